package operating

import (
	"math"
	"slices"
	"strings"
	"testing"

	"standoff/netlist/stage"
)

// rest is a stage that runs on whatever charges net e, with exact values.
const rest = "C9 e 0 1u\nX9 e b1 b2 2N2646\nR91 vcc b2 470\nR92 b1 0 27\n" +
	"*> all R tol=0\n*> all C tol=0\n*> all V tol=0\n*> board ambient=25..25\n" +
	".model QP PNP(bf=100)\n.model QN NPN(bf=100)\n.model DZ D(bv=5)\n.model DL D(vf=1.8)\n.model DX D(vf=0.65)\n"

// Current sources of every kind in the trade, recognised from wiring with the parts that set them, and
// with the current that a calculation by hand gives: V_BE 0.65 V, gain 100.
func TestCurrentSourcesOfEveryKind(t *testing.T) {
	const share = 100. / 101
	for _, c := range []struct {
		name, text  string
		timing, own string
		amperes     float64
		within      float64
	}{
		{"zener", "D1 b vcc DZ\nR1 b 0 2k\nR2 vcc ee 10k\nQ1 e b ee QP\n", "R2", "D1 R1 Q1", share * (5 - 0.65) / 10e3, 0.005},
		{"light-emitting diode", "D1 vcc b DL\nR1 b 0 2k\nR2 vcc ee 5k\nQ1 e b ee QP\n", "R2", "D1 R1 Q1", share * (1.8 - 0.65) / 5e3, 0.02},
		{"two diodes", "D1 vcc m DX\nD2 m b DX\nR1 b 0 10k\nR2 vcc ee 5k\nQ1 e b ee QP\n", "R2", "D1 D2 R1 Q1", share * 0.65 / 5e3, 0.02},
		{"divider", "R1 vcc b 2k\nR3 b 0 18k\nR2 vcc ee 5k\nQ1 e b ee QP\n", "R2", "R1 R3 Q1", share * (2.4 - 0.65) / (5e3 + 1800./101), 0.005},
		{"base resistor alone", "R1 b 0 2meg\nQ1 e b vcc QP\n", "R1", "Q1", 100 * (24 - 0.65) / 2e6, 0.005},
		{"mirror", "Q1 e b vcc QP\nQ2 b b vcc QP\nR1 b 0 100k\n", "R1", "Q1 Q2", (24 - 0.65) / 100e3 / 1.02, 0.005},
		{"Wilson's mirror", "Q1 b a vcc QP\nQ2 a a vcc QP\nQ3 e b a QP\nR1 b 0 100k\n", "R1", "Q1 Q2 Q3", (24 - 1.3) / 100e3, 0.005},
		{"ring of two", "R2 vcc ee 5k\nQ1 b ee vcc QP\nQ2 e b ee QP\nR1 b 0 47k\n", "R2", "Q1 Q2 R1", 0.65 / 5e3, 0.04},
		{"zener fed by a regulator diode", "D1 b vcc DZ\nX1 b 0 1N5285\nR2 vcc ee 10k\nQ1 e b ee QP\n", "R2", "D1 X1 Q1",
			share * (5 - 0.65) / 10e3, 0.005},
		{"cascode", "D1 z vcc DZ\nR1 z y 1k\nR3 y 0 10k\nR2 vcc ee 10k\nQ1 c z ee QP\nQ2 e y c QP\n", "R2", "D1 R1 R3 Q1 Q2",
			share * share * (5 - 0.65) / 10e3, 0.005},
		{"two in cascade", "D1 b vcc DZ\nR1 b 0 2k\nR2 vcc ee 10k\nQ1 e b m QP\nQ2 e m ee QP\n", "R2", "D1 R1 Q1 Q2", (5 - 1.3) / 10e3, 0.005},
		{"behind a resistor", "D1 b vcc DZ\nR1 b 0 2k\nR2 vcc ee 10k\nQ1 c b ee QP\nR3 c e 100\n", "R2 R3", "D1 R1 Q1", share * (5 - 0.65) / 10e3, 0.005},
		{"control voltage", "V2 in 0 3\nQ1 b in n QN\nR2 n 0 10k\nQ2 b b vcc QP\nQ3 e b vcc QP\n", "R2", "Q1 Q2 Q3", share * (3 - 0.65) / 10e3 / 1.02, 0.005},
		{"field-effect transistor", "J1 vcc e s JN\nR2 s e 10k\n.model JN NJF(vto=-2 beta=0.25m)\n", "R2", "J1", 0.128348e-3, 1e-4},
		{"p channel", "J1 e vcc s JP\nR2 vcc s 10k\n.model JP PJF(vto=2 beta=0.25m)\n", "R2", "J1", 0.128348e-3, 1e-4},
		{"behind a gate stopper", "J1 vcc g s JN\nR1 g e 1k\nR2 s e 10k\n.model JN NJF(vto=-2 beta=0.25m)\n", "R2", "J1", 0.128348e-3, 1e-4},
		{"potentiometer", "J1 vcc e s JN\nR2 s m 1k\nR3 m e 9k\n*> R3 travel=0..9k\n.model JN NJF(vto=-2 beta=0.25m)\n", "R2 R3", "J1",
			0.128348e-3, 1e-4},
		{"gate on its source", "J1 vcc e e JN\n.model JN NJF(vto=-2 idss=0.2m)\n", "", "J1", 0.2e-3, 1e-6},
		{"three-terminal source", "X1 vcc r e LM334\nR2 r e 680\n", "R2", "X1", 67.7e-3 / 680, 0.005},
		// The sheet's circuit without drift: R2 ten times R1, 0.134 V over R1.
		{"without drift", "X1 vcc r f LM334\nR1 r f 680\nR2 r e 6.8k\nD1 f e DX\n", "R1 R2", "X1 D1", 0.134 / 680, 0.08},
		{"regulator diode", "X1 vcc e 1N5283\n", "", "X1", 0.22e-3, 1e-6},
		{"follower that sets the voltage", "R7 vcc p 1k\nR8 p 0 9k\nQ5 vcc p f QN\nR9 f 0 10k\nR1 f e 47k\n", "R1 R9", "", (21.6 - 0.65 - 2) / 47e3, 0.02},
		{"amplifier that sets the voltage", "V2 in 0 1.65\nQ5 x in n QN\nR8 n 0 1k\nR9 vcc x 3k\nR1 x e 47k\n", "R1 R9", "",
			(24 - 3*share - 2) / 50e3, 0.02},
		{"ideal source", "I1 vcc e 100u\n", "", "I1", 100e-6, 1e-6},
	} {
		text := "t\nV1 vcc 0 24\n" + c.text + rest
		a := accountOf(t, text)
		f, ok := a.Figure("charging_current_at_valley")
		if !ok {
			t.Errorf("%s: not worked out: %v %s", c.name, a.Unchecked, a.Stage.Gap)
			continue
		}
		if math.Abs(f.Nominal-c.amperes) > c.within*c.amperes {
			t.Errorf("%s: %g A, by hand %g", c.name, f.Nominal, c.amperes)
		}
		for role, want := range map[stage.Role]string{stage.TimingResistor: c.timing, stage.CurrentSource: c.own} {
			var got []string
			for _, e := range a.Stage.Parts[role] {
				got = append(got, e.Designator)
			}
			list := strings.Fields(want)
			slices.Sort(got)
			slices.Sort(list)
			if !slices.Equal(got, list) {
				t.Errorf("%s: %s is %v, want %v", c.name, role, got, list)
			}
		}
	}
}

