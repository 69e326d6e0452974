package circuit

import (
	"math"

	"standoff/netlist/quantity"
)

// With returns the same circuit with other nominal values for the elements
// named (case does not matter); their spreads keep their relative width. All
// that is the same is shared; the circuit itself is left alone.
func (c *Circuit) With(values map[string]float64) *Circuit {
	other := *c
	other.Elements = make([]*Element, len(c.Elements))
	copy(other.Elements, c.Elements)
	other.Nodes = make([]Node, len(c.Nodes))
	copy(other.Nodes, c.Nodes)
	wanted := newIndex(len(values))
	numbers := make([]float64, 0, len(values))
	for name, v := range values {
		if _, fresh := wanted.add(name); fresh {
			numbers = append(numbers, v)
		}
	}
	for i, e := range c.Elements {
		if at, ok := wanted.find(e.Designator); ok {
			changed := *e
			revalue(&changed, numbers[at])
			other.replace(i, &changed)
		}
	}
	return &other
}

// replace puts an element in the place of another and on its nodes.
func (c *Circuit) replace(at int, e *Element) {
	c.Elements[at] = e
	for _, n := range e.Nodes {
		pins := make([]Pin, len(c.Nodes[n].Pins))
		copy(pins, c.Nodes[n].Pins)
		for k := range pins {
			if pins[k].Element.Index == e.Index {
				pins[k].Element = e
			}
		}
		c.Nodes[n].Pins = pins
	}
}

// revalue gives an element another nominal value. A part that had none, or was a
// link, takes the spread that is declared of it or usual for its kind.
func revalue(e *Element, v float64) {
	e.Written = quantity.Short(v)
	old := e.Value
	if !e.HasValue || old.Nominal == 0 {
		e.HasValue = true
		e.Value.Nominal = v
		spreadOf(e)
		return
	}
	factor := v / old.Nominal
	low, high := old.Low*factor, old.High*factor
	e.Value = quantity.Spread{Low: math.Min(low, high), Nominal: v, High: math.Max(low, high)}
}
