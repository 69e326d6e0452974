package operating

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"

	"standoff/netlist/circuit"
	"standoff/netlist/stage"
)

// curve is a diode of the oracle, straight in pieces: a current from a to b, of which a share
// flows besides out of one net into another.
type curve struct {
	a, b, from, to              circuit.NodeID
	threshold, slope, breakdown float64
	gain                        float64
	state                       int // 0 blocks, 1 leads, 2 broken down
	name                        string
}

// line returns conductance and voltage where the current would vanish.
func (c *curve) line() (g, at float64) {
	switch c.state {
	case 1:
		return 1 / c.slope, c.threshold
	case 2:
		return 1 / c.slope, -c.breakdown
	}
	return 1e-12, 0
}

// stamp adds the curve to nodal equations.
func (c *curve) stamp(w *circuit.Wiring, m *mat.Dense, rhs *mat.VecDense) {
	g, at := c.line()
	a, b := int(w.Net(c.a)), int(w.Net(c.b))
	leaves := func(n circuit.NodeID, share float64) {
		i := int(w.Net(n))
		m.Set(i, a, m.At(i, a)+share*g)
		m.Set(i, b, m.At(i, b)-share*g)
		rhs.SetVec(i, rhs.AtVec(i)+share*g*at)
	}
	leaves(c.a, 1)
	leaves(c.b, -1)
	if c.gain > 0 {
		leaves(c.from, c.gain)
		leaves(c.to, -c.gain)
	}
}

// states counts the states that the curves may be in together.
func (o *oracle) states() int {
	n := 1
	for range o.curves {
		n *= 3
	}
	return n
}

// another goes on to the next state, as a counter does.
func (o *oracle) another() {
	for _, c := range o.curves {
		if c.state = (c.state + 1) % 3; c.state == 2 && math.IsInf(c.breakdown, 1) {
			c.state = 0
		}
		if c.state != 0 {
			return
		}
	}
}

// agrees reports whether every curve is in the state that belongs to its voltage.
func (o *oracle) agrees(v []float64) bool {
	for _, c := range o.curves {
		u := v[o.w.Net(c.a)] - v[o.w.Net(c.b)]
		const near = 1e-9
		if c.state == 1 && u < c.threshold-near || c.state == 2 && u > -c.breakdown+near ||
			c.state == 0 && (u > c.threshold+near || u < -c.breakdown-near) {
			return false
		}
	}
	return true
}

// bend gives the oracle the diodes and pnp transistors of a board: Ebers and Moll's equations, straight
// in pieces, with 0.0257 V over the emitter current of the nominal board for the slope of a
// junction, found by working that board out again and again.
func (b built) bend(t *testing.T, o *oracle) {
	t.Helper()
	nominal, slopes := built{b.c, b.s, b.m, b.m.nominal()}, map[string]float64{}
	n := nominal.oracle()
	for range 8 {
		n.curves = nil
		emitters := nominal.junctions(t, n, slopes)
		v, _ := n.solve(1)
		for _, j := range emitters {
			if amperes := (v[n.w.Net(j.a)] - v[n.w.Net(j.b)] - j.threshold) / j.slope; j.state == 1 {
				slopes[j.name] = min(max(0.0257/amperes, 1), 25e3)
			}
		}
	}
	b.junctions(t, o, slopes)
}

// junctions gives the oracle diodes and transistors and returns the base-emitter junctions.
func (b built) junctions(t *testing.T, o *oracle, slopes map[string]float64) []*curve {
	t.Helper()
	heat := b.x[b.m.ambient] - 25
	var emitters []*curve
	for _, e := range b.c.Elements {
		switch e.Kind {
		case circuit.Diode:
			d := &curve{a: e.Nodes[0], b: e.Nodes[1], slope: 1, breakdown: math.Inf(1)}
			d.threshold = b.named(t, "drop of "+e.Designator) - 2e-3*heat
			if e.PartName == "DZ" {
				d.breakdown = b.named(t, "bv of "+e.Designator)
			}
			o.curves = append(o.curves, d)
		case circuit.PNP:
			beta := b.named(t, "gain of "+e.Designator)
			c, base, emitter := e.Nodes[0], e.Nodes[1], e.Nodes[2]
			forward := &curve{a: emitter, b: base, from: base, to: c, gain: beta / (1 + beta), slope: 1, name: e.Designator}
			back := &curve{a: c, b: base, from: base, to: emitter, gain: 0.5, slope: 1}
			for _, j := range []*curve{forward, back} {
				j.threshold, j.breakdown = b.named(t, "V_BE of Q1")-2e-3*heat-0.0257, math.Inf(1)
			}
			if slope, known := slopes[e.Designator]; known {
				forward.slope = slope
			}
			emitters = append(emitters, forward)
			o.curves = append(o.curves, forward, back)
		}
	}
	if len(emitters) > 1 {
		for _, j := range emitters {
			j.slope *= math.Exp(b.named(t, "mismatch of "+j.name) / 0.0257)
		}
	}
	return emitters
}

// The period of 200 stages with transistors as current sources, some of which saturate on the way,
// agrees with an independent integration within a thousandth.
func TestTransistorPeriodAgreesWithIntegration(t *testing.T) {
	count, bent := 0, 0
	for seed := uint64(0); count < 200; seed++ {
		text := randomSource(seed)
		if !strings.Contains(text, "Q1 ") || strings.Contains(text, "vaf") || !strings.Contains(text, "X1 e k") && !strings.Contains(text, "X1 e b1") {
			continue
		}
		b := build(t, text, seed)
		o := b.oracle()
		b.bend(t, o)
		condition := func(_ []float64, volts float64) float64 { return volts - b.m.cycle.vp }
		if b.s.Kind == stage.UJTOscillator {
			heat := b.x[b.m.ambient] - 25
			eta, vd := b.named(t, "eta"), b.named(t, "vd")-2.5e-3*heat
			o.ohms = b.named(t, "rbb") * (1 + b.named(t, "rbb_tc")*heat)
			b1, b2 := b.s.Nodes["base1"], b.s.Nodes["base2"]
			o.bar = [2]circuit.NodeID{b1, b2}
			condition = func(v []float64, volts float64) float64 { return volts - vd - v[b1] - eta*(v[b2]-v[b1]) }
		}
		b.m.evaluate(b.x)
		if b.compare(t, seed, o, condition) {
			count++
			if b.m.room < 0.2 {
				bent++
			}
		}
	}
	if bent < 3 {
		t.Errorf("only %d of them saturate before the peak", bent)
	}
}
