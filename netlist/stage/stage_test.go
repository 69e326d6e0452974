package stage_test

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/netlist/stage"
	"standoff/netlist/syntax"
)

func recognise(t *testing.T, text string) []*stage.Stage {
	t.Helper()
	c, problems := circuit.Build(syntax.Parse(source.New("t.cir", "title\n"+text+"\n"), true), circuit.Options{})
	for _, p := range problems {
		t.Fatalf("%s: %s", text, p.Message)
	}
	return stage.Recognise(c)
}

// show writes a stage in one line.
func show(s *stage.Stage) string {
	if s.Gap != "" {
		return s.Anchor.Designator + ": " + s.Gap
	}
	var words []string
	for _, role := range stage.Roles {
		var names []string
		for _, e := range s.Parts[role] {
			names = append(names, e.Designator)
		}
		if names != nil {
			words = append(words, fmt.Sprintf("%s=%s", role, strings.Join(names, ",")))
		}
	}
	return s.Anchor.Designator + ": " + strings.Join(words, " ")
}

func TestOscillators(t *testing.T) {
	const rest = "\nR2 vcc b2 330\nR3 b1 0 22\nV1 vcc 0 20"
	const bases = " base-one=R3 base-two=R2 supply=V1"
	for _, c := range []struct{ name, text, want string }{
		{"plain", "R1 vcc e 100k\nC1 e 0 1u\nX1 e b1 b2 2N2646" + rest, "X1: timing-resistor=R1 timing-capacitor=C1" + bases},
		{"capacitor to the upper rail", "R1 vcc e 100k\nC1 vcc e 1u\nX1 e b1 b2 2N2646" + rest, "X1: timing-resistor=R1 timing-capacitor=C1" + bases},
		{"split parts", "R1 vcc m 50k\nR9 m e 50k\nC1 e 0 1u\nC2 e 0 1u\nX1 e b1 b2 2N2646" + rest,
			"X1: timing-resistor=R1,R9 timing-capacitor=C1,C2" + bases},
		{"capacitors in series", "R1 vcc e 50k\nC1 e x 1u\nC2 x 0 1u\nX1 e b1 b2 2N2646" + rest, "X1: timing-resistor=R1 timing-capacitor=C1,C2" + bases},
		{"emitter resistor", "R1 vcc k 50k\nC1 k 0 1u\nRE k e 10\nX1 e b1 b2 2N2646" + rest,
			"X1: timing-resistor=R1 timing-capacitor=C1 base-one=R3 base-two=R2 emitter-series=RE supply=V1"},
		{"no base resistors", "R1 vcc e 50k\nC1 e 0 1u\nX1 e 0 vcc 2N2646\nV1 vcc 0 20", "X1: timing-resistor=R1 timing-capacitor=C1 supply=V1"},
		{"ground at the plus rail", "R1 0 e 50k\nC1 e n 1u\nX1 e b1 b2 2N2646\nR2 0 b2 330\nR3 b1 n 22\nV1 0 n 20", "X1: timing-resistor=R1 timing-capacitor=C1" + bases},
		{"control supply", "VC c 0 30\nR1 c e 50k\nC1 e 0 1u\nX1 e b1 b2 2N2646" + rest,
			"X1: timing-resistor=R1 timing-capacitor=C1 base-one=R3 base-two=R2 supply=VC,V1"},
		{"soft supply", "RD raw vcc 220\nR1 vcc e 50k\nC1 e 0 1u\nX1 e b1 b2 2N2646\nR2 vcc b2 330\nR3 b1 0 22\nV1 raw 0 20", "X1: timing-resistor=R1 timing-capacitor=C1" + bases},
		{"current source", "I1 vcc e 1m\nC1 e 0 1u\nX1 e b1 b2 2N2646" + rest, "X1: timing-capacitor=C1 current-source=I1" + bases},
		{"a tap that leads nowhere", "R1 vcc e 50k\nR7 e tap 1meg\nC1 e 0 1u\nX1 e b1 b2 2N2646" + rest, "X1: timing-resistor=R1 timing-capacitor=C1" + bases},
		{"no capacitor", "R1 vcc e 100k\nX1 e b1 b2 2N2646" + rest, "X1: no capacitor stands at the emitter"},
		{"nothing charges", "C1 e 0 1u\nX1 e b1 b2 2N2646" + rest, "X1: nothing charges the capacitor"},
		{"turned supply", "R1 vcc e 100k\nC1 e 0 1u\nX1 e b1 b2 2N2646\nR2 vcc b2 330\nR3 b1 0 22\nV1 0 vcc 20", "X1: base two is not more positive than base one"},
		{"links", "VS vcc v2 0\nR1 v2 e 100k\nR8 e e2 0\nC1 e2 0 1u\nX1 e b1 b2 2N2646" + rest, "X1: timing-resistor=R1 timing-capacitor=C1" + bases},
	} {
		if got := show(recognise(t, c.text)[0]); got != c.want {
			t.Errorf("%s:\n got %s\nwant %s", c.name, got, c.want)
		}
	}
}

