package wiring_test

import (
	"slices"
	"strings"
	"testing"

	"standoff/netlist"
	"standoff/rules/rule"
	"standoff/rules/wiring"
)

// findings runs the rules of this group over a board, as "RULE GRADE" in order.
func findings(t *testing.T, text string) (list []string, all []rule.Finding) {
	t.Helper()
	b, err := netlist.ReadText("t.cir", []byte(text), netlist.Options{})
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range b.Problems {
		t.Errorf("line %d: %s\n%s", p.Span.Position().Line, p.Message, text)
	}
	for _, r := range wiring.Rules() {
		p := rule.NewPass(b.Circuit, b.Accounts, func(f rule.Finding) {
			f.Rule = r.ID
			list, all = append(list, r.ID+" "+f.Grade.String()), append(all, f)
		})
		p.File = b.File
		r.Check(p)
	}
	slices.Sort(list)
	return list, all
}

const small = "Dryer timer\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.22u\nXQ1 e b1 b2 2N2646\nR2 vcc b2 330\nR3 b1 0 22\n"

// What people draw on sound boards and for their simulator gets no finding.
func TestSoundBoardsAreLeftAlone(t *testing.T) {
	for name, more := range map[string]string{
		"nothing more":              "",
		"ground aliases joined":     "R9 gnd 0 0\nV9 GND 0 0\n",
		"a current probe":           "V9 b1 x 0\nR9 x 0 10k\n",
		"a terminal left open":      "X9 vcc 0 nc1 op\n.subckt op p m nc\nR1 p m 10k\n.ends\n",
		"unconnected by name":       "R9 b1 unconnected-_J1-Pad3_ 1k\n",
		"a controlled source":       "E1 out 0 b1 0 2\n",
		"a source for a formula":    "B1 x 0 V=V(ctl)*2\nR9 x 0 10k\nV9 ctl 0 5\n",
		"an isolated winding":       "L1 b1 0 1m\nL2 s1 s2 1m\nK1 L1 L2 0.99\nR9 s1 s2 1k\n",
		"an isolated supply":        "V9 p m 12\nR9 p m 1k\nC9 m 0 10n\n",
		"numbered nodes":            "R8 n100 0 1k\nR9 n100 n101 1k\nC9 n101 0 1u\n",
		"signed nodes":              "R7 in+ 0 1k\nR8 in+ b1 1k\nR9 vcc in- 1k\nC9 in- 0 1u\n",
		"a diode-connected npn":     "Q1 b1 b1 0 QN\n.model QN npn(bf=100)\n",
		"a bulk on the source":      "M1 b1 vcc 0 0 MN\n.model MN nmos(vto=2)\n",
		"resistance of a winding":   "L1 vcc c 0.1\nR9 c d 83\nC9 d 0 1u\n",
		"a load":                    "RL vcc a 97\nRS b1 g 220\nRG g 0 1k\nXS1 a g 0 C106D\n",
		"a potentiometer":           "R9 vcc e 98k\n*> R9 travel=50k..98k\n",
		"a shunt of 10 milliohm":    "RL vcc a 100\nR9 a 0 10m\n",
		"a shunt, upper case":       "RL VCC A 100\nR9 A 0 10M\n",
		"a supercapacitor, meant":   "C9 vcc 0 1\n*> C9 volts=25\n",
		"a test jig":                "C9 vcc x 1T\nR9 x 0 1k\nL9 vcc y 1T\nR8 y 0 1k\n",
		"1 % values":                "R9 vcc 0 48.7k\n*> R9 tol=1%\n",
		"old tolerance, E24 values": "R9 vcc 0 51k\n*> R9 tol=20%\n",
		"insides of a device model": "X9 vcc 0 dev\n.subckt dev p m\nR1 p x 3217\nC1 x m 17.3p\nR2 x m 1meg\n.ends\n",
		"a value from a parameter":  ".param rt=50k\nR9 vcc 0 {2*rt}\n",
	} {
		if list, all := findings(t, small+more); len(list) > 0 {
			t.Errorf("%s: %v: %s", name, list, all[0].Message)
		}
	}
}

