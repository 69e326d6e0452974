package circuit_test

import (
	"strings"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/part"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

func TestTerminalOrders(t *testing.T) {
	const pair = "Q1 x g 3 N\nQ2 g x 1 P\n.model N npn\n.model P pnp\n.ends\n"
	for _, c := range []struct{ text, roles, by string }{
		{"XS1 a g k C106D", "anode gate cathode", "library order"},
		{"XS1 a k g C106D\n*> XS1 pins=a,k,g", "anode cathode gate", "pins="},
		{"XS1 a k g C106D\n*> XS1 pins=anode,cathode,gate", "anode cathode gate", "pins="},
		{".subckt C106D A K G\nR1 A K 1\n.ends\nXS1 a k g C106D", "anode cathode gate", "header"},
		{"* TERMINALS: K G A\n.subckt C106D 1 2 3\nR1 1 2 1\n.ends\nXS1 a k g C106D", "cathode gate anode",
			"comment"},
		{".subckt HOUSE 1 g 3\n" + pair + "XS1 a gt k HOUSE", "anode gate cathode", "insides"},
		{".subckt HOUSE 3 1 g\n" + pair + "XS1 k a gt HOUSE", "cathode anode gate", "insides"},
		{".subckt BT136 A G K\nR1 A K 1\n.ends\n.model BT136 triac(igt=35m)\nXT1 l g 0 BT136", "mt2 gate mt1",
			"header"},
		{"XQ1 x y z 2N2646\n*> XQ1 pins=b2,e,b1", "base2 emitter base1", "pins="},
		{"Q7 x y z 2N2646", "emitter base1 base2", "library order"},
		// spelling variants in headers
		{".subckt Q7 Emitter Base_1 B2\nR1 1 2 1\n.ends\n.model Q7 ujt(eta=0.6)\nXQ1 x y z Q7",
			"emitter base1 base2", "header"},
		{".subckt Q7 B2 E B1\nR1 1 2 1\n.ends\n.model Q7 ujt(eta=0.6)\nXQ1 x y z Q7", "base2 emitter base1",
			"header"},
		{".subckt P1 an ga ca\nR1 1 2 1\n.ends\n.model P1 put(vf=1)\nXQ1 x y z P1", "anode gate cathode",
			"header"},
		{".subckt P1 a g c\nR1 1 2 1\n.ends\n.model P1 put(vf=1)\nXQ1 x y z P1", "anode gate cathode", "header"},
		{".subckt BT136 A K G\nR1 A K 1\n.ends\nXT1 l 0 g BT136", "mt2 mt1 gate", "header"},
		{".subckt BT136 A2 G A1\nR1 A K 1\n.ends\nXT1 l g 0 BT136", "mt2 gate mt1", "header"},
		{".subckt BT136 T1 G T2\nR1 A K 1\n.ends\nXT1 0 g l BT136", "mt1 gate mt2", "header"},
		{".subckt MOC3021 A K MT2 MT1\nR1 A K 1\n.ends\nXU1 a k l m MOC3021", "anode cathode mt2 mt1", "header"},
		// comments
		{".subckt C106D 1 2 3 ; nodes: cathode, anode, gate\nR1 1 2 1\n.ends\nXS1 k a g C106D",
			"cathode anode gate", "comment"},
		{"* Pin order: 1=A 2=G 3=K\n.subckt C106D 1 3 2\nR1 1 2 1\n.ends\nXS1 a k g C106D", "anode cathode gate",
			"comment"},
		{"* Nodes: A=3 G=2 K=1\n.subckt C106D 1 2 3\nR1 1 2 1\n.ends\nXS1 k g a C106D", "cathode gate anode",
			"comment"},
		{"* CONNECTIONS: anode\n*              | gate\n*              | | cathode\n.subckt C106D 1 2 3\n" +
			"R1 1 2 1\n.ends\n" +
			"XS1 a g k C106D", "anode gate cathode", "comment"},
		{"* terminals: main terminal 2, gate, main terminal 1\n.subckt BT136 1 2 3\nR1 1 2 1\n.ends\n" +
			"XT1 l g 0 BT136",
			"mt2 gate mt1", "comment"},
		{".subckt 2N2646 1 2 3\n* connections: base 2, base 1, emitter\nR1 1 2 1\n.ends\nXQ1 x y z 2N2646",
			"base2 base1 emitter", "comment"},
		{"* a sensitive gate device\n.subckt C106D 1 2 3\nR1 1 2 1\n.ends\nXS1 a g k C106D",
			"anode gate cathode", "library order"},
		// the header wins over the comment, pins= over both
		{"* TERMINALS: K G A\n.subckt C106D A G K\nR1 1 2 1\n.ends\nXS1 a g k C106D", "anode gate cathode",
			"header"},
		{"* TERMINALS: K G A\n.subckt C106D A G K\nR1 1 2 1\n.ends\nXS1 k a g C106D\n*> XS1 pins=k,a,g",
			"cathode anode gate", "pins="},
		// insides: a known part, numbers only
		{".subckt C106D 7 g 3\nQ1 x g 3 N\nQ2 g x 7 P\n.model N npn\n.model P pnp\n.ends\nXS1 a gt k C106D",
			"anode gate cathode", "insides"},
		// a sensing source, a diode in the anode's way, resistors in the gate's and across it
		{".subckt HOUSE 1 2 3\nVS 1 4 0\nD1 4 5 DX\nQ1 x g 3 N\nQ2 g x 5 P\nRG 2 g 50\nRGK g 3 1k\n" +
			".model DX d\n" +
			".model N npn\n.model P pnp\n.ends\n" + "XS1 a gt k HOUSE", "anode gate cathode", "insides"},
		{".subckt HOUSE 1 2 3\nQ1 x g 3 N\nQ2 g x 1 P\nRG 2 g 900\n.model N npn\n.model P pnp\n.ends\n" +
			"XS1 a gt k HOUSE",
			"anode gate cathode", "insides"},
		// the gate at the other base: a programmable unijunction transistor
		{".subckt HOUSE 1 g 3\nQ1 g y 3 N\nQ2 y g 1 P\n.model N npn\n.model P pnp\n.ends\nXS1 a gt k HOUSE",
			"anode gate cathode", "insides"},
		// kept whole by names that leave no doubt, in front of a behavioural model
		{".subckt MYUJT E B1 B2\nD1 E 5 DX\nVS 5 6 0\nHX 7 0 VS 1\nB1 6 B1 V=V(7)\nRB1 6 B1 2k\nRB2 B2 6 3k\n" +
			".model DX d\n.ends\n" +
			"XQ1 e x y MYUJT", "emitter base1 base2", "header"},
		// terminals of other parts
		{"Q1 b c e QM\n.model QM npn\n*> Q1 pins=b,c,e", "base collector emitter", "pins="},
		{"XA 1 2 3 WHATSIT\n*> XA pins=b2,e,b1", "base2 emitter base1", "pins="},
		{"XA 1 2 3 WHATSIT\n*> XA pins=b2,e,b1 part=2N2646", "base2 emitter base1", "pins="},
		{"XI 1 2 3 LM334\n*> XI pins=v+,v-,r", "v+ v- r", "pins="},
		{".subckt LM334 K A\nR1 K A 1\n.ends\nXI 1 2 LM334", "v- v+", "header"},
		{"XI 1 2 LM334", "v+ v-", "library order"},
		{"XS1 a g C106D\n.subckt C106D A G\nR1 A 0 1\n.ends", "anode gate cathode", "header"},
		{".subckt SPECIAL a g k\nR1 a k 1\n.ends\nXS1 a g k SPECIAL\n*> XS1 part=C106D", "anode gate cathode",
			"header"},
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

func TestWhatStaysOnePart(t *testing.T) {
	const crossed = "Q1 x g 3 N\nQ2 g x 1 P\n.model N npn\n.model P pnp\n"
	for _, c := range []struct{ name, text, want string }{
		{"a crossed pair", ".subckt H 1 g 3\n" + crossed + "RB1 g 3 1k\n.ends\nXS a b c H", "XS scr a,b,c 0"},
		{"a pair with its gate at the upper base",
			".subckt H 1 g 3\nQ1 g y 3 N\nQ2 y g 1 P\n.model N npn\n.model P pnp\n.ends\n" +
				"XS a b c H", "XS put a,b,c 0"},
		{"a board with a pair on it is flattened", ".subckt H 1 g 3\n" + crossed +
			"X1 1 3 LAMP\n.ends\nXS a b c H",
			"XS.Q1 npn XS.x,b,c 0; XS.Q2 pnp b,XS.x,a 0; XS.X1 unknown a,c 0"},
		{"a part of the library, whatever is inside",
			".subckt 2N2646 1 2 3\nRB1 1 2 1\nRB2 1 3 1\n.ends\nXQ a b c 2N2646",
			"XQ ujt a,b,c 0"},
		{"a model in the netlist makes it one",
			".subckt OURS 1 2 3\nRB1 1 2 1\n.ends\n.model OURS ujt(eta=0.6)\nXQ a b c OURS",
			"XQ ujt a,b,c 0"},
		{"so does part=", ".subckt OURS 1 2 3\nRB1 1 2 1\n.ends\nXQ a b c OURS\n*> XQ part=2N2646",
			"XQ ujt a,b,c 0"},
		{"also by a path", ".subckt o 1 2 3\nRB1 1 2 1\n.ends\n.subckt s a b c\nXQ a b c o\n.ends\n" +
			"X1 a b c s\nX2 a b c s\n" +
			"*> X2.XQ part=2N2646", "X1.XQ.RB1 r a,b 1; X2.XQ ujt a,b,c 0"},
		{"a wrapper of one is flattened", ".subckt W e b1 b2\nXQ e b1 b2 2N2646\n.ends\nX1 a b c W",
			"X1.XQ ujt a,b,c 0"},
		{"a block that is only called like a part", ".subckt DB3 a b c\nR1 a b 1\nR2 b c 1\n.ends\nX1 p q r DB3",
			"X1.R1 r p,q 1; X1.R2 r q,r 1"},
		{"a zener of two diodes is flattened", ".subckt DZ 1 2\nD1 1 2 DF\nDZ 3 1 DR\nVZ 2 3 10.8\n" +
			".model DF d\n.model DR d\n.ends\n" +
			"X1 a k DZ", "X1.D1 d a,k 0; X1.DZ d X1.3,a 0; X1.VZ v k,X1.3 10.8"},
	} {
		if got := all(t, c.text); got != c.want {
			t.Errorf("%s:\n got %s\nwant %s", c.name, got, c.want)
		}
	}
}

func TestWhoseRatings(t *testing.T) {
	ours := &part.Ratings{Name: "2N2646", Kind: part.UJT, Origin: "file"}
	text := "title\nXQ1 a b c 2N2646\nXQ2 a b c X2N2646\nXQ3 a b c 2N2647\n.subckt s a\n" +
		".model 2N2646 ujt(eta=0.6)\n" +
		"XQ1 a b c 2N2646\n.ends\nX1 a s\n"
	deck := syntax.Parse(source.New("t.cir", text), true)
	c, problems := circuit.Build(deck, circuit.Options{Parts: []*part.Ratings{ours}})
	if len(problems) > 0 {
		t.Fatal(problems)
	}
	for name, want := range map[string]string{"XQ1": "file", "XQ2": "file", "XQ3": "library",
		"X1.XQ1": "netlist"} {
		if got := find(t, c, name).Ratings.Origin; got != want {
			t.Errorf("%s has the ratings of %s, want %s", name, got, want)
		}
	}
}
