package wiring

import (
	"fmt"

	"standoff/netlist/circuit"
	"standoff/rules/rule"
)

func partShorted() *rule.Rule {
	return &rule.Rule{
		ID: "part-shorted", Group: group, Title: "A part has two terminals on one node.",
		Why: "A two-terminal part with both ends on one node does nothing, a voltage source there is shorted, " +
			"and a " +
			"trigger transistor or thyristor with two terminals joined cannot work. Links of 0 ohm or 0 V are wire " +
			"and may lie where they like.",
		Formula: "two terminals of one part on one node", Source: practice,
		Failing: board("Foghorn pacer", "C9 vcc vcc 100n"),
		Mended:  board("Foghorn pacer", "C9 vcc 0 100n"),
		Check: func(p *rule.Pass) {
			report := once(p)
			for _, e := range p.Circuit.Elements {
				if grade, what := shorted(e); grade != 0 {
					n, _ := twice(e.Nodes)
					report(about(e, grade, fmt.Sprintf("%s of %s lie on the node "+
						"%s: %s", terminals(e), rule.Name(e.Designator),
						nodeName(p.Circuit, n), what)))
				}
			}
		},
	}
}

func terminals(e *circuit.Element) string {
	if len(e.Nodes) == 2 {
		return "both ends"
	}
	return "two terminals"
}

// shorted says what two terminals on one node do to a part; grade 0 where there
// are none or they do no harm.
func shorted(e *circuit.Element) (rule.Grade, string) {
	grade, what := harm(e.Kind) // parts of these kinds have few terminals, others may have thousands
	if grade == 0 || circuit.IsLink(e) {
		return 0, ""
	}
	if _, ok := twice(e.Nodes); !ok {
		return 0, ""
	}
	if one, ok := e.Pin("1"); ok && e.Kind == circuit.Diac {
		if two, _ := e.Pin("2"); one != two {
			return 0, "" // the gate of a silicon switch tied to one of its ends
		}
	}
	return grade, what
}

// harm is what a part of this kind suffers from two terminals on one node.
func harm(k circuit.Kind) (rule.Grade, string) {
	switch k {
	case circuit.UJT, circuit.PUT, circuit.SCR, circuit.Triac:
		return rule.Hold, "it cannot work"
	case circuit.VoltageSource:
		return rule.Hold, "the source is shorted"
	case circuit.Resistor, circuit.Capacitor, circuit.Inductor, circuit.CurrentSource, circuit.Diode,
		circuit.Diac:
		return rule.Doubt, "it does nothing"
	}
	return 0, ""
}

// twice returns the node on which two terminals lie.
func twice(nodes []circuit.NodeID) (circuit.NodeID, bool) {
	for i := range nodes {
		for _, n := range nodes[:i] {
			if nodes[i] == n {
				return n, true
			}
		}
	}
	return 0, false
}