func TestOtherTimingStages(t *testing.T) {
	const supply = "\nV1 vcc 0 20"
	const divider = "\nR2 vcc g 10k\nR3 g 0 15k\nR4 k 0 47" + supply
	const put = " base-one=R4 gate-divider=R2,R3 supply=V1"
	const bases = "\nX1 e b1 b2 2N2646\nR2 vcc b2 330\nR3 b1 0 22" + supply
	const models = "\n.model QP PNP\n.model QN NPN\n.model DZ D(bv=5.6)\n.model JN NJF(vto=-2 idss=3m)\n.model CR isource(i=1m v_min=1)"
	for _, c := range []struct{ name, kind, text, want string }{
		{"programmable", "put-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nX1 a g k 2N6027" + divider, "X1: timing-resistor=R1 timing-capacitor=C1" + put},
		{"programmable, anode resistor", "put-oscillator", "R1 vcc c 100k\nC1 c 0 1u\nR9 c a 10\nX1 a g k 2N6027" + divider,
			"X1: timing-resistor=R1 timing-capacitor=C1 base-one=R4 emitter-series=R9 gate-divider=R2,R3 supply=V1"},
		{"programmable, diode in the divider", "put-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nX1 a g k 2N6027\nR2 vcc g 10k\nD1 g d DZ\nR3 d 0 15k\nR4 k 0 47" + supply + models,
			"X1: timing-resistor=R1 timing-capacitor=C1 base-one=R4 gate-divider=R2,D1,R3 supply=V1"},
		{"programmable, plus at ground", "put-oscillator", "R1 0 a 100k\nC1 a n 1u\nX1 a g k 2N6027\nR2 0 g 10k\nR3 g n 15k\nR4 k n 47\nV1 0 n 20",
			"X1: timing-resistor=R1 timing-capacitor=C1" + put},
		{"programmable, order from the wiring", "put-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nX1 g a k 2N6027" + divider, "X1: timing-resistor=R1 timing-capacitor=C1" + put},
		{"programmable, resistor from gate to anode", "put-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nX1 a g k 2N6027\nR9 a g 1meg" + divider,
			"X1: timing-resistor=R1 timing-capacitor=C1" + put + " gate-shunt=R9"},
		{"programmable, lamp diode at the cathode", "put-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nX1 a g k 2N6027\nR2 vcc g 10k\nR3 g 0 15k\nR4 k d 47\nD1 d 0 DZ" + supply + models,
			"X1: timing-resistor=R1 timing-capacitor=C1" + put},
		{"programmable, gate at the lower rail alone", "put-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nX1 a g k 2N6027\nR3 g 0 15k\nR4 k 0 47" + supply,
			"X1: timing-resistor=R1 timing-capacitor=C1 base-one=R4 gate-divider=R3 supply=V1"},
		{"programmable, gate in the air", "put-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nX1 a g k 2N6027\nR4 k 0 47" + supply, "X1: the gate has no way to a supply"},
		{"crossed pair", "put-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nQ1 x g a QP\nQ2 g x k QN\nR5 x k 22k" + divider + models,
			"Q1: timing-resistor=R1 timing-capacitor=C1 base-one=R4 gate-divider=R2,R3 supply=V1 gate-shunt=R5"},
		{"crossed pair, both junctions bridged", "put-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nQ1 x g a QP\nQ2 g x k QN\nR5 x k 22k\nR6 g a 1meg" + divider + models,
			"Q1: timing-resistor=R1 timing-capacitor=C1 base-one=R4 gate-divider=R2,R3 supply=V1 gate-shunt=R5,R6"},
		{"diac", "breakover-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nX1 a k DB3\nR4 k 0 47" + supply, "X1: timing-resistor=R1 timing-capacitor=C1 base-one=R4 supply=V1"},
		{"diac, turned round", "breakover-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nX1 k a DB3\nR4 k 0 47" + supply, "X1: timing-resistor=R1 timing-capacitor=C1 base-one=R4 supply=V1"},
		{"neon lamp across the capacitor", "breakover-oscillator", "R1 vcc a 1meg\nC1 a 0 1u\nX1 a 0 NE-2" + supply, "X1: timing-resistor=R1 timing-capacitor=C1 supply=V1"},
		{"silicon switch, negative supply", "breakover-oscillator", "R1 n a 100k\nC1 a 0 1u\nX1 a k MBS4991\nR4 k 0 47\nV1 n 0 -20", "X1: timing-resistor=R1 timing-capacitor=C1 base-one=R4 supply=V1"},
		{"lamp from the line", "breakover-oscillator", "R1 l a 100k\nC1 a 0 100n\nX1 a 0 NE-2\nV1 l 0 SIN(0 325 50)", "X1: timing-resistor=R1 timing-capacitor=C1 supply=V1"},
		{"silicon switch with its gate open", "breakover-oscillator", "R1 vcc a 47k\nC1 a 0 1u\nX1 a g k MBS4991\nR4 k 0 22" + supply, "X1: timing-resistor=R1 timing-capacitor=C1 base-one=R4 supply=V1"},
		{"unilateral switch", "breakover-oscillator", "R1 vcc a 47k\nC1 a 0 1u\nX1 a k 2N4988\nR4 k 0 22" + supply, "X1: timing-resistor=R1 timing-capacitor=C1 base-one=R4 supply=V1"},
		{"winding on the far side", "breakover-oscillator", "R1 vcc a 47k\nC1 a 0 1u\nX1 a k DB3\nL4 k 0 1m" + supply, "X1: timing-resistor=R1 timing-capacitor=C1 base-one=L4 supply=V1"},
		{"resistor at the lamp", "breakover-oscillator", "R1 vcc a 1meg\nC1 a 0 1u\nR9 a b 1k\nX1 b 0 NE-2" + supply, "X1: timing-resistor=R1 timing-capacitor=C1 emitter-series=R9 supply=V1"},
		{"capacitor across the lamp at the plus rail", "breakover-oscillator", "R1 a 0 1meg\nC1 vcc a 1u\nX1 vcc a NE-2" + supply, "X1: timing-resistor=R1 timing-capacitor=C1 supply=V1"},
		{"straight into a gate", "breakover-oscillator", "R1 vcc a 100k\nC1 a 0 1u\nX1 a g DB3\nX2 o g 0 C106D\nR5 vcc o 1k" + supply, "X1: timing-resistor=R1 timing-capacitor=C1 supply=V1"},
		{"behind a rectifier", "breakover-oscillator", "D1 l p DZ\nR1 p a 100k\nC1 a 0 100n\nX1 a 0 NE-2\nV1 l 0 SIN(0 325 50)" + models, "X1: timing-resistor=R1 timing-capacitor=C1 supply=V1 rectifier=D1"},
		{"behind a bridge", "breakover-oscillator", "V1 l n SIN(0 325 50)\nD1 l p DZ\nD2 n p DZ\nD3 0 l DZ\nD4 0 n DZ\nR1 p a 100k\nC1 a 0 100n\nX1 a 0 NE-2" + models,
			"X1: timing-resistor=R1 timing-capacitor=C1 supply=V1 rectifier=D1,D2,D3,D4"},
		{"behind a reservoir", "breakover-oscillator", "V1 l 0 SIN(0 325 50)\nD1 l p DZ\nC2 p 0 10u\nR1 p a 100k\nC1 a 0 100n\nX1 a 0 NE-2" + models,
			"X1: timing-resistor=R1 timing-capacitor=C1 supply=V1 rectifier=D1 reservoir=C2"},
		{"minus of a bridge not at ground", "breakover-oscillator", "V1 l 0 SIN(0 325 50)\nD1 l p DZ\nD2 0 p DZ\nD3 m l DZ\nD4 m 0 DZ\nR1 p a 100k\nC1 a m 100n\nX1 a m NE-2" + models,
			"X1: no capacitor from the breakover device to a rail; a rail behind rectifiers counts where node 0 is put there"},
		{"phase control", "breakover-oscillator", "R1 l a 100k\nC1 a 0 100n\nX1 a g DB3\nX2 l g 0 BT136-600\nV1 l 0 SIN(0 325 50)", "X1: it fires X2 from the line: phase control is not worked out"},
		{"nothing charges a diac", "breakover-oscillator", "C1 a 0 1u\nX1 a 0 DB3" + supply, "X1: nothing charges the capacitor"},
		{"zener-biased source", "ujt-oscillator", "D1 b vcc DZ\nR6 b 0 4.7k\nR5 vcc ee 10k\nQ1 e b ee QP\nC1 e 0 1u" + bases + models,
			"X1: timing-resistor=R5 timing-capacitor=C1 current-source=D1,R6,Q1 base-one=R3 base-two=R2 supply=V1"},
		{"mirror", "ujt-oscillator", "R6 b 0 100k\nQ1 e b vcc QP\nQ2 b b vcc QP\nC1 e 0 1u" + bases + models,
			"X1: timing-resistor=R6 timing-capacitor=C1 current-source=Q1,Q2 base-one=R3 base-two=R2 supply=V1"},
		{"field-effect source", "ujt-oscillator", "J1 vcc e s JN\nR5 s e 4.7k\nC1 e 0 1u" + bases + models,
			"X1: timing-resistor=R5 timing-capacitor=C1 current-source=J1 base-one=R3 base-two=R2 supply=V1"},
		{"three-terminal source", "ujt-oscillator", "X5 vcc r e LM334\nR5 r e 68\nC1 e 0 1u" + bases,
			"X1: timing-resistor=R5 timing-capacitor=C1 current-source=X5 base-one=R3 base-two=R2 supply=V1"},
		{"regulator diode", "ujt-oscillator", "X5 vcc e CR\nC1 e 0 1u" + bases + models, "X1: timing-capacitor=C1 current-source=X5 base-one=R3 base-two=R2 supply=V1"},
		{"reset transistor", "ujt-oscillator", "R1 vcc e 100k\nC1 e 0 1u\nQ9 e r 0 QN\nR9 rst r 10k\nVR rst 0 PULSE(0 5 0 1u 1u 1m 1)" + bases + models,
			"X1: timing-resistor=R1 timing-capacitor=C1 base-one=R3 base-two=R2 supply=V1"},
	} {
		s := recognise(t, c.text)[0]
		if got := show(s); got != c.want || string(s.Kind) != c.kind {
			t.Errorf("%s:\n got %s %s\nwant %s %s", c.name, s.Kind, got, c.kind, c.want)
		}
	}
}

