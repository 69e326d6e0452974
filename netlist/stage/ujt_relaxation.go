package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// ujt recognises the relaxation oscillator around a unijunction transistor:
// a capacitor at the emitter (or behind a resistor at the emitter), charged
// from a supply through any network, base two at the upper rail and base one
// at the lower one, each directly or through resistors.
func (r *recogniser) ujt(anchor *circuit.Element, nets []circuit.NodeID) *Stage {
	u := &ujtReading{rampReading{w: r.w, stage: newStage(UJTOscillator, anchor),
		terminal: nets[0], outlet: nets[1], control: nets[2],
		terminalWords: "emitter", outletWords: "base one", controlWords: "base two"}}
	s := u.stage
	s.Nodes["outlet"] = u.outlet
	s.Nodes["emitter"], s.Nodes["base1"], s.Nodes["base2"] = u.terminal, u.outlet, u.control
	s.Gap = steps(u.distinct, u.capacitorNode, u.rails, u.capacitors, u.charging, u.bases)
	if s.Gap == "" {
		u.supplies()
		u.beside()
	}
	return s
}

// ujtReading is the state of reading one oscillator.
type ujtReading struct{ rampReading }

// bases collects the resistors in the base leads.
func (u *ujtReading) bases() string {
	quiet := func(n circuit.NodeID) bool { return u.isRail(n) || n == u.node || n == u.terminal }
	two := u.w.Walk([]circuit.NodeID{u.control}, isResistor, func(n circuit.NodeID) bool { return quiet(n) || n == u.outlet })
	ends := func(base circuit.NodeID) func(circuit.NodeID) bool {
		return func(n circuit.NodeID) bool { return n == base || u.isRail(n) }
	}
	u.stage.add(BaseTwo, prune(u.w, without(two.Elements, u.stage.Parts[TimingResistor]), ends(u.control))...)
	u.lead()
	return ""
}

func isResistor(e *circuit.Element) bool { return e.Kind == circuit.Resistor }

// isDirect reports whether a part carries the bar current whatever its sign: a
// loudspeaker or a winding in the base-one lead does as well as a resistor.
func isDirect(e *circuit.Element) bool { return isResistor(e) || e.Kind == circuit.Inductor }

func without(list, drop []*circuit.Element) []*circuit.Element {
	return slices.DeleteFunc(slices.Clone(list), func(e *circuit.Element) bool { return slices.Contains(drop, e) })
}
