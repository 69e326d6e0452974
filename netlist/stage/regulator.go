package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// Regulator is a two-terminal current source as it is wired: the nets between which it
// works, and what sets its current.
type Regulator struct {
	High, Low circuit.NodeID
	// Foot is the net to which the setting resistors lead from the third terminal: the low end,
	// or where a diode stands in between its anode.
	Foot circuit.NodeID
	// Set lists the resistors that set the current, none where none does.
	Set []*circuit.Element
	// Diode and Bypass are what takes the drift out of a current-source circuit: a diode from its foot
	// to the low end, and a resistor from its third terminal to the low end; nil for none.
	Diode, Bypass *circuit.Element
}

// Holds reports whether the law of the regulator counts an element in.
func (r *Regulator) Holds(e *circuit.Element) bool {
	return slices.Contains(r.Set, e) || r.Diode != nil && (e == r.Diode || e == r.Bypass)
}

// RegulatorOf returns how a part works as a two-terminal current source; ok is false where it is
// not wired as one. A junction field-effect transistor is one with its gate on its source
// or behind its source resistor; a current-source circuit sets its current with a
// resistor from its third terminal to the low end.
func RegulatorOf(w *circuit.Wiring, e *circuit.Element) (r Regulator, ok bool) {
	ok = true
	pin := func(role string) circuit.NodeID {
		n, known := e.Pin(role)
		ok = ok && known
		return w.Net(n)
	}
	var between circuit.NodeID
	switch e.Kind {
	case circuit.SourceIC:
		r.High, r.Low = pin("v+"), pin("v-")
		n, known := e.Pin("r")
		if !known {
			return r, ok && r.High != r.Low
		}
		between = w.Net(n)
	case circuit.NJF, circuit.PJF:
		r.High, between, r.Low = pin("drain"), pin("source"), behindStopper(w, pin("gate"))
	default:
		return r, false
	}
	r.Foot = r.Low
	if between != r.Low {
		r.withoutDrift(w, e, between)
		if r.Set = r.settingNetwork(w, e, between); len(r.Set) == 0 {
			return r, false
		}
	}
	if e.Kind == circuit.PJF {
		r.High, r.Low = r.Low, r.High
	}
	return r, ok && r.High != r.Low
}

// behindStopper returns the far side of a resistor that stands alone in a gate's lead, else the
// gate's own net.
func behindStopper(w *circuit.Wiring, gate circuit.NodeID) circuit.NodeID {
	pins := w.On(gate)
	if w.IsFixed(gate) || len(pins) != 2 {
		return gate
	}
	for _, p := range pins {
		if isResistor(p.Element) {
			return w.Other(p.Element, gate)
		}
	}
	return gate
}

// withoutDrift looks for a diode behind the foot and a resistor across both, which take the
// drift out of the current.
func (r *Regulator) withoutDrift(w *circuit.Wiring, e *circuit.Element, from circuit.NodeID) {
	if e.Kind != circuit.SourceIC || w.IsFixed(r.Foot) {
		return
	}
	for _, p := range w.On(r.Foot) {
		d := p.Element
		anode, ok := d.Pin("anode")
		if d.Kind != circuit.Diode || !ok || w.Net(anode) != r.Foot {
			continue
		}
		low := w.Other(d, r.Foot)
		for _, q := range w.On(low) {
			if isResistor(q.Element) && w.Other(q.Element, low) == from {
				r.Low, r.Diode, r.Bypass = low, d, q.Element
			}
		}
	}
	if r.Diode == nil {
		return
	}
	for _, p := range w.On(r.Foot) {
		other := p.Element
		if other != e && other != r.Diode && !(isResistor(other) && w.Other(other, r.Foot) == from) {
			r.Low, r.Diode, r.Bypass = r.Foot, nil, nil // more hangs there
			return
		}
	}
}

// settingNetwork returns the resistors between the third terminal and the foot; none where
// something else hangs on the way.
func (r *Regulator) settingNetwork(w *circuit.Wiring, e *circuit.Element, from circuit.NodeID,
) []*circuit.Element {
	list := resistorsBetween(w, from, r.Foot, r.Bypass)
	nets := []circuit.NodeID{from}
	for _, set := range list {
		nets = append(nets, w.Net(set.Nodes[0]), w.Net(set.Nodes[1]))
	}
	for _, n := range nets {
		if n == r.Foot {
			continue
		}
		for _, p := range w.On(n) {
			other := p.Element
			loose := len(other.Nodes) == 2 && len(w.On(w.Other(other, n))) == 1
			own := other == e || r.Holds(other) || slices.Contains(list, other)
			if !own && !loose && other.Kind != circuit.Capacitor {
				return nil
			}
		}
	}
	return list
}

// resistorsBetween returns the resistors between two nets, but for one; none where they lead
// to a third that is fixed.
func resistorsBetween(w *circuit.Wiring, from, to circuit.NodeID, but *circuit.Element) []*circuit.Element {
	if w.IsFixed(from) {
		return nil
	}
	area := w.Walk([]circuit.NodeID{from}, func(e *circuit.Element) bool { return isResistor(e) && e != but },
		func(n circuit.NodeID) bool { return n == to || w.IsFixed(n) })
	list := prune(w, area.Elements, func(n circuit.NodeID) bool { return n == from || n == to || w.IsFixed(n) })
	for _, e := range list {
		third := func(n circuit.NodeID) bool { return w.IsFixed(n) && w.Net(n) != to }
		if !e.HasValue || slices.ContainsFunc(e.Nodes, third) {
			return nil
		}
	}
	return list
}