// A transistor across the capacitor is worked out where dc sets its base, and named
// where a signal does.
func TestTransistorsThatHoldTheCapacitorDown(t *testing.T) {
	const rest = "\nR1 vcc e 100k\nC1 e 0 1u\nX1 e b1 b2 2N2646\nR2 vcc b2 330\nR3 b1 0 22\nV1 vcc 0 20\n.model QN NPN"
	held := recognise(t, "Q9 e r 0 QN\nR9 vcc r 10k"+rest)[0]
	if len(held.Clamps) != 1 || held.Beside != nil {
		t.Errorf("%+v", held)
	}
	free := recognise(t, "Q9 e r 0 QN\nR9 s r 10k\nVS s 0 PULSE(0 5 0 1u 1u 1m 1)"+rest)[0]
	if free.Clamps != nil || len(free.Beside) != 1 || !strings.Contains(free.Beside[0], "taken as off") {
		t.Errorf("%+v", free)
	}
}

const oscillator = "V1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 1u\nXQ1 e b1 b2 2N2646\nR2 vcc b2 330\nR3 b1 0 22\n"

// So does a field-effect transistor across it; what its gate does is not asked.
func TestFieldEffectTransistorThatHoldsTheCapacitorDown(t *testing.T) {
	s := recognise(t, "V1 vcc 0 20\nVP g 0 PULSE(0 5 0 1u 1u 1m 20m)\nR1 vcc e 100k\nC1 e 0 1u\nX1 e b1 b2 2N2646\nR2 vcc b2 330\n"+
		"R3 b1 0 22\nM1 e g 0 0 MN\n.model MN NMOS(vto=2)")[0]
	if len(s.Beside) != 1 || !strings.HasPrefix(s.Beside[0], "M1 can hold the capacitor down") {
		t.Errorf("beside: %q", s.Beside)
	}
}

