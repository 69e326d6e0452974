package circuit_test

import (
	"math"
	"testing"

	"standoff/netlist/circuit"
)

func TestWithLeavesTheCircuitAlone(t *testing.T) {
	c := sound(t, "R1 a b 1k\nR2 b 0 2k\n*> R1 tol=10%")
	d := c.With(map[string]float64{"r1": 500})
	if find(t, c, "R1").Value.Nominal != 1000 || find(t, d, "R1").Value.High != 550 {
		t.Error("the copy has the new value with its spread, the original the old one")
	}
	for i := range d.Nodes {
		for _, p := range d.Nodes[i].Pins {
			if d.Elements[p.Element.Index] != p.Element {
				t.Error("a pin of the copy belongs to an element of the original")
			}
		}
	}
}

func TestWith(t *testing.T) {
	c := sound(t, `
R1 a b 1k
R2 a b 0
R3 a b 10k
C1 a b 1u
C2 a a 1u
V1 a 0 -10
R4 a b RMOD
.model RMOD r
*> all R tol=1%
*> C1 tol=-20%..80%
*> R3 travel=1k..20k`)
	d := c.With(map[string]float64{"R1": 2e3, "r2": 100, "R3": 5e3, "C1": 2e-6, "c2": 3e-6, "V1": -20,
		"R4": 10, "NONE": 1})
	for name, want := range map[string][3]float64{"R1": {1980, 2000, 2020}, "R2": {99, 100, 101},
		"R3": {500, 5000, 10000},
		"C1": {1.6e-6, 2e-6, 3.6e-6}, "C2": {2.7e-6, 3e-6, 3.3e-6}, "V1": {-21, -20, -19}, "R4": {9.9, 10, 10.1}} {
		before, e := find(t, c, name), find(t, d, name)
		for i, got := range []float64{e.Value.Low, e.Value.Nominal, e.Value.High} {
			if !(math.Abs(got-want[i]) <= 1e-9*math.Abs(want[i])) {
				t.Errorf("%s: got %+v, want %v", name, e.Value, want)
				break
			}
		}
		if before == e || before.Value.Nominal == e.Value.Nominal || before.Index != e.Index {
			t.Errorf("%s: the original has to stay as it was", name)
		}
	}
	if n := d.Nodes[find(t, d, "C2").Nodes[0]]; len(n.Pins) != len(c.Nodes[find(t, c, "C2").Nodes[0]].Pins) {
		t.Error("every pin is there once")
	}
	wired(t, c)
	wired(t, d)
}

// wired checks that pins and elements name each other.
func wired(t *testing.T, c *circuit.Circuit) {
	t.Helper()
	count := 0
	for n, node := range c.Nodes {
		for _, p := range node.Pins {
			count++
			if c.Elements[p.Element.Index] != p.Element || p.Element.Nodes[p.Index] != circuit.NodeID(n) {
				t.Errorf("a pin of %s does not lead to its element", node.Name)
			}
		}
	}
	for _, e := range c.Elements {
		count -= len(e.Nodes)
	}
	if count != 0 {
		t.Errorf("%d pins too many", count)
	}
}
