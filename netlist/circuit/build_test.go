package circuit_test

import (
	"fmt"
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

// told returns the problems of a deck as "line: message".
func told(text string) []string {
	_, problems := build(text)
	list := make([]string, len(problems))
	for i, p := range problems {
		list[i] = fmt.Sprintf("%d: %s", p.Span.Position().Line, p.Message)
	}
	return list
}

// all shows every element of a deck without problems.
func all(t *testing.T, text string) string {
	t.Helper()
	c := sound(t, text)
	list := make([]string, len(c.Elements))
	for i, e := range c.Elements {
		list[i] = show(c, e)
	}
	return strings.Join(list, "; ")
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

func TestManyNodesOnOneCard(t *testing.T) {
	var b strings.Builder
	for i := range 200 {
		fmt.Fprintf(&b, " n%d N%d", i, i)
	}
	c := sound(t, "X1"+b.String()+" WHATSIT")
	if e := c.Elements[0]; len(e.Nodes) != 400 || len(c.Nodes) != 201 || e.Nodes[0] != e.Nodes[1] {
		t.Errorf("%d pins on %d nodes", len(e.Nodes), len(c.Nodes))
	}
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
		{"R1 a b 0", "R1 r a,b 0"},
		{"R1 a b value={2*3}", "R1 r a,b 6"},
		{"R1 a b R = 5k", "R1 r a,b 5000"},
		{".param R47=9\nR1 a b R47", "R1 r a,b 9"},
		{"R1 a b R47", "R1 r a,b 0.47"},
		{"R1 a b RMOD\n.model RMOD r(rsh=1)", "R1 r a,b 0"},
		{"r 1 2 1k", "r r 1,2 1000"},
		{"C1 a b c=10n", "C1 c a,b 1e-08"},
		{"C1 a b 1T", "C1 jig a,b 1e+12"},
		{"L1 a b 10u ic=0", "L1 l a,b 1e-05"},
		{"VCC VCC gnd VCC\n.param VCC=9", "VCC v VCC,0 9"},
		{"V1 +24V GND DC 24", "V1 v +24V,0 24"},
		{"V1 a 0 dc=12", "V1 v a,0 12"},
		{"V1 a 0 12 AC 1 90", "V1 v a,0 12"},
		{"V1 a 0 AC 1 SIN(0 325 50)", "V1 v a,0 325"},
		{"V1 a 0 DC 3 SIN 0 12 50", "V1 v a,0 12"},
		{"V1 a 0 PULSE 0 5 1n 1n 1n '5n-1n' '9n'", "V1 v a,0 0"},
		{"V1 a 0 PULSE(0 5 1n 1n 1n 4n 9n)", "V1 v a,0 0"},
		{"V1 a 0 0Vdc", "V1 v a,0 0"},
		{"D1 a k DM m=0.5\n.model DM d", "D1 d a,k 0"},
		{"D1 a k DM 2 off\n.model DM d", "D1 d a,k 0"},
		{"D1 a k DUNHEARD", "D1 d a,k 0"},
		{"D1 a k DB3", "D1 diac a,k 0"},
		{"Q1 c b e 2N3904", "Q1 unknown c,b,e 0"},
		{"Q1 c b e 2N3904 2", "Q1 unknown c,b,e 0"},
		{"Q1 c b e s QM\n.model QM npn", "Q1 npn c,b,e,s 0"},
		{"Q1 5 6 7 QM\n.model QM npn", "Q1 npn 5,6,7 0"},
		{"Q1 +24V b e PART\n.model PART PNP(BF=50)", "Q1 pnp +24V,b,e 0"},
		{"J1 d g s JM\n.model JM njf", "J1 njf d,g,s 0"},
		{"M1 d g s b MM\n.model MM nmos", "M1 nmos d,g,s,b 0"},
		{"M1 d g s MM l=1u w=2u\n.model MM pmos", "M1 pmos d,g,s 0"},
		{"M1 d g s MP\n.model MP vdmos pchan", "M1 pmos d,g,s 0"},
		{"M1 d g s MP\n.MODEL MP VDMOS(nchan vto=3)", "M1 nmos d,g,s 0"},
		{"R1 a b 1k m=2", "R1 r a,b 500"},
		{"C1 a b 1u m=2", "C1 c a,b 2e-06"},
		{"X1 a b off WHATSIT", "X1 unknown a,b,off 0"},
		{"X1 / b / WHATSIT", "X1 unknown /,b 0"},
		{"U1 in adj out LM334", "U1 isource in,adj,out 0"},
		{"T1 mt2 g mt1 BT136", "T1 triac mt2,g,mt1 0"},
		{"T1 a b c NOSUCH", "T1 unknown a,b,c 0"},
		{"X1 a b MYD\n.model MYD d(bv=5)", "X1 d a,b 0"},
		{"X1 c b e MYQ\n.model MYQ npn", "X1 npn c,b,e 0"},
		{"W1 a b V1 WM\n.model WM csw", "W1 s a,b 0"},
		{"F1 a b V1 2", "F1 controlled a,b 0"},
		{"G1 a 0 POLY(1) b 0 0 1", "G1 controlled a,0 0"},
		{"BX n n gnd", "BX controlled n,n 0"},
		{"B1 a 0 V=V(b)*2", "B1 controlled a,0 0"},
		{"E\u00a7fix a 0 b 0 1", "E\u00a7fix controlled a,0,b,0 0"},
		{"R1 Net-_U3A--_ /block/sub/_RST 1k", "R1 r Net-_U3A--_,/block/sub/_RST 1000"},
	} {
		b := sound(t, c.text)
		if got := show(b, b.Elements[0]); got != c.want {
			t.Errorf("%s: got %s, want %s", c.text, got, c.want)
		}
	}
}
