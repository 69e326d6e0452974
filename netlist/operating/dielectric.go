package operating

import (
	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
)

// dielectric is how the capacitance of a kind of capacitor may change with
// temperature.
type dielectric struct {
	tempco quantity.Spread // 1/K
	class  quantity.Spread // relative change anywhere in the temperature range
}

// classReach is how far from 25 deg C, in K, the whole of a class change is
// taken. A class limits the change anywhere in its temperature range and promises
// nothing in between.
const classReach = 5

// dielectricOf returns what a standard promises of a kind: EIA-198 for C0G (30 ppm
// per K), X7R (15 % over -55 .. 125 deg C) and Y5V (+22, -82 % over -30 .. 85
// deg C), the nominal change of a class being the middle of its range. Of film and
// electrolytic capacitors no standard limits it: their drift is what tempco= says.
func dielectricOf(kind string) (d dielectric, ok bool) {
	switch kind {
	case "c0g":
		return dielectric{tempco: quantity.Spread{Low: -30e-6, High: 30e-6}}, true
	case "x7r":
		return dielectric{class: quantity.Spread{Low: -0.15, High: 0.15}}, true
	case "y5v":
		return dielectric{class: quantity.Spread{Low: -0.82, Nominal: -0.3, High: 0.22}}, true
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
	if d.tempco.Low < d.tempco.High {
		s.tempco = b.add(trait{name: e.Designator + ".tempco", unit: "1/K"}, d.tempco)
	}
	if d.class.Low < d.class.High {
		s.class = b.add(trait{name: e.Designator + ".class"}, d.class)
	}
}
