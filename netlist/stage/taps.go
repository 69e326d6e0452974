package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// taps takes in the transistors that read the ramp with their base: what they draw is
// part of the charging network. Those whose surroundings cannot be worked out are left
// to be named.
func (u *rampReading) taps(charging *circuit.Area) {
	for _, n := range charging.Nets {
		if u.ends(n) && n != u.node && n != u.terminal {
			continue
		}
		for _, p := range u.w.On(n) {
			e := p.Element
			base, ok := e.Pin("base")
			bipolar := e.Kind == circuit.NPN || e.Kind == circuit.PNP
			if ok && bipolar && u.w.Net(base) == n && !u.isOwn(e) && !u.isSource(e) && u.isFollowable(e) {
				u.stage.Taps = append(u.stage.Taps, e)
			}
		}
	}
}

// isFollowable reports whether collector and emitter of a transistor lead through dc
// parts alone to dc rails, with nothing else on the way.
func (u *rampReading) isFollowable(e *circuit.Element) bool {
	return u.isSettled(e, "collector") && u.isSettled(e, "emitter")
}

// isSettled reports whether a terminal of a transistor leads through dc parts alone to dc rails, with
// nothing else on the way.
func (u *rampReading) isSettled(e *circuit.Element, role string) bool {
	n, ok := e.Pin(role)
	if n = u.w.Net(n); !ok || n == u.node || n == u.terminal || n == u.outlet || n == u.control {
		return false
	}
	area := u.w.Walk([]circuit.NodeID{n}, carriesDC, u.ends)
	powered := false
	for _, m := range append(slices.Clone(area.Nets), n) {
		if u.w.IsFixed(m) {
			if _, dc := u.w.Potential(m); !dc {
				return false
			}
			powered = true
		}
		powered = powered || u.isRail(m)
	}
	others := slices.DeleteFunc(u.strangers(area, u.ends), func(x *circuit.Element) bool { return x == e })
	return powered && len(others) == 0
}

// feeders takes in the transistors that set the voltage from which the capacitor is charged: followers
// and amplifiers with collector or emitter inside the charging network, whose other terminals can be
// worked out. It reports whether any brings current from a rail.
func (u *rampReading) feeders(nets []circuit.NodeID) bool {
	fed := false
	for _, n := range nets {
		if n == u.node || u.ends(n) {
			continue
		}
		for _, p := range u.w.On(n) {
			e := p.Element
			known := u.isOwn(e) || u.isSource(e) || slices.Contains(u.stage.Taps, e)
			if known || !isBipolar(e) || !u.isSettled(e, "base") {
				continue
			}
			far := "collector"
			if collector, _ := e.Pin(far); u.w.Net(collector) == n {
				far = "emitter"
			}
			end, _ := e.Pin(far)
			if end = u.w.Net(end); (u.isRail(end) || !slices.Contains(nets, end)) && u.isSettled(e, far) {
				u.stage.Taps = append(u.stage.Taps, e)
				fed = fed || u.leadsAway(end)
			}
		}
	}
	return fed
}

// isDeaf reports whether a pin draws no current: the gate of a field-effect
// transistor.
func isDeaf(p circuit.Pin) bool {
	switch p.Element.Kind {
	case circuit.NJF, circuit.PJF, circuit.NMOS, circuit.PMOS:
		return p.Index < len(p.Element.Roles) && p.Element.Roles[p.Index] == "gate"
	}
	return false
}

// besideControl names what hangs on base two or on a gate besides what sets its voltage,
// and leaves out resistors through which a signal reaches it.
func (u *rampReading) besideControl() {
	if u.control == u.outlet || u.w.IsFixed(u.control) {
		return
	}
	area := u.w.Walk([]circuit.NodeID{u.control}, carriesDC, u.ends)
	for _, e := range u.strangers(area, func(n circuit.NodeID) bool { return u.ends(n) && n != u.control }) {
		if !slices.Contains(u.stage.Clamps, e) {
			if u.pullsDown(e) {
				u.stage.Pullers = append(u.stage.Pullers, e)
			}
			u.tell(e, "hangs on "+u.controlWords+"; what it does there is not worked out")
		}
	}
	for _, p := range u.w.On(u.control) {
		e := p.Element
		if len(e.Nodes) != 2 {
			continue
		}
		far := u.w.Other(e, u.control)
		_, dc := u.w.Potential(far)
		switch {
		case e.Kind == circuit.Capacitor && !u.isRail(far) && !dc, e.Kind == circuit.Capacitor && u.w.IsFixed(far) && !dc:
			u.tell(e, "couples a signal into "+u.controlWords+" (synchronisation); what it does to the rate is not worked out")
		case isResistor(e) && u.w.IsFixed(far) && !dc:
			u.stage.Apart = append(u.stage.Apart, e)
			u.tell(e, "leads a signal to "+u.controlWords+" (synchronisation); the stage is worked out without it")
		}
	}
}

// pullsDown reports whether a transistor or switch can connect what it hangs on with the
// lower rail.
func (u *rampReading) pullsDown(e *circuit.Element) bool {
	low := func(n circuit.NodeID) bool {
		if n = u.w.Net(n); n == u.lower {
			return true
		}
		return !u.ends(n) && u.w.Walk([]circuit.NodeID{n}, isResistor, u.ends).HasNet(u.w, u.lower)
	}
	switch e.Kind {
	case circuit.NPN, circuit.NMOS, circuit.NJF:
		for _, role := range [2]string{"emitter", "source"} {
			if n, ok := e.Pin(role); ok && low(n) {
				return true
			}
		}
	case circuit.Switch:
		return low(e.Nodes[0]) != low(e.Nodes[1])
	}
	return false
}

// tell names a part that is not worked out.
func (u *rampReading) tell(e *circuit.Element, what string) {
	u.stage.Beside = append(u.stage.Beside, e.Designator+" "+what)
}
