package circuit_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

func build(text string) (*circuit.Circuit, []source.Problem) {
	return circuit.Build(syntax.Parse(source.New("t.cir", "title\n"+text+"\n"), true), circuit.Options{})
}

// sound builds a deck that must have no problems.
func sound(t *testing.T, text string) *circuit.Circuit {
	t.Helper()
	c, problems := build(text)
	for _, p := range problems {
		t.Fatalf("%s\nline %d: %s", text, p.Span.Position().Line, p.Message)
	}
	return c
}

func find(t *testing.T, c *circuit.Circuit, name string) *circuit.Element {
	t.Helper()
	for _, e := range c.Elements {
		if e.Designator == name {
			return e
		}
	}
	t.Fatalf("there is no %s", name)
	return nil
}

// show writes an element as "X1.R1 r vcc,X1.n 1000".
func show(c *circuit.Circuit, e *circuit.Element) string {
	var nodes []string
	for _, n := range e.Nodes {
		nodes = append(nodes, c.Nodes[n].Name)
	}
	return fmt.Sprintf("%s %s %s %.6g", e.Designator, e.Kind, strings.Join(nodes, ","), e.Value.Nominal)
}

func TestElements(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"R1 a gnd 4.7k", "R1 r a,0 4700"},
		{"R1 a GND r=10", "R1 r a,0 10"},
		{"R1 a b 100 RMOD", "R1 r a,b 100"},
		{".model RMOD r\nR1 a b RMOD 100", "R1 r a,b 100"},
		{".param x=2k\nR1 a b x", "R1 r a,b 2000"},
		{".param A='B*2'\n.param B=3\nR1 a b {A+1}", "R1 r a,b 7"},
		{"R1 a b {if(2>1, max(3,4), 9) + 2^3 - -1}", "R1 r a,b 13"},
		{"C1 a b 10n ic=0", "C1 c a,b 1e-08"},
		{"V1 a b DC 12 AC 1", "V1 v a,b 12"},
		{"V1 a b 12V", "V1 v a,b 12"},
		{"V1 l n SIN(0 325 50)", "V1 v l,n 325"},
		{"V1 l n AC 230 50", "V1 v l,n 230"},
		{"I1 a b 1m", "I1 i a,b 0.001"},
		{"D1 a k DX\n.model DX d(bv=12)", "D1 d a,k 0"},
		{"Q1 c b e QM .5\n.model QM pnp", "Q1 pnp c,b,e 0"},
		{"Q1 e b1 b2 2N2646", "Q1 ujt e,b1,b2 0"},
		{"X1 a b c / 2N4871", "X1 ujt a,b,c 0"},
		{"T1 a b 0 0 z0=50 td=1n", "T1 t a,b,0,0 0"},
		{"X1 a b WHATSIT", "X1 unknown a,b 0"},
		{"E1 a 0 b 0 10", "E1 controlled a,0,b,0 0"},
		{"E1 a 0 VALUE={V(b)*2}", "E1 controlled a,0 0"},
		{"S1 a b c 0 SM\n.model SM sw", "S1 s a,b,c,0 0"},
	} {
		b := sound(t, c.text)
		if got := show(b, b.Elements[0]); got != c.want {
			t.Errorf("%s: got %s, want %s", c.text, got, c.want)
		}
	}
}

