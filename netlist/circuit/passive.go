package circuit

import (
	"strings"

	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// Roles of two-terminal parts; shared, never written to.
var (
	plainRoles = []string{"1", "2"}
	polarRoles = []string{"plus", "minus"}
)

// jig is a capacitance that no board has.
const jig = 1e6

// passive makes a resistor, capacitor or inductor.
func (p *placing) passive(letter byte) {
	fields := p.card.e.Fields
	if len(fields) < 2 {
		p.fail(p.card.e.Name, "%s needs two nodes and a value", p.shown())
		return
	}
	kind := Resistor
	switch letter {
	case 'C':
		kind = Capacitor
	case 'L':
		kind = Inductor
	}
	e := p.new(letter, kind, fields[:2])
	e.Roles = plainRoles
	p.passiveValue(e, fields[2:])
	if kind == Capacitor && e.HasValue && e.Value.Nominal >= jig {
		e.Kind = Jig
	}
	if v, ok := p.pair("tc", "tc1"); ok {
		p.tempco(e, v)
	}
	p.add(e)
}

// passiveValue finds the value: a bare word, before or behind the name of a
// model, or a setting. A model alone may hold it.
func (p *placing) passiveValue(e *Element, words []syntax.Value) {
	v, ok := p.pair(string(e.Letter), "value", "val")
	named := len(words) > 0 && !p.isValue(words[0])
	switch {
	case named:
		p.use(words[0].Text)
		if len(words) > 1 {
			v, ok = words[1], true
		}
	case len(words) > 0:
		v, ok = words[0], true
		if len(words) > 1 {
			p.use(words[1].Text)
		}
	}
	if ok {
		p.setValue(e, v)
	} else if !named {
		p.fail(p.card.e.Name, "%s has no value%s", p.shown(), p.swallowed())
	}
}

// swallowed says that a comment begins where the value should stand, as a
// placeholder $NAME makes one.
func (p *placing) swallowed() string {
	text := p.card.deck.File.Text
	fields := p.card.e.Fields
	line, _, _ := strings.Cut(text[fields[len(fields)-1].End:], "\n")
	if word := strings.Fields(line); len(word) > 0 && word[0][0] == '$' {
		return "; " + source.Visible(word[0]) + " begins a comment"
	}
	return ""
}

// isValue tells a value from the name of a model.
func (p *placing) isValue(v syntax.Value) bool {
	if v.Expr != nil || v.Text != "" && isDigit(v.Text[0]) {
		return true
	}
	if _, err := p.value(v); err == nil {
		return true
	}
	return p.model(v.Text) == nil
}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

func (p *placing) setValue(e *Element, v syntax.Value) {
	e.ValueAt, e.Written = p.span(v.Word), v.Text
	value, err := p.value(v)
	switch {
	case err != nil:
		p.fail(v.Word, "the value of %s: %v", p.shown(), err)
	case e.Kind == Resistor && value < 0, e.Kind != Resistor && value <= 0:
		p.fail(v.Word, "%s cannot have the value %s", p.shown(), source.Visible(v.Text))
	default:
		e.Value.Nominal, e.HasValue = value, true
		p.parallel(e)
	}
}

// parallel counts equal parts side by side, written as m=.
func (p *placing) parallel(e *Element) {
	v, ok := p.pair("m")
	if !ok {
		return
	}
	m, err := p.value(v)
	switch {
	case err != nil:
		p.fail(v.Word, "m of %s: %v", p.shown(), err)
	case m <= 0:
		p.fail(v.Word, "%s cannot have m=%s: parts side by side are counted from 1", p.shown(),
			source.Visible(v.Text))
	case e.Kind == Capacitor:
		e.Value.Nominal *= m
	default:
		e.Value.Nominal /= m
	}
}

// tempco takes the first coefficient of tc=; an intent line wins over it.
func (p *placing) tempco(e *Element, v syntax.Value) {
	first := v
	if i := strings.IndexByte(v.Text, ','); i > 0 && v.Expr == nil {
		first.Text, first.End = v.Text[:i], v.Start+int32(i)
	}
	tc, err := p.value(first)
	if err != nil {
		p.fail(v.Word, "tc of %s: %v", p.shown(), err)
		return
	}
	if e.Intent.Tempco == nil {
		e.own().Tempco = &tc
	}
}

// coupling makes a K card. Its inductors are found when all cards are placed.
func (p *placing) coupling() {
	fields := p.card.e.Fields
	if len(fields) < 3 {
		p.fail(p.card.e.Name, "%s needs two inductors and a coupling factor", p.shown())
		return
	}
	e := p.new('K', Coupling, nil)
	last := fields[len(fields)-1]
	if def := p.model(last.Text); def != nil && len(fields) > 3 { // a core
		def.used = true
		last = fields[len(fields)-2]
	}
	e.ValueAt, e.Written = p.span(last.Word), last.Text
	k, err := p.value(last)
	switch {
	case err != nil:
		p.fail(last.Word, "the coupling factor of %s: %v", p.shown(), err)
	case k <= 0 || k > 1:
		p.fail(last.Word, "%s cannot have the coupling factor %s: it lies above 0 and is at most 1", p.shown(),
			source.Visible(last.Text))
	default:
		e.Value.Nominal, e.HasValue = k, true
	}
	p.add(e)
}
