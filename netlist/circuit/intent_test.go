package circuit_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
)

// intentOf declares one thing of one element and returns its intent.
func intentOf(t *testing.T, card, line string) *circuit.Intent {
	t.Helper()
	return sound(t, card+"\n*> "+line).Elements[0].Intent
}

func TestEveryKey(t *testing.T) {
	r, l, c, v := "R1 a b 1k", "L1 a b 1m", "C1 a b 1u", "V1 a 0 12"
	q, s := "XQ1 e x y 2N2646", "XS1 a g k C106D"
	value := func(p *float64) float64 { return *p }
	ends := func(s *quantity.Spread) float64 { return s.Low*1000 + s.High }
	for _, x := range []struct {
		card, line string
		want       float64
		got        func(i *circuit.Intent) float64
	}{
		{r, "R1 tol=1%", 0.01, func(i *circuit.Intent) float64 { return i.Tol.High }},
		{r, "R1 tol=0.01", -0.01, func(i *circuit.Intent) float64 { return i.Tol.Low }},
		{c, "C1 tol=-20%..80%", -0.2, func(i *circuit.Intent) float64 { return i.Tol.Low }},
		{c, "C1 tol=-20%..+80%", 0.8, func(i *circuit.Intent) float64 { return i.Tol.High }},
		{r, "R1 power=0.25", 0.25, func(i *circuit.Intent) float64 { return value(i.Power) }},
		{r, "R1 power=250mW", 0.25, func(i *circuit.Intent) float64 { return value(i.Power) }},
		{r, "R1 volts=1.6kV", 1600, func(i *circuit.Intent) float64 { return value(i.Volts) }},
		{r, "R1 tempco=100", 100e-6, func(i *circuit.Intent) float64 { return value(i.Tempco) }},
		{r, "R1 tempco=-50ppm", -50e-6, func(i *circuit.Intent) float64 { return value(i.Tempco) }},
		{r, "R1 tempco=50ppm/K", 50e-6, func(i *circuit.Intent) float64 { return value(i.Tempco) }},
		{c, "C1 tempco=30ppm/C", 30e-6, func(i *circuit.Intent) float64 { return value(i.Tempco) }},
		{r, "R1 travel=0..100k", 100e3, func(i *circuit.Intent) float64 { return i.Travel.High }},
		{r, "R1 travel=1k..1MEG", 2e6, func(i *circuit.Intent) float64 { return ends(i.Travel) }},
		{l, "L1 vt=300u", 300e-6, func(i *circuit.Intent) float64 { return value(i.VoltSeconds) }},
		{l, "L1 vt=300uVs", 300e-6, func(i *circuit.Intent) float64 { return value(i.VoltSeconds) }},
		{c, "C1 volts=63V", 63, func(i *circuit.Intent) float64 { return value(i.Volts) }},
		{c, "C1 leak=0.1uA", 0.1e-6, func(i *circuit.Intent) float64 { return value(i.Leak) }},
		{v, "V1 range=9..15", 9015, func(i *circuit.Intent) float64 { return ends(i.Range) }},
		{v, "V1 range=-15..-9", -15009, func(i *circuit.Intent) float64 { return ends(i.Range) }},
		{v, "V1 range=12", 12012, func(i *circuit.Intent) float64 { return ends(i.Range) }},
		{q, "XQ1 frequency=90..110", 90110, func(i *circuit.Intent) float64 { return ends(i.Frequency) }},
		{q, "XQ1 frequency=1kHz..2kHz", 1002e3, func(i *circuit.Intent) float64 { return ends(i.Frequency) }},
		{q, "XQ1 period=9..11s", 9011, func(i *circuit.Intent) float64 { return ends(i.Period) }},
		{s, "XS1 amps=3", 3, func(i *circuit.Intent) float64 { return value(i.Amps) }},
		{s, "XS1 heatsink=5K/W", 5, func(i *circuit.Intent) float64 { return value(i.Heatsink) }},
		{s, "xs1 HEATSINK=5", 5, func(i *circuit.Intent) float64 { return value(i.Heatsink) }},
		{".param p=0.5\nR1 a b 1k", "R1 power=p", 0.5, func(i *circuit.Intent) float64 { return value(i.Power) }},
	} {
		if got := x.got(intentOf(t, x.card, x.line)); !(math.Abs(got-x.want) <= 1e-9*math.Abs(x.want)) {
			t.Errorf("%s: got %g, want %g", x.line, got, x.want)
		}
	}
	if i := intentOf(t, c, "C1 kind=X7R"); i.Kind != "x7r" {
		t.Errorf("kind is %q", i.Kind)
	}
	if i := intentOf(t, s, "XS1 load=motor latch=ok"); i.Load != "motor" || !i.LatchOK ||
		i.At["latch"].IsZero() {
		t.Errorf("got %+v", i)
	}
}

