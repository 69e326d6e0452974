package wiring

import (
	"fmt"
	"strings"

	"standoff/netlist/circuit"
	"standoff/rules/rule"
)

func nodeDangling() *rule.Rule {
	return &rule.Rule{
		ID: "node-dangling", Group: group, Title: "Only one terminal stands on a node.",
		Why: "A node with a single terminal carries no current: a wire was forgotten, or the name is misspelt. " +
			"Nodes called nc or unconnected are left open on purpose, and so are outputs of controlled sources " +
			"and terminals of parts of which nothing is known; none of them is told.",
		Formula: "terminals on the node = 1", Source: practice,
		Failing: board("Doorbell timer", "R9 b1 spare 100"),
		Mended:  board("Doorbell timer", "R9 b1 0 100"),
		Check: func(p *rule.Pass) {
			report, near, formulas := once(p), nearMisses(p.Circuit), hasFormulas(p.Circuit)
			for i := 1; i < len(p.Circuit.Nodes); i++ {
				n := &p.Circuit.Nodes[i]
				if _, misspelt := near[i]; misspelt || len(n.Pins) != 1 || openOnPurpose(n, formulas) {
					continue
				}
				e := n.Pins[0].Element
				f := about(e, rule.Doubt, fmt.Sprintf("only %s stands on the node %s, so it carries no current: a "+
					"wire is missing "+
					"or the name is misspelt", rule.Name(e.Designator), rule.Name(n.Name)))
				f.At = n.At
				report(f)
			}
		},
	}
}

// openOnPurpose reports whether a node with one terminal is no mistake. A formula
// may name the node of a source.
func openOnPurpose(n *circuit.Node, formulas bool) bool {
	if leftOpen(strings.ToLower(n.Name[len(instance(n.Name)):])) {
		return true
	}
	pin := n.Pins[0]
	if gate, ok := pin.Element.Pin("gate"); ok && pin.Element.Kind == circuit.Diac && gate == pin.Element.Nodes[pin.Index] {
		return true // the gate of a silicon switch may stay open
	}
	switch pin.Element.Kind {
	case circuit.Controlled, circuit.Unknown, circuit.Line, circuit.Jig:
		return true
	case circuit.VoltageSource:
		return formulas
	}
	return false
}

// leftOpen reports whether a name says that its node leads nowhere.
func leftOpen(name string) bool {
	rest, open := strings.CutPrefix(name, "nc")
	return open && strings.Trim(rest, "_-0123456789") == "" || strings.HasPrefix(name, "unconnected")
}

// hasFormulas reports whether any part of the board follows a formula.
func hasFormulas(c *circuit.Circuit) bool {
	for _, e := range c.Elements {
		if e.Kind == circuit.Controlled {
			return true
		}
	}
	return false
}
