package circuit

import (
	"slices"
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// triggerKinds are the parts that stay one element, whatever their subcircuit
// holds inside.
func isTrigger(k part.Kind) bool {
	switch k {
	case part.UJT, part.PUT, part.SCR, part.Triac, part.Diac, part.CurrentSource, part.Optotriac:
		return true
	}
	return false
}

// device makes everything that is told by a part name: semiconductors, trigger
// devices on any letter, subcircuits.
func (p *placing) device(letter byte) {
	fields := p.partFields()
	if len(fields) < 2 {
		p.fail(p.card.e.Name, "%s needs its nodes and a part name", source.Visible(p.card.e.Name.Text))
		return
	}
	at := p.partIndex(letter, fields)
	name := fields[at]
	ratings := p.ratings(name.Text)
	sub := p.in.scope.findSubckt(name.Text)
	switch {
	case ratings != nil && isTrigger(ratings.Kind):
		p.trigger(letter, fields[:at], name, ratings, sub)
	case letter == 'X' && sub != nil:
		if guess := p.b.guess(sub); guess != nil && len(guess.roles) == at {
			p.guessed(fields[:at], name, sub, guess)
			return
		}
		p.expand(fields[:at], name, sub)
	case letter == 'X':
		p.unknown(letter, fields[:at], name, ratings)
	default:
		p.semiconductor(letter, fields, at, ratings)
	}
}

// partFields drops the slash before a cell name and the word PARAMS:.
func (p *placing) partFields() []syntax.Value {
	return slices.DeleteFunc(slices.Clone(p.card.e.Fields), func(v syntax.Value) bool {
		return v.Text == "/" || strings.EqualFold(v.Text, "params:")
	})
}

// partIndex finds the part name: the last word, or for a transistor or diode
// with an area behind it, the last word that is no number.
func (p *placing) partIndex(letter byte, fields []syntax.Value) int {
	least := map[byte]int{'D': 2, 'Q': 3, 'J': 3, 'M': 3}[letter]
	for i := min(least, len(fields)-1); i < len(fields); i++ {
		if least > 0 && i >= least && (p.isModel(fields[i].Text) || p.ratings(fields[i].Text) != nil) {
			return i
		}
	}
	last := len(fields) - 1
	for i := last; i > 0 && i >= least && least > 0; i-- {
		if _, err := p.in.env.value(fields[i]); err != nil && !strings.EqualFold(fields[i].Text, "off") {
			return i
		}
	}
	return last
}

// ratings looks a part name up: the netlist's own model, a --parts file, the
// library.
func (p *placing) ratings(name string) *part.Ratings {
	if def := p.in.scope.findModel(name); def != nil {
		p.b.used[def] = true
		return p.b.model(def)
	}
	if r, ok := p.b.parts[strings.ToLower(name)]; ok {
		return r
	}
	if r, ok := part.Lookup(name); ok {
		return r
	}
	return nil
}

// model turns a .model card into ratings, once.
func (b *builder) model(def *modelDef) *part.Ratings {
	if def.ratings == nil {
		env := b.environment(def.scope, nil, nil)
		resolve := func(v syntax.Value) (float64, bool) {
			x, err := env.value(v)
			return x, err == nil
		}
		r, problems := part.FromModel(def.deck, def.m, resolve, "netlist")
		def.ratings = r
		b.problems = append(b.problems, problems...)
	}
	return def.ratings
}

// trigger makes a trigger device. Its terminal order comes from the header of a
// subcircuit of that name, a comment there, its insides, or the library.
func (p *placing) trigger(letter byte, nodes []syntax.Value, name syntax.Value, r *part.Ratings, sub *scope) {
	e := p.new(letter, Kind(r.Kind), nodes)
	e.PartName, e.ValueAt, e.Ratings, e.Order = name.Text, p.span(name.Word), r, ByLibrary
	e.Roles = part.NetlistOrder(r.Kind)
	if sub != nil {
		if roles, by := p.b.headerRoles(sub, r.Kind); roles != nil {
			e.Roles, e.Order = roles, by
		}
	}
	if len(nodes) != len(e.Roles) && !(r.Kind == part.CurrentSource && len(nodes) == 2) {
		p.fail(name.Word, "%s is a %s with %d terminals, but %s has %d nodes", source.Visible(name.Text), r.Kind,
			len(e.Roles), source.Visible(e.Designator), len(nodes))
	}
	p.add(e)
}

// guessed makes a thyristor of a subcircuit whose insides show one.
func (p *placing) guessed(nodes []syntax.Value, name syntax.Value, sub *scope, g *deviceGuess) {
	e := p.new('X', g.kind, nodes)
	e.PartName, e.ValueAt, e.Order, e.Roles = name.Text, p.span(name.Word), g.by, g.roles
	p.add(e)
}

// unknown keeps a part of which nothing is known.
func (p *placing) unknown(letter byte, nodes []syntax.Value, name syntax.Value, r *part.Ratings) {
	e := p.new(letter, Unknown, nodes)
	e.PartName, e.ValueAt = name.Text, p.span(name.Word)
	if r != nil && r.Kind != "" {
		e.Kind, e.Ratings = Kind(r.Kind), r
		if order := part.NetlistOrder(r.Kind); len(order) == len(nodes) {
			e.Roles = order
		}
	}
	p.add(e)
}

// letterKinds are the semiconductors of the plain letters.
var letterKinds = map[byte]Kind{'D': Diode, 'Q': NPN, 'J': NJF, 'M': NMOS, 'T': Line}

// semiconductor makes D, Q, J, M and T elements and whatever else stands on a
// letter of its own.
func (p *placing) semiconductor(letter byte, fields []syntax.Value, at int, r *part.Ratings) {
	kind, known := letterKinds[letter]
	if letter == 'T' && at < 4 && len(fields) >= 4 {
		at = 4
	}
	nodes := fields[:min(at, len(fields))]
	need := map[byte]int{'D': 2, 'Q': 3, 'J': 3, 'M': 3, 'T': 4}[letter]
	if known && len(nodes) < need {
		p.fail(p.card.e.Name, "%s needs %d nodes and a model", source.Visible(p.card.e.Name.Text), need)
		return
	}
	if letter == 'T' && len(p.card.e.Pairs) == 0 {
		p.fail(p.card.e.Name, "%s starts like a transmission line but has no z0=; is this a card?", source.Visible(p.card.e.Name.Text))
		return
	}
	if !known {
		kind = Unknown
	}
	e := p.new(letter, kind, nodes)
	if at < len(fields) {
		e.PartName, e.ValueAt, e.Ratings = fields[at].Text, p.span(fields[at].Word), r
	}
	if r != nil && r.Kind != "" {
		e.Kind = Kind(r.Kind)
	} else if known && letter != 'D' && letter != 'T' {
		e.Kind = Unknown // polarity not known
	}
	e.Roles = letterRoles(letter, len(nodes))
	p.add(e)
}

func letterRoles(letter byte, count int) []string {
	var roles []string
	switch letter {
	case 'D':
		roles = []string{"anode", "cathode"}
	case 'Q':
		roles = []string{"collector", "base", "emitter", "substrate"}
	case 'J':
		roles = []string{"drain", "gate", "source"}
	case 'M':
		roles = []string{"drain", "gate", "source", "bulk"}
	}
	return roles[:min(count, len(roles))]
}

// expand flattens a subcircuit.
func (p *placing) expand(nodes []syntax.Value, name syntax.Value, sub *scope) {
	if len(nodes) != len(sub.pins) {
		p.fail(name.Word, "%s has %d nodes, but the subcircuit %s has %d pins", source.Visible(p.in.prefix+p.card.e.Name.Text),
			len(nodes), source.Visible(sub.name), len(sub.pins))
		return
	}
	depth := p.in.depth + 1
	for at := p.in; at != nil; at = at.outer {
		if at.scope == sub {
			p.b.once("recursion "+sub.name, p.whole(), "the subcircuit %s contains itself", source.Visible(sub.name))
			return
		}
	}
	if depth > p.b.opts.Limits.depth() {
		p.b.once("depth", p.whole(), "subcircuits nest deeper than %d", p.b.opts.Limits.depth())
		return
	}
	in := &instance{outer: p.in, scope: sub, prefix: p.in.prefix + p.card.e.Name.Text + ".", depth: depth,
		pins: make(map[string]NodeID, len(nodes))}
	for i, n := range nodes {
		if _, twice := in.pins[sub.pins[i]]; !twice {
			in.pins[sub.pins[i]] = p.node(n.Word)
		}
	}
	in.env = p.b.environment(sub, p.in.env, p.card.e.Pairs)
	p.checkRepeat()
	p.b.place(sub, in)
	p.b.direct(in)
}

// checkRepeat notes an X line whose name was used before.
func (p *placing) checkRepeat() {
	key := strings.ToLower(p.card.e.Name.Text)
	at := p.span(p.card.e.Name)
	if known, ok := p.in.names[key]; ok {
		p.b.circuit.Repeats = append(p.b.circuit.Repeats, Repeat{p.in.prefix + p.card.e.Name.Text, known.NameAt, at})
		return
	}
	p.in.names[key] = &Element{NameAt: at}
}
