package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// put recognises the relaxation oscillator around a programmable unijunction: a
// capacitor at the anode (or behind a resistor there), the gate on a divider of
// any shape that reaches the upper rail, the cathode at the lower rail directly
// or through resistors.
func (r *recogniser) put(anchor *circuit.Element, nets []circuit.NodeID) *Stage {
	u := r.putReading(anchor, nets[0], nets[1], nets[2])
	u.read()
	return u.stage
}

// unliftedPUT recognises one whose gate leads to the lower rail alone: wired as a stage, but
// nothing lifts the gate.
func (r *recogniser) unliftedPUT(anchor *circuit.Element, nets []circuit.NodeID) *Stage {
	u := r.putReading(anchor, nets[0], nets[1], nets[2])
	u.unlifted = true
	u.read()
	return u.stage
}

// putReading starts the reading of an oscillator around a device with anode, gate
// and cathode.
func (r *recogniser) putReading(anchor *circuit.Element, anode, gate, cathode circuit.NodeID) *rampReading {
	u := &rampReading{w: r.w, stage: newStage(PUTOscillator, anchor),
		terminal: anode, outlet: cathode, control: gate,
		terminalWords: "anode", outletWords: "the cathode", controlWords: "the gate"}
	n := u.stage.Nodes
	n["outlet"], n["anode"], n["gate"], n["cathode"] = cathode, anode, gate, cathode
	return u
}

// read goes through the steps of the reading.
func (u *rampReading) read() {
	s := u.stage
	s.Gap = steps(u.distinct, u.capacitorNode, u.rails, u.capacitors, u.charging, u.divider)
	if s.Gap == "" {
		u.lead()
		u.supplies()
		u.beside()
	}
}

// divider collects what sets the gate's voltage: everything that carries dc from
// the gate to the rails or to the cathode.
func (u *rampReading) divider() string {
	quiet := func(n circuit.NodeID) bool {
		return u.isRail(n) || n == u.node || n == u.terminal || n == u.outlet
	}
	area := u.w.Walk([]circuit.NodeID{u.control}, carriesDC, quiet)
	list := prune(u.w, area.Elements, func(n circuit.NodeID) bool { return n == u.control || quiet(n) })
	if len(list) == 0 && !u.w.IsFixed(u.control) {
		return "nothing sets the voltage of its gate"
	}
	u.stage.add(GateDivider, without(list, u.stage.Parts[GateShunt])...)
	return ""
}

// lead collects the resistors from the outlet to the lower rail, diodes (a lamp diode,
// say) may stand between.
func (u *rampReading) lead() {
	area := u.w.Walk([]circuit.NodeID{u.outlet}, leadsPulse, func(n circuit.NodeID) bool {
		return u.isRail(n) || n == u.node || n == u.terminal || n == u.control || u.isGate(n)
	})
	own := without(without(area.Elements, u.stage.Parts[GateDivider]), u.stage.Parts[TimingResistor])
	own = prune(u.w, own, func(n circuit.NodeID) bool { return n == u.outlet || u.isRail(n) })
	u.stage.add(BaseOne, slices.DeleteFunc(own, func(e *circuit.Element) bool { return !isDirect(e) })...)
}

// leadsPulse reports whether an element can carry the pulse to the lower rail.
func leadsPulse(e *circuit.Element) bool { return isDirect(e) || e.Kind == circuit.Diode }