func TestBadIntent(t *testing.T) {
	const r, c, v, q, s = "R1 a b 1k\n*> ", "C1 a b 1n\n*> ", "V1 a 0 9\n*> ", "XQ1 e x y 2N2646\n*> ",
		"XS1 a g k C106D\n*> "
	for _, x := range []struct{ text, want string }{
		{r + "R1 tol=5", "tol: a tolerance of 5 makes no sense; per cent are written with their sign, as 5%"},
		{r + "R1 tol=-5%", "tol: a tolerance of -5% makes no sense"},
		{r + "R1 tol=-100%..0", "tol: a tolerance of -100%..0 makes no sense"},
		{r + "R1 power=0", "power: power has to be above zero"},
		{r + "R1 power=-1", "power: power has to be above zero"},
		{r + "R1 power=1..2", "power: power takes one value, not a range"},
		{r + "R1 power=5%", "power: power is no figure in per cent"},
		{r + "R1 power=much", `power: "much" is not a number`},
		{r + "R1 volts=nan", `volts: "nan" is not a number`},
		{r + "R1 volts=0,5", `volts: "0,5" has a decimal comma; write a point`},
		{r + "R1 tempco=1meg", "tempco: a coefficient of 1meg ppm/K makes no sense"},
		{r + "R1 tempco=10..20", "tempco: tempco takes one value, not a range"},
		{r + "R1 travel=100k", "travel: travel takes a range LOW..HIGH, not the single value 100k"},
		{r + "R1 travel=100k..1k", "travel: the range 100k..1k runs backwards"},
		{r + "R1 travel=-1..1k", "travel: a travel starts at zero or above"},
		{r + "R1 travel=0..0", "travel: a travel ends above zero"},
		{r + "R1 leak=1u", "leak does not fit R1, which is a resistor"},
		{r + "R1 frequency=1..2", "frequency does not fit R1, which is a resistor"},
		{r + "R1 load=lamp", "load does not fit R1, which is a resistor"},
		{r + "R1 part=2N2646", "part: 2N2646 is a unijunction transistor, but R1 is a resistor"},
		{r + "R1 part=ZZ9", "part: nothing is known of the part ZZ9"},
		{r + "R1 pins=a,k", "pins: the terminals of R1, which is a resistor, have no order to declare"},
		{r + "all R part=X", "part does not fit all R, which is a resistor"},
		{r + "all R pins=1,2", "pins does not fit all R, which is a resistor"},
		{r + "all R kind=film", "kind does not fit all R, which is a resistor"},
		{r + "all RC tol=1%", "all takes one of the letters R, C, L, V, I"},
		{r + "board ambient=50..0", "ambient: the range 50..0 runs backwards"},
		{r + "board ambient=0..900", "ambient: an ambient of 0..900 deg C makes no sense"},
		{r + "board mains=0..230", "mains: a mains of 0..230 V makes no sense"},
		{r + "board line=55", "line: line is 50 or 60"},
		{r + "board line=50..60", "line: line is 50 or 60"},
		{r + "board mains=10%", "mains: mains is no figure in per cent"},
		{c + "C1 power=1", "power does not fit C1, which is a capacitor"},
		{c + "C1 kind=film,x7r", "kind: kind is one of film, c0g, x7r, y5v, electrolytic, tantalum, x2, y2"},
		{v + "V1 range=15..9", "range: the range 15..9 runs backwards"},
		{v + "V1 amps=3", "amps does not fit V1, which is a voltage source"},
		{q + "XQ1 frequency=100", "frequency: frequency takes a range LOW..HIGH, not the single value 100"},
		{q + "XQ1 period=0..1", "period: period has to be above zero"},
		{q + "XQ1 period=1min..2min", "period: a period is written in seconds"},
		{q + "XQ1 tol=1%", "tol does not fit XQ1, which is a unijunction transistor"},
		{q + "XQ1 pins=a,g,k",
			"pins: pins= of a unijunction transistor names emitter, base1, base2 once each, " +
				"in the order of the nodes"},
		{q + "XQ1 pins=e,b1,b1",
			"pins: pins= of a unijunction transistor names emitter, base1, base2 once each, " +
				"in the order of the nodes"},
		{s + "XS1 load=heavy", "load: load is one of resistive, inductive, lamp, motor"},
		{s + "XS1 latch=no", "latch: latch is one of ok"},
		{"XA a b WHAT\n*> XA pins=e,b9", "pins: e,b9 are no terminals of one part"},
		{".subckt s a\nR1 a 0 1\n.ends\nX1 n s\n*> X1 tol=1%",
			"X1 is a subcircuit; a line names a part inside it, as X1.R1"},
		{".subckt s a\nR1 a 0 1\n.ends\nX1 n s\n*> X1.R2 tol=1%", "no element is called X1.R2"},
		{".subckt s a\nR1 a 0 1\n*> R2 tol=1%\n.ends\nX1 n s\nX2 n s", "no element is called X1.R2"},
		{".subckt s a\nR1 a 0 1\n*> R1 tol=x\n.ends\nX1 n s\nX2 n s", `tol: "x" is not a number`},
		{".subckt s a\nR1 a 0 1\n*> all R tol=x\n.ends\nX1 n s\nX2 n s", `tol: "x" is not a number`},
		{".subckt s a\nR1 a 0 1\n*> board ambient=0..50\n.ends\nX1 n s\nX2 n s",
			"board lines belong to the top level"},
	} {
		list := told(x.text)
		if len(list) != 1 {
			t.Errorf("%s: %d problems: %q", x.text, len(list), list)
			continue
		}
		if _, got, _ := strings.Cut(list[0], ": "); got != x.want {
			t.Errorf("%s\n got %s\nwant %s", x.text, got, x.want)
		}
	}
}

