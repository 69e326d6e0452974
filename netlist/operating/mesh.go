package operating

import (
	"fmt"
	"math"
	"slices"

	"standoff/netlist/circuit"
	"standoff/netlist/network"
	"standoff/netlist/quantity"
)

// mesh is a piece of the board as the dc solver sees it.
type mesh struct {
	bench     *bench
	net       network.Network
	solver    *network.Solver
	nodes     map[circuit.NodeID]network.Node
	have      map[*circuit.Element]bool
	branches  []meshBranch
	crest     bool    // sine sources stand at their crest
	polarity  float64 // +1 or -1: which crest
	bends     bool    // diodes stand in it: straight only in pieces
	sines     []*circuit.Element
	shapes    []shape
	junctions []junctionAt
	sources   []*regulated // current sources in it
	there     []float64
	back      []float64
}

// meshBranch ties a branch of the solver to the slot that gives its value.
type meshBranch struct {
	branch network.Branch
	slot   slot
	kind   circuit.Kind
	fixed  float64 // added to the value: the offset of a sine source
	sine   bool
	drift  float64                   // V/K of a diode threshold
	zener  int                       // variable of the breakdown voltage, -1 for none
	gain   int                       // variable of a current gain, 0 for none
	set    func(x []float64) float64 // works the value out, nil where the slot gives it
}

// newMesh takes in every element that the starting nets reach without crossing
// a net that voltage sources fix, and the sources behind the fixed nets.
func newMesh(b *bench, starts []circuit.NodeID, leaveOut func(*circuit.Element) bool) (*mesh, error) {
	return fillMesh(&mesh{}, b, starts, leaveOut)
}

// newCrestMesh does the same with every sine source at its crest.
func newCrestMesh(b *bench, starts []circuit.NodeID, leaveOut func(*circuit.Element) bool) (*mesh, error) {
	return fillMesh(&mesh{crest: true, polarity: 1}, b, starts, leaveOut)
}

func fillMesh(m *mesh, b *bench, starts []circuit.NodeID, leaveOut func(*circuit.Element) bool) (*mesh, error) {
	*m = mesh{crest: m.crest, polarity: m.polarity, bench: b, nodes: map[circuit.NodeID]network.Node{}, have: map[*circuit.Element]bool{}}
	area := b.w.Walk(starts, func(e *circuit.Element) bool {
		return isMeshElement(e) && !b.inside(e) && (leaveOut == nil || !leaveOut(e))
	}, b.w.IsFixed)
	// Transistors that a stage counts as its own lead on to what hangs on them.
	for more := true; more; {
		more = false
		for _, e := range b.active {
			if b.touches(e, area) && !b.within(e, area) {
				starts, more = append(slices.Clone(starts), b.ends(e)...), true
			}
		}
		if more {
			area = b.w.Walk(starts, func(e *circuit.Element) bool {
				return isMeshElement(e) && !b.inside(e) && (leaveOut == nil || !leaveOut(e))
			}, b.w.IsFixed)
		}
	}
	if len(area.Elements) > maxMesh {
		return nil, fmt.Errorf("the network around it has more than %d parts", maxMesh)
	}
	for _, n := range area.Nets {
		if err := m.take(n); err != nil {
			return nil, err
		}
	}
	for _, e := range b.active {
		if b.touches(e, area) {
			if err := m.active(e); err != nil {
				return nil, err
			}
		}
	}
	for _, e := range area.Elements {
		if err := m.element(e); err != nil {
			return nil, err
		}
	}
	return m, nil
}

// maxMesh bounds a network; a board has some tens of parts around a stage.
const maxMesh = 3000

func isMeshElement(e *circuit.Element) bool {
	switch e.Kind {
	case circuit.Resistor, circuit.Inductor, circuit.CurrentSource, circuit.VoltageSource, circuit.Diode:
		return true
	}
	return false
}

// take adds a net; a fixed net brings its sources along.
func (m *mesh) take(n circuit.NodeID) error {
	n = m.bench.w.Net(n)
	if _, ok := m.nodes[n]; ok {
		return nil
	}
	sources := m.bench.w.Sources(n)
	if m.bench.w.IsFixed(n) && len(sources) == 0 {
		m.nodes[n] = 0
		return nil
	}
	m.nodes[n] = m.net.Node()
	for _, e := range sources {
		for _, end := range e.Nodes {
			if err := m.take(end); err != nil {
				return err
			}
		}
		if err := m.element(e); err != nil {
			return err
		}
	}
	return nil
}

// node returns the solver's node of a net that the mesh holds.
func (m *mesh) node(n circuit.NodeID) network.Node { return m.nodes[m.bench.w.Net(n)] }

