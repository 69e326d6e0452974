package operating

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mat"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/netlist/stage"
	"standoff/netlist/syntax"
)

// oracle works a stage out with general libraries alone: nodal equations with a row
// for every voltage source, solved by gonum/mat; the time by gonum's Gauss-Legendre
// quadrature of C dv/i(v). It takes the stage's parts from the circuit and their values
// from the point, and nothing from the model's networks.
type oracle struct {
	c      *circuit.Circuit
	w      *circuit.Wiring
	value  func(*circuit.Element) float64
	bar    [2]circuit.NodeID // ends of one more resistor
	ohms   float64           // 0 for none
	capped circuit.NodeID
	skip   func(*circuit.Element) bool
	drive  func(*circuit.Element) (from, to circuit.NodeID, amperes float64, ok bool)
	curves []*curve // diodes and junctions
}

// solve holds the capacitor's net at a voltage over ground and returns all
// potentials and the current into the capacitor.
func (o *oracle) solve(volts float64) (v []float64, amperes float64) {
	for range o.states() {
		v, amperes = o.straight(volts)
		if o.agrees(v) {
			return v, amperes
		}
		o.another()
	}
	panic("no state of the diodes agrees")
}

// straight solves with every curve on its straight piece.
func (o *oracle) straight(volts float64) (v []float64, amperes float64) {
	n := len(o.c.Nodes)
	var sources []*circuit.Element
	for _, e := range o.c.Elements {
		if e.Kind == circuit.VoltageSource && !circuit.IsLink(e) {
			sources = append(sources, e)
		}
	}
	size := n + len(sources) + 1
	a, b := mat.NewDense(size, size, nil), mat.NewVecDense(size, nil)
	add := func(i, j int, g float64) { a.Set(i, j, a.At(i, j)+g) }
	resistor := func(p, q circuit.NodeID, ohms float64) {
		i, j := int(o.w.Net(p)), int(o.w.Net(q))
		add(i, i, 1/ohms)
		add(j, j, 1/ohms)
		add(i, j, -1/ohms)
		add(j, i, -1/ohms)
	}
	for i := range n {
		add(i, i, 1e-15)
	}
	for _, e := range o.c.Elements {
		switch {
		case o.skip != nil && o.skip(e), circuit.IsLink(e):
		case e.Kind == circuit.Resistor:
			resistor(e.Nodes[0], e.Nodes[1], o.value(e))
		case o.drive != nil:
			if from, to, i, ok := o.drive(e); ok {
				b.SetVec(int(o.w.Net(from)), b.AtVec(int(o.w.Net(from)))-i)
				b.SetVec(int(o.w.Net(to)), b.AtVec(int(o.w.Net(to)))+i)
			}
		}
	}
	for _, c := range o.curves {
		c.stamp(o.w, a, b)
	}
	if o.ohms > 0 {
		resistor(o.bar[0], o.bar[1], o.ohms)
	}
	hold := func(row int, p, q circuit.NodeID, volts float64) {
		for _, end := range []struct {
			n    circuit.NodeID
			sign float64
		}{{p, 1}, {q, -1}} {
			i := int(o.w.Net(end.n))
			add(i, row, end.sign)
			add(row, i, end.sign)
		}
		b.SetVec(row, volts)
	}
	for k, e := range sources {
		hold(n+k, e.Nodes[0], e.Nodes[1], o.value(e))
	}
	hold(size-1, o.capped, circuit.Ground, volts)
	for j := range size { // ground's own row
		a.Set(0, j, 0)
	}
	a.Set(0, 0, 1)
	b.SetVec(0, 0)
	var x mat.VecDense
	if err := x.SolveVec(a, b); err != nil {
		if _, bad := err.(mat.Condition); !bad {
			panic(err)
		}
	}
	v = make([]float64, n)
	for i := range v {
		v[i] = x.AtVec(int(o.w.Net(circuit.NodeID(i))))
	}
	return v, x.AtVec(size - 1)
}

// time integrates from one voltage to another, in short stretches towards the end,
// where the current is small.
func (o *oracle) time(from, to, farads float64) float64 {
	sum := 0.0
	for k := range 12 {
		a, b := to-(to-from)*math.Pow(0.5, float64(k)), to-(to-from)*math.Pow(0.5, float64(k+1))
		if k == 11 {
			b = to
		}
		sum += o.stretch(a, b, farads, 12)
	}
	return sum
}

