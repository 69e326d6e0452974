package circuit

import (
	"slices"
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/syntax"
)

// roleNames are the spellings of terminal roles, by kind of part; letters and
// digits only, lower case.
func roleNames(kind part.Kind) map[string]string {
	switch kind {
	case part.UJT:
		return map[string]string{"e": "emitter", "em": "emitter", "emitter": "emitter", "b1": "base1", "base1": "base1",
			"baseone": "base1", "b2": "base2", "base2": "base2", "basetwo": "base2"}
	case part.SCR, part.PUT:
		return map[string]string{"a": "anode", "an": "anode", "anode": "anode", "g": "gate", "gate": "gate", "gt": "gate",
			"k": "cathode", "c": "cathode", "ca": "cathode", "cathode": "cathode", "kathode": "cathode"}
	case part.Triac:
		return map[string]string{"mt2": "mt2", "t2": "mt2", "a2": "mt2", "a": "mt2", "mt1": "mt1", "t1": "mt1", "a1": "mt1",
			"k": "mt1", "g": "gate", "gate": "gate", "gt": "gate"}
	case part.CurrentSource:
		return map[string]string{"v+": "v+", "r": "r", "v-": "v-", "vp": "v+", "vn": "v-"}
	case part.Optotriac:
		return map[string]string{"a": "anode", "anode": "anode", "k": "cathode", "cathode": "cathode", "mt2": "mt2",
			"mt1": "mt1", "t2": "mt2", "t1": "mt1"}
	}
	return nil
}

// roleOf maps one word to a role.
func roleOf(names map[string]string, word string) (string, bool) {
	word = strings.ToLower(word)
	if r, ok := names[word]; ok {
		return r, true
	}
	word = strings.Map(func(r rune) rune {
		if r >= 'a' && r <= 'z' || r >= '0' && r <= '9' {
			return r
		}
		return -1
	}, word)
	r, ok := names[word]
	return r, ok
}

// headerRoles takes the terminal order of a part from its subcircuit: the names
// in the header, a comment beside it, or the insides. nil where none tells.
func (b *builder) headerRoles(sub *scope, kind part.Kind) ([]string, Authority) {
	names := roleNames(kind)
	want := part.NetlistOrder(kind)
	if roles := rolesOf(names, sub.pins); complete(roles, want) {
		return roles, ByHeader
	}
	for _, c := range sub.header.Comments {
		words := strings.FieldsFunc(c.Text, func(r rune) bool {
			return !(r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9' || r == '+' || r == '-')
		})
		if roles := rolesOf(names, words); complete(roles, want) {
			return roles, ByComment
		}
	}
	if kind == part.SCR || kind == part.PUT {
		if g := b.guess(sub); g != nil && complete(g.roles, want) {
			return g.roles, ByInsides
		}
	}
	return nil, ""
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

// deviceGuess is what the insides of a subcircuit show.
type deviceGuess struct {
	kind  Kind
	roles []string
	by    Authority
}

// guess looks for a crossed pair inside a three-pin subcircuit: the collector of
// the npn feeds the base of the pnp and the other way round. The anode then is
// the side of the pnp's emitter, the gate the base of the npn, the cathode its
// emitter. nil where there is none.
func (b *builder) guess(sub *scope) *deviceGuess {
	if sub.selfKind == nil {
		sub.selfKind = &deviceGuess{}
		if g := b.crossedPair(sub); g != nil {
			*sub.selfKind = *g
		}
	}
	if sub.selfKind.kind == "" {
		return nil
	}
	return sub.selfKind
}

// bipolar is a transistor inside a subcircuit.
type bipolar struct{ collector, base, emitter string }

func (b *builder) crossedPair(sub *scope) *deviceGuess {
	if len(sub.pins) != 3 {
		return nil
	}
	nets := map[string]string{}
	root := func(n string) string {
		for nets[n] != "" && nets[n] != n {
			n = nets[n]
		}
		return n
	}
	var npn, pnp []bipolar
	for _, c := range sub.cards {
		f := c.e.Fields
		switch c.e.Name.Text[0] | 0x20 {
		case 'r':
			if len(f) >= 3 && smallResistor(f[2]) {
				nets[root(strings.ToLower(f[0].Text))] = root(strings.ToLower(f[1].Text))
			}
		case 'q':
			if len(f) < 4 {
				continue
			}
			q := bipolar{strings.ToLower(f[0].Text), strings.ToLower(f[1].Text), strings.ToLower(f[2].Text)}
			switch b.typeOf(sub, f[3].Text) {
			case part.NPN:
				npn = append(npn, q)
			case part.PNP:
				pnp = append(pnp, q)
			}
		}
	}
	for _, n := range npn {
		for _, p := range pnp {
			if root(n.collector) == root(p.base) && root(p.collector) == root(n.base) {
				return pairRoles(sub, root, n, p)
			}
		}
	}
	return nil
}

// smallResistor tells a lead resistance from a shunt.
func smallResistor(v syntax.Value) bool {
	r, ok := part.Plain(v)
	return ok && r < 5
}

// typeOf returns the type of a model seen from inside a subcircuit.
func (b *builder) typeOf(sub *scope, name string) part.Kind {
	if def := sub.findModel(name); def != nil {
		return part.Kind(strings.ToLower(def.m.Type.Text))
	}
	return ""
}

func pairRoles(sub *scope, root func(string) string, n, p bipolar) *deviceGuess {
	roles := make([]string, len(sub.pins))
	for i, pin := range sub.pins {
		switch root(pin) {
		case root(p.emitter):
			roles[i] = "anode"
		case root(n.base):
			roles[i] = "gate"
		case root(n.emitter):
			roles[i] = "cathode"
		case root(p.base):
			roles[i] = "anodegate"
		}
	}
	if complete(roles, []string{"anode", "gate", "cathode"}) {
		return &deviceGuess{SCR, roles, ByInsides}
	}
	if i := slices.Index(roles, "anodegate"); i >= 0 {
		roles[i] = "gate"
		if complete(roles, []string{"anode", "gate", "cathode"}) {
			return &deviceGuess{PUT, roles, ByInsides}
		}
	}
	return nil
}
