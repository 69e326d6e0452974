package operating

import (
	"math"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/netlist/stage"
	"standoff/netlist/syntax"
)

// latchTime returns the nominal latching time of the first thyristor.
func latchTime(t *testing.T, text string) float64 {
	t.Helper()
	c, problems := circuit.Build(syntax.Parse(source.New("t.cir", "title\n"+text), true), circuit.Options{})
	if len(problems) > 0 {
		t.Fatal(problems[0].Message)
	}
	for _, a := range Compute(c, stage.Recognise(c)) {
		if f, ok := a.Figure("latching_time"); ok {
			return f.Nominal
		}
	}
	t.Fatal("no latching time")
	return 0
}

// Published examples: D. De, Basic Electronics, ex. 8-3 (100 V, 0.1 H, 4 mA:
// 4.0 us), and a power electronics text, ex. 1.7 (90 V, 25 ohm, 0.5 H: after 40 us
// 7.19 mA; with 2743 ohm beside the load it just carries 40 mA then). The third is
// computed from an exam question (100 V; 20 ohm and 0.5 H beside 5 kohm; 50 mA: the
// bleeder carries 20 mA at once, the coil the other 30 mA after 150.5 us).
func TestLatchingTimesInPrint(t *testing.T) {
	for _, c := range []struct {
		name, cards string
		want, tol   float64
	}{
		{"coil alone", ".model T scr(il=4m igt=1m vgt=1)\nV1 vcc 0 100\nL1 vcc a 0.1\nXS1 a g 0 T\nR9 g 0 1k", 4e-6, 0.05e-6},
		{"coil and resistor", ".model T scr(il=7.193m igt=1m vgt=1)\nV1 vcc 0 90\nL1 vcc x 0.5\nR1 x a 25\nXS1 a g 0 T\nR9 g 0 1k", 40e-6, 0.01e-6},
		{"bleeder", ".model T scr(il=40m igt=1m vgt=1)\nV1 vcc 0 90\nL1 vcc x 0.5\nR1 x a 25\nRB vcc a 2743\nXS1 a g 0 T\nR9 g 0 1k", 40e-6, 0.05e-6},
		{"bleeder of the exam", ".model T scr(il=50m igt=1m vgt=1)\nV1 vcc 0 100\nL1 vcc x 0.5\nR1 x a 20\nRB vcc a 5k\nXS1 a g 0 T\nR9 g 0 1k", 150.5e-6, 0.05e-6},
		{"bleeder enough by itself", ".model T scr(il=10m igt=1m vgt=1)\nV1 vcc 0 100\nL1 vcc x 0.5\nR1 x a 20\nRB vcc a 5k\nXS1 a g 0 T\nR9 g 0 1k", 0, 0},
	} {
		if got := latchTime(t, c.cards); math.Abs(got-c.want) > c.tol {
			t.Errorf("%s: %g s, in print %g s", c.name, got, c.want)
		}
	}
	never := ".model T scr(il=4 igt=1m vgt=1)\nV1 vcc 0 100\nL1 vcc x 0.1\nR1 x a 100\nXS1 a g 0 T\nR9 g 0 1k"
	if got := latchTime(t, never); !math.IsInf(got, 1) {
		t.Errorf("a load that never carries the latching current: %g s", got)
	}
}
