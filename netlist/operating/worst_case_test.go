package operating

import (
	"flag"
	"fmt"
	"math"
	"math/rand/v2"
	"runtime"
	"strings"
	"sync"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/numeric"
	"standoff/netlist/source"
	"standoff/netlist/stage"
	"standoff/netlist/syntax"
)

// deckMaker writes random boards.
type deckMaker struct {
	*rand.Rand
	b strings.Builder
	n int
}

func (d *deckMaker) card(format string, args ...any) { fmt.Fprintf(&d.b, format+"\n", args...) }

// between returns a value spread evenly over decades.
func (d *deckMaker) between(low, high float64) float64 {
	return low * math.Pow(high/low, d.Float64())
}

func (d *deckMaker) resistor(a, b string, low, high float64) {
	d.n++
	d.card("R%d %s %s %g", d.n, a, b, d.between(low, high))
	if d.IntN(3) == 0 {
		d.card("*> R%d tol=%d%% tempco=%d", d.n, 1+d.IntN(20), d.IntN(2000)-1000)
	}
}

// charging writes one of six charging networks between supply and emitter.
func (d *deckMaker) charging() {
	switch d.IntN(6) {
	case 0:
		d.resistor("vcc", "e", 3e3, 1e6)
	case 1:
		d.resistor("vcc", "m", 3e3, 3e5)
		d.resistor("m", "e", 3e3, 3e5)
	case 2:
		d.resistor("vcc", "e", 6e3, 1e6)
		d.resistor("vcc", "e", 6e3, 1e6)
	case 3:
		d.resistor("vcc", "e", 5e3, 1e5)
		d.resistor("e", "0", 5e5, 5e6)
	case 4:
		d.card("VC ctl 0 %g", 20+30*d.Float64())
		d.resistor("ctl", "m", 3e3, 3e5)
		d.resistor("m", "0", 3e5, 3e6)
		d.resistor("m", "e", 3e3, 3e5)
	case 5:
		d.resistor("vcc", "m", 3e3, 3e4)
		d.n++
		low := d.between(10, 1e4)
		d.card("R%d m e %g\n*> R%d travel=%g..%g", d.n, low*5, d.n, low, low*20)
	}
}

// randomDeck writes a random oscillator, sometimes with a thyristor behind it.
func randomDeck(seed uint64) string {
	d := &deckMaker{Rand: rand.New(rand.NewPCG(seed, 1))}
	d.card("random board")
	d.card("V1 vcc 0 %g", 8+22*d.Float64())
	if d.IntN(2) == 0 {
		d.card("*> V1 tol=%d%%", d.IntN(15))
	}
	d.charging()
	d.card("C1 e 0 %g", d.between(5e-9, 20e-6))
	eta := 0.5 + 0.3*d.Float64()
	d.card(".model U ujt(eta_min=%g eta_max=%g rbb_min=4k rbb_max=%g rbb_tc_min=0.1e-2 rbb_tc_max=0.9e-2 ip_max=5u ip_vbb=25 iv_min=4m iv_vbb=20",
		eta, eta+0.15*d.Float64(), 5e3+5e3*d.Float64())
	d.card("+ vob1_min=3 vob1_typ=5 pd=0.3 pd_slope=3m ie_rms=50m ie_pulse=2 vb2e=30 vb2b1=35)")
	b2 := "vcc"
	if d.IntN(4) > 0 {
		b2 = "b2"
		d.resistor("vcc", "b2", 50, 1000)
	}
	d.card("X1 e b1 %s U", b2)
	d.resistor("b1", "0", 10, 100)
	low := d.IntN(60) - 30
	d.card("*> board ambient=%d..%d", low, low+d.IntN(70))
	if d.IntN(3) == 0 {
		d.resistor("b1", "g", 10, 500)
		d.resistor("g", "0", 200, 5000)
		d.card("X2 a g 0 C106D")
		d.resistor("vcc", "a", 10, 1000)
		if d.IntN(3) == 0 {
			d.resistor("b1", "g2", 10, 500)
			d.card("X3 a2 g2 0 BT151-500L")
			d.resistor("vcc", "a2", 10, 1000)
		}
	}
	return d.b.String()
}

// modelOf builds the richest model of a deck: the gate stage where there is one.
func modelOf(t testing.TB, text string) *model {
	deck := syntax.Parse(source.New("random.cir", text), true)
	c, problems := circuit.Build(deck, circuit.Options{})
	if len(problems) > 0 {
		t.Fatalf("%s\n%v", text, problems[0].Message)
	}
	stages := stage.Recognise(c)
	w := circuit.NewWiring(c)
	if stages[0].Gap != "" {
		t.Fatalf("%s\n%s", text, stages[0].Gap)
	}
	if len(stages) >= 2 && stages[1].Gap == "" && len(stages[0].Drives) == len(stages)-1 {
		m, err := newSCRGate(w, stages[1], stages[0])
		if err != nil {
			t.Fatalf("%s\n%v", text, err)
		}
		return &m.model
	}
	if stages[0].Kind == stage.BreakoverOscillator {
		m, err := newBreakover(w, stages[0])
		if err != nil {
			t.Fatalf("%s\n%v", text, err)
		}
		return &m.model
	}
	m, err := newDriver(w, stages[0])
	if err != nil {
		t.Fatalf("%s\n%v", text, err)
	}
	return &m.model
}

