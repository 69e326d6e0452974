package rules

import (
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
)

// Caution is a word on safety.
type Caution struct{ Kind, Message string }

// Up to these voltages bare parts may be touched in a dry place: 42.4 V peak, 60 V
// dc (IEC 60950-1; the dc figure from memory).
const touchSafePeak, touchSafeDC = 42.4, 60.0

// cautions gives the words that are due where mains, a high supply or stored
// charge can hurt someone.
func cautions(c *circuit.Circuit) []Caution {
	var list []Caution
	mains, high, stores := c.Board.Mains != nil, 0.0, false
	for _, e := range c.Elements {
		switch {
		case e.Kind == circuit.Capacitor:
			stores = true
		case e.Kind != circuit.VoltageSource || !e.HasValue:
		case e.Wave.Kind == "dc" || e.Wave.Kind == "":
			high = math.Max(high, greatest(e))
		default:
			mains = mains || crest(e) > touchSafePeak
		}
	}
	if mains {
		list = append(list, Caution{"mains", "parts of this board lie on the mains or on an alternating " +
			"voltage that can kill. " +
			"Isolate before touching, keep to the local codes, and leave the work to people licensed for it. " +
			"This report " +
			"replaces no inspection."})
	}
	if high > touchSafePeak {
		text := "a supply of up to " + quantity.Format(high, "V")
		if high > touchSafeDC {
			text += " can kill. Switch off, isolate and measure before touching."
		} else {
			text += " is no longer harmless in wet places."
		}
		list = append(list, Caution{"voltage", text})
	}
	if stores && (mains || high > touchSafeDC) {
		list = append(list, Caution{"stored-charge", "capacitors on this board can stay charged after the " +
			"supply is gone. " +
			"Discharge them through a resistor and measure before touching."})
	}
	return list
}

// greatest is the largest value of a source, whatever its sign, over its spread.
func greatest(e *circuit.Element) float64 {
	return math.Max(math.Abs(e.Value.Low), math.Abs(e.Value.High))
}

// crest is the greatest voltage that a source reaches, in volt: an AC magnitude
// counts as rms, as people write mains; a sine has its offset added; the levels of
// the other shapes are taken from their arguments.
func crest(e *circuit.Element) float64 {
	level := func(i int) float64 {
		if i < len(e.Wave.Args) {
			return math.Abs(e.Wave.Args[i])
		}
		return 0
	}
	switch e.Wave.Kind {
	case "ac":
		return greatest(e) * math.Sqrt2
	case "sin":
		return greatest(e) + level(0)
	case "pwl":
		most := 0.0
		for i := 1; i < len(e.Wave.Args); i += 2 {
			most = math.Max(most, level(i))
		}
		return most
	}
	return math.Max(level(0), level(1))
}
