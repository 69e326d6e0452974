package circuit_test

import (
	"fmt"
	"strings"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// decks of a given number of elements, made in different ways.
var decks = map[string]func(count int) string{
	"flat": func(count int) string {
		var b strings.Builder
		for i := range count {
			fmt.Fprintf(&b, "R%d n%d n%d 1k\n", i, i, i+1)
		}
		return b.String()
	},
	// A chain of stages of five elements each, with parameters and intent.
	"stages": func(count int) string {
		var b strings.Builder
		b.WriteString(".subckt stage in out gnd R=1k\n.model DX d\nR1 in m {R}\nR2 M out {R*2}\nC1 m gnd 10n\n" +
			"D1 m 0 DX\n" +
			"R3 out gnd 1k\n*> all R tol=1%\n*> C1 kind=c0g\n.ends\n")
		for i := range count / 5 {
			fmt.Fprintf(&b, "X%d N%d N%d 0 stage R=2k\n", i, i, i+1)
		}
		return b.String()
	},
	// A tree: every level uses the one below ten times.
	"tree": func(count int) string {
		var b strings.Builder
		b.WriteString(".subckt s0 a b\nR1 a b 1\n.ends\n")
		level := 0
		for n := 1; n < count; n *= 10 {
			level++
			fmt.Fprintf(&b, ".subckt s%d a b\n", level)
			for k := range 10 {
				fmt.Fprintf(&b, "X%d a m%d s%d\n", k, k, level-1)
			}
			b.WriteString(".ends\n")
		}
		fmt.Fprintf(&b, "X1 a b s%d\n", level)
		return b.String()
	},
}

// Time and memory of Build grow in proportion to the number of elements.
func BenchmarkBuild(b *testing.B) {
	for _, name := range []string{"flat", "stages", "tree"} {
		for _, count := range []int{100, 10_000, 1_000_000} {
			b.Run(fmt.Sprint(name, "/", count), func(b *testing.B) {
				text := "title\n" + decks[name](count)
				deck := syntax.Parse(source.New("t.cir", text), true)
				b.ReportAllocs()
				for b.Loop() {
					if c, _ := circuit.Build(deck, circuit.Options{}); len(c.Elements) < count {
						b.Fatal(len(c.Elements))
					}
				}
			})
		}
	}
}

// A value changed on a board of fifty parts, as for every piece of advice.
func BenchmarkWith(b *testing.B) {
	deck := syntax.Parse(source.New("t.cir", "title\n"+decks["flat"](50)), true)
	c, _ := circuit.Build(deck, circuit.Options{})
	b.ReportAllocs()
	for b.Loop() {
		c.With(map[string]float64{"R7": 2e3})
	}
}
