package network_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"standoff/netlist/network"
)

// transistor is a bipolar transistor of the test: nodes, polarity and gains.
type transistor struct {
	c, b, e       int
	npn           bool
	forward, back float64 // alpha
	be, bc        network.Branch
}

// diodeOf returns anode and cathode of a junction.
func (q transistor) junction(other int) (anode, cathode int) {
	if q.npn {
		return q.b, other
	}
	return other, q.b
}

const threshold = 0.65

// networks is how many random networks are solved.
const networks = 4000

// Every solution of a random transistor network obeys Kirchhoff's current law with
// the currents of the piecewise-linear Ebers-Moll transistor, worked out here from
// the node voltages alone; and it is the one that the general solver of gonum
// finds for the segments that the junctions are on.
func TestTransistorNetworksAgreeWithAGeneralSolver(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 7))
	for k := range networks {
		var n network.Network
		nodes := 3 + r.IntN(8)
		for range nodes {
			n.Node()
		}
		source := n.Voltage(1, 0)
		volts := 30 * r.Float64()
		type resistor struct {
			a, b int
			ohms float64
			at   network.Branch
		}
		var resistors []resistor
		add := func(a, b int) {
			at := n.Resistor(network.Node(a), network.Node(b))
			resistors = append(resistors, resistor{a, b, 100 * math.Exp(r.Float64()*7), at})
		}
		for i := 2; i <= nodes; i++ {
			add(i, r.IntN(i))
		}
		for range r.IntN(nodes) {
			if a, b := r.IntN(nodes+1), r.IntN(nodes+1); a != b {
				add(a, b)
			}
		}
		var list []transistor
		for range 1 + r.IntN(3) {
			p := r.Perm(nodes + 1)
			q := transistor{c: p[0], b: p[1], e: p[2], npn: r.IntN(2) == 0,
				forward: 0.97 + 0.029*r.Float64(), back: 0.5 * r.Float64()}
			a, c := q.junction(q.e)
			q.be = n.Diode(network.Node(a), network.Node(c))
			a, c = q.junction(q.c)
			q.bc = n.Diode(network.Node(a), network.Node(c))
			follow := func(d network.Branch, far int) {
				if q.npn {
					n.Follow(d, network.Node(far), network.Node(q.b))
				} else {
					n.Follow(d, network.Node(q.b), network.Node(far))
				}
			}
			follow(q.be, q.c)
			follow(q.bc, q.e)
			list = append(list, q)
		}
		s, err := n.Compile()
		if err != nil {
			t.Fatal(err)
		}
		s.Values[source] = volts
		for _, x := range resistors {
			s.Values[x.at] = x.ohms
		}
		for _, q := range list {
			s.Values[q.be], s.Values[q.bc] = threshold, threshold
			s.SetGain(q.be, q.forward)
			s.SetGain(q.bc, q.back)
		}
		if !s.Solve() {
			t.Errorf("network %d does not come to rest", k)
			continue
		}
		want := generalSolution(nodes, volts, func(add func(i, j int, g, inject float64)) {
			for _, x := range resistors {
				for _, p := range [2][2]int{{x.a, x.b}, {x.b, x.a}} {
					add(p[0], p[0], 1/x.ohms, 0)
					add(p[0], p[1], -1/x.ohms, 0)
				}
			}
			for _, q := range list {
				stampJunction(add, q, q.e, q.c, q.forward, s.Conducts(q.be))
				stampJunction(add, q, q.c, q.e, q.back, s.Conducts(q.bc))
			}
		})
		for i := 1; i <= nodes; i++ {
			if got := s.Voltage(network.Node(i)); math.Abs(got-want[i-1]) > 1e-6*(1+math.Abs(want[i-1])) {
				t.Fatalf("network %d: node %d at %g, want %g", k, i, got, want[i-1])
			}
		}
		for _, q := range list {
			for _, j := range []struct {
				other    int
				conducts bool
			}{{q.e, s.Conducts(q.be)}, {q.c, s.Conducts(q.bc)}} {
				a, c := q.junction(j.other)
				v := s.Voltage(network.Node(a)) - s.Voltage(network.Node(c))
				if j.conducts != (v > threshold) {
					t.Errorf("network %d: a junction at %g V conducts: %v", k, v, j.conducts)
				}
			}
		}
	}
}

// stampJunction adds a junction and what follows it to the equations.
func stampJunction(add func(i, j int, g, inject float64), q transistor,
	near, far int, gain float64, conducts bool) {
	g, e := 1e-12, 0.0
	if conducts {
		g, e = 1, threshold
	}
	a, c := q.junction(near)
	leaving := func(i int, share float64) {
		add(i, a, share*g, share*g*e)
		add(i, c, -share*g, 0)
	}
	leaving(a, 1)
	leaving(c, -1)
	sign := 1.0
	if !q.npn {
		sign = -1
	}
	leaving(far, sign*gain)
	leaving(q.b, -sign*gain)
}

// generalSolution solves nodal equations with node 1 held at a voltage.
func generalSolution(nodes int, volts float64, fill func(add func(i, j int, g, inject float64))) []float64 {
	g, i := mat.NewDense(nodes, nodes, nil), mat.NewVecDense(nodes, nil)
	for k := range nodes {
		g.Set(k, k, 1e-15)
	}
	fill(func(row, column int, conductance, inject float64) {
		if row == 0 {
			return
		}
		i.SetVec(row-1, i.AtVec(row-1)+inject)
		if column > 0 {
			g.Set(row-1, column-1, g.At(row-1, column-1)+conductance)
		}
	})
	for k := range nodes {
		g.Set(0, k, 0)
	}
	g.Set(0, 0, 1)
	i.SetVec(0, volts)
	var v mat.VecDense
	if err := v.SolveVec(g, i); err != nil {
		panic(err)
	}
	return v.RawVector().Data
}

// A ring of two transistors, in which moving all junctions at once goes round in a circle,
// keeps its current: the base-emitter voltage of one across the resistor of the other.
func TestRingOfTwoComesToRest(t *testing.T) {
	var n network.Network
	supply, sense, bias, out := n.Node(), n.Node(), n.Node(), n.Node()
	volts := n.Voltage(supply, 0)
	resistor, pull, load := n.Resistor(supply, sense), n.Resistor(bias, 0), n.Resistor(out, 0)
	var junctions []network.Branch
	pnp := func(c, b, e network.Node) {
		forward, back := n.Diode(e, b), n.Diode(c, b)
		n.Follow(forward, b, c)
		n.Follow(back, b, e)
		junctions = append(junctions, forward, back)
	}
	pnp(bias, sense, supply)
	pnp(out, bias, sense)
	s, err := n.Compile()
	if err != nil {
		t.Fatal(err)
	}
	s.Values[volts], s.Values[resistor], s.Values[pull] = 24, 3300, 47e3
	for i, d := range junctions {
		s.Values[d] = threshold
		s.SetGain(d, [2]float64{0.993, 0.5}[i%2])
	}
	for _, ohms := range []float64{1, 1e3, 1e4, 7e4, 1e5, 1e6} {
		s.Values[load] = ohms
		if !s.Solve() {
			t.Errorf("does not come to rest with %g ohm", ohms)
		}
		if got := s.Voltage(out) / ohms; ohms <= 7e4 && math.Abs(got-threshold/3300) > 0.03*threshold/3300 {
			t.Errorf("%g A into %g ohm, want about %g", got, ohms, threshold/3300)
		}
	}
}