func TestSubcircuits(t *testing.T) {
	c := sound(t, `
.param top=3k
.global rail
.subckt inner p gnd R=1k
R1 p m {R}
R2 m gnd {R*2}
R3 rail p top
.ends
.subckt outer a PARAMS: Q=5
.subckt private x
R9 x 0 {Q}
.ends
X1 a 0 inner R={Q*100}
X2 a private
.ends
XA in outer
XB in outer Q=7`)
	var got []string
	for _, e := range c.Elements {
		got = append(got, show(c, e))
	}
	want := []string{"XA.X1.R1 r in,XA.X1.m 500", "XA.X1.R2 r XA.X1.m,0 1000", "XA.X1.R3 r rail,in 3000", "XA.X2.R9 r in,0 5",
		"XB.X1.R1 r in,XB.X1.m 700", "XB.X1.R2 r XB.X1.m,0 1400", "XB.X1.R3 r rail,in 3000", "XB.X2.R9 r in,0 7"}
	if strings.Join(got, "\n") != strings.Join(want, "\n") {
		t.Errorf("got\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
}

func TestConditionsAndSections(t *testing.T) {
	c := sound(t, ".param on=1\n.if(on==1)\nR1 a b 1k\n.else\nR1 a b 2k\n.endif\n.lib tt\nR2 a b 1\n.endl\n.if(on==2)\n.elseif(on==1)\nR3 a b 3\n.endif")
	if len(c.Elements) != 2 || c.Elements[0].Value.Nominal != 1000 || c.Elements[1].Designator != "R3" {
		t.Errorf("got %d elements", len(c.Elements))
	}
}

func TestProblems(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"R1 a b nan", `2: the value of R1: "nan" is not a number`},
		{"R1 a b 0,9", `2: the value of R1: "0,9" has a decimal comma; write a point`},
		{"R1 a b -5", "2: R1 cannot have the value -5"},
		{"C1 a b 0", "2: C1 cannot have the value 0"},
		{"R1 a b", "2: R1 has no value"},
		{"R1 a", "2: R1 needs two nodes and a value"},
		{"S1 a b c SM", "2: S1 needs 4 nodes and a model"},
		{"Q1 a b", "2: Q1 needs 3 nodes and a model"},
		{"R1 a b {x}", "2: the value of R1: the parameter x is not defined"},
		{".param a={b} b={a}\nR1 a b {a}", "3: the value of R1: the parameter a depends on itself"},
		{"R1 a b {1/0}", "2: the value of R1: division by zero"},
		{".subckt s a\nR1 a 0 1\n.ends\nX1 a b s", "5: X1 has 2 nodes, but the subcircuit s has 1 pins"},
		{".subckt s a\nX1 a s\n.ends\nX1 a s", "3: the subcircuit s contains itself"},
		{".ends", "2: this .ends closes nothing"},
		{".subckt s a\nR1 a 0 1", "2: the subcircuit s is never closed with .ends"},
		{".else", "2: this .else belongs to no .if"},
		{".wombat 3", "2: .wombat is no dot card that is known here; it is passed over"},
		{"XQ1 a b 2N2646", "2: 2N2646 is a unijunction transistor with 3 terminals, but XQ1 has 2 nodes"},
		{"R1 a b 1k\n*> R2 tol=1%", "3: no element is called R2"},
		{"R1 a b 1k\n*> R1 volume=1", "3: volume is no key of an intent line"},
		{"R1 a b 1k\n*> R1 kind=film", "3: kind does not fit R1, which is a resistor"},
		{"R1 a b 1k\n*> R1 tol=200%..1%", "3: tol: the range 200%..1% runs backwards"},
		{"C1 a b 1n\n*> C1 kind=wood", "3: kind: kind is one of film, c0g, x7r, y5v, electrolytic, tantalum, x2, y2"},
		{"R1 a b 1k\n*> all Q tol=1%", "3: all takes one of the letters R, C, L, V, I"},
		{"R1 a b 1k\n*> board moon=full", "3: moon: a board line takes ambient, mains and line"},
		{"XQ1 a b c 2N2646\n*> XQ1 pins=e,b1", "3: pins: pins= names 2 terminals, but XQ1 has 3 nodes"},
		{"R1 a b 1k\n.include x.inc", "3: x.inc is not read: nothing can be included here"},
	} {
		_, problems := build(c.text)
		if len(problems) != 1 {
			t.Errorf("%s: %d problems: %v", c.text, len(problems), problems)
			continue
		}
		if got := fmt.Sprintf("%d: %s", problems[0].Span.Position().Line, problems[0].Message); got != c.want {
			t.Errorf("%s\n got %s\nwant %s", c.text, got, c.want)
		}
	}
}

func TestABombStopsEarly(t *testing.T) {
	var b strings.Builder
	b.WriteString(".subckt s0 a\nR1 a 0 1k\n.ends\n")
	for i := 1; i < 12; i++ {
		fmt.Fprintf(&b, ".subckt s%d a\n", i)
		for k := range 10 {
			fmt.Fprintf(&b, "X%d a s%d\n", k, i-1)
		}
		b.WriteString(".ends\n")
	}
	b.WriteString("X1 a s11\n")
	deck := syntax.Parse(source.New("t.cir", "title\n"+b.String()), true)
	c, problems := circuit.Build(deck, circuit.Options{Limits: circuit.Limits{Elements: 1000}})
	if len(c.Elements) > 1000 || len(problems) != 1 || !strings.Contains(problems[0].Message, "more than 1000") {
		t.Errorf("%d elements, %v", len(c.Elements), problems)
	}
}

func TestSpreads(t *testing.T) {
	c := sound(t, `
R1 a b 1k
R2 a b 1k
R3 a b 50k
R4 a b 50k
C1 a b 10u
C2 a b 10n
V1 a 0 12
V2 l 0 SIN(0 325 50)
.subckt s p
R1 p 0 1k
R2 p 0 1k
*> all R tol=2%
*> R2 tol=3%
.ends
X1 a s
*> all R tol=10%
*> R1 tol=1% tempco=100
*> R3 travel=1k..100k
*> R4 travel=1k..100k tol=20%
*> C1 kind=electrolytic
*> V1 range=9..15
*> X1.R1 power=0.25
*> board mains=207..253`)
	for name, want := range map[string][3]float64{
		"R1": {990, 1000, 1010}, "R2": {900, 1000, 1100}, "R3": {1e3, 50e3, 100e3}, "R4": {800, 50e3, 120e3},
		"C1": {8e-6, 10e-6, 12e-6}, "C2": {9e-9, 10e-9, 11e-9}, "V1": {9, 12, 15},
		"V2": {207 * math.Sqrt2, 325, 253 * math.Sqrt2}, "X1.R1": {980, 1000, 1020}, "X1.R2": {970, 1000, 1030},
	} {
		v := find(t, c, name).Value
		for i, got := range []float64{v.Low, v.Nominal, v.High} {
			if math.Abs(got-want[i]) > 1e-9*want[i] {
				t.Errorf("%s: got %+v, want %v", name, v, want)
				break
			}
		}
	}
	if r := find(t, c, "R1"); math.Abs(*r.Intent.Tempco-100e-6) > 1e-15 || r.Basis != circuit.BasisDeclared {
		t.Error("tempco is in ppm/K, and a declared tolerance is declared")
	}
	if find(t, c, "X1.R1").Intent.Power == nil {
		t.Error("a path names an element inside a subcircuit")
	}
}

