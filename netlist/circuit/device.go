package circuit

import (
	"cmp"
	"slices"
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// isTrigger reports the kinds of parts that stay one element, whatever a
// subcircuit of their name holds inside.
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
	fields := p.words(letter)
	pinless := letter == 'X' && len(fields) == 1 && p.in.scope.findSubckt(fields[0].Text) != nil
	if len(fields) < 2 && !pinless {
		p.fail(p.card.e.Name, "%s needs its nodes and a part name", p.shown())
		return
	}
	at := p.partPlace(letter, fields)
	nodes, name := fields[:at], fields[at]
	taken := cmp.Or(p.askedPart(), name.Text)
	ratings := p.ratings(taken)
	sub := p.in.scope.findSubckt(name.Text)
	switch {
	case ratings != nil && isTrigger(ratings.Kind) && !sub.namesake(ratings):
		p.trigger(p.start(letter, Kind(ratings.Kind), nodes, name), ratings, sub)
	case letter == 'X' && sub != nil:
		if g := p.b.guess(sub); g != nil && len(g.roles) == at {
			e := p.start(letter, g.kind, nodes, name)
			e.Roles, e.Order = g.roles, g.by
			p.add(e)
			return
		}
		p.expand(nodes, name, sub)
	case letter == 'T' && len(p.card.e.Pairs) > 0:
		p.line(fields)
	case slices.Contains([]byte("DQJM"), letter):
		p.semiconductor(letter, fields, at)
	default:
		p.other(letter, nodes, name, ratings)
	}
}

// namesake reports a subcircuit that only happens to be called like a part of
// the library: it has another number of pins.
func (s *scope) namesake(r *part.Ratings) bool {
	if s == nil || r.Origin != "library" {
		return false
	}
	hidden := r.Kind == part.SCR && len(s.pins) == 2
	return len(libraryOrder(r.Kind, len(s.pins))) != len(s.pins) && !hidden || r.Kind == part.Diac && len(s.pins) != 2
}

// words returns the fields without the word PARAMS:, the slash before a cell
// name, and the flag OFF of a semiconductor.
func (p *placing) words(letter byte) []syntax.Value {
	fields := p.card.e.Fields
	least := leastNodes(letter)
	skip := func(i int) bool {
		switch word := fields[i].Text; {
		case strings.EqualFold(word, "params:"):
			return true
		case word == "/":
			return letter == 'X' && i == len(fields)-2
		}
		return least > 1 && i > least && strings.EqualFold(fields[i].Text, "off")
	}
	for i := range fields {
		if !skip(i) {
			continue
		}
		kept := slices.Clone(fields[:i])
		for k := i + 1; k < len(fields); k++ {
			if !skip(k) {
				kept = append(kept, fields[k])
			}
		}
		return kept
	}
	return fields
}

// leastNodes says how many nodes stand before the part name at least.
func leastNodes(letter byte) int {
	switch letter {
	case 'D':
		return 2
	case 'Q', 'J', 'M':
		return 3
	}
	return 1
}

// partPlace finds the part name: the last word; behind it a diode or transistor
// may have an area.
func (p *placing) partPlace(letter byte, fields []syntax.Value) int {
	last := len(fields) - 1
	least := leastNodes(letter)
	if least == 1 || last <= least {
		return last
	}
	for i := last; i >= least; i-- {
		if p.isPart(fields[i].Text) {
			return i
		}
	}
	for last > least && isArea(fields[last]) {
		last--
	}
	return last
}

func (p *placing) isPart(name string) bool { return p.model(name) != nil || p.b.lookup(name) != nil }

// isArea tells a plain number from the name of a part: 2N3904 is none, although
// it starts like one.
func isArea(v syntax.Value) bool {
	if v.Expr != nil {
		return true
	}
	n, err := quantity.Parse(v.Text)
	return err == nil && !n.Trade
}