// element adds one element, once.
func (m *mesh) element(e *circuit.Element) error {
	if m.have[e] {
		return nil
	}
	m.have[e] = true
	a, b := m.node(e.Nodes[0]), m.node(e.Nodes[1])
	mb := meshBranch{kind: e.Kind, slot: slot{index: -1, tempco: -1}, zener: -1}
	switch e.Kind {
	case circuit.Inductor:
		mb.branch = m.net.Voltage(a, b)
	case circuit.Diode:
		return m.diode(e, mb)
	default:
		if !e.HasValue {
			return fmt.Errorf("%s has no value", e.Designator)
		}
		if mb.sine = e.Wave.Kind == "sin"; mb.sine && len(e.Wave.Args) > 0 {
			mb.fixed = e.Wave.Args[0]
		}
		if mb.sine {
			m.sines = append(m.sines, e)
		}
		if e.Wave.Kind != "" && e.Wave.Kind != "dc" && !(mb.sine && m.crest) {
			return fmt.Errorf("it is fed by %s, which is not a dc source", e.Designator)
		}
		mb.slot = m.bench.element(e)
		switch e.Kind {
		case circuit.Resistor:
			mb.branch = m.net.Resistor(a, b)
		case circuit.VoltageSource:
			mb.branch = m.net.Voltage(a, b)
		case circuit.CurrentSource:
			mb.branch = m.net.Current(a, b)
		}
	}
	m.branches = append(m.branches, mb)
	return nil
}

// diode adds a diode; one with a breakdown voltage in its ratings is a zener
// when it is driven backwards.
func (m *mesh) diode(e *circuit.Element, mb meshBranch) error {
	anode, ok := e.Pin("anode")
	cathode, _ := e.Pin("cathode")
	if !ok {
		anode, cathode = e.Nodes[0], e.Nodes[1]
	}
	s, known := m.bench.slots[e]
	if !known {
		s = slot{index: m.bench.drop(e), tempco: -1}
		m.bench.slots[e] = s
	}
	mb.slot, mb.drift = s, diodeDrift
	mb.branch = m.net.Diode(m.node(anode), m.node(cathode))
	m.bends = true
	if e.Ratings != nil {
		if v, _, ok := e.Ratings.Spread("bv"); ok {
			mb.zener = m.breakdown(e, v)
		}
	}
	m.branches = append(m.branches, mb)
	return nil
}

// breakdown adds the breakdown voltage with the declared or assumed tolerance.
func (m *mesh) breakdown(e *circuit.Element, v quantity.Spread) int {
	if !v.IsExact() {
		return m.bench.add(trait{name: "bv of " + e.Designator, unit: "V"}, v)
	}
	if tol, _, ok := e.Ratings.Spread("vz_tol"); ok {
		return m.bench.add(trait{name: "bv of " + e.Designator, unit: "V"},
			quantity.Tolerance(v.Nominal, tol.High, tol.High))
	}
	return m.bench.assumed("bv of "+e.Designator, "V", quantity.Tolerance(v.Nominal, 0.05, 0.05),
		"tolerance of the breakdown voltage assumed")
}

// resistor adds a resistor that is not an element of the board.
func (m *mesh) resistor(a, b network.Node) network.Branch { return m.net.Resistor(a, b) }

// compile readies the solver.
func (m *mesh) compile() error {
	var err error
	m.solver, err = m.net.Compile()
	if err != nil {
		return fmt.Errorf("voltage sources form a loop")
	}
	for _, s := range m.shapes {
		m.solver.SetDiode(s.branch, s.slope, math.Inf(1), 1)
	}
	return nil
}

// shape is the slope of a diode that is no diode of the board.
type shape struct {
	branch network.Branch
	slope  float64
}

// load sets every branch of the solver to its value at a point.
func (m *mesh) load(x []float64) {
	heat := x[m.bench.ambient] - 25
	for i := range m.branches {
		mb := &m.branches[i]
		v := 0.0
		if mb.set != nil {
			v = mb.set(x)
		} else if mb.slot.index >= 0 {
			v = m.bench.value(mb.slot, x) + mb.drift*heat
		}
		if mb.gain > 0 {
			m.solver.SetGain(mb.branch, x[mb.gain]/(1+x[mb.gain]))
		}
		if mb.sine {
			v = m.polarity*v + mb.fixed
		}
		m.solver.Values[mb.branch] = v
		if mb.zener >= 0 {
			m.solver.SetDiode(mb.branch, diodeSlope, x[mb.zener], diodeSlope)
		}
	}
	for i := range m.junctions {
		m.junctions[i].shape(m.solver, x)
	}
}

// between returns the resistance between two nets in the last solution, diodes
// staying as they are.
func (m *mesh) between(a, b circuit.NodeID) float64 {
	if m.there == nil {
		m.there, m.back = make([]float64, m.solver.Nodes()), make([]float64, m.solver.Nodes())
	}
	i, j := m.node(a), m.node(b)
	m.solver.Transfer(i, m.there)
	if m.solver.IsFixed(j) {
		return m.there[i]
	}
	m.solver.Transfer(j, m.back)
	return m.there[i] - m.there[j] - m.back[i] + m.back[j]
}
