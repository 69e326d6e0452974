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
	u := &ujtReading{w: r.w, stage: newStage(UJTOscillator, anchor),
		emitter: nets[0], base1: nets[1], base2: nets[2]}
	s := u.stage
	s.Nodes["outlet"] = u.base1
	s.Nodes["emitter"], s.Nodes["base1"], s.Nodes["base2"] = u.emitter, u.base1, u.base2
	for _, step := range []func() string{u.distinct, u.capacitorNode, u.rails, u.capacitors, u.charging, u.bases} {
		if s.Gap = step(); s.Gap != "" {
			return s
		}
	}
	u.supplies()
	u.beside()
	return s
}

// ujtReading is the state of reading one oscillator.
type ujtReading struct {
	w                                *circuit.Wiring
	stage                            *Stage
	emitter, base1, base2, node      circuit.NodeID
	upper, lower                     circuit.NodeID
	atBase1, atBase2, atNode         *circuit.Area
	upperVolts, lowerVolts           float64
	upperVoltsKnown, lowerVoltsKnown bool
}

func (u *ujtReading) distinct() string {
	if u.emitter == u.base1 || u.emitter == u.base2 || u.base1 == u.base2 {
		return "two of its terminals are on one net"
	}
	return ""
}

// capacitorNode finds the net whose voltage is the sawtooth: the emitter, or
// the far side of a single resistor at the emitter.
func (u *ujtReading) capacitorNode() string {
	if u.hasCapacitor(u.emitter) {
		u.node = u.emitter
	} else {
		var only *circuit.Element
		count := 0
		for _, p := range u.w.On(u.emitter) {
			if p.Element == u.stage.Anchor {
				continue
			}
			count++
			if p.Element.Kind == circuit.Resistor && u.hasCapacitor(u.w.Other(p.Element, u.emitter)) {
				only = p.Element
			}
		}
		if only == nil || count != 1 {
			return "no capacitor stands at the emitter"
		}
		u.node = u.w.Other(only, u.emitter)
		u.stage.add(EmitterSeries, only)
	}
	u.stage.Nodes["capacitor"] = u.node
	return ""
}

func (u *ujtReading) hasCapacitor(n circuit.NodeID) bool {
	return slices.ContainsFunc(u.w.On(n), func(p circuit.Pin) bool { return p.Element.Kind == circuit.Capacitor })
}

// rails finds the nets between which the bar of the transistor lies.
func (u *ujtReading) rails() string {
	fixed := u.w.IsFixed
	own := func(n circuit.NodeID) bool { return n == u.emitter || n == u.node || n == u.base1 || n == u.base2 }
	stop := func(n circuit.NodeID) bool { return fixed(n) || own(n) }
	u.atBase2 = u.w.Walk([]circuit.NodeID{u.base2}, carriesDC, stop)
	u.atBase1 = u.w.Walk([]circuit.NodeID{u.base1}, carriesDC, stop)
	u.atNode = u.w.Walk([]circuit.NodeID{u.node}, u.feeds, stop)
	if fixed(u.base1) {
		u.lower = u.base1
	} else if !u.lowerRail() {
		return "base one has no way to a rail"
	}
	u.lowerVolts, u.lowerVoltsKnown = u.w.Potential(u.lower)
	if fixed(u.base2) {
		u.upper = u.base2
		u.upperVolts, u.upperVoltsKnown = u.w.Potential(u.upper)
	} else if !u.upperRail() {
		return "base two has no way to a supply"
	}
	if u.upper == u.lower {
		return "both bases end on the same rail"
	}
	if u.upperVoltsKnown && u.lowerVoltsKnown && u.upperVolts <= u.lowerVolts {
		return "base two is not more positive than base one"
	}
	u.stage.Nodes["upper"], u.stage.Nodes["lower"] = u.upper, u.lower
	return ""
}

// feeds reports whether an element can charge the capacitor; the resistor in
// the emitter lead cannot.
func (u *ujtReading) feeds(e *circuit.Element) bool {
	return carriesDC(e) && !slices.Contains(u.stage.Parts[EmitterSeries], e)
}