func TestGates(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"direct", "XS1 a b1 0 C106D\nRL vcc a 100", "XS1: supply=V1 gate-shunt=R3 driver=XQ1 load=RL"},
		{"resistor", "R4 b1 g 47\nR5 g 0 1k\nXS1 a g 0 C106D\nRL vcc a 100", "XS1: supply=V1 gate-series=R4 gate-shunt=R5 driver=XQ1 load=RL"},
		{"split resistors", "R4 b1 x 22\nR6 x g 22\nR5 g y 500\nR7 y 0 500\nXS1 a g 0 C106D\nRL vcc a 100",
			"XS1: supply=V1 gate-series=R4,R6 gate-shunt=R5,R7 driver=XQ1 load=RL"},
		{"diode", "D1 b1 g DX\n.model DX d\nR5 g 0 1k\nXS1 a g 0 C106D\nRL vcc a 100", "XS1: supply=V1 gate-series=D1 gate-shunt=R5 driver=XQ1 load=RL"},
		{"coil with a freewheel diode", "R4 b1 g 47\nXS1 a g 0 C106D\nL1 vcc a 10m\nD1 a vcc DX\n.model DX d",
			"XS1: supply=V1 gate-series=R4 driver=XQ1 load=L1 freewheel=D1"},
		{"snubber", "R4 b1 g 47\nXS1 a g 0 C106D\nRL vcc a 100\nRS a s 47\nCS s 0 10n", "XS1: supply=V1 gate-series=R4 driver=XQ1 load=RL snubber=RS,CS"},
		{"line", "VL l 0 SIN(0 325 50)\nR4 b1 g 47\nXS1 a g 0 C106D\nRL l a 100", "XS1: supply=VL gate-series=R4 driver=XQ1 load=RL"},
		{"switch", "R4 b1 g 47\nXS1 a g 0 C106D\nS1 a vcc e 0 SW\n.model SW sw", "XS1: a switch stands in its anode circuit; switches are not followed"},
		{"no supply", "R4 b1 g 47\nXS1 a g 0 C106D\nRL 0 a 100", "XS1: its anode has no way to a supply above its cathode"},
	} {
		stages := recognise(t, oscillator+c.text)
		if got := show(stages[1]); got != c.want {
			t.Errorf("%s:\n got %s\nwant %s", c.name, got, c.want)
		}
		if stages[1].Gap == "" && (len(stages[0].Drives) != 1 || stages[1].DrivenBy != stages[0]) {
			t.Errorf("%s: the oscillator drives the gate", c.name)
		}
	}
}