// A board on a negative supply, its diodes and transistors turned round, does what the board on the
// positive one does.
func TestNegativeSupplyMirrorsThePositive(t *testing.T) {
	const positive = "t\nV1 vcc 0 60\nD1 b vcc DZ\nR1 b 0 47k\nR2 vcc ee 10k\nQ1 e b ee QT\nD2 e f DX\nR3 f vcc 1meg\n" +
		"C1 e 0 100n\nX1 e k DB3\nR4 k 0 22\n.model QT PNP(bf=150)\n.model DZ D(bv=4.7)\n.model DX D\n"
	negative := strings.NewReplacer("vcc 0 60", "vcc 0 -60", "D1 b vcc", "D1 vcc b", "D2 e f", "D2 f e", "PNP", "NPN").Replace(positive)
	a, b := accountOf(t, positive), accountOf(t, negative)
	for _, name := range []string{"period", "first_pulse", "charging_current_at_peak", "charging_current_at_valley",
		"current_source_voltage", "ramp_nonlinearity"} {
		p, ok := a.Figure(name)
		n, also := b.Figure(name)
		if !ok || !also {
			t.Errorf("no %s: %v %v", name, a.Unchecked, b.Unchecked)
			continue
		}
		for k, pair := range [][2]float64{{p.Low, n.Low}, {p.Nominal, n.Nominal}, {p.High, n.High}} {
			if pair[0] <= 0 && name != "ramp_nonlinearity" || math.Abs(pair[0]-pair[1]) > 1e-6*math.Abs(pair[0]) {
				t.Errorf("%s: %g on the positive supply, %g on the negative (%d)", name, pair[0], pair[1], k)
			}
		}
	}
}

// A transistor that is saturated all the time and feeds a resistor is a switch: what charges
// is the resistor, and no range of a current source is left.
func TestSaturatedTransistorBehindAResistorIsASwitch(t *testing.T) {
	a := accountOf(t, "t\nV1 vcc 0 24\nQ1 x b vcc QP\nR1 b 0 100k\nR2 x e 100k\n"+rest)
	if f, ok := a.Figure("timing_resistance"); !ok || math.Abs(f.Nominal-100e3) > 100 {
		t.Errorf("timing resistance %v", f)
	}
	if _, ok := a.Comparison("current_source_voltage"); ok {
		t.Error("the switch is held against the range of a current source")
	}
	a = accountOf(t, "t\nV1 vcc 0 24\nQ1 x b ee QP\nD1 b vcc DZ\nR1 b 0 2k\nR3 vcc ee 10k\nR2 x e 1k\n"+rest)
	if _, ok := a.Comparison("current_source_voltage"); !ok {
		t.Error("the current source behind a resistor is not held against its range")
	}
}

// A source whose bias comes from a part that is not understood is not worked out, rather than taken for
// dead.
func TestUnknownBiasIsNamed(t *testing.T) {
	a := accountOf(t, "t\nV1 vcc 0 24\nQ1 e b ee QP\nR2 vcc ee 10k\nM1 b g 0 0 MN\nR1 g 0 1k\nR3 b vcc 10k\n.model MN NMOS(vto=2)\n"+rest)
	if !strings.Contains(a.Stage.Gap, "M1") {
		t.Errorf("gap %q", a.Stage.Gap)
	}
}
