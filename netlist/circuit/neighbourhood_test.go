package circuit_test

import (
	"testing"

	"standoff/netlist/circuit"
)

func TestNeighbourhood(t *testing.T) {
	c := sound(t, "V1 a 0 12\nV2 b a 3\nR0 b c 0\nR1 c d 1k\nC1 d 0 1n\nV3 p q 5\nR9 p q 1k")
	w := circuit.NewWiring(c)
	node := func(name string) circuit.NodeID {
		for i := range c.Nodes {
			if c.Nodes[i].Name == name {
				return circuit.NodeID(i)
			}
		}
		t.Fatal(name)
		return 0
	}
	if v, ok := w.Potential(node("c")); !ok || v != 15 {
		t.Errorf("potential of c is %g, %v", v, ok)
	}
	if w.IsFixed(node("d")) || !w.IsFixed(node("p")) || w.Reference(node("p")) != w.Net(node("q")) {
		t.Error("d floats; p is fixed against q, the minus of its own source")
	}
	if len(w.Between(node("d"), circuit.Ground)) != 1 || len(w.Sources(node("c"))) != 2 {
		t.Error("one capacitor between d and ground, two sources behind c")
	}
}
