package operating

import (
	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
)

// dielectric is how the capacitance of a kind of capacitor changes with
// temperature.
type dielectric struct {
	tempco quantity.Spread // 1/K
	class  quantity.Spread // relative change anywhere in the temperature range
	memory bool
}

// classReach is how far from 25 deg C, in K, the whole of a class change is
// taken. A class limits the change anywhere in its temperature range and promises
// nothing in between.
const classReach = 5

// dielectricOf returns what is known of a kind. C0G, X7R and Y5V: EIA-198 (30 ppm
// per K; 15 % over -55 .. 125 deg C; +22, -82 % over -30 .. 85 deg C), the nominal
// change of a class being the middle of its range. Film: the span of polypropylene
// and polyester; electrolytic and tantalum: a fifth less at -40 deg C (all three
// from memory). A y2 capacitor may be ceramic of several classes: unknown.
func dielectricOf(kind string) (d dielectric, ok bool) {
	switch kind {
	case "c0g":
		return dielectric{tempco: quantity.Spread{Low: -30e-6, High: 30e-6}}, true
	case "x7r":
		return dielectric{class: quantity.Spread{Low: -0.15, High: 0.15}}, true
	case "y5v":
		return dielectric{class: quantity.Spread{Low: -0.82, Nominal: -0.3, High: 0.22}}, true
	case "film", "x2":
		return dielectric{tempco: quantity.Spread{Low: -300e-6, Nominal: 100e-6, High: 600e-6}, memory: true}, true
	case "electrolytic", "tantalum":
		return dielectric{tempco: quantity.Spread{Low: 0, Nominal: 1e-3, High: 3e-3}, memory: true}, true
	}
	return dielectric{}, false
}

// drifts adds how an element drifts: as declared with tempco=, else as the
// declared kind of a capacitor does.
func (b *bench) drifts(e *circuit.Element, s *slot) {
	if declared := e.Intent.Tempco; declared != nil {
		if *declared != 0 {
			s.tempco = b.add(trait{name: e.Designator + ".tempco", unit: "1/K"}, quantity.Exact(*declared))
		}
		return
	}
	d, ok := dielectricOf(e.Intent.Kind)
	if !ok {
		return
	}
	note := func(what string) trait {
		t := trait{name: e.Designator + what, unit: "1/K"}
		if d.memory {
			t.doubtLow, t.doubtHigh = true, true
			t.note = "drift of " + e.Designator + " as of a capacitor of its kind, from memory"
		}
		return t
	}
	if d.tempco.Low < d.tempco.High {
		s.tempco = b.add(note(".tempco"), d.tempco)
	}
	if d.class.Low < d.class.High {
		t := note(".class")
		t.unit = ""
		s.class = b.add(t, d.class)
	}
}
