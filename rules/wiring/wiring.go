// Package wiring holds the rules on the netlist itself: is everything connected,
// named and valued as it was meant. A rule looks at nodes, elements and values;
// it reads no files and prints nothing.
package wiring

import (
	"standoff/netlist/circuit"
	"standoff/rules/rule"
)

// Rules returns the rules of this group in the order of the reference.
func Rules() []*rule.Rule {
	return []*rule.Rule{dangling, noPath, nearMiss, groundMissing, repeated, shorted, unknown, suffix, preferred,
		assumed, contradicted, intentRepeated}
}

const group = "Netlist"

const practice = "common practice, no source"

// board is a small sound board of the reference; extra cards follow.
func board(title string, cards ...string) string {
	text := title + "\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.22u\nXQ1 e b1 b2 2N2646\nR2 vcc b2 330\nR3 b1 0 22\n"
	for _, c := range cards {
		text += c + "\n"
	}
	return text + ".end\n"
}

// at starts a finding on an element's designator.
func at(e *circuit.Element, grade rule.Grade, message string) rule.Finding {
	return rule.Finding{Grade: grade, At: e.NameAt, Parts: []string{e.Designator}, Message: message}
}