func TestFaultsAreFound(t *testing.T) {
	for name, row := range map[string]struct{ more, want, part string }{
		"a lonely node":             {"R9 b1 spare 1k\n", "node-dangling doubt", "R9"},
		"a lonely source":           {"V9 spare 0 5\n", "node-dangling doubt", "V9"},
		"misspelt, a letter more":   {"R9 vccc 0 10k\n", "node-name-near-miss doubt", "R9"},
		"misspelt, a letter less":   {"R8 supply 0 1k\nR7 supply e 10meg\nR9 suply 0 1k\n", "node-name-near-miss doubt", "R9"},
		"misspelt, a letter turned": {"R9 vcx 0 10k\n", "node-name-near-miss doubt", "R9"},
		"misspelt by a part unknown": {"X9 vccc 0 OPAMP9\n",
			"node-name-near-miss doubt, part-unknown doubt", "X9"},
		"floating between capacitors": {"C8 b1 m 10n\nC9 m 0 10n\n", "node-no-dc-path doubt", "C8"},
		"floating pair of nodes":      {"C8 b1 m 10n\nR8 m k 1k\nC9 k 0 10n\n", "node-no-dc-path doubt", "C8"},
		"copied and not renamed":      {"r1 vcc 0 10k\n", "designator-repeated hold", "r1"},
		"a capacitor on one node":     {"C9 vcc vcc 1u\n", "part-shorted doubt", "C9"},
		"a source on one node":        {"V9 vcc vcc 5\n", "part-shorted hold", "V9"},
		"a thyristor joined": {"RL vcc a 100\nXS1 a 0 0 C106D\n",
			"part-shorted hold", "XS1"},
		"a diode without a model":   {"D1 b1 vcc 1N9999\n", "part-unknown remark", "D1"},
		"one name, three parts":     {"D1 b1 vcc DX\nD2 b1 vcc dx\nD3 b1 vcc DX\n", "part-unknown remark", "D1 D2 D3"},
		"a model never used":        {".model DFW d(is=1n)\n", "part-unknown remark", "DFW"},
		"a milliohm":                {"R9 vcc 0 1M\n", "value-suffix-suspect hold", "R9"},
		"ten milliohm to set":       {"R9 vcc e 10M\n", "value-suffix-suspect hold", "R9"},
		"22 milliohm across supply": {"R9 vcc 0 22M\n", "value-suffix-suspect hold", "R9"},
		"ten femtofarad":            {"C9 vcc 0 10F\n", "value-suffix-suspect hold", "C9"},
		"a suffix forgotten":        {"C9 vcc 0 47\n", "value-suffix-suspect hold", "C9"},
		"a coil of 10 kH":           {"L9 vcc 0 10k\n", "value-suffix-suspect hold", "L9"},
		"the trade's notation":      {"R9 vcc 0 4k7\n", "value-suffix-suspect remark", "R9"},
		"in no series":              {"R9 vcc 0 99k\n", "value-not-preferred remark", "R9"},
		"a 1 % value at 5 %":        {"R9 vcc 0 48.7k\n", "value-not-preferred remark", "R9"},
		"a key given twice":         {"*> R1 tol=1%\n*> R1 tol=2%\n", "intent-repeated remark", "R1"},
		"a key given three times":   {"*> R1 tol=1%\n*> R1 tol=2%\n*> r1 TOL=5%\n", "intent-repeated remark", "R1"},
		"a model twice, never used": {".model DW d\n.model dw d\n", "part-unknown remark", "DW"},
	} {
		list, all := findings(t, small+row.more)
		if got := strings.Join(list, ", "); got != row.want {
			t.Errorf("%s: %q, want %q", name, got, row.want)
		} else if got := strings.Join(all[0].Parts, " "); got != row.part {
			t.Errorf("%s: parts %q, want %q", name, got, row.part)
		}
	}
}

// A chip has no bought values and holds femtofarads.
func TestAChipIsLeftAlone(t *testing.T) {
	list, _ := findings(t, "Inverter\nVDD vdd 0 1.8\nVA a 0 1\nMP y a vdd vdd PCH W=2u L=0.18u\nMN y a 0 0 NCH W=1u\n"+
		"CL y 0 10f\nRL y 0 5123\n.model PCH pmos\n.model NCH nmos\n")
	if len(list) > 0 {
		t.Error(list)
	}
}

func TestAPartCopiedManyTimesIsOneFault(t *testing.T) {
	list, all := findings(t, small+strings.Repeat("R9 vcc 0 10k\n", 5))
	if len(list) != 1 || all[0].Message != "R9 stands 5 times; the first is on line 8" {
		t.Errorf("%v %+v", list, all)
	}
}

// A fault inside a subcircuit is told once, not once for every instance.
func TestAFaultInASubcircuitIsToldOnce(t *testing.T) {
	list, _ := findings(t, small+".subckt s a\nR1 a spare 1k\nR2 a 0 1M\nR2 a 0 1k\nC1 a a 1u\n.ends\nX1 b1 s\nX2 b1 s\nX3 b1 s\n")
	want := "designator-repeated hold, node-dangling doubt, part-shorted doubt, value-suffix-suspect hold"
	if got := strings.Join(list, ", "); got != want {
		t.Errorf("%q, want %q", got, want)
	}
}

func TestNamesInTwoSubcircuitsAreNeverNear(t *testing.T) {
	list, _ := findings(t, small+".subckt s a\nR1 a supply 1k\nR2 supply 0 1k\n.ends\n.subckt u a\nR1 a suply 1k\n.ends\n"+
		"XA b1 s\nXB b1 u\n")
	if got := strings.Join(list, ", "); got != "node-dangling doubt" {
		t.Errorf("%q", got)
	}
}
