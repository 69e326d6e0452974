package wiring

import (
	"fmt"
	"strings"

	"standoff/netlist/circuit"
	"standoff/rules/rule"
)

func nodeNameNearMiss() *rule.Rule {
	return &rule.Rule{
		ID: "node-name-near-miss", Group: group, Title: "A node with one terminal is named nearly like another.",
		Why: "Two names that differ in one letter, one of them used once, are nearly always one node " +
			"misspelt. The " +
			"board then has a wire too few. Digits and signs count for nothing: n1 and n2, in+ and in- are two nodes.",
		Formula: "one letter changed, added or left out in a name of three letters or more, and one terminal " +
			"on the node",
		Source:  practice,
		Failing: board("Lighthouse lamp changer", "R9 vccc 0 10k"),
		Mended:  board("Lighthouse lamp changer", "R9 vcc 0 10k"),
		Check: func(p *rule.Pass) {
			report, near := once(p), nearMisses(p.Circuit)
			for i := range p.Circuit.Nodes {
				other, ok := near[i]
				if !ok {
					continue
				}
				n := &p.Circuit.Nodes[i]
				e := n.Pins[0].Element
				f := about(e, rule.Doubt, fmt.Sprintf("only %s stands on the node %s; was %s "+
					"meant?", rule.Name(e.Designator),
					rule.Name(n.Name), nodeName(p.Circuit, circuit.NodeID(other))))
				f.At = n.At
				report(f)
			}
		},
	}
}

// nearMisses returns, for every node with one terminal whose name is nearly that
// of a node with more, that other node. It takes time in proportion to the
// length of all names: names are near where they agree once a letter of either
// is left out, so those of the lonely nodes are noted with every letter left out
// in turn.
func nearMisses(c *circuit.Circuit) map[int]int {
	short := map[string][]int{}
	for i := 1; i < len(c.Nodes); i++ {
		if len(c.Nodes[i].Pins) == 1 {
			each(strings.ToLower(c.Nodes[i].Name), func(text []byte) {
				short[string(text)] = append(short[string(text)], i)
			})
		}
	}
	if len(short) == 0 {
		return nil
	}
	found := map[int]int{}
	for k := range c.Nodes {
		if len(c.Nodes[k].Pins) < 2 {
			continue
		}
		name := strings.ToLower(c.Nodes[k].Name)
		each(name, func(text []byte) {
			for _, i := range short[string(text)] {
				if _, known := found[i]; !known && near(strings.ToLower(c.Nodes[i].Name), name) {
					found[i] = k
				}
			}
		})
	}
	return found
}

// each calls f with a name and with the name less one letter, for every letter
// behind the path of its subcircuit.
func each(name string, f func([]byte)) {
	text := []byte(name)
	f(text)
	for i := len(name) - 1; i >= len(instance(name)); i-- {
		text = append(append(text[:0], name[:i]...), name[i+1:]...)
		f(text)
	}
}

// near reports whether one letter makes a into b. Digits and signs count for
// nothing, and names in two subcircuits are never near.
func near(a, b string) bool {
	path := instance(a)
	if path != instance(b) {
		return false
	}
	a, b = a[len(path):], b[len(path):]
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
	counts := func(s string) bool { return i >= len(s) || !strings.ContainsRune("0123456789+-", rune(s[i])) }
	if !counts(a) || !counts(b) {
		return false
	}
	if len(a) == len(b) {
		return i < len(a) && a[i+1:] == b[i+1:]
	}
	return a[i:] == b[i+1:]
}
