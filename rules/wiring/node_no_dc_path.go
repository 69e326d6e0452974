package wiring

import (
	"fmt"

	"standoff/netlist/circuit"
	"standoff/rules/rule"
)

func nodeNoDCPath() *rule.Rule {
	return &rule.Rule{
		ID: "node-no-dc-path", Group: group, Title: "A part of the board has no dc path to ground.",
		Why: "Nodes that only capacitors or current sources tie to the rest float: leakage sets their " +
			"voltage, and it " +
			"differs from board to board. What has a source or a winding of its own is taken as isolated on purpose.",
		Formula: "no path to ground through anything but capacitors and current sources", Source: practice,
		Failing: board("Weather vane reader", "C8 b1 m 10n", "C9 m 0 10n"),
		Mended:  board("Weather vane reader", "C8 b1 m 10n", "C9 m 0 10n", "R9 m 0 100k"),
		Check: func(p *rule.Pass) {
			if !p.Circuit.GroundNamed {
				return
			}
			report := once(p)
			for _, nodes := range islands(p.Circuit) {
				n := &p.Circuit.Nodes[nodes[0]]
				what := "the node " + rule.Name(n.Name) + " has"
				if more := len(nodes) - 1; more > 0 {
					what = fmt.Sprintf("the node %s and %d more tied to it have", rule.Name(n.Name), more)
				}
				f := about(n.Pins[0].Element, rule.Doubt, what+" no dc path to ground: leakage alone sets the "+
					"voltage there")
				f.At = n.At
				report(f)
			}
		},
	}
}

// islands returns the nodes of every part of the board that no dc path ties to
// ground. Nodes with one terminal are another rule's matter.
func islands(c *circuit.Circuit) [][]circuit.NodeID {
	root := joined(c)
	own := make([]bool, len(c.Nodes))
	own[root(circuit.Ground)] = true
	for _, e := range c.Elements {
		if bringsItsOwn(e.Kind) {
			for _, n := range e.Nodes {
				own[root(n)] = true
			}
		}
	}
	var list [][]circuit.NodeID
	place := map[circuit.NodeID]int{}
	for i := 1; i < len(c.Nodes); i++ {
		n := circuit.NodeID(i)
		r := root(n)
		if own[r] || len(c.Nodes[i].Pins) < 2 {
			continue
		}
		if _, known := place[r]; !known {
			place[r] = len(list)
			list = append(list, nil)
		}
		list[place[r]] = append(list[place[r]], n)
	}
	return list
}

// bringsItsOwn reports whether a part of the board with such a part in it may be
// isolated on purpose.
func bringsItsOwn(k circuit.Kind) bool {
	return k == circuit.VoltageSource || k == circuit.Inductor || k == circuit.Unknown || k == circuit.Controlled
}

// joined returns a function that tells the node which stands for all nodes that
// dc ties together.
func joined(c *circuit.Circuit) func(circuit.NodeID) circuit.NodeID {
	parent := make([]circuit.NodeID, len(c.Nodes))
	for i := range parent {
		parent[i] = circuit.NodeID(i)
	}
	root := func(n circuit.NodeID) circuit.NodeID {
		for parent[n] != n {
			parent[n] = parent[parent[n]]
			n = parent[n]
		}
		return n
	}
	for _, e := range c.Elements {
		switch e.Kind {
		case circuit.Capacitor, circuit.CurrentSource, circuit.Coupling, circuit.Jig:
			continue
		}
		for _, n := range e.Nodes {
			a, b := root(e.Nodes[0]), root(n)
			parent[max(a, b)] = min(a, b)
		}
	}
	return root
}
