package circuit_test

import (
	"testing"

	"standoff/netlist/circuit"
)

// What real netlists hold, each in a line of our own; the sources of surprise
// were counted over public files.
func TestSurprisingConstructs(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"PARAMS: ends a line, a blank one follows",
			".subckt K1 a b\n+ PARAMS:\n\n+ T1=5m ; note\nR1 a b {T1}\n.ends\nX1 n 0 K1",
			"X1.R1 r n,0 0.005"},
		{"a comment inside a continued card", ".model m NPN\n* charge part\n+ CJE=1p\nQ1 c b e m",
			"Q1 npn c,b,e 0"},
		{"a slash before the cell", ".subckt CELL i o v\nR1 i o 1\n.ends\nX9 in out vdd / CELL",
			"X9.R1 r in,out 1"},
		{"one word in three roles", ".param VCC=5\nVCC VCC gnd VCC", "VCC v VCC,0 5"},
		{"nodes that look like numbers", "R4 n1 -VEE 1k\nV1 +24V GND DC 24", "R4 r n1,-VEE 1000; V1 v +24V,0 24"},
		{"names with signs", "VIN+ p 0 1", "VIN+ v p,0 1"},
		{"a subcircuit that starts with a digit", ".SUBCKT 7XX/ABC 1 2\nR1 1 2 3\n.ENDS\nX1 a b 7xx/abc",
			"X1.R1 r a,b 3"},
		{"odd model names", ".MODEL N-GEN NPN\n.model Q9.Qabc PNP\nQ1 c b e N-gen\nQ2 c b e q9.QABC",
			"Q1 npn c,b,e 0; Q2 pnp c,b,e 0"},
		{"a model named as its type", ".MODEL NPN NPN (BF=50)\nQ1 c b e npn", "Q1 npn c,b,e 0"},
		{"text and units in a model", ".model DX D(MFG=Somebody Icrating=15A BV=100V)\nD1 a k DX", "D1 d a,k 0"},
		{"a type nobody knows", ".model u1 uio\nR1 a 0 1", "R1 r a,0 1"},
		{"indented conditions in front of their bracket",
			".param on=1\n  .if(on==1)\n  R1 a 0 1\n  .else\n  R1 a 0 2\n  .endif", "R1 r a,0 1"},
		{"parameters in reverse order", ".param A='B*2'\n.param B=1\nR1 a 0 A", "R1 r a,0 2"},
		{"a bare .PARAM", ".PARAM\nR1 a 0 1", "R1 r a,0 1"},
		{"blanks around =", ".subckt s a R = 2\nR1 a 0 R\n.ends\nX1 n s R = 5", "X1.R1 r n,0 5"},
		{"the value of one file, the part of the next",
			".subckt DZ a k\nD1 a k DZ\n.ends\n.model DZ d(bv=5)\nD5 a k DZ\nX1 a k DZ",
			"D5 d a,k 0; X1.D1 d a,k 0"},
		{"CR LF and tabs", "R1\ta\tb\t1k\r\nC1 a 0 1u\r", "R1 r a,b 1000; C1 c a,0 1e-06"},
		{"beyond ASCII", "R\u00fc1 \u00e4 \u00d6 1k\nR2 \u00c4 \u00f6 1k",
			"R\u00fc1 r \u00e4,\u00d6 1000; R2 r \u00e4,\u00d6 1000"},
		{"a ground that is another's pin", ".subckt s in GND\nR1 in GND 1\n.ends\nX1 a VSS s\nR2 VSS GND 1",
			"X1.R1 r a,VSS 1; R2 r VSS,0 1"},
	} {
		if got := all(t, c.text); got != c.want {
			t.Errorf("%s:\n got %s\nwant %s", c.name, got, c.want)
		}
	}
}

// The inner resistors of a unijunction model are named like those of the board.
func TestInsidesAreNoBoard(t *testing.T) {
	c := sound(t, ".subckt 2N2646 1 2 3\nDE 1 4 DX\nVE 4 5 0\nHX 6 0 VE 1k\nBX 5 2 I=V(6)\nRB1 5 2 2.7k\n"+
		"RB2 3 5 4k\n.model DX d\n.ends\n"+
		"V1 vcc 0 20\nRB2 vcc b2 330\nRB1 b1 0 22\nXQ1 e b1 b2 2N2646\nR1 vcc e 100k\nC1 e 0 100n\n*> RB1 tol=1%")
	if len(c.Elements) != 6 || find(t, c, "RB1").Value.Nominal != 22 || find(t, c, "XQ1").Kind != circuit.UJT {
		t.Errorf("%d elements", len(c.Elements))
	}
}

// The same board written flat and inside a subcircuit is the same circuit.
func TestWrappedBoard(t *testing.T) {
	const board = "V1 vcc 0 20\nR1 vcc e 100k\nC1 e gnd 1u\nXQ1 e b1 b2 2N2646\nR2 vcc b2 330\nR3 b1 0 22\n" +
		"*> R1 tol=1%\n*> all C tol=20%"
	flat, wrapped := sound(t, board), sound(t, ".subckt whole\n"+board+"\n.ends\nXW whole\nR9 x 0 1\nR8 x 0 1")
	for i, e := range flat.Elements {
		w := wrapped.Elements[i]
		if "XW."+e.Designator != w.Designator || e.Kind != w.Kind || e.Value != w.Value ||
			len(e.Nodes) != len(w.Nodes) {
			t.Errorf("%s became %s", show(flat, e), show(wrapped, w))
		}
	}
}
