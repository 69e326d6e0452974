package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// rampReading is the state of reading an oscillator that fills a capacitor and
// empties it into a device: what all kinds have in common. The device takes the
// charge in at its terminal and lets it out at its outlet; its control (base two,
// a gate) hangs on the upper rail.
type rampReading struct {
	w                                *circuit.Wiring
	stage                            *Stage
	terminal, outlet, control, node  circuit.NodeID
	upper, lower                     circuit.NodeID
	atOutlet, atControl, atNode      *circuit.Area
	upperVolts, lowerVolts           float64
	upperVoltsKnown, lowerVoltsKnown bool
	// unlifted takes a control as it is that leads to the lower rail alone.
	unlifted bool
	// unclear is a part that biases a current source in a way that is not understood.
	unclear *circuit.Element
	// How a fault names the three.
	terminalWords, outletWords, controlWords string
}

// steps runs the steps of a reading until one says what is missing.
func steps(list ...func() string) string {
	for _, step := range list {
		if gap := step(); gap != "" {
			return gap
		}
	}
	return ""
}

func (u *rampReading) distinct() string {
	if u.terminal == u.outlet || u.terminal == u.control || u.outlet == u.control {
		return "two of its terminals are on one net"
	}
	return ""
}

// capacitorNode finds the net whose voltage is the sawtooth: the emitter, or
// the far side of a single resistor at the emitter.
func (u *rampReading) capacitorNode() string {
	if u.hasCapacitor(u.terminal) {
		u.node = u.terminal
	} else {
		var only *circuit.Element
		count := 0
		for _, p := range u.w.On(u.terminal) {
			if u.isOwn(p.Element) {
				continue
			}
			count++
			if p.Element.Kind == circuit.Resistor && u.hasCapacitor(u.w.Other(p.Element, u.terminal)) {
				only = p.Element
			}
		}
		if only == nil || count != 1 {
			return "no capacitor stands at the " + u.terminalWords
		}
		u.node = u.w.Other(only, u.terminal)
		u.stage.add(EmitterSeries, only)
	}
	u.stage.Nodes["capacitor"] = u.node
	return ""
}

func (u *rampReading) hasCapacitor(n circuit.NodeID) bool {
	return slices.ContainsFunc(u.w.On(n), func(p circuit.Pin) bool { return p.Element.Kind == circuit.Capacitor })
}

// rails finds the nets between which the bar of the transistor lies.
func (u *rampReading) rails() string {
	fixed := u.w.IsFixed
	own := func(n circuit.NodeID) bool { return n == u.terminal || n == u.node || n == u.outlet || n == u.control }
	stop := func(n circuit.NodeID) bool { return fixed(n) || own(n) }
	u.atControl = u.w.Walk([]circuit.NodeID{u.control}, carriesDC, stop)
	u.atOutlet = u.w.Walk([]circuit.NodeID{u.outlet}, carriesDC, stop)
	u.atNode = u.w.Walk(u.feedNets(stop), u.feeds, stop)
	if fixed(u.outlet) {
		u.lower = u.outlet
	} else if !u.lowerRail() {
		return u.outletWords + " has no way to a rail"
	}
	u.lowerVolts, u.lowerVoltsKnown = u.w.Potential(u.lower)
	if fixed(u.control) {
		u.upper = u.control
		u.upperVolts, u.upperVoltsKnown = u.w.Potential(u.upper)
	} else if !u.upperRail() && !(u.unlifted && u.chargingRail()) {
		return u.controlWords + " has no way to a supply"
	}
	if u.upper == u.lower {
		return u.outletWords + " and " + u.controlWords + " end on the same rail"
	}
	if u.upperVoltsKnown && u.lowerVoltsKnown && u.upperVolts <= u.lowerVolts {
		return u.controlWords + " is not more positive than " + u.outletWords
	}
	u.stage.Nodes["upper"], u.stage.Nodes["lower"] = u.upper, u.lower
	return ""
}

// feeds reports whether an element can charge the capacitor; the resistor in
// the emitter lead cannot.
func (u *rampReading) feeds(e *circuit.Element) bool {
	return carriesDC(e) && !slices.Contains(u.stage.Parts[EmitterSeries], e)
}

