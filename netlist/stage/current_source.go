package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// RegulatorEnds returns the two nets between which a two-terminal current source
// works and the resistors that set its current, none where none does. ok is false
// where the part is not wired as one. A junction field-effect transistor is one
// with its gate on its source or behind its source resistor; a current-source
// circuit sets its current with a resistor from its third terminal to the low end.
func RegulatorEnds(w *circuit.Wiring, e *circuit.Element) (high, low circuit.NodeID, set []*circuit.Element, ok bool) {
	pin := func(role string) circuit.NodeID {
		n, known := e.Pin(role)
		ok = ok && known
		return w.Net(n)
	}
	ok = true
	var free, between, far circuit.NodeID
	switch e.Kind {
	case circuit.SourceIC:
		free, far = pin("v+"), pin("v-")
		if r, known := e.Pin("r"); known {
			between = w.Net(r)
			break
		}
		return free, far, nil, ok && free != far
	case circuit.NJF, circuit.PJF:
		free, between, far = pin("drain"), pin("source"), pin("gate")
	default:
		return 0, 0, nil, false
	}
	if between != far {
		if set = settingNetwork(w, between, far); len(set) == 0 {
			return 0, 0, nil, false
		}
	}
	if e.Kind == circuit.PJF {
		free, far = far, free
	}
	return free, far, set, ok && free != far
}

// settingNetwork returns the resistors between two nets, of which only the second may
// have anything else on it but the part they set; none where something else hangs on
// the way.
func settingNetwork(w *circuit.Wiring, from, to circuit.NodeID) []*circuit.Element {
	if w.IsFixed(from) {
		return nil
	}
	area := w.Walk([]circuit.NodeID{from}, isResistor, func(n circuit.NodeID) bool { return n == to || w.IsFixed(n) })
	list := prune(w, area.Elements, func(n circuit.NodeID) bool { return n == from || n == to || w.IsFixed(n) })
	for _, e := range list {
		if !e.HasValue || e.Value.Low <= 0 || w.IsFixed(e.Nodes[0]) && w.Net(e.Nodes[0]) != to || w.IsFixed(e.Nodes[1]) && w.Net(e.Nodes[1]) != to {
			return nil
		}
	}
	return list
}

// sources collects the current sources on the capacitor's net, and the transistors
// that can pull it down. It reports whether any charges.
func (u *rampReading) sources() bool {
	charges := false
	for _, p := range u.w.On(u.node) {
		e := p.Element
		switch {
		case u.isOwn(e) || u.isSource(e):
		case e.Kind == circuit.NPN || e.Kind == circuit.PNP:
			charges = u.transistor(e) || charges
		default:
			charges = u.regulator(e) || charges
		}
	}
	return charges
}

// isSource reports whether an element counts as part of a current source already.
func (u *rampReading) isSource(e *circuit.Element) bool {
	return slices.Contains(u.stage.Parts[CurrentSource], e) || slices.Contains(u.stage.Clamps, e)
}

// regulator takes in a two-terminal current source on the capacitor's net.
func (u *rampReading) regulator(e *circuit.Element) bool {
	high, low, set, ok := RegulatorEnds(u.w, e)
	if !ok || high != u.node && low != u.node {
		return false
	}
	u.stage.add(CurrentSource, e)
	u.stage.add(TimingResistor, set...)
	other := high
	if high == u.node {
		other = low
	}
	return u.leadsAway(other)
}

// leadsAway reports whether a net is, or leads to, a rail other than the lower one.
func (u *rampReading) leadsAway(n circuit.NodeID) bool {
	area := u.w.Walk([]circuit.NodeID{n}, carriesDC, u.ends)
	return slices.ContainsFunc(area.Nets, func(n circuit.NodeID) bool { return n != u.lower && u.isRail(n) })
}

// ends reports whether a walk around the stage ends on a net.
func (u *rampReading) ends(n circuit.NodeID) bool {
	return u.isRail(n) || n == u.node || n == u.terminal || n == u.outlet || n == u.control
}

// transistor takes in a bipolar transistor whose collector lies on the capacitor's
// net: a current source where its emitter leads away from the lower rail, with
// everything that biases it; else one that can hold the capacitor down.
func (u *rampReading) transistor(e *circuit.Element) bool {
	collector, _ := e.Pin("collector")
	base, _ := e.Pin("base")
	emitter, ok := e.Pin("emitter")
	if !ok || u.w.Net(collector) != u.node || u.w.Net(base) == u.node || u.w.Net(emitter) == u.node {
		return false
	}
	if !u.leadsAway(emitter) {
		u.clamp(e, base)
		return false
	}
	u.stage.add(CurrentSource, e)
	lead := u.w.Walk([]circuit.NodeID{emitter}, isResistor, u.ends)
	setting := slices.Clone(lead.Elements)
	if u.w.IsFixed(emitter) || u.isRail(u.w.Net(emitter)) {
		setting = nil // a rail leads everywhere
	}
	bias := u.bias(e, setting)
	for _, b := range bias {
		if isResistor(b) && len(setting) == 0 {
			u.stage.add(TimingResistor, b)
		} else {
			u.stage.add(CurrentSource, b)
		}
	}
	u.stage.add(TimingResistor, setting...)
	return true
}

// maxBias bounds the parts that bias a current source.
const maxBias = 64

// bias collects what sets the base of a current source: everything that carries dc
// from there to the rails, and the transistors on the way with what hangs on them.
func (u *rampReading) bias(e *circuit.Element, setting []*circuit.Element) []*circuit.Element {
	var list []*circuit.Element
	seen := map[*circuit.Element]bool{e: true}
	queue := []*circuit.Element{e}
	for len(queue) > 0 && len(list) < maxBias {
		at := queue[0]
		queue = queue[1:]
		for _, n := range at.Nodes {
			if n = u.w.Net(n); u.ends(n) {
				continue
			}
			area := u.w.Walk([]circuit.NodeID{n}, carriesDC, u.ends)
			for _, part := range area.Elements {
				if !seen[part] && !slices.Contains(setting, part) && part.Kind != circuit.VoltageSource {
					seen[part] = true
					list = append(list, part)
				}
			}
			for _, m := range area.Nets {
				for _, p := range u.w.On(m) {
					other := p.Element
					bipolar := (other.Kind == circuit.NPN || other.Kind == circuit.PNP) && !u.isOwn(other)
					if !seen[other] && bipolar && !u.ends(m) {
						seen[other] = true
						list, queue = append(list, other), append(queue, other)
					}
				}
			}
		}
	}
	return list
}

// clamp notes a transistor that can hold the capacitor down. Where dc on the board
// sets its base, it is worked out; else it counts as off while the stage runs.
func (u *rampReading) clamp(e *circuit.Element, base circuit.NodeID) {
	area := u.w.Walk([]circuit.NodeID{base}, carriesDC, u.ends)
	known := true
	for _, n := range append(area.Nets, u.w.Net(base)) {
		if _, dc := u.w.Potential(n); u.w.IsFixed(n) && !dc || n == u.node {
			known = false
		}
	}
	if known {
		u.stage.Clamps = append(u.stage.Clamps, e)
		return
	}
	u.stage.Beside = append(u.stage.Beside, e.Designator+" can hold the capacitor down (reset or inhibit); it is taken as off while the stage runs")
}
