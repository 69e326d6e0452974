package circuit_test

import (
	"fmt"
	"strings"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

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

func TestEmptySubcircuitsAreBombsToo(t *testing.T) {
	var b strings.Builder
	b.WriteString(".subckt s0 a\n.ends\n")
	for i := 1; i < 30; i++ {
		fmt.Fprintf(&b, ".subckt s%d a\nX1 a s%d\nX2 a s%d\n.ends\n", i, i-1, i-1)
	}
	b.WriteString("X1 a s29\n")
	deck := syntax.Parse(source.New("t.cir", "title\n"+b.String()), true)
	_, problems := circuit.Build(deck, circuit.Options{Limits: circuit.Limits{Elements: 1000}})
	want := "X1 unfolds to more than 1000 elements; it is not read"
	if len(problems) != 1 || problems[0].Message != want {
		t.Errorf("told %v", problems)
	}
}

// A bomb takes nothing with it: the rest of the board is read.
func TestTheBoardBesideABombIsRead(t *testing.T) {
	text := "X1 a s9\nR1 a 0 1k\nX2 a s0\n.subckt s0 a\nR1 a 0 1\n.ends\n"
	for i := 1; i < 10; i++ {
		text += fmt.Sprintf(".subckt s%d a\n%s.ends\n", i, strings.Repeat(fmt.Sprintf("X1 a s%d\n", i-1), 100))
	}
	c, problems := build(text)
	if len(problems) != 1 || len(c.Elements) != 2 {
		t.Errorf("%d elements, %v", len(c.Elements), problems)
	}
}

func TestDepth(t *testing.T) {
	var b strings.Builder
	b.WriteString(".subckt s0 a\nR1 a 0 1\n.ends\n")
	for i := 1; i < 60; i++ {
		fmt.Fprintf(&b, ".subckt s%d a\nX1 a s%d\n.ends\n", i, i-1)
	}
	if list := told(b.String() + "X1 a s38\n"); len(list) > 0 {
		t.Errorf("told %q", list)
	}
	list := told(b.String() + "X1 a s59\n")
	if len(list) != 1 || !strings.HasSuffix(list[0], "subcircuits nest deeper than 40") {
		t.Errorf("told %q", list)
	}
}

// chain is a row of parameters each of which hangs on the next.
func chain(length int) string {
	var b strings.Builder
	for i := range length {
		fmt.Fprintf(&b, ".param p%d={p%d}\n", i, i+1)
	}
	fmt.Fprintf(&b, ".param p%d=5\nR1 a 0 {p0}", length)
	return b.String()
}

func TestLongChainsOfParameters(t *testing.T) {
	if got := all(t, chain(600)); got != "R1 r a,0 5" {
		t.Errorf("got %s", got)
	}
	list := told(chain(100_000))
	want := "the value of R1: more than 2000 parameters and operators hang on one another"
	if len(list) != 1 || !strings.HasSuffix(list[0], want) {
		t.Errorf("told %q", list)
	}
	if got := told("R1 a 0 {" + strings.Repeat("1+", 100_000) + "1}"); len(got) != 1 {
		t.Errorf("a sum of 100,000 terms: told %q", got)
	}
}

// Decks that ask for a lot of work without making any element.
func TestWorkIsBounded(t *testing.T) {
	limits := circuit.Limits{Elements: 10_000}
	many := func(line string, count int) string { return strings.Repeat(line+"\n", count) }
	for name, c := range map[string]struct{ text, want string }{
		"cards that no use takes": {".subckt s a m=0\n.if(m)\n" + many("R1 a 0 1", 1000) + ".endif\n.ends\n" +
			many("X1 a s", 1000),
			"the subcircuits unfold to far more than a board can hold; the rest is not read"},
		"a long waveform in each": {".subckt s a\nV1 a 0 PWL(" + strings.Repeat("0 1 ", 1000) + ")\n.ends\n" +
			many("X1 a s", 1000),
			"the subcircuits unfold to far more than a board can hold; the rest is not read"},
		"long names": {".subckt s a\n" + many("R1 a 0 1", 100) + ".ends\nX" + strings.Repeat("n", 100_000) +
			" a s\n",
			"the subcircuits unfold to far more than a board can hold; the rest is not read"},
		"a wide expression in each": {".subckt s a p=1\nR1 a 0 {" + strings.Repeat("(p+p)*", 500) +
			"1}\n.ends\n" + many("X1 a s", 1000),
			"the value of X1.R1: the netlist asks for more arithmetic than a board can need"},
		"nested conditions": {many(".if(1)", 60) + "R1 a 0 1\n" + many(".endif", 60),
			"conditions nest deeper than 40; what is deeper is not read"},
	} {
		deck := syntax.Parse(source.New("t.cir", "title\n"+c.text), true)
		_, problems := circuit.Build(deck, circuit.Options{Limits: limits})
		found := false
		for _, p := range problems {
			found = found || p.Message == c.want
		}
		if !found || len(problems) > 1 {
			t.Errorf("%s: told %v", name, problems)
		}
	}
}