// lowerRail takes the fixed net that base one reaches through the fewest parts;
// where it reaches none, the cathode of a thyristor whose gate it reaches.
func (u *ujtReading) lowerRail() bool {
	for _, n := range u.atBase1.Nets {
		if u.w.IsFixed(n) && n != u.base2 {
			u.lower = n
			return true
		}
	}
	for _, n := range u.atBase1.Nets {
		for _, p := range u.w.On(n) {
			cathode, ok := p.Element.Pin("cathode")
			gate, _ := p.Element.Pin("gate")
			if p.Element.Kind == circuit.SCR && ok && u.w.Net(gate) == n && u.w.IsFixed(cathode) {
				u.lower = u.w.Net(cathode)
				return true
			}
		}
	}
	return false
}

// upperRail takes the net that base two and the charging network share; where
// they share none that is free, the most positive fixed net that base two reaches.
func (u *ujtReading) upperRail() bool {
	found := false
	for _, n := range u.atBase2.Nets {
		if !u.w.IsFixed(n) || n == u.lower {
			continue
		}
		v, known := u.w.Potential(n)
		if !found || known && v > u.upperVolts {
			u.upper, found = n, true
			u.upperVolts, u.upperVoltsKnown = v, known
		}
	}
	if shared, ok := u.sharedRail(); ok && found {
		u.upper = shared
	}
	return found
}

// sharedRail looks for a free net that both the charging network and base two
// hang on and through which alone each reaches its supply.
func (u *ujtReading) sharedRail() (circuit.NodeID, bool) {
	for _, n := range u.atBase2.Nets {
		if u.w.IsFixed(n) || n == u.base2 || !u.atNode.HasNet(u.w, n) {
			continue
		}
		stop := func(m circuit.NodeID) bool { return m == n || u.w.IsFixed(m) || m == u.base1 }
		if u.cut(u.base2, n, stop) && u.cut(u.node, n, stop) {
			return n, true
		}
	}
	return 0, false
}

// cut reports whether, with the walk stopped at rail, from reaches no fixed
// net but the lower rail and not the other side.
func (u *ujtReading) cut(from, rail circuit.NodeID, stop func(circuit.NodeID) bool) bool {
	area := u.w.Walk([]circuit.NodeID{from}, u.feeds, stop)
	for _, n := range area.Nets {
		if n != rail && n != from && (u.w.IsFixed(n) && n != u.lower || n == u.base2 || n == u.node) {
			return false
		}
	}
	return area.HasNet(u.w, rail)
}

// isRail reports whether a net is quiet: fixed, or one of the two rails.
func (u *ujtReading) isRail(n circuit.NodeID) bool {
	return u.w.IsFixed(n) || n == u.upper || n == u.lower
}

// capacitors collects the capacitor network between the node and the rails.
func (u *ujtReading) capacitors() string {
	isCapacitor := func(e *circuit.Element) bool { return e.Kind == circuit.Capacitor }
	area := u.w.Walk([]circuit.NodeID{u.node}, isCapacitor, func(n circuit.NodeID) bool {
		return u.isRail(n) || !u.onlyCapacitors(n)
	})
	list := prune(u.w, area.Elements, func(n circuit.NodeID) bool { return n == u.node || u.isRail(n) })
	if len(list) == 0 {
		return "no capacitor from the emitter to a rail"
	}
	u.stage.add(TimingCapacitor, list...)
	return ""
}

func (u *ujtReading) onlyCapacitors(n circuit.NodeID) bool {
	return !slices.ContainsFunc(u.w.On(n), func(p circuit.Pin) bool { return p.Element.Kind != circuit.Capacitor })
}

// charging collects what charges the capacitor.
func (u *ujtReading) charging() string {
	area := u.w.Walk([]circuit.NodeID{u.node}, u.feeds, func(n circuit.NodeID) bool {
		return u.isRail(n) || n == u.base1 || n == u.base2
	})
	ends := func(n circuit.NodeID) bool { return n == u.node || u.isRail(n) || n == u.base2 || n == u.base1 }
	list := prune(u.w, area.Elements, ends)
	fed := false
	for _, e := range list {
		for _, n := range e.Nodes {
			if n = u.w.Net(n); n != u.node && n != u.lower && ends(n) && n != u.base1 {
				fed = true
			}
		}
		u.stage.add(chargingRole(e), e)
	}
	if !fed {
		return "nothing charges the capacitor"
	}
	return ""
}

