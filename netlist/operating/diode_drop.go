package operating

import (
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
)

// diodeSlope is the slope resistance of a conducting diode in ohm: a silicon
// diode changes by about 60 mV a decade (memory), less than 1 ohm above 30 mA.
const diodeSlope = 1

// diodeThreshold is the threshold of a silicon diode at 25 deg C in volt from
// microamperes to tens of milliamperes, and its drift in V/K (common practice,
// no source).
var diodeThreshold = quantity.Spread{Low: 0.5, Nominal: 0.65, High: 0.8}

const diodeDrift = -2e-3

// drop adds the forward voltage of a diode: the card's vf, as of a light-emitting diode; else
// what SPICE's law says of its is and n; else that of silicon.
func (b *bench) drop(e *circuit.Element) int {
	name := "drop of " + e.Designator
	if e.Ratings != nil {
		if v, _, ok := e.Ratings.Spread("vf"); ok {
			return b.add(trait{name: name, unit: "V"}, v)
		}
	}
	if v, ok := cardSpread(e, "vfwd"); ok && v.Low > 0 { // of a diode straight in pieces
		return b.add(trait{name: name, unit: "V"}, v)
	}
	if v, ok := lawOfCard(e); ok {
		return b.assumed(name, "V", v, "from is and n of the card for 0.1 .. 10 mA")
	}
	return b.assumed(name, "V", diodeThreshold, "silicon diode, assumed")
}

// lawOfCard returns the forward voltage n kT/q ln(I/I_S) of a card of SPICE's own at 0.1, 1 and
// 10 mA, where it is that of some diode.
func lawOfCard(e *circuit.Element) (quantity.Spread, bool) {
	is, okIS := cardSpread(e, "is")
	n, okN := cardSpread(e, "n")
	if !okN {
		n = quantity.Exact(1)
	}
	if !okIS || is.Nominal <= 0 || n.Nominal <= 0 {
		return quantity.Spread{}, false
	}
	at := func(amperes float64) float64 { return n.Nominal * thermal * math.Log(amperes/is.Nominal) }
	v := quantity.Spread{Low: at(0.1e-3), Nominal: at(1e-3), High: at(10e-3)}
	return v, v.Low > 0.1 && v.High < 5
}
