package circuit

import (
	"strings"

	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// expand flattens a subcircuit.
func (p *placing) expand(nodes []syntax.Value, name syntax.Value, sub *scope) {
	b := p.b
	if len(nodes) != len(sub.pins) {
		p.fail(name.Word, "%s has %d nodes, but the subcircuit %s has %d pins", p.shown(), len(nodes),
			source.Visible(sub.name), len(sub.pins))
		return
	}
	if p.tooDeep(sub) || p.tooMany(sub) {
		return
	}
	prefix := p.in.prefix + p.card.e.Name.Text + "."
	if b.work += sub.cost(len(prefix)); b.work > b.opts.Limits.work() {
		b.stop(p.card.span(), "the subcircuits unfold to far more than a board can hold; the rest is not read")
		return
	}
	in := &instance{outer: p.in, scope: sub, name: p.card.e.Name.Text, depth: p.in.depth + 1,
		prefix: prefix}
	p.connect(in, nodes)
	in.env = b.environment(in, p.in.env, p.card.e.Pairs)
	b.place(in)
}

// cost says what one use of a subcircuit takes: the words of its cards, and the
// names that it makes.
func (s *scope) cost(prefix int) int {
	if s.words == 0 {
		s.words = 1 + len(s.params) + len(s.intents) + len(s.pins)
		for _, c := range s.cards {
			s.words += 1 + len(c.e.Fields) + len(c.e.Pairs)
			if c.e.Function != nil {
				s.words += len(c.e.Function.Args)
			}
		}
	}
	return s.words + len(s.cards)*prefix/16
}

// tooDeep reports, and tells once, where subcircuits contain themselves or nest
// too deep.
func (p *placing) tooDeep(sub *scope) bool {
	for at := p.in; at != nil; at = at.outer {
		if at.scope == sub {
			p.b.once("recursion "+sub.name, p.card.span(), "the subcircuit %s contains itself",
				source.Visible(sub.name))
			return true
		}
	}
	limit := p.b.opts.Limits.depth()
	if p.in.depth >= limit {
		p.b.once("depth", p.card.span(), "subcircuits nest deeper than %d", limit)
		return true
	}
	return false
}

// hopeless is by what factor a subcircuit has to pass the limit of elements
// before it is not even begun: the count is rough, since parts whose insides are
// a model stay one element and cards may stand in branches of an .if.
const hopeless = 10

// tooMany refuses a use of a subcircuit that would unfold without end, before
// any of it takes time or memory. The rest of the board is still read.
func (p *placing) tooMany(sub *scope) bool {
	limit := p.b.opts.Limits.elements()
	if sub.unfolded(p.b.opts.Limits.depth()) <= hopeless*float64(limit) {
		return false
	}
	p.fail(p.card.e.Name, "%s unfolds to more than %d elements; it is not read", p.shown(), limit)
	return true
}

// unfolded counts the elements, and uses of subcircuits, that one use makes.
func (s *scope) unfolded(depth int) float64 {
	if s.count > 0 || depth <= 0 {
		return max(s.count, 1)
	}
	s.count = 1 // what a use of itself inside counts
	total := 1.0
	for i := range s.cards {
		c := &s.cards[i]
		if c.guard != nil {
			continue
		}
		total++
		if n := len(c.e.Fields); n > 0 && c.e.Name.Text[0]|0x20 == 'x' {
			if sub := s.findSubckt(c.e.Fields[n-1].Text); sub != nil {
				total += sub.unfolded(depth - 1)
			}
		}
	}
	s.count = total
	return total
}

// connect ties the pins of an instance to the nodes outside.
func (p *placing) connect(in *instance, nodes []syntax.Value) {
	if in.scope.nodes == nil {
		p.b.firstSlots(in.scope)
	}
	in.nodes = make([]NodeID, max(len(in.scope.slots), len(nodes)))
	for i := range in.nodes {
		in.nodes[i] = noNode
	}
	for i, n := range nodes {
		outside := p.b.node(p.in, n.Word, p.card.deck)
		if slot, ok := in.scope.nodes.find(in.scope.pins[i]); ok && in.nodes[slot] == noNode {
			in.nodes[slot] = outside
		}
	}
}

// findRepeats notes the designators that stand twice in a scope, once a scope.
// Cards in branches of an .if may share a name.
func (b *builder) findRepeats(in *instance) {
	s := in.scope
	s.names = newIndex(len(s.cards))
	s.named = make([]*cardRef, 0, len(s.cards))
	for i := range s.cards {
		c := &s.cards[i]
		first, fresh := s.names.add(c.e.Name.Text)
		if fresh {
			s.named = append(s.named, c)
		} else if known := s.named[first]; c.guard == nil && known.guard == nil {
			b.circuit.Repeats = append(b.circuit.Repeats, Repeat{in.prefix + c.e.Name.Text,
				known.deck.Span(known.e.Name), c.deck.Span(c.e.Name)})
		}
	}
}

// couple gives K cards their inductors.
func (b *builder) couple(in *instance) {
	var cards []*Element
	wanted := map[string][]*Element{}
	for _, e := range b.circuit.Elements[in.start:] {
		if e.Kind == Coupling && e.Designator == in.prefix+e.NameAt.Text() {
			cards = append(cards, e)
		}
		if e.Kind == Inductor {
			lower := strings.ToLower(e.Designator)
			wanted[lower] = append(wanted[lower], e)
		}
	}
	for i := range in.scope.cards {
		c := &in.scope.cards[i]
		if c.e.Name.Text[0]|0x20 != 'k' || len(cards) == 0 || cards[0].NameAt != c.deck.Span(c.e.Name) {
			continue
		}
		p := placing{b: b, in: in, card: c}
		p.inductors(cards[0], wanted)
		cards = cards[1:]
	}
}

// inductors joins the coils that a K card names.
func (p *placing) inductors(k *Element, coils map[string][]*Element) {
	fields := p.card.e.Fields
	count := len(fields) - 1
	for count > 2 && p.span(fields[count].Word) != k.ValueAt {
		count--
	}
	for _, f := range fields[:count] {
		found := coils[strings.ToLower(p.in.prefix+f.Text)]
		if len(found) == 0 {
			p.fail(f.Word, "%s couples %s, but no inductor is called that", p.shown(), source.Visible(f.Text))
			continue
		}
		k.Coupled = append(k.Coupled, found[0].Index)
	}
}
