package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// sources collects the current sources on the nets from which dc parts lead to the capacitor, and the
// transistors that can pull it down. It returns the nets on which the sources stand, and
// whether any charges.
func (u *rampReading) sources(nets []circuit.NodeID) (at []circuit.NodeID, charge bool) {
	inside := func(n circuit.NodeID) bool { return n == u.node || slices.Contains(nets, n) && !u.ends(n) }
	for _, n := range nets {
		if !inside(n) {
			continue
		}
		for _, p := range u.w.On(n) {
			e, end, charges := p.Element, n, false
			switch {
			case u.isOwn(e) || u.isSource(e):
				continue
			case isBipolar(e):
				charges = u.transistor(e, n)
			default:
				end, charges = u.regulator(e, inside)
			}
			if charges {
				at, charge = append(at, end), true
				if u.stage.Source == nil {
					u.stage.Source = e
				}
			}
		}
	}
	return at, charge
}

func isBipolar(e *circuit.Element) bool { return e.Kind == circuit.NPN || e.Kind == circuit.PNP }

// isSource reports whether an element counts as part of a current source already.
func (u *rampReading) isSource(e *circuit.Element) bool {
	return slices.Contains(u.stage.Parts[CurrentSource], e) || slices.Contains(u.stage.Clamps, e)
}

// regulator takes in a two-terminal current source of which one end lies inside the charging network,
// and returns that end and whether it charges.
func (u *rampReading) regulator(e *circuit.Element, inside func(circuit.NodeID) bool) (circuit.NodeID, bool) {
	r, ok := RegulatorOf(u.w, e)
	if !ok || inside(r.High) == inside(r.Low) {
		return 0, false
	}
	u.stage.add(CurrentSource, e)
	u.stage.add(TimingResistor, r.Set...)
	if r.Diode != nil {
		u.stage.add(CurrentSource, r.Diode)
		u.stage.add(TimingResistor, r.Bypass)
	}
	if inside(r.High) {
		return r.High, u.leadsAway(r.Low)
	}
	return r.Low, u.leadsAway(r.High)
}

// holds reports whether the law of a regulator of the stage counts an element in.
func (u *rampReading) holds(e *circuit.Element) bool {
	return slices.ContainsFunc(u.stage.Parts[CurrentSource], func(source *circuit.Element) bool {
		r, ok := RegulatorOf(u.w, source)
		return ok && r.Holds(e)
	})
}

// leadsAway reports whether a net is, or leads to, a rail other than the lower one; through
// other transistors too, from collector to emitter.
func (u *rampReading) leadsAway(n circuit.NodeID) bool { return u.leads(n, maxStack) }

// maxStack is how many transistors may stand in series.
const maxStack = 4

func (u *rampReading) leads(n circuit.NodeID, depth int) bool {
	area := u.w.Walk([]circuit.NodeID{n}, carriesDC, u.ends)
	for _, m := range area.Nets {
		if m != u.lower && u.isRail(m) {
			return true
		}
	}
	if depth == 0 {
		return false
	}
	return slices.ContainsFunc(u.stacked(area.Nets), func(emitter circuit.NodeID) bool {
		return u.leads(emitter, depth-1)
	})
}

// stacked returns the emitters of transistors whose collectors lie on the inner ones of some nets.
func (u *rampReading) stacked(nets []circuit.NodeID) []circuit.NodeID {
	var list []circuit.NodeID
	for _, n := range nets {
		if u.ends(n) {
			continue
		}
		for _, p := range u.w.On(n) {
			e := p.Element
			collector, ok := e.Pin("collector")
			emitter, also := e.Pin("emitter")
			if ok && also && isBipolar(e) && !u.isOwn(e) && u.w.Net(collector) == n && u.w.Net(emitter) != n {
				list = append(list, u.w.Net(emitter))
			}
		}
	}
	return list
}

// feedNets lists the nets over which the capacitor may be fed: its own, and where a pnp or a
// regulator stands between, the far sides of that.
func (u *rampReading) feedNets(stop func(circuit.NodeID) bool) []circuit.NodeID {
	list := []circuit.NodeID{u.node}
	for done := 0; done < len(list) && done < maxBias; done++ {
		for _, n := range u.w.Walk(list[done:done+1], u.feeds, stop).Nets {
			if n != u.node && stop(n) {
				continue
			}
			for _, p := range u.w.On(n) {
				for _, far := range u.farSides(p.Element, n) {
					if !slices.Contains(list, far) {
						list = append(list, far)
					}
				}
			}
		}
	}
	return list
}

