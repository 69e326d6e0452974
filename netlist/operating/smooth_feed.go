package operating

import (
	"fmt"

	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
)

// smoothFeed is a line that rectifiers bring to a reservoir. It is taken for dc: the reservoir
// stands between the crest, less the rectifiers' drops, and what is left of it a cycle later under
// the load of the empty timing capacitor (I T/C, the slowest that a reservoir is filled up).
type smoothFeed struct {
	feed   *lineFeed
	share  float64 // which crest fills the reservoir
	ripple int     // variable of the share of the crest that is lost
}

// mostRipple is the share of the crest beyond which a reservoir does not make dc (assumed).
const mostRipple = 0.5

// newSmoothFeed works out from the nominal board how far the reservoir falls between crests.
func (m *breakoverModel) newSmoothFeed(e *circuit.Element) (*smoothFeed, error) {
	s := &smoothFeed{feed: m.line, share: 1, ripple: -1}
	mesh, lower := m.standing, m.standing.node(m.stage.Nodes["lower"])
	slot := m.element(e)
	x := m.nominal()
	s.feed.crests(mesh, x)
	var net circuit.NodeID
	for _, n := range e.Nodes {
		if _, inside := mesh.nodes[m.w.Net(n)]; inside && !m.w.IsFixed(n) {
			net = m.w.Net(n)
		}
	}
	amperes := 0.0
	for _, share := range [...]float64{-1, 1} {
		s.feed.instant(mesh, share)
		m.charging.draw(0)
		m.charging.seize(mesh.solver.Voltage(lower))
		if i := m.through(net, x); i >= amperes {
			amperes, s.share = i, share
		}
	}
	volts := mesh.solver.Voltage(mesh.node(net)) - mesh.solver.Voltage(lower)
	if volts < 0 {
		volts = -volts
	}
	lost := amperes / (s.feed.hertz * m.box[slot.index].Low * max(volts, 1e-3))
	if !(lost < mostRipple) {
		return nil, fmt.Errorf("%s is too small to smooth what the line feeds, which is not worked out", e.Designator)
	}
	s.ripple = m.assumed("ripple of "+e.Designator, "", quantity.Spread{High: lost, Nominal: lost / 2},
		"share of the crest that the load takes between two of them")
	return s, nil
}

// through returns the current that the rectifiers on a net carry in the last solution.
func (m *breakoverModel) through(net circuit.NodeID, x []float64) float64 {
	sum := 0.0
	for _, p := range m.w.On(net) {
		e := p.Element
		slot, known := m.slots[e]
		if e.Kind != circuit.Diode || !known {
			continue
		}
		anode, ok := e.Pin("anode")
		cathode, _ := e.Pin("cathode")
		if !ok {
			anode, cathode = e.Nodes[0], e.Nodes[1]
		}
		solver := m.standing.solver
		v := solver.Voltage(m.standing.node(anode)) - solver.Voltage(m.standing.node(cathode))
		v -= m.value(slot, x) + diodeDrift*(x[m.ambient]-25)
		sum += max(v, 0) / diodeSlope
	}
	return sum
}

// load sets the sources to what is left of the crest.
func (s *smoothFeed) load(m *mesh, x []float64) {
	s.feed.crests(m, x)
	s.feed.instant(m, s.share*(1-x[s.ripple]))
}