func TestWhatIsNotFollowedIsNamed(t *testing.T) {
	s := recognise(t, oscillator+"R7 e t 1meg\nQ7 vcc t out QN\nR8 out 0 1k\nR9 b1 y 1k\nQ9 z y 0 QN\nR10 vcc z 1k\n.model QN npn")[0]
	want := []string{"Q9 hangs on base one; what it does there is not worked out"}
	if s.Gap != "" || !slices.Equal(s.Beside, want) || len(s.Taps) != 1 || s.Taps[0].Designator != "Q7" {
		t.Errorf("gap %q, beside %q, taps %v", s.Gap, s.Beside, s.Taps)
	}
	for text, want := range map[string]string{
		"Q7 z e out QN\nX5 z y blackbox\nR8 out 0 1k\n.model QN npn": "Q7 hangs on the charging network; the current it draws is not worked out",
		"X5 e y blackbox": "X5 hangs on the charging network; the current it draws is not worked out",
		"C5 b2 s 1n\nVS s 0 PULSE(0 5 0 1u 1u 1m 2m)": "C5 couples a signal into base two (synchronisation); what it does to the rate is not worked out",
		"R5 b2 s 4.7k\nVS s 0 SIN(0 5 50)":            "R5 leads a signal to base two (synchronisation); the stage is worked out without it",
		"Q7 b2 x 0 QN\nR8 x vcc 10k\n.model QN npn":   "Q7 hangs on base two; what it does there is not worked out",
		"J7 vcc e s JN\nR8 s 0 10k\n.model JN njf":    "",
		"C5 b2 0 1n": "",
	} {
		s := recognise(t, oscillator+text)[0]
		if s.Gap != "" || strings.Join(s.Beside, "|") != want {
			t.Errorf("%s:\n got %q %q\nwant %q", text, s.Gap, s.Beside, want)
		}
	}
	if s := recognise(t, oscillator+"R4 b1 g 47\nXS1 a g 0 C106D\nRL vcc a 100")[0]; s.Beside != nil {
		t.Errorf("nothing hangs on a plain stage: %q", s.Beside)
	}
}

