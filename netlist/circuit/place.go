package circuit

import (
	"slices"
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// instance is one use of a scope: the board itself, or an X line.
type instance struct {
	outer  *instance
	scope  *scope
	env    *environment
	prefix string   // "X1."
	name   string   // of the X line
	nodes  []NodeID // by the number of the name in the scope
	depth  int
	start  int // its first element in Circuit.Elements

	all    map[byte]*Intent // what "all" lines of this instance and around it declare
	chosen map[*ifGroup]int // which branches of .if it takes
	models map[*modelDef]*part.Ratings
	picked map[picked]*modelDef
}

// noNode stands for a node that was not made yet.
const noNode NodeID = -1

// place makes the elements of an instance and of everything inside it, then
// applies the intent lines that stand in it.
func (b *builder) place(in *instance) {
	in.start = len(b.circuit.Elements)
	b.declareAll(in)
	s := in.scope
	p := placing{b: b, in: in}
	for i := range s.cards {
		if b.stopped {
			return
		}
		if p.card = &s.cards[i]; b.holds(in, p.card.guard) {
			p.place()
		}
	}
	if !s.placed {
		s.placed = true
		b.findRepeats(in)
	}
	if s.couples {
		b.couple(in)
	}
	b.direct(in)
}

// placing is the state of making one element.
type placing struct {
	b    *builder
	in   *instance
	card *cardRef
}

func (p *placing) span(w syntax.Word) source.Span { return p.card.deck.Span(w) }

func (c *cardRef) span() source.Span {
	return source.Span{File: c.deck.File, Start: c.start, End: c.end}
}

// fail reports what is wrong at a word of the card.
func (p *placing) fail(at syntax.Word, format string, args ...any) {
	p.b.inside(p.in, p.span(at), format, args...)
}

// shown returns the name of the card's element for messages.
func (p *placing) shown() string { return source.Visible(p.in.prefix + p.card.e.Name.Text) }

// value works out a value of the card in this instance.
func (p *placing) value(v syntax.Value) (float64, error) { return p.in.env.value(v) }

// node returns the node of a word in an instance: a header pin, ground, a global
// node, or a node of the instance itself.
func (b *builder) node(in *instance, w syntax.Word, deck *syntax.Deck) NodeID {
	i := b.slot(in.scope, w, deck)
	if int(i) < len(in.nodes) && in.nodes[i] != noNode {
		return in.nodes[i]
	}
	var n NodeID
	switch slot := &in.scope.slots[i]; slot.kind {
	case groundNode:
		b.circuit.GroundNamed = true
		return Ground
	case globalNode:
		n = b.globalNode(w, deck)
	default:
		n = b.ownNode(in, slot)
	}
	in.keep(i, n)
	return n
}

// keep remembers the node of a name.
func (in *instance) keep(name int32, n NodeID) {
	if in.nodes == nil {
		in.nodes = make([]NodeID, 0, cap(in.scope.slots))
	}
	for int(name) >= len(in.nodes) {
		in.nodes = append(in.nodes, noNode)
	}
	in.nodes[name] = n
}

func (b *builder) newNode(name string, at source.Span) NodeID {
	b.circuit.Nodes = append(b.circuit.Nodes, Node{Name: name, At: at})
	return NodeID(len(b.circuit.Nodes) - 1)
}

func (b *builder) globalNode(w syntax.Word, deck *syntax.Deck) NodeID {
	lower := strings.ToLower(w.Text)
	if b.globals[lower] == noNode {
		b.globals[lower] = b.newNode(w.Text, deck.Span(w))
	}
	return b.globals[lower]
}

// ownNode makes a node of an instance. The board may name a node inside a
// subcircuit by its path; it is then one and the same.
func (b *builder) ownNode(in *instance, slot *nodeSlot) NodeID {
	name, at := in.prefix+slot.name, slot.span()
	if b.reach == nil {
		return b.newNode(name, at)
	}
	full := strings.ToLower(name)
	n, ok := b.reach[full]
	if !ok {
		return b.newNode(name, at)
	}
	if n == noNode {
		n = b.newNode(name, at)
		b.reach[full] = n
	}
	return n
}

// reachInside finds the names on the board that can be paths into a subcircuit.
func (b *builder) reachInside(top *scope) {
	for i := range top.cards {
		e := top.cards[i].e
		for _, f := range e.Fields {
			head, _, ok := strings.Cut(f.Text, ".")
			if !ok || head == "" || head[0]|0x20 != 'x' || f.Expr != nil {
				continue
			}
			if b.reach == nil {
				b.reach = map[string]NodeID{}
			}
			b.reach[strings.ToLower(f.Text)] = noNode
		}
	}
}

// place makes the element, or everything behind an X line.
func (p *placing) place() {
	switch letter := p.card.e.Name.Text[0] &^ 0x20; letter {
	case 'R', 'C', 'L':
		p.passive(letter)
	case 'V', 'I':
		p.source(letter)
	case 'K':
		p.coupling()
	case 'E', 'G', 'F', 'H', 'B', 'S', 'W':
		p.controlled(letter)
	default:
		p.device(letter)
	}
}

// new starts an element with its nodes.
func (p *placing) new(letter byte, kind Kind, nodes []syntax.Value) *Element {
	e := p.b.newElement()
	e.Designator, e.Letter, e.Kind = p.in.prefix+p.card.e.Name.Text, letter, kind
	e.At, e.NameAt = p.card.span(), p.span(p.card.e.Name)
	e.Basis, e.Order, e.Intent = BasisExact, ByLetter, p.in.declared(letter)
	e.Nodes = p.b.newIDs(len(nodes))
	for i, n := range nodes {
		e.Nodes[i] = p.b.node(p.in, n.Word, p.card.deck)
	}
	return e
}

// newElement takes an element from a block of them: a million single ones
// would cost more than all that is in them.
func (b *builder) newElement() *Element {
	if len(b.elements) == 0 {
		b.elements = make([]Element, min(1024, max(16, len(b.circuit.Elements))))
	}
	e := &b.elements[0]
	b.elements = b.elements[1:]
	return e
}

func (b *builder) newIDs(count int) []NodeID {
	if count > len(b.ids) {
		b.ids = make([]NodeID, max(count, min(4096, max(64, 2*len(b.circuit.Elements)))))
	}
	ids := b.ids[:count:count]
	b.ids = b.ids[count:]
	return ids
}

// add puts an element on the board.
func (p *placing) add(e *Element) {
	b := p.b
	if limit := b.opts.Limits.elements(); len(b.circuit.Elements) >= limit {
		b.stop(e.At, "the board has more than %d elements; the rest is not read", limit)
		return
	}
	e.Index = len(b.circuit.Elements)
	b.circuit.Elements = append(b.circuit.Elements, e)
}

// stop ends the building at a limit.
func (b *builder) stop(at source.Span, format string, args ...any) {
	b.stopped = true
	b.problem(at, format, args...)
}

// pair returns the value of a key on the card.
func (p *placing) pair(keys ...string) (syntax.Value, bool) {
	for _, pair := range p.card.e.Pairs {
		for _, key := range keys {
			if strings.EqualFold(pair.Key.Text, key) {
				return pair.Value, true
			}
		}
	}
	return syntax.Value{}, false
}

// model finds a model of the netlist as this instance sees it: of several with
// one name the last that stands in no branch, or in one that is taken.
func (p *placing) model(name string) *modelDef {
	name = strings.ToLower(name)
	for s := p.in.scope; s != nil; s = s.parent {
		defs := s.models[name]
		if len(defs) == 0 {
			continue
		}
		key := picked{s, name}
		def, known := p.in.picked[key]
		if !known {
			def = p.pick(defs)
			if len(defs) > 1 {
				p.in.keepPick(key, def)
			}
		}
		if def != nil {
			return def
		}
	}
	return nil
}

func (p *placing) pick(defs []*modelDef) *modelDef {
	for _, def := range slices.Backward(defs) {
		if p.b.holds(p.in, def.guard) {
			return def
		}
	}
	return nil
}

// picked is a name of several models of a scope.
type picked struct {
	scope *scope
	name  string
}

func (in *instance) keepPick(key picked, def *modelDef) {
	if in.picked == nil {
		in.picked = map[picked]*modelDef{}
	}
	in.picked[key] = def
}

// use marks a model of the netlist as used.
func (p *placing) use(name string) {
	if def := p.model(name); def != nil {
		def.used = true
	}
}
