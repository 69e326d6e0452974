// Package wiring holds the rules on the netlist itself: is everything connected,
// named and valued as it was meant. What goes in is a circuit, what comes out is
// findings; a rule here reads no files, prints nothing and knows no physics. One
// rule, one file.
package wiring

import (
	"strings"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/rules/rule"
)

// Rules returns the rules of this group in the order of the reference.
func Rules() []*rule.Rule {
	return []*rule.Rule{
		nodeDangling(), nodeNoDCPath(), nodeNameNearMiss(), groundMissing(), designatorRepeated(), partShorted(),
		partUnknown(), valueSuffixSuspect(), valueNotPreferred(), pinOrderAssumed(), pinOrderContradicted(),
		intentRepeated(),
	}
}

const (
	group    = "Netlist"
	practice = "common practice, no source"
)

// board is a small sound board of the reference; extra cards follow.
func board(title string, cards ...string) string {
	return title + `
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
` + strings.Join(append(cards, ".end\n"), "\n")
}

// thyristor adds a thyristor to that board whose card names the cathode second.
var thyristor = []string{"RL vcc a 100", "RS b1 g 220", "RG g 0 1k", "XS1 a 0 g C106D", "*> board " +
	"ambient=15..40"}

// about starts a finding on an element, at its designator.
func about(e *circuit.Element, grade rule.Grade, message string) rule.Finding {
	return rule.Finding{Grade: grade, At: e.NameAt, Parts: []string{e.Designator}, Message: message}
}

// once hands findings on to the pass, one for each place: what stands in a
// subcircuit is told of its first instance.
func once(p *rule.Pass) func(rule.Finding) {
	seen := map[source.Span]bool{}
	return func(f rule.Finding) {
		if !f.At.IsZero() && seen[f.At] {
			return
		}
		seen[f.At] = true
		p.Report(f)
	}
}

// nodeName returns the name of a node, fit for a message.
func nodeName(c *circuit.Circuit, n circuit.NodeID) string { return rule.Name(c.Nodes[n].Name) }

// instance returns the path of the subcircuit that a name stands in, with its
// point: "X1." of "X1.R3", nothing on the board itself.
func instance(name string) string { return name[:strings.LastIndexByte(name, '.')+1] }
