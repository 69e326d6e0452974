package circuit

import (
	"math"
	"strings"

	"standoff/netlist/quantity"
)

// finish applies what names single elements, works out every spread and
// gathers the facts for the hygiene rules.
func (b *builder) finish(top *scope) {
	b.direct(&instance{scope: top, env: b.environment(top, nil, nil)})
	for _, e := range b.circuit.Elements {
		if e.HasValue {
			spreadOf(e)
		}
	}
	b.applyMains()
	for _, def := range b.models {
		if !b.used[def] {
			b.circuit.UnusedModels = append(b.circuit.UnusedModels, b.model(def))
		}
	}
}

// defaultTolerance is the spread of an element of which nothing is declared.
func defaultTolerance(e *Element) (minus, plus float64) {
	switch e.Kind {
	case Resistor, VoltageSource, CurrentSource:
		return 0.05, 0.05
	case Capacitor:
		if e.Intent.Kind == "electrolytic" {
			return 0.2, 0.2
		}
		return 0.1, 0.1
	}
	return 0, 0
}

// spreadOf works out the spread of an element from its nominal value.
func spreadOf(e *Element) {
	v := e.Value.Nominal
	minus, plus := defaultTolerance(e)
	e.Basis = BasisDefault
	if minus == 0 && plus == 0 {
		e.Basis = BasisExact
	}
	if t := e.Intent.Tol; t != nil {
		minus, plus, e.Basis = -t.Low, t.High, BasisDeclared
	}
	switch {
	case e.Intent.Travel != nil:
		t := *e.Intent.Travel
		t.Nominal = min(max(v, t.Low), t.High)
		if _, own := e.Intent.At["tol"]; own { // the track's own tolerance widens its ends
			t.Low, t.High = t.Low*(1-minus), t.High*(1+plus)
		}
		e.Value, e.Basis = t, BasisDeclared
	case e.Intent.Range != nil:
		r := *e.Intent.Range
		r.Nominal = min(max(v, r.Low), r.High)
		e.Value, e.Basis = r, BasisDeclared
	default:
		e.Value = quantity.Tolerance(v, minus, plus)
	}
}

// applyMains gives every sine source of line frequency whose crest lies within
// 25 % of the declared mains the declared range.
func (b *builder) applyMains() {
	mains := b.circuit.Board.Mains
	if mains == nil {
		return
	}
	for _, e := range b.circuit.Elements {
		if e.Kind != VoltageSource || e.Wave.Kind != "sin" || len(e.Wave.Args) < 3 || e.Intent.Range != nil {
			continue
		}
		hertz, crest := e.Wave.Args[2], math.Abs(e.Wave.Args[1])
		low, high := mains.Low*math.Sqrt2, mains.High*math.Sqrt2
		if hertz < 45 || hertz > 65 || crest < 0.75*low || crest > 1.25*high {
			continue
		}
		e.Value = quantity.Spread{Low: low, Nominal: min(max(crest, low), high), High: high}
		e.Basis = BasisDeclared
	}
}

// With returns the same circuit with other nominal values for the elements
// named (case does not matter); their spreads keep their relative width. The
// circuit itself is left alone.
func (c *Circuit) With(values map[string]float64) *Circuit {
	copied := *c
	copied.Elements = make([]*Element, len(c.Elements))
	changed := make([]Element, 0, len(values))
	wanted := make(map[string]float64, len(values))
	for name, v := range values {
		wanted[strings.ToLower(name)] = v
	}
	for i, e := range c.Elements {
		copied.Elements[i] = e
		if v, ok := wanted[strings.ToLower(e.Designator)]; ok && len(changed) < cap(changed) {
			changed = append(changed, *e)
			e = &changed[len(changed)-1]
			revalue(e, v)
			copied.Elements[i] = e
		}
	}
	copied.Nodes = append([]Node(nil), c.Nodes...)
	for i := range changed {
		e := &changed[i]
		for _, n := range e.Nodes {
			pins := append([]Pin(nil), copied.Nodes[n].Pins...)
			for k := range pins {
				if pins[k].Element.Index == e.Index {
					pins[k].Element = e
				}
			}
			copied.Nodes[n].Pins = pins
		}
	}
	return &copied
}

// revalue gives an element another nominal value.
func revalue(e *Element, v float64) {
	factor := 1.0
	if e.Value.Nominal != 0 {
		factor = v / e.Value.Nominal
	}
	e.Value = quantity.Spread{Low: e.Value.Low * factor, Nominal: v, High: e.Value.High * factor}
	e.Written = quantity.Short(v)
}
