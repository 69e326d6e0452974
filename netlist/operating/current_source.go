package operating

import (
	"standoff/netlist/circuit"
	"standoff/netlist/network"
	"standoff/netlist/part"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
)

// regulated is a current source of the board at work in a mesh: what stands across
// it and what it needs to keep its current.
type regulated struct {
	element    *circuit.Element
	high, low  network.Node              // the voltage across counts from high to low
	least      func(x []float64) float64 // the voltage below which it leaves its range
	greatest   float64                   // its rating, +Inf for none
	amperes    func(x []float64) float64 // nil for a transistor: the network sets it
	from, upTo float64                   // the range of currents it can be set to; 0, +Inf for none
	slope      int                       // variable of its volts per kelvin, where it has a third terminal
	mark       part.Mark
	assumed    bool // the least voltage is assumed
}

// What stands in for the figures of transistors (common practice, no source).
var (
	// assumedBaseEmitter is the base-emitter voltage of a silicon transistor at 25 deg C
	// from tens of microamperes to tens of milliamperes.
	assumedBaseEmitter = quantity.Spread{Low: 0.55, Nominal: 0.65, High: 0.75}
	// assumedGain is the current gain of a small-signal transistor.
	assumedGain = quantity.Spread{Low: 40, Nominal: 150, High: 500}
)

// activeParts lists the transistors and regulators that a stage counts as its own,
// those that could pull its capacitor down, and
// those that read its ramp.
func activeParts(s *stage.Stage) []*circuit.Element {
	var list []*circuit.Element
	for _, e := range s.Parts[stage.CurrentSource] {
		if isActive(e.Kind) {
			list = append(list, e)
		}
	}
	return append(append(list, s.Clamps...), s.Taps...)
}

func isActive(k circuit.Kind) bool {
	switch k {
	case circuit.NPN, circuit.PNP, circuit.NJF, circuit.PJF, circuit.SourceIC:
		return true
	}
	return false
}

// ends lists the nets on which an active part meets the rest: of a regulator that a
// resistor sets, not the net between the two.
func (b *bench) ends(e *circuit.Element) []circuit.NodeID {
	if e.Kind == circuit.NPN || e.Kind == circuit.PNP {
		return e.Nodes
	}
	r, ok := stage.RegulatorOf(b.w, e)
	if !ok {
		return nil
	}
	return []circuit.NodeID{r.High, r.Low}
}

// touches reports whether an active part hangs on a net of the area that no source
// fixes; within, whether all of its nets are in it.
func (b *bench) touches(e *circuit.Element, area *circuit.Area) bool {
	for _, n := range b.ends(e) {
		if area.HasNet(b.w, n) && !b.w.IsFixed(n) {
			return true
		}
	}
	return false
}

func (b *bench) within(e *circuit.Element, area *circuit.Area) bool {
	for _, n := range b.ends(e) {
		if !area.HasNet(b.w, n) {
			return false
		}
	}
	return true
}

// inside reports whether a part belongs to a regulator whose current it sets: the
// regulator's law counts it.
func (b *bench) inside(e *circuit.Element) bool {
	if e.Kind != circuit.Resistor && e.Kind != circuit.Diode {
		return false
	}
	for _, a := range b.active {
		if a.Kind == circuit.NPN || a.Kind == circuit.PNP {
			continue
		}
		if r, ok := stage.RegulatorOf(b.w, a); ok && r.Holds(e) {
			return true
		}
	}
	return false
}

// active adds a transistor or a regulator to the mesh.
func (m *mesh) active(e *circuit.Element) error {
	if m.have[e] {
		return nil
	}
	m.have[e], m.bends = true, true
	for _, n := range m.bench.ends(e) {
		if err := m.take(n); err != nil {
			return err
		}
	}
	if e.Kind == circuit.NPN || e.Kind == circuit.PNP {
		return m.transistor(e)
	}
	return m.regulator(e)
}

// across returns the voltage across a source in the last solution.
func (m *mesh) across(r *regulated) float64 {
	return m.solver.Voltage(r.high) - m.solver.Voltage(r.low)
}

// sourceNotes lists what of a stage's current sources is left out.
func sourceNotes(s *stage.Stage) []Unchecked {
	var list []Unchecked
	add := func(rule, because string) { list = append(list, Unchecked{rule, because}) }
	for _, e := range s.Parts[stage.CurrentSource] {
		name := e.Designator
		bipolar := e.Kind == circuit.NPN || e.Kind == circuit.PNP
		if isActive(e.Kind) && !bipolar && e != s.Source && s.Source != nil {
			add("current-source-compliance", name+" is not held against its range as "+s.Source.Designator+" is")
		}
		switch e.Kind {
		case circuit.NPN, circuit.PNP:
			if _, ok := cardSpread(e, "vaf"); !ok && e == s.Source {
				add("", "how the current of "+name+" rises with the voltage across it is left out: its card gives no vaf")
			}
		case circuit.NJF, circuit.PJF:
			add("frequency-drift", "the drift of the current of "+name+" with temperature is left out")
			if v, ok := cardSpread(e, "vto"); ok && v.IsExact() {
				add("", "the card of "+name+" gives its pinch-off voltage without a spread: it was taken as exact")
			}
		case circuit.SourceIC:
			if _, ok := e.Pin("r"); !ok {
				add("frequency-drift", "the temperature coefficient of "+name+" is unknown")
			}
		}
	}
	return list
}
