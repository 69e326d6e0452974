package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// breakover recognises the relaxation oscillator around a two-terminal device
// that breaks over: a capacitor on one side, charged by any network; the other
// side at a rail, through a resistor, a winding or a thyristor's gate. Which side
// is which the wiring tells; a device with a direction has to stand the right way.
func (r *recogniser) breakover(anchor *circuit.Element, nets []circuit.NodeID) *Stage {
	first := r.breakoverFrom(anchor, nets[0], nets[1])
	if first.Gap == "" {
		return first
	}
	if second := r.breakoverFrom(anchor, nets[1], nets[0]); second.Gap == "" || !r.hasCapacitor(nets[0]) {
		return second
	}
	return first
}

func (r *recogniser) hasCapacitor(n circuit.NodeID) bool {
	return slices.ContainsFunc(r.w.On(n), func(p circuit.Pin) bool { return p.Element.Kind == circuit.Capacitor })
}

// breakoverFrom reads the stage with the capacitor on the side of terminal.
func (r *recogniser) breakoverFrom(anchor *circuit.Element, terminal, outlet circuit.NodeID) *Stage {
	u := &breakoverReading{rampReading{w: r.w, stage: newStage(BreakoverOscillator, anchor),
		terminal: terminal, outlet: outlet, control: outlet,
		terminalWords: "breakover device", outletWords: "its far side"}}
	s := u.stage
	s.Nodes["outlet"], s.Nodes["terminal"] = outlet, terminal
	s.Gap = steps(u.apart, u.capacitorNode, u.rails, u.returns, u.charging, u.fed)
	if s.Gap == "" {
		u.lead()
		u.supplies()
		u.bridge()
		u.beside()
		u.gate()
	}
	return s
}

// breakoverReading is the state of reading one oscillator.
type breakoverReading struct{ rampReading }

func (u *breakoverReading) apart() string {
	if u.terminal == u.outlet {
		return "both its terminals are on one net"
	}
	return ""
}

// rails finds the rail that the discharge returns to and the one that feeds the
// capacitor: of those that the charging network reaches, the one farthest from it.
func (u *breakoverReading) rails() string {
	stop := func(n circuit.NodeID) bool {
		return u.w.IsFixed(n) || n == u.terminal || n == u.node || n == u.outlet
	}
	u.atOutlet = u.w.Walk([]circuit.NodeID{u.outlet}, carriesDC, stop)
	u.atControl = u.atOutlet
	u.atNode = u.w.Walk([]circuit.NodeID{u.node}, u.feeds, stop)
	if u.w.IsFixed(u.outlet) {
		u.lower = u.outlet
	} else if !u.lowerRail() {
		return "its far side has no way to a rail"
	}
	u.lowerVolts, u.lowerVoltsKnown = u.w.Potential(u.lower)
	found, most := false, 0.0
	for _, n := range append(slices.Clone(u.atNode.Nets), u.sourceNets(stop)...) {
		if !u.w.IsFixed(n) || n == u.lower {
			continue
		}
		v, known := u.w.Potential(n)
		away := max(v-u.lowerVolts, u.lowerVolts-v)
		if !known {
			away = 1e12 // a source that swings
		}
		if !found || away > most {
			found, most, u.upper = true, away, n
		}
	}
	if !found && !u.rectified() {
		return "nothing charges the capacitor"
	}
	u.stage.Nodes["upper"], u.stage.Nodes["lower"] = u.upper, u.lower
	return ""
}

// sourceNets lists the nets that transistors and regulators on the capacitor lead
// to.
func (u *breakoverReading) sourceNets(stop func(circuit.NodeID) bool) []circuit.NodeID {
	var list []circuit.NodeID
	for _, p := range u.w.On(u.node) {
		var ends []circuit.NodeID
		if emitter, ok := p.Element.Pin("emitter"); ok && p.Element != u.stage.Anchor {
			ends = append(ends, emitter)
		}
		if r, ok := RegulatorOf(u.w, p.Element); ok {
			ends = append(ends, r.High, r.Low)
		}
		for _, n := range ends {
			if n = u.w.Net(n); n != u.node {
				list = append(list, u.w.Walk([]circuit.NodeID{n}, carriesDC, stop).Nets...)
			}
		}
	}
	return list
}

// rectified takes for the upper rail the net behind which the rectifiers of a floating source (a
// transformer's winding, a line with its bridge) stand.
func (u *breakoverReading) rectified() bool {
	floats := slices.ContainsFunc(u.atNode.Elements, func(e *circuit.Element) bool {
		return e.Kind == circuit.VoltageSource
	})
	for _, e := range u.atNode.Elements {
		if e.Kind != circuit.Diode || !floats {
			continue
		}
		for _, n := range u.atNode.Nets { // in the order of the walk: the near end comes first
			if n != u.node && n != u.lower && (n == u.w.Net(e.Nodes[0]) || n == u.w.Net(e.Nodes[1])) {
				u.upper = n
				return true
			}
		}
	}
	return false
}

// bridge collects the rectifiers beyond the upper rail, the floating source that feeds them, and
// what smooths the feed.
func (u *breakoverReading) bridge() {
	for _, e := range u.atNode.Elements {
		switch {
		case e.Kind == circuit.VoltageSource:
			u.stage.add(Supply, e)
		case e.Kind == circuit.Diode:
			u.stage.add(Rectifier, e)
		}
	}
	for _, n := range u.atNode.Nets {
		if n == u.node || u.w.IsFixed(n) {
			continue
		}
		pins := u.w.On(n)
		if !slices.ContainsFunc(pins, func(p circuit.Pin) bool { return p.Element.Kind == circuit.Diode }) {
			continue
		}
		for _, p := range pins {
			if e := p.Element; e.Kind == circuit.Capacitor && u.isRail(u.w.Other(e, n)) {
				u.stage.add(Reservoir, e)
			}
		}
	}
}

// returns collects the timing capacitor; where none ends on a rail, the minus of a bridge may be
// meant, which only counts as one where it is the reference.
func (u *breakoverReading) returns() string {
	gap := u.capacitors()
	if gap == "" {
		return ""
	}
	diode := func(e *circuit.Element) bool { return e.Kind == circuit.Diode }
	if !u.w.IsFixed(u.outlet) && slices.ContainsFunc(u.atOutlet.Elements, diode) {
		return gap + "; a rail behind rectifiers counts where node 0 is put there"
	}
	return gap
}

// fed turns away what is timed from the line through a thyristor's own load: that
// is phase control.
func (u *breakoverReading) fed() string {
	for _, n := range u.atOutlet.Nets {
		for _, p := range u.w.On(n) {
			e := p.Element
			gate, ok := e.Pin("gate")
			if !ok || e.Kind != circuit.Triac && e.Kind != circuit.SCR || u.w.Net(gate) != n {
				continue
			}
			if _, dc := u.w.Potential(u.upper); !dc && !u.smoothed() {
				return "it fires " + e.Designator + " from the line: phase control is not worked out"
			}
		}
	}
	return ""
}

// smoothed reports whether a reservoir stands behind the rectifiers.
func (u *breakoverReading) smoothed() bool {
	u.bridge()
	return len(u.stage.Parts[Reservoir]) > 0
}

// gate names a third terminal that is wired: it moves the breakover voltage.
func (u *breakoverReading) gate() {
	gate, ok := u.stage.Anchor.Pin("gate")
	if ok && len(u.w.On(gate)) > 1 {
		u.stage.Beside = append(u.stage.Beside,
			"its gate is wired; what that does to the breakover voltage is not worked out")
	}
}