// lowerRail takes the fixed net that base one reaches through the fewest parts;
// where it reaches none, the cathode (main terminal one) of a thyristor whose gate it reaches.
func (u *rampReading) lowerRail() bool {
	for _, n := range u.atOutlet.Nets {
		if u.w.IsFixed(n) && n != u.control {
			u.lower = n
			return true
		}
	}
	for _, n := range u.atOutlet.Nets {
		for _, p := range u.w.On(n) {
			back, ok := p.Element.Pin(map[circuit.Kind]string{circuit.SCR: "cathode", circuit.Triac: "mt1"}[p.Element.Kind])
			gate, _ := p.Element.Pin("gate")
			if ok && u.w.Net(gate) == n && u.w.IsFixed(back) {
				u.lower = u.w.Net(back)
				return true
			}
		}
	}
	return false
}

// upperRail takes the net that base two and the charging network share; where
// they share none that is free, the most positive fixed net that base two reaches.
func (u *rampReading) upperRail() bool {
	found := false
	for _, n := range u.atControl.Nets {
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

// chargingRail takes the most positive dc rail that the charging network reaches.
func (u *rampReading) chargingRail() bool {
	found := false
	for _, n := range u.atNode.Nets {
		v, dc := u.w.Potential(n)
		if u.w.IsFixed(n) && n != u.lower && dc && (!found || v > u.upperVolts) {
			u.upper, u.upperVolts, u.upperVoltsKnown, found = n, v, true, true
		}
	}
	return found
}

// sharedRail looks for a free net that both the charging network and base two
// hang on and through which alone each reaches its supply.
func (u *rampReading) sharedRail() (circuit.NodeID, bool) {
	for _, n := range u.atControl.Nets {
		if u.w.IsFixed(n) || n == u.control || !u.atNode.HasNet(u.w, n) {
			continue
		}
		stop := func(m circuit.NodeID) bool { return m == n || u.w.IsFixed(m) || m == u.outlet }
		if u.cut(u.control, n, stop) && u.cut(u.node, n, stop) {
			return n, true
		}
	}
	return 0, false
}

// cut reports whether, with the walk stopped at rail, from reaches no fixed
// net but the lower rail and not the other side.
func (u *rampReading) cut(from, rail circuit.NodeID, stop func(circuit.NodeID) bool) bool {
	nets := []circuit.NodeID{from}
	if from == u.node {
		nets = u.feedNets(stop)
	}
	area := u.w.Walk(nets, u.feeds, stop)
	for _, n := range area.Nets {
		if n != rail && n != from && (u.w.IsFixed(n) && n != u.lower || n == u.control || n == u.node) {
			return false
		}
	}
	return area.HasNet(u.w, rail)
}

// isRail reports whether a net is quiet: fixed, or one of the two rails.
func (u *rampReading) isRail(n circuit.NodeID) bool {
	return u.w.IsFixed(n) || n == u.upper || n == u.lower
}

// capacitors collects the capacitor network between the node and the rails.
func (u *rampReading) capacitors() string {
	isCapacitor := func(e *circuit.Element) bool { return e.Kind == circuit.Capacitor }
	area := u.w.Walk([]circuit.NodeID{u.node}, isCapacitor, func(n circuit.NodeID) bool {
		return u.isRail(n) || !u.onlyCapacitors(n)
	})
	list := prune(u.w, area.Elements, func(n circuit.NodeID) bool { return n == u.node || u.isRail(n) })
	if len(list) == 0 {
		return "no capacitor from the " + u.terminalWords + " to a rail"
	}
	u.stage.add(TimingCapacitor, list...)
	return ""
}

func (u *rampReading) onlyCapacitors(n circuit.NodeID) bool {
	return !slices.ContainsFunc(u.w.On(n), func(p circuit.Pin) bool { return p.Element.Kind != circuit.Capacitor })
}

// charging collects what charges the capacitor.
func (u *rampReading) charging() string {
	area := u.w.Walk([]circuit.NodeID{u.node}, u.feeds, func(n circuit.NodeID) bool {
		return u.isRail(n) || n == u.outlet || n == u.control
	})
	ends := func(n circuit.NodeID) bool { return n == u.node || u.isRail(n) || n == u.control || n == u.outlet }
	sources, fed := u.sources(area.Nets)
	fed = u.feeders(area.Nets) || fed
	kept := func(n circuit.NodeID) bool { return ends(n) || slices.Contains(sources, n) }
	list := prune(u.w, area.Elements, kept)
	for _, e := range list {
		if u.holds(e) {
			continue
		}
		for _, n := range e.Nodes {
			if n = u.w.Net(n); n != u.node && n != u.lower && ends(n) && n != u.outlet {
				fed = true
			}
		}
		role := chargingRole(e)
		if u.isAcross(e) {
			role = GateShunt
		}
		u.stage.add(role, e)
	}
	if u.unclear != nil {
		return "how " + u.unclear.Designator + " biases the current source is not understood"
	}
	if fed {
		return ""
	}
	if list := u.strangers(area, func(n circuit.NodeID) bool { return ends(n) && n != u.node }); len(list) > 0 {
		return "what charges the capacitor is not understood: how " + list[0].Designator + " is wired"
	}
	return "nothing charges the capacitor"
}

// isAcross reports whether an element is a resistor from the gate to the anode or its
// capacitor.
func (u *rampReading) isAcross(e *circuit.Element) bool {
	far := u.w.Other(e, u.control)
	return u.stage.Kind == PUTOscillator && isResistor(e) && (far == u.node || far == u.terminal) &&
		(u.w.Net(e.Nodes[0]) == u.control || u.w.Net(e.Nodes[1]) == u.control)
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

// isGate reports whether a thyristor's gate stands on the net.
func (u *rampReading) isGate(n circuit.NodeID) bool {
	if n == u.outlet {
		return false
	}
	return slices.ContainsFunc(u.w.On(n), func(p circuit.Pin) bool {
		gate, ok := p.Element.Pin("gate")
		return ok && (p.Element.Kind == circuit.SCR || p.Element.Kind == circuit.Triac) && u.w.Net(gate) == n
	})
}

// beside names what hangs on the charging network or on base one and is not
// followed: transistors, switches, controlled sources, unknown parts.
func (u *rampReading) beside() {
	own := func(n circuit.NodeID) bool {
		return u.isRail(n) || n == u.outlet || n == u.control
	}
	charging := u.w.Walk([]circuit.NodeID{u.node, u.terminal}, carriesDC, own)
	u.taps(charging)
	for _, e := range u.strangers(charging, func(n circuit.NodeID) bool { return own(n) }) {
		what := "hangs on the charging network; the current it draws is not worked out"
		if u.canClamp(e) {
			what = clampWords
		}
		u.tell(e, what)
	}
	apart := func(n circuit.NodeID) bool { return u.isRail(n) || n == u.node || n == u.terminal }
	base := u.w.Walk([]circuit.NodeID{u.outlet}, carriesDC, apart)
	for _, e := range u.strangers(base, apart) {
		u.tell(e, "hangs on "+u.outletWords+"; what it does there is not worked out")
	}
	u.besideControl()
}

// isClamp reports whether a transistor lies with its collector on the capacitor: it
// is told already.
func (u *rampReading) isClamp(e *circuit.Element) bool {
	collector, ok := e.Pin("collector")
	emitter, _ := e.Pin("emitter")
	return ok && u.w.Net(collector) == u.node && !u.leadsAway(emitter)
}

// strangers returns the parts on the inner nets of an area that no walk follows.
func (u *rampReading) strangers(area *circuit.Area, outside func(circuit.NodeID) bool) []*circuit.Element {
	var list []*circuit.Element
	for _, n := range area.Nets {
		if outside(n) {
			continue
		}
		for _, p := range u.w.On(n) {
			e := p.Element
			thyristor := e.Kind == circuit.SCR // its gate stage tells
			known := u.isOwn(e) || u.isSource(e) || u.isClamp(e) || slices.Contains(u.stage.Taps, e)
			followed := carriesDC(e) || e.Kind == circuit.Capacitor || isDeaf(p)
			if known || followed || thyristor || slices.Contains(list, e) {
				continue
			}
			list = append(list, e)
		}
	}
	return list
}

// supplies collects the sources that feed the stage.
func (u *rampReading) supplies() {
	areas := []*circuit.Area{u.atControl, u.atNode}
	for _, a := range areas {
		for _, n := range a.Nets {
			if u.w.IsFixed(n) {
				u.stage.add(Supply, u.w.Sources(n)...)
			}
		}
	}
	u.stage.add(Supply, u.w.Sources(u.lower)...)
}