// chargingRole names what an element of the charging network is.
func chargingRole(e *circuit.Element) Role {
	switch e.Kind {
	case circuit.CurrentSource:
		return CurrentSource
	case circuit.VoltageSource:
		return Supply
	case circuit.Diode:
		return Rectifier
	}
	return TimingResistor
}

// bases collects the resistors in the base leads.
func (u *ujtReading) bases() string {
	quiet := func(n circuit.NodeID) bool { return u.isRail(n) || n == u.node || n == u.emitter }
	two := u.w.Walk([]circuit.NodeID{u.base2}, isResistor, func(n circuit.NodeID) bool { return quiet(n) || n == u.base1 })
	ends := func(base circuit.NodeID) func(circuit.NodeID) bool {
		return func(n circuit.NodeID) bool { return n == base || u.isRail(n) }
	}
	u.stage.add(BaseTwo, prune(u.w, without(two.Elements, u.stage.Parts[TimingResistor]), ends(u.base2))...)
	one := u.w.Walk([]circuit.NodeID{u.base1}, isDirect, func(n circuit.NodeID) bool {
		return quiet(n) || n == u.base2 || u.isGate(n)
	})
	u.stage.add(BaseOne, prune(u.w, one.Elements, ends(u.base1))...)
	return ""
}

// isGate reports whether a thyristor's gate stands on the net.
func (u *ujtReading) isGate(n circuit.NodeID) bool {
	if n == u.base1 {
		return false
	}
	return slices.ContainsFunc(u.w.On(n), func(p circuit.Pin) bool {
		gate, ok := p.Element.Pin("gate")
		return ok && p.Element.Kind == circuit.SCR && u.w.Net(gate) == n
	})
}

func isResistor(e *circuit.Element) bool { return e.Kind == circuit.Resistor }

// isDirect reports whether a part carries the bar current whatever its sign: a
// loudspeaker or a winding in the base-one lead does as well as a resistor.
func isDirect(e *circuit.Element) bool { return isResistor(e) || e.Kind == circuit.Inductor }

func without(list, drop []*circuit.Element) []*circuit.Element {
	return slices.DeleteFunc(slices.Clone(list), func(e *circuit.Element) bool { return slices.Contains(drop, e) })
}

// beside names what hangs on the charging network or on base one and is not
// followed: transistors, switches, controlled sources, unknown parts.
func (u *ujtReading) beside() {
	own := func(n circuit.NodeID) bool {
		return u.isRail(n) || n == u.base1 || n == u.base2
	}
	charging := u.w.Walk([]circuit.NodeID{u.node, u.emitter}, carriesDC, own)
	for _, e := range u.strangers(charging, func(n circuit.NodeID) bool { return own(n) }) {
		u.stage.Beside = append(u.stage.Beside, e.Designator+" hangs on the charging network; the current it draws is not worked out")
	}
	base := u.w.Walk([]circuit.NodeID{u.base1}, carriesDC, func(n circuit.NodeID) bool { return u.isRail(n) || n == u.node || n == u.emitter })
	for _, e := range u.strangers(base, func(n circuit.NodeID) bool { return u.isRail(n) || n == u.node || n == u.emitter }) {
		u.stage.Beside = append(u.stage.Beside, e.Designator+" hangs on base one; what it does there is not worked out")
	}
}

// strangers returns the parts on the inner nets of an area that no walk follows.
func (u *ujtReading) strangers(area *circuit.Area, outside func(circuit.NodeID) bool) []*circuit.Element {
	var list []*circuit.Element
	for _, n := range area.Nets {
		if outside(n) {
			continue
		}
		for _, p := range u.w.On(n) {
			e := p.Element
			thyristor := e.Kind == circuit.SCR // its gate stage tells
			if e == u.stage.Anchor || carriesDC(e) || e.Kind == circuit.Capacitor || thyristor || slices.Contains(list, e) {
				continue
			}
			list = append(list, e)
		}
	}
	return list
}

// supplies collects the sources that feed the stage.
func (u *ujtReading) supplies() {
	areas := []*circuit.Area{u.atBase2, u.atNode}
	for _, a := range areas {
		for _, n := range a.Nets {
			if u.w.IsFixed(n) {
				u.stage.add(Supply, u.w.Sources(n)...)
			}
		}
	}
	u.stage.add(Supply, u.w.Sources(u.lower)...)
}
