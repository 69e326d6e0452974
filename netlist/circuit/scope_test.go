package circuit_test

import (
	"math"
	"strings"
	"testing"
)

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
	want := []string{"XA.X1.R1 r in,XA.X1.m 500", "XA.X1.R2 r XA.X1.m,0 1000", "XA.X1.R3 r rail,in 3000",
		"XA.X2.R9 r in,0 5",
		"XB.X1.R1 r in,XB.X1.m 700", "XB.X1.R2 r XB.X1.m,0 1400", "XB.X1.R3 r rail,in 3000", "XB.X2.R9 r in,0 7"}
	if strings.Join(got, "\n") != strings.Join(want, "\n") {
		t.Errorf("got\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
}

func TestConditionsAndSections(t *testing.T) {
	c := sound(t, ".param on=1\n.if(on==1)\nR1 a b 1k\n.else\nR1 a b 2k\n.endif\n.lib tt\nR2 a b 1\n.endl\n"+
		".if(on==2)\n.elseif(on==1)\nR3 a b 3\n.endif")
	if len(c.Elements) != 2 || c.Elements[0].Value.Nominal != 1000 || c.Elements[1].Designator != "R3" {
		t.Errorf("got %d elements", len(c.Elements))
	}
}

func TestScopes(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"defaults may hang on one another", ".subckt s a P=2 Q={P*3}\nR1 a 0 {Q}\n.ends\nX1 n s P=5\nX2 n s",
			"X1.R1 r n,0 15; X2.R1 r n,0 6"},
		{"an override sees the use, not the definition",
			".param R=7\n.subckt s a R=1\nR1 a 0 {R}\n.ends\nX1 n s R={R}",
			"X1.R1 r n,0 7"},
		{"PARAMS: on both lines", ".subckt s a PARAMS: R=1\nR1 a 0 {R}\n.ends\nX1 n s PARAMS: R = 4",
			"X1.R1 r n,0 4"},
		{"an inner .param hides the outer one",
			".param p=1\n.subckt s a\n.param p=2\nR1 a 0 p\n.ends\nX1 n s\nR1 n 0 p",
			"X1.R1 r n,0 2; R1 r n,0 1"},
		{"an outer subcircuit is seen inside", ".subckt leaf a\nR1 a 0 1\n.ends\n.subckt s a\nX1 a leaf\n" +
			".ends\nX9 n s",
			"X9.X1.R1 r n,0 1"},
		{"an inner one hides it", ".subckt leaf a\nR1 a 0 1\n.ends\n.subckt s a\n.subckt leaf a\nR1 a 0 2\n" +
			".ends\n" +
			"X1 a leaf\n.ends\nX9 n s\nX8 n leaf", "X9.X1.R1 r n,0 2; X8.R1 r n,0 1"},
		{"gnd as a pin is no ground", ".subckt s a GND\nR1 a gnd 1\n.ends\nX1 n m s", "X1.R1 r n,m 1"},
		{"gnd as no pin is ground", ".subckt s a\nR1 a GND 1\n.ends\nX1 n s", "X1.R1 r n,0 1"},
		{"a global node", ".global VDD\n.subckt s a\nR1 a vdd 1\n.ends\nX1 n s\nR2 Vdd n 1",
			"X1.R1 r n,vdd 1; R2 r vdd,n 1"},
		{"case of names", ".SUBCKT Sub A B\nR1 A Mid 1\nR2 MID b 1\n.ENDS\nx1 N n2 SUB\nR3 n 0 1",
			"x1.R1 r N,x1.Mid 1; x1.R2 r x1.Mid,n2 1; R3 r N,0 1"},
		{"a pin named twice means its first place", ".subckt s a a\nR1 a 0 1\n.ends\nX1 n m s", "X1.R1 r n,0 1"},
		{"the board names a node inside", "R1 X1.mid 0 9\n.subckt s a\nR1 a mid 1\n.ends\nX1 n s",
			"R1 r X1.mid,0 9; X1.R1 r n,X1.mid 1"},
		{"and names it after the use", ".subckt s a\nR1 a mid 1\n.ends\nX1 n s\nR1 x1.MID 0 9",
			"X1.R1 r n,X1.mid 1; R1 r X1.mid,0 9"},
		{"a subcircuit that holds only a model", ".subckt D1 a k\n.model D1 d\nD1 a k D1\n.ends\nX1 a k D1",
			"X1.D1 d a,k 0"},
		{"an inner model hides the outer", ".model M npn\n.subckt s c b e\n.model M pnp\nQ1 c b e M\n.ends\n" +
			"X1 c b e s\n" +
			"Q2 c b e M", "X1.Q1 pnp c,b,e 0; Q2 npn c,b,e 0"},
		{"random draws stand at their nominal value", "R1 a b {gauss(100,0.05,3)}", "R1 r a,b 100"},
	} {
		if got := all(t, c.text); got != c.want {
			t.Errorf("%s:\n got %s\nwant %s", c.name, got, c.want)
		}
	}
}

