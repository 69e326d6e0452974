package circuit

import (
	"math"

	"standoff/netlist/quantity"
)

// defaultTolerance is the spread of an element of which nothing is declared.
func defaultTolerance(e *Element) float64 {
	switch e.Kind {
	case Resistor, VoltageSource, CurrentSource:
		return 0.05
	case Capacitor:
		if e.Intent.Kind == "electrolytic" {
			return 0.2
		}
		return 0.1
	}
	return 0
}

// spreadOf works out the spread of an element from its nominal value.
func spreadOf(e *Element) {
	v := e.Value.Nominal
	minus := defaultTolerance(e)
	plus := minus
	e.Basis = BasisDefault
	if minus == 0 || v == 0 {
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
	low, high := mains.Low*math.Sqrt2, mains.High*math.Sqrt2
	for _, e := range b.circuit.Elements {
		if e.Kind != VoltageSource || e.Wave.Kind != "sin" || len(e.Wave.Args) < 3 || e.Intent.Range != nil {
			continue
		}
		hertz, crest := e.Wave.Args[2], math.Abs(e.Wave.Args[1])
		if hertz < 45 || hertz > 65 || crest < 0.75*low || crest > 1.25*high {
			continue
		}
		e.Value = quantity.Spread{Low: low, Nominal: min(max(crest, low), high), High: high}
		if e.Wave.Args[1] < 0 { // the source stands the other way round
			e.Value = quantity.Spread{Low: -high, Nominal: -e.Value.Nominal, High: -low}
		}
		e.Basis = BasisDeclared
	}
}
