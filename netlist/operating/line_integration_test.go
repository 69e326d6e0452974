package operating

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

// lineBoard writes a random stage on the line: straight, behind one rectifier or behind a bridge,
// with and without a bleeder.
func lineBoard(seed uint64) string {
	d := &deckMaker{Rand: rand.New(rand.NewPCG(seed, 7))}
	d.card("random board on the line")
	d.b.WriteString(".model DR D\n")
	supply := [...]string{"V1 l 0", "V1 l 0", "V1 l n"}[seed%3]
	d.card("%s SIN(0 %g %d)", supply, d.between(100, 400), 50+10*d.IntN(2))
	switch seed % 3 {
	case 0:
		d.card("R1 l e %g", d.between(2e4, 2e5))
	case 1:
		d.card("D1 l p DR\nR1 p e %g", d.between(5e4, 1e6))
	case 2:
		d.card("D1 l p DR\nD2 n p DR\nD3 0 l DR\nD4 0 n DR\nR1 p e %g", d.between(5e4, 1e6))
	}
	if d.IntN(2) == 0 {
		d.card("R2 e 0 %g", d.between(5e5, 5e6))
	}
	farads := d.between(2e-8, 5e-7)
	if slow(seed) {
		farads *= 10
	}
	d.card("C1 e 0 %g", farads)
	d.card("X1 e k %s", [...]string{"DB3", "HT-32", "NE-2"}[d.IntN(3)])
	d.card("R3 k 0 %g", d.between(10, 100))
	return d.b.String()
}

// slow says of which boards the first breakover takes many cycles.
func slow(seed uint64) bool { return seed%10 == 0 }

// lineOracle integrates the capacitor's voltage with the classical Runge-Kutta method; the current of
// the three networks is written down by hand.
type lineOracle struct {
	network                           uint64 // straight, half wave, bridge
	crest, hertz, ohms, bleed, farads float64
	drops                             [2]float64 // in the two half cycles
}

func (o *lineOracle) rise(t, v float64) float64 {
	line := o.crest * math.Sin(2*math.Pi*o.hertz*t)
	i := (line - v) / o.ohms
	switch {
	case o.network == 2 && line < 0:
		i = max(-line-o.drops[1]-v, 0) / o.ohms
	case o.network > 0:
		i = max(line-o.drops[0]-v, 0) / o.ohms
	}
	return (i - v*o.bleed) / o.farads
}

// first returns when a voltage is reached from another, and the highest voltage met before a time.
func (o *lineOracle) first(t, v, goal, until float64) (at, most float64) {
	h := 1 / o.hertz / 1000
	most = v
	for t < until {
		a := o.rise(t, v)
		b := o.rise(t+h/2, v+h/2*a)
		c := o.rise(t+h/2, v+h/2*b)
		d := o.rise(t+h, v+h*c)
		next := v + h/6*(a+2*b+2*c+d)
		if next >= goal {
			return t + h*(goal-v)/(next-v), goal
		}
		t, v = t+h, next
		most = max(most, v)
	}
	return math.Inf(1), most
}

// On 200 random stages on the line the first breakover and the time from the valley to
// the next agree with an independent integration.
func TestLineStagesAgreeWithIntegration(t *testing.T) {
	fired := map[uint64]int{}
	for seed := range uint64(210) {
		text := lineBoard(seed)
		b := build(t, text, seed)
		o, m := newLineOracle(t, b, text, seed), breakoverOf(t, text)
		m.evaluate(b.x)
		m.pace()
		if m.line.turn < 0 { // of a bridge, the half cycle with the smaller drops comes first
			o.drops[0], o.drops[1] = o.drops[1], o.drops[0]
		}
		s := &m.s
		cycles := 40.0
		if slow(seed) {
			cycles = 600
		}
		at, _ := o.first(0, 0, s.vp, cycles/o.hertz)
		if math.IsInf(at, 1) && s.first <= (cycles-1)/o.hertz || !math.IsInf(at, 1) && math.Abs(at-s.first) > 1e-3*at {
			t.Errorf("seed %d: first breakover at %g, integrated %g", seed, s.first, at)
		}
		if math.IsInf(at, 1) {
			continue
		}
		fired[seed%3]++
		if !m.charging.bends {
			continue
		}
		next, _ := o.first(0, s.vv, s.vp, cycles/o.hertz)
		if want := next + s.discharge; !math.IsInf(next, 1) && math.Abs(want-s.period) > 1e-3*want {
			t.Errorf("seed %d: next breakover after %g, integrated %g", seed, s.period, want)
		}
	}
	if fired[0] < 20 || fired[1] < 20 || fired[2] < 20 {
		t.Errorf("too few of them fire: %v", fired)
	}
}

// So does the crest to which a stage settles while nothing breaks over.
func TestSettledCrestAgreesWithIntegration(t *testing.T) {
	count := 0
	for seed := range uint64(90) {
		text := lineBoard(seed)
		b := build(t, text, seed)
		o, m := newLineOracle(t, b, text, seed), breakoverOf(t, text)
		m.evaluate(b.x)
		g := 1/o.ohms + o.bleed
		want := o.crest / o.ohms / math.Hypot(g, 2*math.Pi*o.hertz*o.farads) // by phasors
		if o.network > 0 {
			cycles := math.Ceil(12 / (o.bleed + 1e-12) * o.farads * o.hertz)
			if cycles > 400 {
				continue // without a bleeder it creeps up for ever
			}
			_, want = o.first(0, 0, math.Inf(1), cycles/o.hertz)
		}
		count++
		if math.Abs(want-m.extent().reach) > 1e-3*want {
			t.Errorf("seed %d: crest %g, integrated %g", seed, m.extent().reach, want)
		}
	}
	if count < 40 {
		t.Errorf("only %d of them settle", count)
	}
}

func breakoverOf(t *testing.T, text string) *breakoverModel {
	t.Helper()
	b := build(t, text, 0)
	m, err := newBreakover(b.m.w, b.s)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

func newLineOracle(t *testing.T, b built, text string, seed uint64) *lineOracle {
	t.Helper()
	value := b.oracle().value
	o := &lineOracle{network: seed % 3}
	heat := b.x[b.m.ambient] - 25
	for _, e := range b.c.Elements {
		switch e.Designator {
		case "V1":
			o.crest, o.hertz = value(e), e.Wave.Args[2]
		case "R1":
			o.ohms = value(e) + float64(o.network)*diodeSlope
		case "R2":
			o.bleed = 1 / value(e)
		case "C1":
			o.farads = value(e)
		}
	}
	if strings.Contains(text, "DB3") {
		o.bleed += b.named(t, "idrm") * math.Exp2(heat/leakRise) / b.m.cycle.vp
	}
	drop := func(k int) float64 { return b.named(t, fmt.Sprintf("drop of D%d", k)) - 2e-3*heat }
	switch o.network {
	case 1:
		o.drops[0] = drop(1)
	case 2:
		o.drops = [2]float64{drop(1) + drop(4), drop(2) + drop(3)}
	}
	return o
}