// stretch integrates over a stretch; where diodes bend it, by halves until they agree with the whole.
func (o *oracle) stretch(from, to, farads float64, depth int) float64 {
	whole := func(a, b float64) float64 {
		return quad.Fixed(func(v float64) float64 {
			_, i := o.solve(v)
			return farads / i
		}, a, b, 8, nil, 0)
	}
	sum, middle := whole(from, to), from/2+to/2
	if len(o.curves) == 0 || depth == 0 {
		return sum
	}
	if halves := whole(from, middle) + whole(middle, to); math.Abs(halves-sum) < 1e-6*sum {
		return sum
	}
	return o.stretch(from, middle, farads, depth-1) + o.stretch(middle, to, farads, depth-1)
}

// crossing looks for the voltage at which a condition of the potentials turns
// positive.
func (o *oracle) crossing(low, high float64, condition func(v []float64, volts float64) float64) float64 {
	for range 60 {
		middle := low/2 + high/2
		v, _ := o.solve(middle)
		if condition(v, middle) < 0 {
			low = middle
		} else {
			high = middle
		}
	}
	return high
}

// built is a stage with its model and a point at which both are compared.
type built struct {
	c *circuit.Circuit
	s *stage.Stage
	m *relaxation
	x []float64
}

func build(t *testing.T, text string, seed uint64) built {
	t.Helper()
	c, problems := circuit.Build(syntax.Parse(source.New("random.cir", text), true), circuit.Options{})
	if len(problems) > 0 {
		t.Fatalf("%s\n%v", text, problems[0].Message)
	}
	s := stage.Recognise(c)[0]
	s.Drives = nil
	var m *relaxation
	if s.Kind == stage.BreakoverOscillator {
		b, err := newBreakover(circuit.NewWiring(c), s)
		if err != nil {
			t.Fatal(err)
		}
		m = &b.relaxation
	} else {
		r, err := newDriver(circuit.NewWiring(c), s)
		if err != nil {
			t.Fatal(err)
		}
		m = r
	}
	x := make([]float64, len(m.box))
	sample(rand.New(rand.NewPCG(seed, 11)), m.box, x)
	m.evaluate(x)
	return built{c, s, m, x}
}

func (b built) oracle() *oracle {
	return &oracle{c: b.c, w: b.m.w, capped: b.s.Nodes["capacitor"], value: func(e *circuit.Element) float64 {
		if s, ok := b.m.slots[e]; ok {
			return b.m.value(s, b.x)
		}
		return e.Value.Nominal
	}}
}

// named returns a variable of the point by name.
func (b built) named(t *testing.T, name string) float64 {
	t.Helper()
	for i, trait := range b.m.traits {
		if trait.name == name {
			return b.x[i]
		}
	}
	t.Fatalf("no variable %s", name)
	return 0
}

// compare holds the model's period against one that is integrated from the valley to
// the voltage at which the condition turns, plus the model's discharge, which is
// integrated too.
func (b built) compare(t *testing.T, seed uint64, o *oracle, condition func(v []float64, volts float64) float64) bool {
	t.Helper()
	s := b.m.cycle
	if !s.fires || math.IsInf(s.period, 0) || s.atPeak < 1e-8 {
		return false
	}
	lower := 0.0
	peak := o.crossing(lower, lower+2*s.vp+1, condition)
	charge := o.time(lower+s.vv, peak, s.c)
	ohms := s.on + s.r1 + s.re
	discharge := quad.Fixed(func(v float64) float64 { return ohms * s.c / v }, s.vv, peak-lower, 60, nil, 0)
	if want := charge + discharge; math.Abs(s.period-want) > 1e-3*want {
		t.Errorf("seed %d: period %g, integrated %g", seed, s.period, want)
	}
	return true
}

// The period of 200 random unijunction stages agrees with an independent integration
// within a thousandth.
func TestPeriodAgreesWithIntegration(t *testing.T) {
	count := 0
	for seed := uint64(0); count < 200; seed++ {
		b := build(t, randomDeck(seed), seed)
		o := b.oracle()
		heat := b.x[b.m.ambient] - 25
		eta, vd := b.named(t, "eta"), b.named(t, "vd")-2.5e-3*heat
		o.ohms = b.named(t, "rbb") * (1 + b.named(t, "rbb_tc")*heat)
		b1, b2 := b.s.Nodes["base1"], b.s.Nodes["base2"]
		o.bar = [2]circuit.NodeID{b1, b2}
		if b.compare(t, seed, o, func(v []float64, volts float64) float64 { return volts - vd - v[b1] - eta*(v[b2]-v[b1]) }) {
			count++
		}
	}
}

