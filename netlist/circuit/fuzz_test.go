package circuit_test

import (
	"math"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// Whatever the text, a circuit comes out that hangs together.
func FuzzBuild(f *testing.F) {
	for _, seed := range []string{
		"V1 a 0 SIN(0 325 50)\nR1 a b 4k7\nC1 b 0 1u\n*> board mains=207..253 ambient=0..50\n" +
			"*> R1 travel=1k..10k tol=20%",
		".subckt s a b R=1k\n.if(R>1)\nR1 a b {R}\n.else\nC1 a b 1n\n.endif\n*> R1 tol=1%\n.ends\n" +
			"X1 a 0 s R={2*p}\n.param p=3",
		"* TERMINALS: K G A\n.subckt C106D 1 2 3\nQ1 x g 3 N\nQ2 g x 1 P\n.model N npn\n.model P pnp\n.ends\n" +
			"XS1 a g k C106D",
		"XQ1 e b1 b2 2N2646\n*> XQ1 pins=b2,e,b1 frequency=1..2 part=2N2647\n*> waive x XQ1 : y",
		"K1 L1 L2 0.9\nL1 a 0 1m\nL2 b 0 1m\nQ1 c b e s QM 2\n.model QM npn\nT1 a b c d z0=50\n" +
			"E1 a 0 POLY(1) b 0 1",
		".global v\n.subckt a x\n.subckt b y\nR1 y v 1\n.ends\nX1 x b\n.ends\nX1 n a\nR2 X1.X1.m 0 1\n" +
			"*> all R tol=1%\n*> X1.X1.R1 tol=2%",
		".lib tt\n.lib x tt\n.endl\n.include x\n.model M ujt(eta={q})\n.param q={q}",
	} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		file := source.New("t.cir", "title\n"+text)
		opts := circuit.Options{Limits: circuit.Limits{Elements: 300, Depth: 5, Includes: 10},
			Includes: &folder{texts: map[string]string{"x": text}}}
		c, problems := circuit.Build(syntax.Parse(file, true), opts)
		for _, p := range problems {
			if at := p.Span; at.File == nil || at.Start < 0 || at.Start > at.End || int(at.End) > len(at.File.Text) {
				t.Errorf("%q has no place: %v", p.Message, at)
			}
		}
		wired(t, c)
		for _, e := range c.Elements {
			hangsTogether(t, e)
		}
		if len(c.Elements) > 0 {
			name := c.Elements[0].Designator
			wired(t, c.With(map[string]float64{name: 5}))
		}
	})
}

func hangsTogether(t *testing.T, e *circuit.Element) {
	t.Helper()
	v := e.Value
	switch {
	case e.Intent == nil:
		t.Errorf("%s has no intent", e.Designator)
	case len(e.Roles) > len(e.Nodes):
		t.Errorf("%s has %d nodes and %d roles", e.Designator, len(e.Nodes), len(e.Roles))
	case !(v.Low <= v.Nominal && v.Nominal <= v.High), math.IsInf(v.High, 0), math.IsInf(v.Low, 0):
		t.Errorf("%s has the spread %+v", e.Designator, v)
	case e.Kind == "":
		t.Errorf("%s has no kind", e.Designator)
	}
}

// Whatever the expression, a resistor gets a finite value or the board a problem at
// its place.
func FuzzExpression(f *testing.F) {
	for _, seed := range []string{"1k*2", "2**3^-1", "sin(p)/q", "p>1?2:3", "max(1,min(2,p))", "if(p,1,2)", "-(-(-1))", "1/0", "sqrt(-1)",
		"((((((1))))))", "p&&q||!p", "1e308*1e308", "table(p,0,0,1,1)", "pwr(2,3)", "p p", "1meg+1m", "limit(p,0,1)", "", "gauss(1,2,3)", "q{p}", "0x1", "é"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		for _, quoted := range []string{"{" + text + "}", "'" + text + "'", "\"" + text + "\""} {
			file := source.New("t.cir", "title\n.param p=2 q={p+1}\nR1 a 0 "+quoted+"\nR2 a 0 r={"+text+"}\n.param s={"+text+"}\n")
			c, problems := circuit.Build(syntax.Parse(file, true), circuit.Options{})
			for _, p := range problems {
				if at := p.Span; at.File == nil || at.Start < 0 || at.Start > at.End || int(at.End) > len(at.File.Text) {
					t.Errorf("%q has no place: %v", p.Message, at)
				}
			}
			for _, e := range c.Elements {
				hangsTogether(t, e)
			}
		}
	})
}

// Whatever stands on an intent line, it is taken or told at its place.
func FuzzIntent(f *testing.F) {
	for _, seed := range []string{"R1 tol=5% power=0.25 travel=1..10k", "all C tol=10% kind=film", "board ambient=-20..70 mains=207..253 line=50",
		"waive node-dangling R1: a reason", "waive x", "C1 volts=25 leak=1u tempco=-30", "V1 range=10..12", "Q1 part=2N2646 pins=b2,e,b1 period=1..2",
		"X1.R1 tol=1", "R1 tol=", "R1 tol=1..", "R1 = 3", "all", "all Z tol=1", "board", "R1 tol=1% tol=2%", "é x=1", "R1 travel=10..1", "Q1 frequency=1e999..2"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		file := source.New("t.cir", "title\nR1 a 0 1k\nC1 a 0 1u\nV1 a 0 5\nXQ1 a 0 a 2N2646\n*> "+text+"\n")
		c, problems := circuit.Build(syntax.Parse(file, true), circuit.Options{})
		for _, p := range problems {
			if at := p.Span; at.File == nil || at.Start < 0 || at.Start > at.End || int(at.End) > len(at.File.Text) {
				t.Errorf("%q has no place: %v", p.Message, at)
			}
		}
		for _, e := range c.Elements {
			hangsTogether(t, e)
		}
	})
}