// farSides lists the nets from which a pnp with its collector on a net, or a regulator on it, is fed.
func (u *rampReading) farSides(e *circuit.Element, n circuit.NodeID) []circuit.NodeID {
	if u.isOwn(e) {
		return nil
	}
	if collector, ok := e.Pin("collector"); ok && e.Kind == circuit.PNP && u.w.Net(collector) == n {
		base, _ := e.Pin("base")
		emitter, _ := e.Pin("emitter")
		return []circuit.NodeID{u.w.Net(base), u.w.Net(emitter)}
	}
	if r, ok := RegulatorOf(u.w, e); ok && r.Low == n {
		return []circuit.NodeID{r.High}
	}
	return nil
}

// ends reports whether a walk around the stage ends on a net.
func (u *rampReading) ends(n circuit.NodeID) bool {
	return u.isRail(n) || n == u.node || n == u.terminal || n == u.outlet || n == u.control
}

// transistor takes in a bipolar transistor whose collector lies on a net: a current
// source where its emitter leads away from the lower rail, with everything that biases
// it; else one that can hold the capacitor down.
func (u *rampReading) transistor(e *circuit.Element, n circuit.NodeID) bool {
	collector, _ := e.Pin("collector")
	base, _ := e.Pin("base")
	emitter, ok := e.Pin("emitter")
	if !ok || u.w.Net(collector) != n || u.w.Net(base) == n || u.w.Net(emitter) == n || u.w.Net(base) == u.node {
		return false
	}
	if !u.leadsAway(emitter) {
		if n == u.node {
			u.clamp(e, base)
		}
		return false
	}
	u.stage.add(CurrentSource, e)
	setting := u.setting(emitter, maxStack)
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

// setting returns the resistors that set the current of a transistor: those from its emitter,
// or where another stands on its way from that one's.
func (u *rampReading) setting(emitter circuit.NodeID, depth int) []*circuit.Element {
	if emitter = u.w.Net(emitter); u.isRail(emitter) {
		return nil // a rail leads everywhere
	}
	lead := u.w.Walk([]circuit.NodeID{emitter}, isResistor, u.ends)
	if len(lead.Elements) > 0 || depth == 0 {
		return slices.Clone(lead.Elements)
	}
	for _, next := range u.stacked(lead.Nets) {
		if list := u.setting(next, depth-1); len(list) > 0 {
			return list
		}
	}
	return nil
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
		collector, _ := e.Pin("collector")
		for _, n := range at.Nodes {
			if n = u.w.Net(n); u.ends(n) || at == e && n == u.w.Net(collector) {
				continue
			}
			area := u.w.Walk([]circuit.NodeID{n}, carriesDC, u.ends)
			for _, part := range area.Elements {
				if !seen[part] && !slices.Contains(setting, part) && part.Kind != circuit.VoltageSource {
					seen[part] = true
					list = append(list, part)
				}
			}
			for _, other := range u.biasing(area, seen) {
				seen[other] = true
				list, queue = append(list, other), append(queue, other)
			}
		}
	}
	return list
}

// biasing returns the transistors and regulators on the inner nets of an area, and notes a part
// whose current into one of them is not understood.
func (u *rampReading) biasing(area *circuit.Area, seen map[*circuit.Element]bool) []*circuit.Element {
	var list []*circuit.Element
	for _, m := range area.Nets {
		if u.ends(m) {
			continue
		}
		for _, p := range u.w.On(m) {
			e := p.Element
			if seen[e] || u.isOwn(e) || carriesDC(e) || e.Kind == circuit.Capacitor || isDeaf(p) || slices.Contains(list, e) {
				continue
			}
			if _, ok := RegulatorOf(u.w, e); ok || isBipolar(e) {
				list = append(list, e)
			} else if u.unclear == nil {
				u.unclear = e
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
	others := slices.DeleteFunc(u.strangers(area, u.ends), func(x *circuit.Element) bool { return x == e })
	if known && len(others) == 0 {
		u.stage.Clamps = append(u.stage.Clamps, e)
		return
	}
	u.tell(e, clampWords)
}

const clampWords = "can hold the capacitor down (reset or inhibit); it is taken as off while the stage runs"

// canClamp reports whether a field-effect transistor lies with its channel across the capacitor.
func (u *rampReading) canClamp(e *circuit.Element) bool {
	drain, ok := e.Pin("drain")
	source, also := e.Pin("source")
	if !ok || !also {
		return false
	}
	if drain, source = u.w.Net(drain), u.w.Net(source); source == u.node {
		drain, source = source, drain
	}
	return drain == u.node && !u.leadsAway(source)
}
