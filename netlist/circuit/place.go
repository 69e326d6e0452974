package circuit

import (
	"slices"
	"strings"

	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// instance is one use of a scope: the board itself, or an X line.
type instance struct {
	outer  *instance
	scope  *scope
	env    *environment
	prefix string            // "X1."
	pins   map[string]NodeID // lower-case header pin -> node outside
	depth  int
	names  map[string]*Element // designators of this instance, lower case
	all    map[byte]*declared  // "all" lines, by letter
}

// place makes the elements of an instance and of everything inside it.
func (b *builder) place(s *scope, in *instance) {
	in.names = make(map[string]*Element, len(s.cards))
	b.declareAll(in)
	for _, c := range s.cards {
		if b.stopped {
			return
		}
		p := &placing{b: b, in: in, card: c}
		p.place()
	}
}

// placing is the state of making one element.
type placing struct {
	b    *builder
	in   *instance
	card cardRef
}

func (p *placing) span(w syntax.Word) source.Span { return p.card.deck.Span(w) }

func (p *placing) whole() source.Span {
	return source.Span{File: p.card.deck.File, Start: p.card.at.Start, End: p.card.at.End}
}

// fail reports a card that is not usable.
func (p *placing) fail(at syntax.Word, format string, args ...any) {
	p.b.problem(p.span(at), format, args...)
}

// node returns the node of a word in this instance.
func (p *placing) node(w syntax.Word) NodeID { return p.b.node(p.in, w, p.card.deck) }

// node resolves a node name: a header pin, ground, a global node, or a node of
// the instance itself.
func (b *builder) node(in *instance, w syntax.Word, deck *syntax.Deck) NodeID {
	lower := strings.ToLower(w.Text)
	if n, ok := in.pins[lower]; ok {
		return n
	}
	if isGround(lower) {
		b.circuit.GroundNamed = true
		return Ground
	}
	full, show := lower, w.Text
	if in.prefix != "" && !b.globals[lower] {
		full, show = strings.ToLower(in.prefix)+lower, in.prefix+w.Text
	}
	if n, ok := b.names[full]; ok {
		return n
	}
	n := NodeID(len(b.circuit.Nodes))
	b.circuit.Nodes = append(b.circuit.Nodes, Node{Name: show, At: deck.Span(w)})
	b.names[full] = n
	return n
}

func isGround(lower string) bool { return lower == "0" || lower == "gnd" || lower == "gnd!" }

// place makes the element, or everything behind an X line.
func (p *placing) place() {
	letter := p.card.e.Name.Text[0] &^ 0x20
	switch letter {
	case 'R', 'C', 'L':
		p.passive(letter)
	case 'V', 'I':
		p.source(letter)
	case 'K':
		p.add(p.new(letter, Coupling, nil))
	case 'E', 'G', 'F', 'H', 'B', 'S', 'W':
		p.controlled(letter)
	default:
		p.device(letter)
	}
}

// new starts an element with its nodes.
func (p *placing) new(letter byte, kind Kind, nodes []syntax.Value) *Element {
	e := &Element{Designator: p.in.prefix + p.card.e.Name.Text, Letter: letter, Kind: kind,
		At: p.whole(), NameAt: p.span(p.card.e.Name), Basis: BasisExact, Order: ByLetter}
	e.Nodes = make([]NodeID, len(nodes))
	for i, n := range nodes {
		e.Nodes[i] = p.node(n.Word)
	}
	return e
}

// add puts an element on the board.
func (p *placing) add(e *Element) {
	b := p.b
	if len(b.circuit.Elements) >= b.opts.Limits.elements() {
		b.stopped = true
		b.problem(e.At, "the board has more than %d elements; the rest is not read", b.opts.Limits.elements())
		return
	}
	key := strings.ToLower(p.card.e.Name.Text)
	if known, ok := p.in.names[key]; ok {
		b.circuit.Repeats = append(b.circuit.Repeats, Repeat{e.Designator, known.NameAt, e.NameAt})
	} else {
		p.in.names[key] = e
		b.byName[strings.ToLower(e.Designator)] = e
	}
	e.Index = len(b.circuit.Elements)
	b.circuit.Elements = append(b.circuit.Elements, e)
	for i, n := range e.Nodes {
		node := &b.circuit.Nodes[n]
		node.Pins = append(node.Pins, Pin{e, i})
	}
	b.inherit(e, p.in)
}

// pair returns the value of a key on the card.
func (p *placing) pair(keys ...string) (syntax.Value, bool) {
	for _, pair := range p.card.e.Pairs {
		if slices.Contains(keys, strings.ToLower(pair.Key.Text)) {
			return pair.Value, true
		}
	}
	return syntax.Value{}, false
}

// passive makes a resistor, capacitor or inductor.
func (p *placing) passive(letter byte) {
	fields := p.card.e.Fields
	kind := Kind(strings.ToLower(string(letter)))
	if len(fields) < 2 {
		p.fail(p.card.e.Name, "%s needs two nodes and a value", source.Visible(p.card.e.Name.Text))
		return
	}
	e := p.new(letter, kind, fields[:2])
	e.Roles = []string{"1", "2"}
	p.passiveValue(e, fields[2:])
	if kind == Capacitor && e.HasValue && e.Value.Nominal >= jig {
		e.Kind = "jig" // 1T farad: a test rig's way to write "short for ac"
	}
	p.add(e)
}

// jig is a capacitance that no board has.
const jig = 1e6

// passiveValue finds the value among the words behind the nodes.
func (p *placing) passiveValue(e *Element, words []syntax.Value) {
	v, ok := p.pair(strings.ToLower(string(e.Letter)), "value", "val")
	if len(words) > 0 {
		w := words[0]
		if _, err := p.in.env.value(w); err == nil || w.Expr != nil || !p.isModel(w.Text) {
			v, ok = w, true
		} else if len(words) > 1 {
			v, ok = words[1], true
		}
	}
	if !ok {
		if len(words) == 0 {
			p.fail(p.card.e.Name, "%s has no value", source.Visible(e.Designator))
		}
		return
	}
	e.ValueAt, e.Written = p.span(v.Word), v.Text
	value, err := p.in.env.value(v)
	switch {
	case err != nil:
		p.fail(v.Word, "the value of %s: %v", source.Visible(e.Designator), err)
	case e.Kind == Resistor && value < 0, e.Kind != Resistor && value <= 0:
		p.fail(v.Word, "%s cannot have the value %s", source.Visible(e.Designator), source.Visible(v.Text))
	default:
		e.Value.Nominal, e.HasValue = value, true
	}
}

// isModel reports whether a word names a model of the netlist.
func (p *placing) isModel(name string) bool { return p.in.scope.findModel(name) != nil }

// source makes a voltage or current source.
func (p *placing) source(letter byte) {
	fields := p.card.e.Fields
	kind := VoltageSource
	if letter == 'I' {
		kind = CurrentSource
	}
	if len(fields) < 2 {
		p.fail(p.card.e.Name, "%s needs two nodes and a value", source.Visible(p.card.e.Name.Text))
		return
	}
	e := p.new(letter, kind, fields[:2])
	e.Roles = []string{"plus", "minus"}
	p.sourceValue(e, fields[2:])
	p.add(e)
}

// sourceValue reads [DC] value, AC magnitude, and a waveform with or without
// brackets.
func (p *placing) sourceValue(e *Element, words []syntax.Value) {
	e.Wave.Kind, e.HasValue = "dc", true
	if f := p.card.e.Function; f != nil {
		p.waveform(e, f.Name, f.Args)
	}
	if v, ok := p.pair("dc", "value"); ok {
		p.direct(e, v)
	}
	for i := 0; i < len(words); i++ {
		switch w := strings.ToLower(words[i].Text); {
		case w == "dc" && i+1 < len(words):
			i++
			p.direct(e, words[i])
		case w == "ac":
			if i+1 < len(words) {
				i++
				p.alternating(e, words[i], len(words) == 2 || len(words) == 3)
			}
			if i+1 < len(words) { // the phase
				i++
			}
		case syntax.IsWaveform(w) && words[i].Expr == nil:
			p.waveform(e, words[i].Word, words[i+1:])
			return
		default:
			p.direct(e, words[i])
		}
	}
}

// direct sets the dc value.
func (p *placing) direct(e *Element, v syntax.Value) {
	value, err := p.in.env.value(v)
	if err != nil {
		p.fail(v.Word, "the value of %s: %v", source.Visible(e.Designator), err)
		e.HasValue = e.Wave.Kind != "dc"
		return
	}
	e.Wave.DC = value
	if e.Wave.Kind == "dc" || e.Wave.Kind == "ac" {
		e.Wave.Kind = "dc"
		e.Value.Nominal, e.ValueAt, e.Written = value, p.span(v.Word), v.Text
	}
}

// alternating notes an AC magnitude; alone on the card it is what the source does.
func (p *placing) alternating(e *Element, v syntax.Value, alone bool) {
	value, err := p.in.env.value(v)
	if err == nil && alone && e.Wave.Kind == "dc" && p.card.e.Function == nil {
		e.Wave.Kind = "ac"
		e.Value.Nominal, e.ValueAt, e.Written = value, p.span(v.Word), v.Text
	}
}

// waveform reads the arguments of SIN, PULSE, PWL, EXP.
func (p *placing) waveform(e *Element, name syntax.Word, args []syntax.Value) {
	kind := strings.ToLower(name.Text)
	if kind == "sine" {
		kind = "sin"
	}
	e.Wave.Kind, e.Wave.Args, e.Value.Nominal = kind, nil, 0
	for _, a := range args {
		v, err := p.in.env.value(a)
		if err != nil {
			p.fail(a.Word, "%s of %s: %v", strings.ToUpper(kind), source.Visible(e.Designator), err)
			e.HasValue = false
			return
		}
		e.Wave.Args = append(e.Wave.Args, v)
	}
	if kind == "sin" {
		if len(e.Wave.Args) < 2 {
			p.fail(name, "SIN of %s needs an offset and an amplitude", source.Visible(e.Designator))
			e.HasValue = false
			return
		}
		e.Value.Nominal, e.ValueAt, e.Written = e.Wave.Args[1], p.span(args[1].Word), args[1].Text
	}
}

// controlledNodes says how many nodes a controlled source or switch has.
var controlledNodes = map[byte]int{'E': 4, 'G': 4, 'F': 2, 'H': 2, 'B': 2, 'S': 4, 'W': 2}

// controlled makes a controlled source or a switch: its wires are known, its
// law is not computed.
func (p *placing) controlled(letter byte) {
	fields := p.card.e.Fields
	count := controlledNodes[letter]
	if letter == 'E' || letter == 'G' {
		_, value := p.pair("value", "vol", "cur", "table")
		if value || len(fields) > 2 && isFormula(fields[2].Text) {
			count = 2
		}
	}
	if len(fields) < count || (letter == 'S' || letter == 'W') && len(fields) < count+1 {
		p.fail(p.card.e.Name, "%s needs %d nodes%s", source.Visible(p.card.e.Name.Text), count,
			map[bool]string{true: " and a model"}[letter == 'S' || letter == 'W'])
		return
	}
	kind := Controlled
	if letter == 'S' || letter == 'W' {
		kind = Switch
		p.use(fields[len(fields)-1].Text)
	}
	e := p.new(letter, kind, fields[:count])
	p.add(e)
}

func isFormula(word string) bool {
	switch strings.ToLower(word) {
	case "poly", "value", "table", "laplace", "freq", "cur", "vol":
		return true
	}
	return false
}

// use marks a model of the netlist as used.
func (p *placing) use(name string) {
	if def := p.in.scope.findModel(name); def != nil {
		p.b.used[def] = true
	}
}
