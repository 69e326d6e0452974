package circuit

import (
	"strings"

	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// source makes a voltage or current source.
func (p *placing) source(letter byte) {
	fields := p.card.e.Fields
	kind := VoltageSource
	if letter == 'I' {
		kind = CurrentSource
	}
	if len(fields) < 2 {
		p.fail(p.card.e.Name, "%s needs two nodes and a value", p.shown())
		return
	}
	e := p.new(letter, kind, fields[:2])
	e.Roles = polarRoles
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
		p.steady(e, v)
	}
	for i := 0; i < len(words); i++ {
		switch w := strings.ToLower(words[i].Text); {
		case w == "dc" && i+1 < len(words):
			i++
			p.steady(e, words[i])
		case w == "ac":
			if i+1 < len(words) {
				i++
				p.alternating(e, words[i], len(words) == 2 || len(words) == 3)
			}
			if i+1 < len(words) && p.isNumber(words[i+1]) { // the phase
				i++
			}
		case syntax.IsWaveform(w) && words[i].Expr == nil:
			p.waveform(e, words[i].Word, words[i+1:])
			return
		default:
			p.steady(e, words[i])
		}
	}
}

func (p *placing) isNumber(v syntax.Value) bool {
	_, err := p.value(v)
	return err == nil
}

// steady sets the dc value.
func (p *placing) steady(e *Element, v syntax.Value) {
	value, err := p.value(v)
	if err != nil {
		p.fail(v.Word, "the value of %s: %v", p.shown(), err)
		e.HasValue = e.HasValue && e.Wave.Kind != "dc"
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
	value, err := p.value(v)
	switch {
	case err != nil:
		p.fail(v.Word, "the AC value of %s: %v", p.shown(), err)
	case alone && e.Wave.Kind == "dc" && p.card.e.Function == nil:
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
		v, err := p.value(a)
		if err != nil {
			p.fail(a.Word, "%s of %s: %v", strings.ToUpper(source.Visible(kind)), p.shown(), err)
			e.HasValue = false
			return
		}
		e.Wave.Args = append(e.Wave.Args, v)
	}
	if kind != "sin" {
		return
	}
	if len(e.Wave.Args) < 2 {
		p.fail(name, "SIN of %s needs an offset and an amplitude", p.shown())
		e.HasValue = false
		return
	}
	e.Value.Nominal, e.ValueAt, e.Written = e.Wave.Args[1], p.span(args[1].Word), args[1].Text
}

// controlledNodes says how many nodes a controlled source or switch has.
func controlledNodes(letter byte) int {
	switch letter {
	case 'E', 'G', 'S':
		return 4
	}
	return 2
}

// controlled makes a controlled source or a switch: its wires are known, its
// law is not computed.
func (p *placing) controlled(letter byte) {
	fields := p.card.e.Fields
	count, kind, rest := controlledNodes(letter), Controlled, ""
	if letter == 'E' || letter == 'G' {
		_, formula := p.pair("value", "vol", "cur", "table", "v", "i")
		if formula || len(fields) > 2 && isFormula(fields[2]) {
			count = 2
		}
	}
	least := count
	switch letter {
	case 'S':
		kind, least, rest = Switch, count+1, " and a model"
	case 'W':
		kind, least, rest = Switch, count+2, ", a source and a model"
	}
	if len(fields) < least {
		p.fail(p.card.e.Name, "%s needs %d nodes%s", p.shown(), count, rest)
		return
	}
	if kind == Switch {
		p.use(fields[least-1].Text)
	}
	p.add(p.new(letter, kind, fields[:count]))
}

// isFormula reports whether a law stands where the controlling nodes would.
func isFormula(v syntax.Value) bool {
	if v.Expr != nil {
		return true
	}
	switch strings.ToLower(v.Text) {
	case "poly", "value", "table", "laplace", "freq", "cur", "vol":
		return true
	}
	return false
}