// The same for programmable stages, the divider's figures by the oracle too.
func TestPUTPeriodAgreesWithIntegration(t *testing.T) {
	count := 0
	for seed := uint64(0); count < 200; seed++ {
		text := randomPUT(seed)
		if strings.Contains(text, "D1 ") || strings.Contains(text, "BRY") || strings.Contains(text, "Q1 ") {
			continue // diodes are not in the oracle; V_T of a BRY56 and of a pair is another
		}
		b := build(t, text, seed)
		o := b.oracle()
		gate := b.s.Nodes["gate"]
		ohms := o.seen(gate)
		share := math.Log(ohms/10e3) / math.Log(100)
		low, high := b.named(t, "vt_10k"), b.named(t, "vt_1meg")
		vt := low + share*(high-low)
		if share < 0 {
			vt = max(vt, low)
		}
		vt = max(vt-2e-3*(b.x[b.m.ambient]-25), 0)
		if b.compare(t, seed, o, func(v []float64, volts float64) float64 { return volts - v[gate] - vt }) {
			count++
		}
	}
}

// seen returns the resistance that a net sees with the capacitor's net free: by two
// solutions with different currents drawn there.
func (o *oracle) seen(n circuit.NodeID) float64 {
	probe := *o
	probe.capped = n
	_, i0 := probe.solve(0)
	_, i1 := probe.solve(1)
	return 1 / (i0 - i1)
}

// The same for breakover stages on dc.
func TestBreakoverPeriodAgreesWithIntegration(t *testing.T) {
	count := 0
	for seed := uint64(0); count < 200; seed++ {
		text := randomBreakover(seed)
		if strings.Contains(text, "SIN") || strings.Contains(text, "V1 vcc 0 -") {
			continue
		}
		b := build(t, text, seed)
		o, vbo, outlet := b.oracle(), b.named(t, "vbo"), b.s.Nodes["outlet"]
		if strings.Contains(text, "MBS") {
			vbo *= 1 + 0.02e-2*(b.x[b.m.ambient]-25)
		}
		if !strings.Contains(text, "NE-2") { // the breakover current flows through what hangs on the far side
			vbo += b.named(t, "ibo") * o.seen(outlet)
		}
		if b.compare(t, seed, o, func(_ []float64, volts float64) float64 { return volts - vbo }) {
			count++
		}
	}
}

// The same for stages with regulators, whose current follows here from the sheet's
// law; of a field-effect transistor it is found by halving the square law.
func TestSourcePeriodAgreesWithIntegration(t *testing.T) {
	count := 0
	for seed := uint64(0); count < 200; seed++ {
		text := randomSource(seed)
		if strings.Contains(text, "Q1 ") || !strings.Contains(text, "X1 e k") && !strings.Contains(text, "X1 e b1") {
			continue
		}
		b := build(t, text, seed)
		if room := b.m.room; room < 3.2 {
			continue // out of its range: not the sheet's law
		}
		o := b.oracle()
		amperes := b.regulated(t, o)
		r, _ := stage.RegulatorOf(b.m.w, b.m.source.element)
		o.skip = r.Holds
		o.drive = func(e *circuit.Element) (circuit.NodeID, circuit.NodeID, float64, bool) {
			return r.High, r.Low, amperes, e == b.m.source.element
		}
		condition := func(_ []float64, volts float64) float64 { return volts - b.m.cycle.vp }
		if b.s.Kind == stage.UJTOscillator {
			heat := b.x[b.m.ambient] - 25
			eta, vd := b.named(t, "eta"), b.named(t, "vd")-2.5e-3*heat
			o.ohms = b.named(t, "rbb") * (1 + b.named(t, "rbb_tc")*heat)
			b1, b2 := b.s.Nodes["base1"], b.s.Nodes["base2"]
			o.bar = [2]circuit.NodeID{b1, b2}
			condition = func(v []float64, volts float64) float64 { return volts - vd - v[b1] - eta*(v[b2]-v[b1]) }
		}
		if b.compare(t, seed, o, condition) {
			count++
		}
	}
}

// regulated returns the current of a regulator by its law.
func (b built) regulated(t *testing.T, o *oracle) float64 {
	t.Helper()
	e := b.m.source.element
	name := func(symbol string) string { return fmt.Sprintf("%s of %s", symbol, e.Designator) }
	r, _ := stage.RegulatorOf(b.m.w, e)
	set := r.Set
	switch {
	case e.Kind == circuit.NJF:
		pinch, full, ohms := b.named(t, name("V_P")), b.named(t, name("I_DSS")), o.value(set[0])
		low, high := 0.0, full
		for range 80 {
			i := low/2 + high/2
			if u := 1 - i*ohms/pinch; u > 0 && full*u*u > i {
				low = i
			} else {
				high = i
			}
		}
		return high
	case len(set) > 0: // LM334 sheet: whole current 227 uV/K T/R
		return b.named(t, name("v_per_k")) * 1.0588 * (b.x[b.m.ambient] + 273.15) / o.value(set[0])
	}
	return b.named(t, name("i"))
}