// Where the usual order makes no working stage and one other does, the wiring
// decides; a declared order stands, and the note says what the wiring wants.
func TestTerminalOrderFromTheWiring(t *testing.T) {
	for _, c := range []struct {
		text     string
		wiring   string
		followed bool
		gap      bool
	}{
		{"R4 b1 g 47\nXS1 a g 0 C106D\nRL vcc a 100", "", false, false},
		{"R4 b1 g 47\nXS1 a 0 g C106D\nRL vcc a 100", "anode cathode gate", true, false},
		{"R4 b1 g 47\nXS1 0 g a C106D\nRL vcc a 100", "cathode gate anode", true, false},
		{"R4 b1 g 47\nXS1 g a 0 C106D\nRL vcc a 100", "gate anode cathode", true, false},
		{"R4 b1 g 47\nXS1 a 0 g C106D\nRL vcc a 100\n*> XS1 pins=a,g,k", "anode cathode gate", false, true},
	} {
		s := recognise(t, oscillator+c.text)[1]
		got, followed := "", false
		if s.Order != nil {
			got, followed = strings.Join(s.Order.Wiring, " "), s.Order.Followed
		}
		if got != c.wiring || followed != c.followed || (s.Gap != "") != c.gap {
			t.Errorf("%s: order %q, followed %v, gap %q", c.text, got, followed, s.Gap)
		}
	}
	for _, order := range [][3]string{{"e", "b1", "b2"}, {"b1", "e", "b2"}, {"b2", "b1", "e"}, {"b1", "b2", "e"}} {
		text := strings.Replace(oscillator, "XQ1 e b1 b2", "XQ1 "+strings.Join(order[:], " "), 1)
		s := recognise(t, text)[0]
		if s.Gap != "" || (s.Order != nil) == slices.Equal(order[:], []string{"e", "b1", "b2"}) {
			t.Errorf("%v: gap %q, note %v", order, s.Gap, s.Order)
		}
	}
}
