package circuit_test

import (
	"fmt"
	"strings"
	"testing"
)

func TestRepeats(t *testing.T) {
	c := sound(t, "R1 a b 1\nr1 a b 2\nR1 a b 3\n.subckt s a\nR1 a 0 1\nR1 a 0 2\n.ends\nX1 a s\nX2 a s\n"+
		"x1 a s\n"+
		".subckt d a m=1\n.if(m)\nR5 a 0 1\n.else\nR5 a 0 2\n.endif\n.ends\nX3 a d")
	var got []string
	for _, r := range c.Repeats {
		got = append(got, fmt.Sprintf("%s %d %d", r.Designator, r.First.Position().Line, r.At.Position().Line))
	}
	if want := "X1.R1 6 7; r1 2 3; R1 2 4; x1 9 11"; strings.Join(got, "; ") != want {
		t.Errorf("got %s\nwant %s", strings.Join(got, "; "), want)
	}
}

func TestUnused(t *testing.T) {
	for text, want := range map[string]string{
		".model M npn\nR1 a 0 1":                                                     "M |",
		".model M npn\nQ1 c b e m":                                                   "|",
		".model RM r\nR1 a b 100 RM\n.model SM sw\nS1 a b c 0 SM":                    "|",
		".model RM r\nR1 a b RM":                                                     "|",
		".model M npn\n.subckt s c b e\nQ1 c b e M\n.ends":                           "| s",
		".subckt s c b e\n.model M npn\n.model N npn\nQ1 c b e M\n.ends":             "| s",
		".subckt s c b e\n.model M npn\n.model N npn\nQ1 c b e M\n.ends\nX1 c b e s": "N |",
		".subckt in a\nR1 a 0 1\n.ends\n.subckt out a\nX1 a in\n.ends":               "| out",
		".subckt 2N2646 1 2 3\n.model D d\nD1 1 2 D\n.ends\nXQ a b c 2N2646":         "|",
		".model Q ujt(eta=0.6)\nXQ1 a b c WHAT\n*> XQ1 part=Q":                       "|",
	} {
		c := sound(t, text)
		var got []string
		for _, m := range c.UnusedModels {
			got = append(got, m.Name)
		}
		got = append(got, "|")
		for _, s := range c.UnusedSubckts {
			got = append(got, s.Name)
		}
		if strings.Join(got, " ") != want {
			t.Errorf("%s: got %s, want %s", text, strings.Join(got, " "), want)
		}
	}
}

func TestGround(t *testing.T) {
	for text, want := range map[string]bool{"R1 a 0 1": true, "R1 a Gnd 1": true, "R1 a b 1": false,
		".subckt s gnd\nR1 gnd b 1\n.ends\nX1 a s": false, ".subckt s a\nR1 a gnd 1\n.ends\nX1 a s": true} {
		if c := sound(t, text); c.GroundNamed != want {
			t.Errorf("%s: ground named is %v", text, c.GroundNamed)
		}
	}
}

func TestCouplings(t *testing.T) {
	c := sound(t, "K1 L1 l2 0.99\nL1 a 0 1m\nL2 b 0 2m\n.subckt t a b\nL1 a 0 1m\nL2 b 0 1m\nL3 b c 1m\n"+
		"K1 L1 L2 L3 1\n.ends\n"+
		"X1 a b t\nX2 a b t\n.model CORE core\nK2 L1 L2 0.5 CORE")
	for name, want := range map[string]string{"K1": "L1 L2", "X1.K1": "X1.L1 X1.L2 X1.L3",
		"X2.K1": "X2.L1 X2.L2 X2.L3",
		"K2":    "L1 L2"} {
		var got []string
		k := find(t, c, name)
		for _, i := range k.Coupled {
			got = append(got, c.Elements[i].Designator)
		}
		if strings.Join(got, " ") != want || !k.HasValue || k.Value.High != k.Value.Nominal {
			t.Errorf("%s couples %s, want %s", name, strings.Join(got, " "), want)
		}
	}
	if len(c.UnusedModels) != 0 {
		t.Error("the core is used")
	}
}
