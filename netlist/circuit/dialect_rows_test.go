package circuit_test

import (
	"strings"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// The rest of what was counted in public netlists, read right.
func TestCountedConstructs(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"a current-controlled voltage source", "H1 a 0 V1 1k\nV1 b 0 1", "H1 controlled a,0 0; V1 v b,0 1"},
		{"a current-controlled source", "F1 a 0 V1 2\nV1 b 0 1", "F1 controlled a,0 0; V1 v b,0 1"},
		{"four nodes of a transconductance", "G1 a 0 c d 1m", "G1 controlled a,0,c,d 0"},
		{"a table", "E1 a 0 TABLE {V(b)} = (0,0) (1,5)", "E1 controlled a,0 0"},
		{"a current-controlled switch", "W1 a b V1 WM\nV1 c 0 0\n.model WM iswitch(ion=1m)", "W1 s a,b 0; V1 v c,0 0"},
		{"a voltage-controlled switch", "S1 a b c 0 SM\n.model SM vswitch(von=1 voff=0)", "S1 s a,b,c,0 0"},
		{"points in time", "V1 a 0 PWL(0 0 1m 5 2m 3)", "V1 v a,0 0"},
		{"rise and fall", "V1 a 0 EXP(0 5 1n 1u 2m 1u)", "V1 v a,0 0"},
		{"units glued on", "V1 a 0 1.8V\nV2 b 0 DC 0Vdc\nC1 a 0 4PF\nI1 a 0 6MA", "V1 v a,0 1.8; V2 v b,0 0; C1 c a,0 4e-12; I1 i a,0 0.006"},
		{"a millihenry in capitals", "L1 a 0 10MH", "L1 l a,0 0.01"},
		{"an x for mega", "R1 a 0 2x", "R1 r a,0 2e+06"},
		{"a micro sign", "C1 a 0 10\u00b5F\nC2 a 0 1\u03bc", "C1 c a,0 1e-05; C2 c a,0 1e-06"},
		{"a trade's notation", "R1 a 0 4k7\nR2 a 0 R47", "R1 r a,0 4700; R2 r a,0 0.47"},
		{"a continuation taken out between two", "V1 a 0\n+ SIN(0\n*+ 12\n+ 325\n+50\n+ )", "V1 v a,0 325"},
		{"braces inside braces", ".param q={1+{2*3}}\nR1 a 0 {q}", "R1 r a,0 7"},
		{"a dollar comment glued to its word", "R1 a 0 1k $note\nR2 a 0 2k $[TAG]", "R1 r a,0 1000; R2 r a,0 2000"},
		{"parameters on the line after", ".subckt s a R=1\nR1 a 0 R\n.ends\nX1 n s\n+ PARAMS: R=3", "X1.R1 r n,0 3"},
		{"a control block in front of the cards", ".control\nrun\n+ more\nR9 a 0 oops\n.endc\nR1 a 0 1", "R1 r a,0 1"},
		{"jobs for a simulator", ".ic v(a)=0\n.options reltol=1e-3\n.option x\n.temp 27\n.tran 1u 1m\n.dc V1 0 1 1\n" +
			".meas tran x when v(a)=1\n.measure tran y max v(a)\n.save all\n.probe v(a)\n.four 50 v(a)\n.print v(a)\n" +
			".nodeset v(a)=0\n.plot tran v(a)\n.op\n.ac dec 10 1 1k\nR1 a 0 1", "R1 r a,0 1"},
		{"two branches with one designator", ".param m=2\n.if (m==1)\nR1 a 0 1\n.elseif (m==2)\nR1 a 0 2\n.endif", "R1 r a,0 2"},
		{"a block in a block in a block", ".subckt a1 p\n.subckt b1 p\n.subckt c1 p\nR1 p q 1\nR2 q 0 1\n.ends c1\n" +
			"X1 p c1\n.ends b1\nX1 p b1\n.ends a1\nX1 n a1",
			"X1.X1.X1.R1 r n,X1.X1.X1.q 1; X1.X1.X1.R2 r X1.X1.X1.q,0 1"},
		{"test jigs, one as good as open, one as good as shorted", "C1 a b 1T\nL1 a b 1T", "C1 jig a,b 1e+12; L1 l a,b 1e+12"},
		{"an old zener model of a type of its own", ".model DZ zener(v_breakdown=9)\nD1 a k DZ", "D1 d a,k 0"},
		{"a diode of light", ".model LED d(n=1.9 bv=5)\nD1 a k LED", "D1 d a,k 0"},
		{"a bundle behind one name", ".subckt relay p m a b c\nL1 p m 10m\nS1 c a p m SW1\n.model SW1 sw(vt=5)\n.ends\n" +
			"XK1 p 0 a b c relay", "XK1.L1 l p,0 0.01; XK1.S1 s c,a,p,0 0"},
		{"two windings of a transformer", ".subckt tr a b c d\nL1 a b 5MH\nL2 c d 5MH\nK1 L1 L2 0.98\n.ends\nX1 a 0 c d tr",
			"X1.L1 l a,0 0.005; X1.L2 l c,d 0.005; X1.K1 k  0.98"},
		{"a comma where the text is not used", ".model D1 d(is=0,9)\nD1 a 0 D1", "D1 d a,0 0"},
		{"gates of a simulator", "O1 a 0 b 0 LTM", "O1 unknown a,0,b,0 0"},
		{"a pin spelt with a stray minus", ".subckt s -a b\nR1 a b 1\n.ends\nX1 n 0 s", "X1.R1 r X1.a,0 1"},
		{"a section sign in the middle of a name", "R\u00a71 a\u00a7b 0 1", "R\u00a71 r a\u00a7b,0 1"},
	} {
		if got := all(t, c.text); got != c.want {
			t.Errorf("%s:\n got %s\nwant %s", c.name, got, c.want)
		}
	}
}

// What cannot be read is refused with the reason and where it stands.
func TestCountedConstructsThatAreRefused(t *testing.T) {
	for text, want := range map[string]string{
		"R1 a 0 $WORD": "2: R1 has no value; $WORD begins a comment",
		"KEY = VALUE":  "2: KEY= stands alone: a setting belongs behind a card, or on a line that starts with +",
		"*> R1 tol=5%\n.model Q ujt(eta=0,6)\nXQ1 e x y Q\nR1 e 0 1": `3: eta: "0,6" has a decimal comma; write a point`,
		"R1 a 0 1,5k":                 `2: the value of R1: "1,5k" has a decimal comma; write a point`,
		"S1 a b c MOD\n.model MOD sw": "2: S1 needs 4 nodes and a model",
	} {
		if got := strings.Join(told(text), "; "); got != want {
			t.Errorf("%s\n got %s\nwant %s", text, got, want)
		}
	}
}

// Bytes of another alphabet, whose last one may look like a bracket or a bar.
func TestBytesOfAnotherAlphabet(t *testing.T) {
	text, err := source.Decode([]byte("t\nR1 a 0 1k ; \xb3\\\xa5|\nR\xb3\\ b 0 4.7\xb5\n"))
	if err != nil {
		t.Fatal(err)
	}
	c, problems := circuit.Build(syntax.Parse(source.New("t.cir", text), true), circuit.Options{})
	if len(problems) > 0 || len(c.Elements) != 2 || c.Elements[1].Value.Nominal != 4.7e-6 {
		t.Errorf("%d elements, %v", len(c.Elements), problems)
	}
}
