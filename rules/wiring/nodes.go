package wiring

import (
	"fmt"
	"strings"

	"standoff/netlist/circuit"
	"standoff/rules/rule"
)

var dangling = &rule.Rule{
	ID: "node-dangling", Group: group, Title: "Only one terminal stands on a node.",
	Why:     "A node with a single terminal carries no current: a wire was forgotten, or the name is misspelt.",
	Formula: "terminals on the node = 1", Source: practice,
	Failing: board("Doorbell timer", "R9 b1 spare 100"),
	Mended:  board("Doorbell timer", "R9 b1 0 100"),
	Check: func(p *rule.Pass) {
		for i := 1; i < len(p.Circuit.Nodes); i++ {
			n := &p.Circuit.Nodes[i]
			if len(n.Pins) != 1 || nearNeighbour(p.Circuit, i) >= 0 {
				continue
			}
			f := at(n.Pins[0].Element, rule.Doubt, fmt.Sprintf("only %s stands on the node %s: it carries no current", rule.Name(n.Pins[0].Element.Designator), rule.Name(n.Name)))
			f.At = n.At
			p.Report(f)
		}
	},
}

var nearMiss = &rule.Rule{
	ID: "node-name-near-miss", Group: group, Title: "A node with one terminal is named nearly like another.",
	Why:     "Two names that differ in one letter, one of them used once, are nearly always one node misspelt. The board then has a wire too few.",
	Formula: "one letter changed, added or left out (digits aside), and one terminal on the node", Source: practice,
	Failing: board("Lighthouse lamp changer", "R9 vccc 0 10k"),
	Mended:  board("Lighthouse lamp changer", "R9 vcc 0 10k"),
	Check: func(p *rule.Pass) {
		for i := 1; i < len(p.Circuit.Nodes); i++ {
			n := &p.Circuit.Nodes[i]
			if len(n.Pins) != 1 {
				continue
			}
			if other := nearNeighbour(p.Circuit, i); other >= 0 {
				f := at(n.Pins[0].Element, rule.Doubt, fmt.Sprintf("the node %s has one terminal; was %s meant?", rule.Name(n.Name), rule.Name(p.Circuit.Nodes[other].Name)))
				f.At = n.At
				p.Report(f)
			}
		}
	},
}

// nearNeighbour returns the node with two terminals or more whose name is
// nearly that of node i; -1 where there is none. Only a board of a size that a
// person reads is searched.
func nearNeighbour(c *circuit.Circuit, i int) int {
	if len(c.Nodes) > 2000 {
		return -1
	}
	name := strings.ToLower(c.Nodes[i].Name)
	for k := range c.Nodes {
		if k != i && len(c.Nodes[k].Pins) > 1 && near(name, strings.ToLower(c.Nodes[k].Name)) {
			return k
		}
	}
	return -1
}

// near reports whether one letter makes a into b. Digits count nothing: n1 and
// n2 are two nodes.
func near(a, b string) bool {
	if len(a) > len(b) {
		a, b = b, a
	}
	if len(a) < 3 || len(b)-len(a) > 1 {
		return false
	}
	i := 0
	for i < len(a) && a[i] == b[i] {
		i++
	}
	digit := func(s string) bool { return i < len(s) && s[i] >= '0' && s[i] <= '9' }
	if digit(b) || digit(a) {
		return false
	}
	if len(a) == len(b) {
		return i < len(a) && a[i+1:] == b[i+1:]
	}
	return a[i:] == b[i+1:]
}

var noPath = &rule.Rule{
	ID: "node-no-dc-path", Group: group, Title: "A part of the board has no dc path to ground.",
	Why:     "Nodes that only capacitors or current sources tie to the rest float: leakage sets their voltage, and it differs from board to board.",
	Formula: "no path to ground through anything but capacitors and current sources", Source: practice,
	Failing: board("Weather vane reader", "C8 b1 m 10n", "C9 m 0 10n"),
	Mended:  board("Weather vane reader", "C8 b1 m 10n", "C9 m 0 10n", "R9 m 0 100k"),
	Check: func(p *rule.Pass) {
		if !p.Circuit.GroundNamed {
			return
		}
		for _, island := range islands(p.Circuit) {
			n := &p.Circuit.Nodes[island]
			f := at(n.Pins[0].Element, rule.Doubt, fmt.Sprintf("the node %s has no dc path to ground: leakage alone sets its voltage", rule.Name(n.Name)))
			f.At = n.At
			p.Report(f)
		}
	},
}

// islands returns one node of every part of the board that no dc path ties to
// ground. Parts with a source or a winding of their own are isolated on purpose;
// nodes with one terminal are another rule's matter.
func islands(c *circuit.Circuit) []int {
	parent := make([]int, len(c.Nodes))
	for i := range parent {
		parent[i] = i
	}
	root := func(i int) int {
		for parent[i] != i {
			parent[i] = parent[parent[i]]
			i = parent[i]
		}
		return i
	}
	own := make([]bool, len(c.Nodes))
	for _, e := range c.Elements {
		if e.Kind == circuit.Capacitor || e.Kind == circuit.CurrentSource || e.Kind == circuit.Coupling || e.Kind == "jig" {
			continue
		}
		for _, n := range e.Nodes {
			a, b := root(int(e.Nodes[0])), root(int(n))
			parent[max(a, b)] = min(a, b)
		}
	}
	for _, e := range c.Elements {
		if e.Kind == circuit.VoltageSource || e.Kind == circuit.Inductor || e.Kind == circuit.Unknown || e.Kind == circuit.Controlled {
			for _, n := range e.Nodes {
				own[root(int(n))] = true
			}
		}
	}
	var list []int
	seen := map[int]bool{root(0): true}
	for i := 1; i < len(c.Nodes); i++ {
		r := root(i)
		if !seen[r] && !own[r] && len(c.Nodes[i].Pins) > 1 {
			seen[r] = true
			list = append(list, i)
		}
	}
	return list
}

var groundMissing = &rule.Rule{
	ID: "ground-missing", Group: group, Title: "No node is ground.",
	Why:     "Nothing on the board is node 0 or gnd, so no voltage has a reference, and a ground that was meant is not connected.",
	Formula: "no card names node 0 or gnd", Source: practice,
	Failing: strings.ReplaceAll(board("Sluice gate timer"), " 0 ", " com "),
	Mended:  board("Sluice gate timer"),
	Check: func(p *rule.Pass) {
		if !p.Circuit.GroundNamed && len(p.Circuit.Elements) > 0 {
			p.Report(at(p.Circuit.Elements[0], rule.Hold, "no node is ground: no card names node 0 or gnd"))
		}
	},
}