// askedPart returns the name that a part= line gives for this element, in its
// own subcircuit or by its path from further out.
func (p *placing) askedPart() string {
	if !p.b.declaresParts {
		return ""
	}
	asked, path := "", strings.ToLower(p.card.e.Name.Text)
	for in := p.in; in != nil; in = in.outer {
		if pair, ok := in.scope.asksPart[path]; ok {
			asked = pair.Value.Text
		}
		path = strings.ToLower(in.name) + "." + path
	}
	return asked
}

// ratings looks a part name up: the netlist's own model, a --parts file, the
// library.
func (p *placing) ratings(name string) *part.Ratings {
	if def := p.model(name); def != nil {
		def.used = true
		return p.b.model(def, p.in)
	}
	return p.b.lookup(name)
}

// start begins an element that is told by its part name.
func (p *placing) start(letter byte, kind Kind, nodes []syntax.Value, name syntax.Value) *Element {
	e := p.new(letter, kind, nodes)
	e.PartName, e.ValueAt = name.Text, p.span(name.Word)
	return e
}

// trigger makes a trigger device. Its terminal order comes from the header of a
// subcircuit of that name, a comment there, its insides, or the library.
func (p *placing) trigger(e *Element, r *part.Ratings, sub *scope) {
	e.Ratings, e.Order = r, ByLibrary
	e.Roles = libraryOrder(r.Kind, len(e.Nodes))
	if asked := p.askedPart(); asked != "" {
		e.PartName = asked
	}
	if sub != nil {
		if roles, by := p.b.orderOf(sub, r.Kind); roles != nil {
			e.Roles, e.Order = roles, by
		}
		p.hiddenCathode(e, sub)
	}
	if len(e.Nodes) != len(e.Roles) {
		p.b.inside(p.in, e.ValueAt, "%s is %s with %d terminals, but %s has %d nodes", source.Visible(e.PartName),
			describe(e.Kind), len(part.NetlistOrder(r.Kind)), p.shown(), len(e.Nodes))
		e.Roles = nil
	}
	p.add(e)
}

// libraryOrder returns the order of the part library. A current source of two
// terminals has none for a resistor.
func libraryOrder(kind part.Kind, count int) []string {
	if kind == part.CurrentSource && count == 2 {
		return []string{"v+", "v-"}
	}
	if kind == part.Diac && count == 3 { // a silicon switch with its gate
		return []string{"1", "gate", "2"}
	}
	return part.NetlistOrder(kind)
}

// hiddenCathode adds the cathode of a thyristor whose subcircuit ties it to
// ground inside and has no pin for it.
func (p *placing) hiddenCathode(e *Element, sub *scope) {
	if e.Kind != SCR || len(e.Nodes) != 2 || len(sub.pins) != 2 {
		return
	}
	roles := rolesOf(roleNames(part.SCR), sub.pins)
	if len(roles) != 2 || roles[0] == roles[1] || slices.Contains(roles, "cathode") || !sub.namesGround() {
		return
	}
	p.b.circuit.GroundNamed = true
	e.Nodes = append(e.Nodes, Ground)
	e.Roles, e.Order = append(roles, "cathode"), ByHeader
}

// namesGround reports whether a card of the subcircuit is wired to ground.
func (s *scope) namesGround() bool {
	grounded := func(f syntax.Value) bool { return isGround(strings.ToLower(f.Text)) }
	return slices.ContainsFunc(s.cards, func(c cardRef) bool {
		return slices.ContainsFunc(c.e.Fields, grounded)
	})
}

// other makes a part on a letter that says nothing of what it is. Where a model
// says it, it is that; else it is kept as unknown.
func (p *placing) other(letter byte, nodes []syntax.Value, name syntax.Value, r *part.Ratings) {
	if letter != 'X' && letter != 'U' && !strings.ContainsAny(p.card.e.Name.Text, "0123456789") {
		p.fail(p.card.e.Name, "%s is no designator that is known here; is this a heading?", p.shown())
		return
	}
	e := p.start(letter, Unknown, nodes, name)
	if r != nil && r.Kind != "" {
		e.Kind, e.Ratings = Kind(r.Kind), r
		if order := part.NetlistOrder(r.Kind); len(order) == len(nodes) {
			e.Roles = order
		}
	}
	p.add(e)
}
