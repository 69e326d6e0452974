package operating

import (
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/netlist/stage"
	"standoff/netlist/syntax"
)

// BenchmarkPlainAccount is everything that a plain stage costs once its circuit is
// there: recognition, model, worst case, drift and what it is held against.
func BenchmarkPlainAccount(b *testing.B) {
	text := "t\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.1u\nXQ1 e b1 b2 2N2646\nR2 vcc b2 330\nR3 b1 0 27\n"
	c, problems := circuit.Build(syntax.Parse(source.New("t.cir", text), true), circuit.Options{})
	if len(problems) > 0 {
		b.Fatal(problems[0].Message)
	}
	for b.Loop() {
		Compute(c, stage.Recognise(c))
	}
}