func TestWhoseDeclarationCounts(t *testing.T) {
	c := sound(t, `
R1 a b 1k
R2 a b 1k
.subckt inner p
R1 p 0 1k
R2 p 0 1k
*> R2 tol=4%
.ends
.subckt outer p
R1 p 0 1k
R2 p 0 1k
X1 p inner
*> all R tol=2% power=1
*> X1.R1 tol=3%
.ends
X1 a outer
X2 a outer
X3 a inner
*> all R tol=10% volts=100
*> R1 tol=1%
*> X2.X1.R1 tol=6%
*> X2.R1 tol=7%`)
	for name, want := range map[string]float64{"R1": 1, "R2": 10, "X1.R1": 2, "X1.R2": 2,
		"X1.X1.R1": 3, "X1.X1.R2": 4,
		"X2.X1.R1": 6, "X2.X1.R2": 4, "X2.R1": 7, "X2.R2": 2, "X3.R1": 10, "X3.R2": 4} {
		if got := find(t, c, name).Intent.Tol.High * 100; !(math.Abs(got-want) <= 1e-9) {
			t.Errorf("%s has %g %%, want %g", name, got, want)
		}
	}
	x := find(t, c, "X1.X1.R1").Intent
	if x.Power == nil || x.Volts == nil || find(t, c, "R1").Intent.Power != nil {
		t.Error("lines for one subject add up, and what a subcircuit says stays in it")
	}
	if len(c.Resets) != 0 {
		t.Errorf("nothing is given twice in one place: %v", c.Resets)
	}
}

func TestResets(t *testing.T) {
	c := sound(t, "R1 a b 1k\n*> R1 tol=1% tol=2%\n*> R1 tol=3%\n*> all C volts=1\n*> all C volts=2\n"+
		"*> board line=50\n*> board line=60\n.subckt s a\nR1 a 0 1\n*> R1 tol=1%\n*> R1 tol=2%\n.ends\n"+
		"X1 a s\nX2 a s\n"+
		"XQ1 a b c 2N2646\n*> XQ1 part=2N2646\n*> XQ1 part=2N2647")
	var got []string
	for _, r := range c.Resets {
		got = append(got, fmt.Sprintf("%d %s %s", r.At.Position().Line, r.Subject, r.Key))
	}
	want := "8 board line; 6 all C volts; 12 X1.R1 tol; 3 R1 tol; 4 R1 tol; 18 XQ1 part"
	if strings.Join(got, "; ") != want {
		t.Errorf("got %s\nwant %s", strings.Join(got, "; "), want)
	}
	if find(t, c, "R1").Intent.Tol.High != 0.03 || c.Board.Line != 60 || find(t, c, "XQ1").PartName != "2N2647" {
		t.Error("the last one counts")
	}
}

func TestWaivers(t *testing.T) {
	c := sound(t, "R1 a b 1k\n*> waive Resistor-Power R1 : it is a fuse\n.subckt s a\nR1 a 0 1\n"+
		"*> waive x R1\n.ends\nX1 a s\nX2 a s")
	var got []string
	for _, w := range c.Waivers {
		got = append(got, strings.TrimSpace(w.Rule+" "+w.Designator+" "+w.Reason))
	}
	if want := "x X1.R1; x X2.R1; resistor-power R1 it is a fuse"; strings.Join(got, "; ") != want {
		t.Errorf("got %s\nwant %s", strings.Join(got, "; "), want)
	}
}