func TestConditions(t *testing.T) {
	const inside = ".subckt s a mode=1\n.if(mode==1)\nR1 a 0 1\n.param v=10\n.elseif(mode==2)\nR1 a 0 2\n" +
		".param v=20\n" +
		".else\n.param v=30\n.endif\nR2 a 0 {v}\n.ends\n"
	for _, c := range []struct{ name, text, want string }{
		{"a parameter behind the condition", ".if(on==1)\nR1 a 0 1\n.else\nR1 a 0 2\n.endif\n.param on=1",
			"R1 r a,0 1"},
		{"a chosen parameter is seen further down",
			".param a=1\n.if(a)\n.param b=2\n.endif\n.if(b==2)\nR1 a 0 {b}\n.endif",
			"R1 r a,0 2"},
		{"a chosen parameter takes the place of another", ".param a=1\n.if(a==1)\n.param a=2\n.endif\n" +
			".if(a==2)\nR1 a 0 {a}\n.endif", "R1 r a,0 2"},
		{"nested, the outer one is off", ".if(0)\n.if(1)\nR1 a 0 1\n.endif\n.else\nR2 a 0 2\n.endif",
			"R2 r a,0 2"},
		{"nested, the inner one is off", ".if(1)\n.if(0)\nR1 a 0 1\n.else\nR3 a 0 3\n.endif\nR2 a 0 2\n.endif",
			"R3 r a,0 3; R2 r a,0 2"},
		{"each use of a subcircuit for itself", inside + "X1 n s\nX2 n s mode=2\nX3 n s mode=3",
			"X1.R1 r n,0 1; X1.R2 r n,0 10; X2.R1 r n,0 2; X2.R2 r n,0 20; X3.R2 r n,0 30"},
		{"a subcircuit inside a branch", ".if(1)\n.subckt s a\nR1 a 0 1\n.ends\n.else\n.subckt s a\nR1 a 0 2\n" +
			".ends\n.endif\nX1 n s",
			"X1.R1 r n,0 1"},
		{"a model inside a branch", ".subckt s c b e p=1\n.if(p)\n.model M pnp\n.else\n.model M npn\n.endif\n" +
			"Q1 c b e M\n.ends\n" +
			"X1 c b e s\nX2 c b e s p=0", "X1.Q1 pnp c,b,e 0; X2.Q1 npn c,b,e 0"},
		{"only what is needed is worked out", ".param z=0\nR1 a 0 {if(z==0, 1, 1/z)}\nR2 a 0 {z ? 1/z : 2}",
			"R1 r a,0 1; R2 r a,0 2"},
	} {
		if got := all(t, c.text); got != c.want {
			t.Errorf("%s:\n got %s\nwant %s", c.name, got, c.want)
		}
	}
}

func TestFunctions(t *testing.T) {
	for text, want := range map[string]float64{
		"abs(-2)": 2, "sqrt(9)": 3, "exp(0)": 1, "ln(exp(2))": 2, "log(exp(2))": 2, "log10(1000)": 3,
		"sin(0)+cos(0)": 1, "tan(0)+1": 1, "atan(1)*4/pi": 1, "asin(1)*2/pi": 1, "acos(0)*2/pi": 1,
		"atan2(1,1)*4/pi":         1,
		"sinh(0)+cosh(0)+tanh(0)": 1, "min(3,1,2)": 1, "max(3,1,2)": 3, "pow(2,3)": 8,
		"pwr(-2,2)": 4, "pwrs(-2,2)+5": 1,
		"int(2.7)": 2, "nint(2.7)": 3, "floor(-1.5)+3": 1, "ceil(1.2)": 2, "sgn(-3)+2": 1, "limit(9,1,5)": 5,
		"limit(9,5,1)": 5, "if(1,2,3)": 2, "u(2)+u(-2)": 1, "uramp(3)": 3, "hypot(3,4)": 5,
		"2**3": 8, "2^3": 8, "7%4": 3,
		"!0 + !5": 1, "(1<2)+(2<=2)+(3>2)+(3>=3)+(1==1)+(1!=2)": 6, "1 && 0 || 1": 1, "-2+3": 1, "1k/1meg*1e3": 1,
		"mc(5,0.1)": 5, "2*temper": 50,
	} {
		c := sound(t, "R1 a b {"+text+"}")
		if got := c.Elements[0].Value.Nominal; !(math.Abs(got-want) <= 1e-12) {
			t.Errorf("%s: got %g, want %g", text, got, want)
		}
	}
}

func TestModelsHangOnTheirInstance(t *testing.T) {
	c := sound(t, ".subckt z a k vz=5\n.model DZ d(bv={vz})\nD1 a k DZ\n.ends\nX1 a k z\nX2 a k z vz=12")
	for name, want := range map[string]float64{"X1.D1": 5, "X2.D1": 12} {
		if bv := find(t, c, name).Ratings.Figures["bv"]; bv.Max != want {
			t.Errorf("%s: bv is %g, want %g", name, bv.Max, want)
		}
	}
	if len(c.UnusedModels) != 0 {
		t.Error("the model is used")
	}
}
