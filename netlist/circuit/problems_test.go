package circuit_test

import (
	"fmt"
	"testing"
)

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
		{"C1 a b 1n\n*> C1 kind=wood",
			"3: kind: kind is one of film, c0g, x7r, y5v, electrolytic, tantalum, x2, y2"},
		{"R1 a b 1k\n*> all Q tol=1%", "3: all takes one of the letters R, C, L, V, I"},
		{"R1 a b 1k\n*> board moon=full", "3: moon: a board line takes ambient, mains and line"},
		{"XQ1 a b c 2N2646\n*> XQ1 pins=e,b1", "3: pins: pins= names 2 terminals, but XQ1 has 3 nodes"},
		{"R1 a b 1k\n.include x.inc", "3: x.inc is not read: nothing can be included here"},
		{"R1 a b inf", `2: the value of R1: "inf" is not a number`},
		{"R1 a b 1e999", `2: the value of R1: "1e999" is out of range`},
		{"L1 a b 0", "2: L1 cannot have the value 0"},
		{"L1 a b -1m", "2: L1 cannot have the value -1m"},
		{"C1 a b -1u", "2: C1 cannot have the value -1u"},
		{"R1 a b {sqrt(-1)}", "2: the value of R1: the result is no finite number"},
		{"R1 a b {exp(9999)}", "2: the value of R1: the result is no finite number"},
		{"R1 a b {nosuch(1)}", "2: the value of R1: the function nosuch with 1 arguments is not known"},
		{"R1 a b \"1k\"", "2: the value of R1: a text stands where a number belongs"},
		{"R1 a b 1k tc=x", `2: tc of R1: "x" is not a number`},
		{"R1 a b 1k m=0", "2: R1 cannot have m=0: parts side by side are counted from 1"},
		{"R1 a b 1k m=x", `2: m of R1: "x" is not a number`},
		{"V1 a", "2: V1 needs two nodes and a value"},
		{"V1 a 0 SIN(0)", "2: SIN of V1 needs an offset and an amplitude"},
		{"V1 a 0 PULSE(0 x)", `2: PULSE of V1: "x" is not a number`},
		{"V1 a 0 twelve", `2: the value of V1: "twelve" is not a number`},
		{"V1 a 0 AC big", `2: the AC value of V1: "big" is not a number`},
		{"E1 a 0 b", "2: E1 needs 4 nodes"},
		{"F1 a", "2: F1 needs 2 nodes"},
		{"W1 a b V1", "2: W1 needs 2 nodes, a source and a model"},
		{"T1 a b z0=50", "2: T1 needs 4 nodes"},
		{"D1 a k", "2: D1 needs 2 nodes and a model"},
		{"M1 d g s", "2: M1 needs 3 nodes and a model"},
		{"J1 d g s b JM\n.model JM njf", "2: J1 has 4 nodes before its model; 3 are the most"},
		{"X1", "2: X1 needs its nodes and a part name"},
		{"K1 L1 0.9\nL1 a b 1m", "2: K1 needs two inductors and a coupling factor"},
		{"K1 L1 L2 0.9\nL1 a b 1m", "2: K1 couples L2, but no inductor is called that"},
		{"K1 L1 L2 1.5\nL1 a b 1m\nL2 c d 1m",
			"2: K1 cannot have the coupling factor 1.5: it lies above 0 and is at most 1"},
		{"K1 L1 L2 tight\nL1 a b 1m\nL2 c d 1m", `2: the coupling factor of K1: "tight" is not a number`},
		{"Schottky note", "2: Schottky needs 4 nodes and a model"},
		{"Please read this note", "2: Please is no designator that is known here; is this a heading?"},
		{"There is no card", "2: There is no designator that is known here; is this a heading?"},
		{".if(x)\nR1 a 0 1\n.endif", "2: this condition cannot be worked out: the parameter x is not defined"},
		{".if(1)\nR1 a 0 1", "2: this .if is never closed with .endif"},
		{".subckt s a\nR1 a 0 1\n.ends t", "4: this .ends names t, but s is open"},
		{".subckt s a\nR1 a 0\n.ends\nX1 n s\nX2 n s\nX3 m s", "3: X1.R1 has no value"},
		{".subckt s a p={x}\nR1 a 0 {p}\n.ends\nX1 n s\nX2 n s",
			"3: the value of X1.R1: the parameter x is not defined"},
		{".subckt s a\n.if(m)\nR1 a 0 1\n.endif\n.ends\nX1 n s\nX2 n s",
			"3: this condition cannot be worked out: the parameter m is not defined"},
		{".subckt s a R=1\nR1 a 0 {R}\n.ends\nX1 n s R={R}",
			"3: the value of X1.R1: the parameter R is not defined"},
		{".param p={p}\nR1 a 0 {p}", "3: the value of R1: the parameter p depends on itself"},
		{".model Q ujt(eta=0.6)\n.model Q ujt(eta=0.7)\nXQ1 e b1 b2 Q",
			"3: the model Q is defined twice, and differently; this one counts"},
		{".model Q ujt(eta=0.6 wat=3)\nXQ1 e b1 b2 Q", "2: wat is no rating of a ujt"},
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
