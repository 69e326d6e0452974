package network_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"standoff/netlist/network"
)

// random builds a random connected network of resistors, grounded sources and
// current sources, and the same as a nodal matrix for the oracle.
func random(r *rand.Rand) (s *network.Solver, want []float64) {
	var n network.Network
	nodes := 2 + r.IntN(12)
	for range nodes {
		n.Node()
	}
	type branch struct {
		a, b  int
		ohms  float64
		index network.Branch
	}
	var resistors []branch
	add := func(a, b int) {
		resistors = append(resistors, branch{a, b, math.Exp(r.Float64()*12 + 1), n.Resistor(network.Node(a), network.Node(b))})
	}
	for i := 1; i <= nodes; i++ {
		add(i, r.IntN(i))
	}
	for range r.IntN(2 * nodes) {
		if a, b := r.IntN(nodes+1), r.IntN(nodes+1); a != b {
			add(a, b)
		}
	}
	supply, volts := 1+r.IntN(nodes), 40*r.Float64()-20
	source := n.Voltage(network.Node(supply), 0)
	from, to, amperes := r.IntN(nodes+1), r.IntN(nodes+1), 0.01*r.Float64()
	current := n.Current(network.Node(from), network.Node(to))
	s, _ = n.Compile()
	g, i := mat.NewDense(nodes, nodes, nil), mat.NewVecDense(nodes, nil)
	for _, b := range resistors {
		s.Values[b.index] = b.ohms
		for _, p := range [][2]int{{b.a, b.b}, {b.b, b.a}} {
			if p[0] > 0 {
				g.Set(p[0]-1, p[0]-1, g.At(p[0]-1, p[0]-1)+1/b.ohms)
				if p[1] > 0 {
					g.Set(p[0]-1, p[1]-1, g.At(p[0]-1, p[1]-1)-1/b.ohms)
				}
			}
		}
	}
	s.Values[source], s.Values[current] = volts, amperes
	if from > 0 {
		i.SetVec(from-1, i.AtVec(from-1)-amperes)
	}
	if to > 0 {
		i.SetVec(to-1, i.AtVec(to-1)+amperes)
	}
	for k := range nodes { // the supply's row becomes v = volts
		g.Set(supply-1, k, 0)
	}
	g.Set(supply-1, supply-1, 1)
	i.SetVec(supply-1, volts)
	var v mat.VecDense
	if err := v.SolveVec(g, i); err != nil {
		panic(err)
	}
	return s, v.RawVector().Data
}

// The oracle is the LU solution of the nodal equations by gonum/mat, a general
// linear algebra library.
func TestSolutionsAgreeWithAGeneralSolver(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for k := range 2000 {
		s, want := random(r)
		if !s.Solve() {
			t.Fatal("no consistent state")
		}
		for i, v := range want {
			if got := s.Voltage(network.Node(i + 1)); math.Abs(got-v) > 1e-6*(1+math.Abs(v)) {
				t.Fatalf("network %d, node %d: %g, want %g", k, i+1, got, v)
			}
		}
	}
}

// A divider with a zener: the law of the piecewise-linear diode, by hand.
func TestAZenerClampsADivider(t *testing.T) {
	var n network.Network
	in, out := n.Node(), n.Node()
	v := n.Voltage(in, 0)
	r := n.Resistor(in, out)
	d := n.Diode(0, out)
	s, err := n.Compile()
	if err != nil {
		t.Fatal(err)
	}
	s.Values[v], s.Values[r], s.Values[d] = 20, 1000, 0.6
	s.SetDiode(d, 1, 10, 1)
	for _, c := range []struct{ supply, want float64 }{
		{20, (20.0/1000 + 10) / (1 + 1.0/1000)},  // broken down: (v-10)/1 = (20-v)/1000
		{5, 5},                                   // blocking
		{-5, (-5.0/1000 - 0.6) / (1 + 1.0/1000)}, // conducting
	} {
		s.Values[v] = c.supply
		if !s.Solve() {
			t.Fatalf("%g V: no consistent state", c.supply)
		}
		if got := s.Voltage(out); math.Abs(got-c.want) > 1e-8 {
			t.Errorf("%g V: %.9g, want %.9g", c.supply, got, c.want)
		}
	}
}

func TestTransferIsTheDrivingPointResistance(t *testing.T) {
	var n network.Network
	a, b := n.Node(), n.Node()
	r1, r2, r3 := n.Resistor(a, 0), n.Resistor(a, b), n.Resistor(b, 0)
	s, _ := n.Compile()
	s.Values[r1], s.Values[r2], s.Values[r3] = 100, 50, 50
	s.Solve()
	ohms := make([]float64, s.Nodes())
	s.Transfer(a, ohms)
	if math.Abs(ohms[a]-50) > 1e-9 || math.Abs(ohms[b]-25) > 1e-9 {
		t.Errorf("got %g and %g, want 50 and 25", ohms[a], ohms[b])
	}
}

func TestALoopOfSourcesIsAnError(t *testing.T) {
	var n network.Network
	a := n.Node()
	n.Voltage(a, 0)
	n.Voltage(a, 0)
	if _, err := n.Compile(); err == nil {
		t.Error("want an error")
	}
}

// Voltage sources between free nodes tie them without a row of their own.
func TestAFloatingSourceShiftsItsNode(t *testing.T) {
	var n network.Network
	a, b := n.Node(), n.Node()
	v := n.Voltage(a, b)
	r1, r2 := n.Resistor(a, 0), n.Resistor(b, 0)
	s, _ := n.Compile()
	s.Values[v], s.Values[r1], s.Values[r2] = 10, 1000, 1000
	s.Solve()
	if math.Abs(s.Voltage(a)-5) > 1e-6 || math.Abs(s.Voltage(b)+5) > 1e-6 {
		t.Errorf("got %g and %g, want 5 and -5", s.Voltage(a), s.Voltage(b))
	}
}

func BenchmarkSolveFourNodes(b *testing.B) {
	r := rand.New(rand.NewPCG(3, 4))
	s, _ := random(r)
	for b.Loop() {
		s.Solve()
	}
}
