package wiring

import (
	"fmt"
	"strings"

	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

func valueNotPreferred() *rule.Rule {
	return &rule.Rule{
		ID: "value-not-preferred", Group: group, Title: "A value is in no series of its tolerance.",
		Why: "The part cannot be bought with this value and tolerance; the nearest preferred value is named. " +
			"Loads, the " +
			"resistance of a winding, potentiometers, and what stands inside the model of a device are not " +
			"bought by " +
			"value and not asked about.",
		Formula: "value in the E series made for its tolerance, or in E24", Source: "IEC 60063",
		Failing: strings.Replace(board("Barn fan pacer"), "100k", "98k", 1),
		Mended:  board("Barn fan pacer"),
		Check: func(p *rule.Pass) {
			report, b := once(p), boughtOn(p)
			for _, e := range p.Circuit.Elements {
				if !b.byValue(e) {
					continue
				}
				v := e.Value.Nominal
				tolerance := (e.Value.High - e.Value.Low) / (2 * v)
				if quantity.IsPreferred(v, tolerance) {
					continue
				}
				f := about(e, rule.Remark, fmt.Sprintf("%s is in no series for %.3g %%; the nearest of E24 "+
					"is %s", quantity.Short(v),
					100*tolerance, quantity.Short(quantity.Nearest(v, 24))))
				f.At = e.ValueAt
				report(f)
			}
		},
	}
}

// bought knows which parts of a board are bought by their value.
type bought struct {
	pass   *rule.Pass
	sense  *sense
	loads  map[string]bool // designators
	staged map[string]bool // paths of subcircuits with a part of a stage in them
}

func boughtOn(p *rule.Pass) bought {
	b := bought{p, &sense{pass: p}, map[string]bool{}, map[string]bool{"": len(p.Accounts) > 0}}
	for _, a := range p.Accounts {
		b.staged[instance(a.Stage.Anchor.Designator)] = true
		for _, e := range a.Stage.Parts[stage.Load] {
			b.loads[e.Designator] = true
		}
	}
	return b
}

// byValue reports whether an element is a resistor or capacitor that is bought by
// its value.
func (b bought) byValue(e *circuit.Element) bool {
	if e.Kind != circuit.Resistor && e.Kind != circuit.Capacitor || !e.HasValue || e.Value.Nominal <= 0 ||
		e.Intent.Travel != nil || b.loads[e.Designator] || !b.staged[instance(e.Designator)] {
		return false
	}
	return b.sense.absurd(e) == "" && !b.ofWinding(e)
}

// ofWinding reports whether a resistor shares a node with an inductor alone: it
// stands for the resistance of the wire.
func (b bought) ofWinding(e *circuit.Element) bool {
	if e.Kind != circuit.Resistor {
		return false
	}
	for _, n := range e.Nodes {
		pins := b.pass.Circuit.Nodes[n].Pins
		coil := func(i int) bool { return pins[i].Element.Kind == circuit.Inductor }
		if len(pins) == 2 && (coil(0) || coil(1)) {
			return true
		}
	}
	return false
}