// sample draws a board: every variable anywhere in its range, or at an end.
func sample(r *rand.Rand, box []numeric.Variable, x []float64) {
	ends := r.IntN(2) == 0
	for i, v := range box {
		share := r.Float64()
		if ends {
			share = float64(r.IntN(2))
		}
		x[i] = v.Low + share*(v.High-v.Low)
	}
}

// No sampled board of 10,000 random stages (with the kinds in the files beside this
// one) lies outside the computed bounds, and each bound is reached, within 1 %, on a board inside the box.
func TestNoSampledBoardLiesOutsideTheBounds(t *testing.T) { sampleStages(t, randomDeck, 10_000) }

// perKind is how many stages of each kind are sampled, 0 for the usual share: ten
// thousand of all kinds together.
var perKind = flag.Int("stages", 0, "stages of each kind to sample")

// sampleStages samples random stages that a maker writes.
func sampleStages(t *testing.T, maker func(seed uint64) string, stages int) {
	switch {
	case *perKind > 0:
		stages = *perKind
	case testing.Short():
		stages /= 20
	}
	const samples = 24
	var wait sync.WaitGroup
	workers := runtime.GOMAXPROCS(0)
	for w := range workers {
		wait.Go(func() {
			for seed := w; seed < stages; seed += workers {
				if t.Failed() {
					return
				}
				sampleStage(t, maker(uint64(seed)), uint64(seed), samples)
			}
		})
	}
	wait.Wait()
}

func sampleStage(t *testing.T, text string, seed uint64, samples int) {
	m := modelOf(t, text)
	n := len(m.outputs) + len(m.contests)
	name := func(j int) string {
		if j < len(m.outputs) {
			return m.outputs[j].name
		}
		return "margin of " + m.contests[j-len(m.outputs)].name
	}
	extremes := append(m.search(m.figuresSought()), m.search(m.contestsSought())[:len(m.contests)]...)
	x, y := make([]float64, len(m.box)), make([]float64, n)
	for j, e := range extremes {
		if math.IsNaN(e.Low) {
			continue // undefined on every board: a stage that never fires has no ramp
		}
		for k, at := range [][]float64{e.LowAt, e.HighAt} {
			m.function(at, y)
			if want := [2]float64{e.Low, e.High}[k]; y[j] != want && !math.IsNaN(want) && math.Abs(y[j]-want) > 0.01*math.Abs(want) {
				t.Errorf("seed %d: %s: bound %g is not reached, %g is", seed, name(j), want, y[j])
			}
			for i, v := range m.box {
				if at[i] < v.Low || at[i] > v.High {
					t.Errorf("seed %d: %s: the bound lies outside the box", seed, name(j))
				}
			}
		}
	}
	r := rand.New(rand.NewPCG(seed, 2))
	for range samples {
		sample(r, m.box, x)
		m.function(x, y)
		for j, v := range y {
			slack := 1e-9 * math.Max(math.Abs(extremes[j].Low), math.Abs(extremes[j].High))
			low, high := m.matters(j)
			if m.settled(j, extremes[j]) {
				if low && v < farOff/2 || high && v > 2./farOff {
					t.Errorf("seed %d: %s = %g was taken for far off\n%s", seed, name(j), v, text)
				}
				continue
			}
			if low && v < extremes[j].Low-slack || high && v > extremes[j].High+slack {
				t.Errorf("seed %d: %s = %g outside %g .. %g\n%s", seed, name(j), v, extremes[j].Low, extremes[j].High, text)
			}
		}
	}
}

// settled reports that a margin is so wide that its worst corner was not explored.
func (m *model) settled(j int, e numeric.Extreme) bool {
	if j < len(m.outputs) {
		return false
	}
	c := m.contests[j-len(m.outputs)]
	return !c.habit && !c.gated && (c.bound == Min && e.Low > farOff/1.01 || c.bound == Max && e.High < 1.01/farOff)
}

// function works out all outputs and margins at a point.
func (m *model) function(x, y []float64) {
	m.evaluate(x)
	for j := range m.outputs {
		y[j] = m.outputs[j].of()
	}
	for k := range m.contests {
		y[len(m.outputs)+k] = m.contests[k].ratio()
	}
}

// matters says which extremes of an output count: of a margin only the worse.
func (m *model) matters(j int) (low, high bool) {
	if j < len(m.outputs) {
		return true, true
	}
	worse := m.contests[j-len(m.outputs)].bound
	return worse == Min, worse == Max
}

func BenchmarkPlainStage(b *testing.B) {
	text := "t\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.1u\nXQ1 e b1 b2 2N2646\nR2 vcc b2 330\nR3 b1 0 27\n"
	m := modelOf(b, text)
	for b.Loop() {
		m.allComparisons()
		m.allFigures()
	}
}

func BenchmarkChargingNetworkOf40Resistors(b *testing.B) {
	var text strings.Builder
	text.WriteString("t\nV1 n0 0 20\nC1 e 0 0.1u\nXQ1 e b1 b2 2N2646\nR2 n0 b2 330\nR3 b1 0 27\n")
	for i := range 20 {
		fmt.Fprintf(&text, "RA%d n%d n%d 5k\nRB%d n%d 0 10meg\n", i, i, i+1, i, i+1)
	}
	text.WriteString("RX n20 e 1k\n")
	m := modelOf(b, text.String())
	for b.Loop() {
		m.allComparisons()
		m.allFigures()
	}
}
