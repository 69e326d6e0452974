package circuit

import (
	"slices"
	"strings"

	"standoff/netlist/part"
)

// roleNames are the spellings of terminal roles, by kind of part; letters and
// digits only, lower case.
func roleNames(kind part.Kind) map[string]string {
	switch kind {
	case part.UJT:
		return map[string]string{"e": "emitter", "em": "emitter", "emit": "emitter", "emitter": "emitter",
			"b1": "base1", "base1": "base1", "baseone": "base1", "b2": "base2", "base2": "base2", "basetwo": "base2"}
	case part.SCR, part.PUT:
		return map[string]string{"a": "anode", "an": "anode", "ano": "anode", "anode": "anode",
			"g": "gate", "gt": "gate", "gate": "gate", "ga": "gate", "ag": "gate",
			"k": "cathode", "c": "cathode", "ca": "cathode", "cat": "cathode", "kat": "cathode", "cath": "cathode",
			"cathode": "cathode", "kathode": "cathode"}
	case part.Triac:
		return map[string]string{"mt2": "mt2", "t2": "mt2", "a2": "mt2", "m2": "mt2", "a": "mt2", "anode": "mt2",
			"anode2": "mt2", "mainterminal2": "mt2", "terminal2": "mt2",
			"mt1": "mt1", "t1": "mt1", "a1": "mt1", "m1": "mt1", "k": "mt1", "cathode": "mt1", "anode1": "mt1",
			"mainterminal1": "mt1", "terminal1": "mt1", "g": "gate", "gt": "gate", "gate": "gate"}
	case part.CurrentSource:
		return map[string]string{"v+": "v+", "r": "r", "rset": "r", "adj": "r", "v-": "v-", "vp": "v+", "vn": "v-",
			"vplus": "v+", "vminus": "v-", "plus": "v+", "minus": "v-", "a": "v+", "anode": "v+", "k": "v-",
			"c": "v-", "cathode": "v-"}
	case part.Optotriac:
		return map[string]string{"a": "anode", "anode": "anode", "k": "cathode", "c": "cathode",
			"cathode": "cathode",
			"mt2":     "mt2", "t2": "mt2", "mt1": "mt1", "t1": "mt1"}
	}
	return otherRoleNames(kind)
}

// otherRoleNames are those of parts that have a letter of their own.
func otherRoleNames(kind part.Kind) map[string]string {
	switch kind {
	case part.Diode:
		return map[string]string{"a": "anode", "anode": "anode", "k": "cathode", "c": "cathode",
			"cathode": "cathode"}
	case part.NPN, part.PNP:
		return map[string]string{"c": "collector", "collector": "collector", "b": "base", "base": "base",
			"e": "emitter", "emitter": "emitter", "s": "substrate", "substrate": "substrate"}
	case part.NJF, part.PJF, part.NMOS, part.PMOS:
		return map[string]string{"d": "drain", "drain": "drain", "g": "gate", "gate": "gate", "s": "source",
			"source": "source", "b": "bulk", "bulk": "bulk"}
	}
	return nil
}

// roleOf maps one word to a role.
func roleOf(names map[string]string, word string) (string, bool) {
	word = strings.ToLower(word)
	if r, ok := names[word]; ok {
		return r, true
	}
	r, ok := names[strings.Map(letterOrDigit, word)]
	return r, ok
}

func letterOrDigit(r rune) rune {
	if r >= 'a' && r <= 'z' || r >= '0' && r <= '9' {
		return r
	}
	return -1
}

// rolesOf maps the words that name a role; others are passed over.
func rolesOf(names map[string]string, words []string) []string {
	var roles []string
	for _, w := range words {
		if r, ok := roleOf(names, w); ok {
			roles = append(roles, r)
		}
	}
	return roles
}

// complete reports whether roles are exactly the wanted ones in any order.
func complete(roles, want []string) bool {
	if len(roles) != len(want) || len(roles) == 0 {
		return false
	}
	for _, w := range want {
		if !slices.Contains(roles, w) {
			return false
		}
	}
	return true
}

// orderOf takes the terminal order of a part from its subcircuit: the names in
// the header, a comment beside it, or the insides. nil where none tells.
func (b *builder) orderOf(sub *scope, kind part.Kind) ([]string, Authority) {
	names, want := roleNames(kind), libraryOrder(kind, len(sub.pins))
	if len(sub.pins) != len(want) {
		return nil, ""
	}
	if roles := rolesOf(names, sub.pins); complete(roles, want) {
		return roles, ByHeader
	}
	if roles := commentOrder(sub, names, want); roles != nil {
		return roles, ByComment
	}
	if kind == part.SCR || kind == part.PUT {
		if g := b.guess(sub); g != nil && complete(g.roles, want) {
			return g.roles, ByInsides
		}
	}
	return nil, ""
}

// commentOrder looks for an order in the comments beside a header: first in
// those that announce one, then in single lines that hold nothing else, then in
// a list that runs over several lines.
func commentOrder(sub *scope, names map[string]string, want []string) []string {
	var all []string
	announced := false
	for _, c := range sub.header.Comments {
		text, ok := announcement(c.Text)
		announced = announced || ok
		all = append(all, text)
		if ok {
			if roles := listedOrder(sub, names, want, text); roles != nil {
				return roles
			}
		}
	}
	for _, c := range sub.header.Comments {
		if roles := listedOrder(sub, names, want, c.Text); roles != nil {
			return roles
		}
	}
	if !announced {
		return nil
	}
	return listedOrder(sub, names, want, strings.Join(all, " "))
}

// announcement returns what follows a word such as TERMINALS in a comment.
func announcement(text string) (rest string, ok bool) {
	lower := strings.ToLower(text)
	for _, word := range []string{"terminals", "connections", "nodes", "pinout", "pins", "pin order", "order"} {
		if i := strings.Index(lower, word); i >= 0 && len(lower) == len(text) {
			return text[i+len(word):], true
		}
	}
	return text, false
}

// listedOrder reads an order off a comment: the roles in the order of the pins
// (A G K), or each with the pin that it is (1=A 3=G 2=K; anode 1, gate 3 ...).
func listedOrder(sub *scope, names map[string]string, want []string, text string) []string {
	text = strings.ToLower(text)
	for _, pair := range [][2]string{{"main terminal ", "mt"}, {"base ", "base"}} {
		text = strings.ReplaceAll(text, pair[0], pair[1])
	}
	var roles, pins []string
	for _, w := range strings.FieldsFunc(text, betweenWords) {
		if r, ok := roleOf(names, w); ok {
			roles = append(roles, r)
		} else if slices.Contains(sub.pins, w) {
			pins = append(pins, w)
		}
	}
	if !complete(roles, want) {
		return nil
	}
	if len(pins) != len(roles) || !complete(pins, sub.pins) {
		return roles
	}
	ordered := make([]string, len(roles))
	for i, pin := range pins {
		ordered[slices.Index(sub.pins, pin)] = roles[i]
	}
	return ordered
}

func betweenWords(r rune) bool {
	return !(r >= 'a' && r <= 'z' || r >= '0' && r <= '9' || r == '+' || r == '-')
}
