package operating

import (
	"fmt"
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/network"
	"standoff/netlist/quantity"
)

// capacitorNet is a network of capacitors between one net and the rails. It is
// solved as a network of resistors of 1/C.
type capacitorNet struct {
	bench    *bench
	parts    []capacitorPart
	solver   *network.Solver
	node     network.Node
	transfer []float64
	single   bool // all of them lie side by side: the sum will do
}

// capacitorPart is one capacitor of the network.
type capacitorPart struct {
	branch network.Branch
	slot   slot
	leak   int // variable of the leakage current at 25 deg C, -1 for none
}

// newCapacitorNet takes in the capacitors around a net; every net that is only
// reached by capacitors is inside, all others are quiet rails.
func newCapacitorNet(b *bench, list []*circuit.Element, at circuit.NodeID) (*capacitorNet, error) {
	n := &capacitorNet{bench: b, single: true}
	var net network.Network
	nodes := map[circuit.NodeID]network.Node{}
	node := func(id circuit.NodeID) network.Node {
		id = b.w.Net(id)
		if id != b.w.Net(at) && !inside(b.w, id) {
			return 0
		}
		if _, ok := nodes[id]; !ok {
			nodes[id] = net.Node()
		}
		return nodes[id]
	}
	n.node = node(at)
	for _, e := range list {
		if !e.HasValue || e.Value.Low <= 0 {
			return nil, fmt.Errorf("%s has no usable value", e.Designator)
		}
		p := capacitorPart{slot: b.element(e), leak: b.leakage(e)}
		from, to := node(e.Nodes[0]), node(e.Nodes[1])
		n.single = n.single && (from == 0 || to == 0)
		p.branch = net.Resistor(from, to)
		n.parts = append(n.parts, p)
	}
	var err error
	n.solver, err = net.Compile()
	n.transfer = make([]float64, n.solver.Nodes())
	return n, err
}

// inside reports whether only capacitors stand on a net.
func inside(w *circuit.Wiring, n circuit.NodeID) bool {
	if w.IsFixed(n) {
		return false
	}
	for _, p := range w.On(n) {
		if p.Element.Kind != circuit.Capacitor {
			return false
		}
	}
	return true
}

// farads returns the capacitance of the whole network at a point.
func (n *capacitorNet) farads(x []float64) float64 {
	sum := 0.0
	for _, p := range n.parts {
		c := n.bench.value(p.slot, x)
		sum += c
		if !n.single {
			n.solver.Values[p.branch] = 1 / c
		}
	}
	if n.single {
		return sum
	}
	n.solver.Solve()
	n.solver.Transfer(n.node, n.transfer)
	return 1 / n.transfer[n.node]
}

// leakage adds the leakage current of a capacitor as a variable: declared with
// leak=, or for an electrolytic the makers' 0.01 C V or 3 uA, whichever is
// greater (catalogue figure after 2 min at 20 deg C; V the rated voltage, or
// the working voltage where none is declared). -1 where there is none.
func (b *bench) leakage(e *circuit.Element) int {
	if e.Intent.Leak != nil {
		return b.add(trait{name: e.Designator + ".leak", unit: "A"}, quantity.Exact(*e.Intent.Leak))
	}
	if e.Intent.Kind != "electrolytic" && e.Intent.Kind != "tantalum" {
		return -1
	}
	volts := 25.0
	if e.Intent.Volts != nil {
		volts = *e.Intent.Volts
	}
	worst := max(0.01*e.Value.High*volts, 3e-6)
	return b.assumed(e.Designator+".leak", "A", quantity.Spread{Low: 0, Nominal: worst / 4, High: worst},
		"leakage not declared, assumed at 0.01 C V or 3 uA")
}

// leakage returns the leakage current of the network at a point. It doubles
// every 10 K (common practice, no source); volts plays no part since the
// declared figure counts at the rated voltage.
func (n *capacitorNet) leakage(x []float64, volts float64) float64 {
	sum := 0.0
	for _, p := range n.parts {
		if p.leak >= 0 && volts > 0 {
			sum += x[p.leak] * math.Exp2((x[n.bench.ambient]-25)/10)
		}
	}
	return sum
}

// leaks reports whether any capacitor of the network leaks.
func (n *capacitorNet) leaks() bool {
	for _, p := range n.parts {
		if p.leak >= 0 {
			return true
		}
	}
	return false
}