func TestTerminalOrders(t *testing.T) {
	const pair = "Q1 x g 3 N\nQ2 g x 1 P\n.model N npn\n.model P pnp\n.ends\n"
	for _, c := range []struct{ text, roles, by string }{
		{"XS1 a g k C106D", "anode gate cathode", "library order"},
		{"XS1 a k g C106D\n*> XS1 pins=a,k,g", "anode cathode gate", "pins="},
		{"XS1 a k g C106D\n*> XS1 pins=anode,cathode,gate", "anode cathode gate", "pins="},
		{".subckt C106D A K G\nR1 A K 1\n.ends\nXS1 a k g C106D", "anode cathode gate", "header"},
		{"* TERMINALS: K G A\n.subckt C106D 1 2 3\nR1 1 2 1\n.ends\nXS1 a k g C106D", "cathode gate anode", "comment"},
		{".subckt HOUSE 1 g 3\n" + pair + "XS1 a gt k HOUSE", "anode gate cathode", "insides"},
		{".subckt HOUSE 3 1 g\n" + pair + "XS1 k a gt HOUSE", "cathode anode gate", "insides"},
		{".subckt BT136 A G K\nR1 A K 1\n.ends\n.model BT136 triac(igt=35m)\nXT1 l g 0 BT136", "mt2 gate mt1", "header"},
		{"XQ1 x y z 2N2646\n*> XQ1 pins=b2,e,b1", "base2 emitter base1", "pins="},
		{"Q7 x y z 2N2646", "emitter base1 base2", "library order"},
	} {
		b := sound(t, c.text)
		if len(b.Elements) != 1 {
			t.Errorf("%s: %d elements", c.text, len(b.Elements))
			continue
		}
		e := b.Elements[0]
		if got := strings.Join(e.Roles, " "); got != c.roles || string(e.Order) != c.by {
			t.Errorf("%s: got %s by %s, want %s by %s", c.text, got, e.Order, c.roles, c.by)
		}
	}
}

func TestWithLeavesTheCircuitAlone(t *testing.T) {
	c := sound(t, "R1 a b 1k\nR2 b 0 2k\n*> R1 tol=10%")
	d := c.With(map[string]float64{"r1": 500})
	if find(t, c, "R1").Value.Nominal != 1000 || find(t, d, "R1").Value.High != 550 {
		t.Error("the copy has the new value with its spread, the original the old one")
	}
	for i := range d.Nodes {
		for _, p := range d.Nodes[i].Pins {
			if d.Elements[p.Element.Index] != p.Element {
				t.Error("a pin of the copy belongs to an element of the original")
			}
		}
	}
}

func TestNeighbourhood(t *testing.T) {
	c := sound(t, "V1 a 0 12\nV2 b a 3\nR0 b c 0\nR1 c d 1k\nC1 d 0 1n\nV3 p q 5\nR9 p q 1k")
	w := circuit.NewWiring(c)
	node := func(name string) circuit.NodeID {
		for i := range c.Nodes {
			if c.Nodes[i].Name == name {
				return circuit.NodeID(i)
			}
		}
		t.Fatal(name)
		return 0
	}
	if v, ok := w.Potential(node("c")); !ok || v != 15 {
		t.Errorf("potential of c is %g, %v", v, ok)
	}
	if w.IsFixed(node("d")) || !w.IsFixed(node("p")) || w.Reference(node("p")) != w.Net(node("q")) {
		t.Error("d floats; p is fixed against q, the minus of its own source")
	}
	if len(w.Between(node("d"), circuit.Ground)) != 1 || len(w.Sources(node("c"))) != 2 {
		t.Error("one capacitor between d and ground, two sources behind c")
	}
}

func BenchmarkBuild(b *testing.B) {
	for _, n := range []int{100, 1_000, 10_000, 100_000, 1_000_000} {
		b.Run(fmt.Sprint(n), func(b *testing.B) {
			var text strings.Builder
			text.WriteString("title\n")
			for i := range n {
				fmt.Fprintf(&text, "R%d n%d n%d 1k\n", i, i, i+1)
			}
			deck := syntax.Parse(source.New("t.cir", text.String()), true)
			for b.Loop() {
				circuit.Build(deck, circuit.Options{})
			}
		})
	}
}
