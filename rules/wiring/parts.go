package wiring

import (
	"fmt"
	"strings"

	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
	"standoff/rules/rule"
)

var repeated = &rule.Rule{
	ID: "designator-repeated", Group: group, Title: "Two parts have the same designator.",
	Why:     "One of the two is a copy that was not renamed: on the board, in the parts list or in the placement one of them will be missing.",
	Formula: "a designator used twice in one scope", Source: practice,
	Failing: board("Stage curtain timer", "R2 vcc 0 10k"),
	Mended:  board("Stage curtain timer", "R4 vcc 0 10k"),
	Check: func(p *rule.Pass) {
		for _, r := range p.Circuit.Repeats {
			p.Report(rule.Finding{Grade: rule.Hold, At: r.At, Parts: []string{r.Designator},
				Message: fmt.Sprintf("%s stands twice; the first is on line %d", rule.Name(r.Designator), r.First.Position().Line)})
		}
	},
}

var shorted = &rule.Rule{
	ID: "part-shorted", Group: group, Title: "A part has two terminals on one node.",
	Why:     "A two-terminal part with both ends on one node does nothing, and a transistor or thyristor with two terminals joined does not do its work.",
	Formula: "two terminals of one part on one node", Source: practice,
	Failing: board("Foghorn pacer", "C9 vcc vcc 100n"),
	Mended:  board("Foghorn pacer", "C9 vcc 0 100n"),
	Check: func(p *rule.Pass) {
		for _, e := range p.Circuit.Elements {
			if len(e.Nodes) == 2 && e.Nodes[0] == e.Nodes[1] && e.Kind != circuit.Unknown {
				p.Report(at(e, rule.Doubt, fmt.Sprintf("both ends of %s lie on the node %s: it does nothing", rule.Name(e.Designator), rule.Name(p.Circuit.Nodes[e.Nodes[0]].Name))))
			} else if (e.Kind == circuit.UJT || e.Kind == circuit.PUT || e.Kind == circuit.SCR) && joined(e.Nodes) {
				p.Report(at(e, rule.Hold, fmt.Sprintf("two terminals of %s lie on one node: it cannot work", rule.Name(e.Designator))))
			}
		}
	},
}

func joined(nodes []circuit.NodeID) bool {
	for i := range nodes {
		for j := range i {
			if nodes[i] == nodes[j] {
				return true
			}
		}
	}
	return false
}

var unknown = &rule.Rule{
	ID: "part-unknown", Group: group, Title: "Nothing is known of a part.",
	Why: "Neither the netlist nor a --parts file nor the library says what the part is or what it stands. It was not checked. A .model card with its " +
		"ratings, or a part= line naming a known equivalent, mends that. A model that is defined and never used is told as a remark.",
	Formula: "no .model, no subcircuit, no library row of that name", Source: practice,
	Failing: board("Planetarium pointer", "XS1 vcc b1 0 ZZ9999"),
	Mended:  board("Planetarium pointer", "RL vcc a 100", "RS b1 g 220", "RG g 0 1k", "XS1 a g 0 C106D", "*> board ambient=15..40"),
	Check: func(p *rule.Pass) {
		for _, e := range p.Circuit.Elements {
			if e.Ratings != nil || e.PartName == "" {
				continue
			}
			grade := rule.Remark
			if e.Letter == 'X' || e.Kind == circuit.Unknown && e.Letter != 'Q' && e.Letter != 'J' && e.Letter != 'M' {
				grade = rule.Doubt
			}
			f := at(e, grade, fmt.Sprintf("nothing is known of the part %s of %s: it is not checked", rule.Name(e.PartName), rule.Name(e.Designator)))
			f.At = e.ValueAt
			p.Report(f)
		}
		for _, m := range p.Circuit.UnusedModels {
			if m.At.File == fileOf(p.Circuit) {
				p.Report(rule.Finding{Grade: rule.Remark, At: m.At, Parts: []string{m.Name},
					Message: fmt.Sprintf("the model %s is defined and never used", rule.Name(m.Name))})
			}
		}
	},
}

// fileOf returns the file of the board itself: that of its first element.
func fileOf(c *circuit.Circuit) any {
	if len(c.Elements) == 0 {
		return nil
	}
	return c.Elements[0].At.File
}

var suffix = &rule.Rule{
	ID: "value-suffix-suspect", Group: group, Title: "A value is absurd for its part: the suffix is not what was meant.",
	Why: "M means milli and MEG means mega, F behind a number means femto: 1M is a milliohm, 10F is ten femtofarad. Values in the trade's " +
		"notation (4k7) are read as meant and told as a remark, since other readers take them otherwise.",
	Formula: "resistor above 0 and below 5 milliohm; capacitor below 0.05 pF or from 0.5 F up; inductor from 1 kH up", Source: "suffixes: SPICE2 input format; limits: " + practice,
	Failing: strings.Replace(board("Tram point heater"), "R1 vcc e 100k", "R1 vcc e 1M", 1),
	Mended:  strings.Replace(board("Tram point heater"), "R1 vcc e 100k", "R1 vcc e 100k", 1),
	Check: func(p *rule.Pass) {
		for _, e := range p.Circuit.Elements {
			if !e.HasValue || e.Written == "" {
				continue
			}
			if text := absurd(e); text != "" {
				f := at(e, rule.Hold, fmt.Sprintf("%s was read as %s: %s", rule.Name(e.Written), quantity.Format(e.Value.Nominal, unit(e.Kind)), text))
				f.At = e.ValueAt
				p.Report(f)
				continue
			}
			if n, err := quantity.Parse(e.Written); err == nil && n.Trade {
				f := at(e, rule.Remark, fmt.Sprintf("%s was read as %s; write %s so that every reader does", rule.Name(e.Written),
					quantity.Format(e.Value.Nominal, unit(e.Kind)), quantity.Short(e.Value.Nominal)))
				f.At = e.ValueAt
				p.Report(f)
			}
		}
	},
}

func unit(k circuit.Kind) string {
	switch k {
	case circuit.Resistor:
		return "ohm"
	case circuit.Capacitor:
		return "F"
	case circuit.Inductor:
		return "H"
	case circuit.CurrentSource:
		return "A"
	}
	return "V"
}

// absurd says what is wrong with a value, "" where nothing is.
func absurd(e *circuit.Element) string {
	v := e.Value.Nominal
	switch {
	case e.Kind == circuit.Resistor && v > 0 && v < 5e-3:
		return "no resistor is that small; M is milli, write MEG for mega"
	case e.Kind == circuit.Capacitor && v < 0.05e-12:
		return "no capacitor is that small; F behind a number is femto"
	case e.Kind == circuit.Capacitor && v >= 0.5:
		return "no timing or filter capacitor is that large; a suffix is missing"
	case e.Kind == circuit.Inductor && v >= 1e3:
		return "no coil is that large; a suffix is missing"
	}
	return ""
}

var preferred = &rule.Rule{
	ID: "value-not-preferred", Group: group, Title: "A value is in no series of its tolerance.",
	Why:     "The part cannot be bought with this value and tolerance. The next preferred values are named.",
	Formula: "value in the E series made for its tolerance, or in E24", Source: "IEC 60063",
	Failing: strings.Replace(board("Barn fan pacer"), "100k", "98k", 1),
	Mended:  board("Barn fan pacer"),
	Check: func(p *rule.Pass) {
		for _, e := range p.Circuit.Elements {
			if e.Kind != circuit.Resistor && e.Kind != circuit.Capacitor || !e.HasValue || e.Value.Nominal == 0 || e.Intent.Travel != nil || absurd(e) != "" {
				continue
			}
			v := e.Value.Nominal
			tolerance := (e.Value.High - e.Value.Low) / (2 * v)
			if quantity.IsPreferred(v, tolerance) {
				continue
			}
			f := at(e, rule.Remark, fmt.Sprintf("%s is in no series for %.3g %%; the nearest of E24 is %s", quantity.Short(v), 100*tolerance, quantity.Short(quantity.Nearest(v, 24))))
			f.At = e.ValueAt
			p.Report(f)
		}
	},
}

var assumed = &rule.Rule{
	ID: "pin-order-assumed", Group: group, Title: "The terminal order of a part was inferred from the wiring.",
	Why:     "Nobody wrote the order down, and the usual one makes no working stage here. The board was checked in the only order that does. A pins= line settles it.",
	Formula: "exactly one order of the terminals makes a working stage", Source: practice,
	Failing: board("Chapel bell", "RL vcc a 100", "RS b1 g 220", "RG g 0 1k", "XS1 a 0 g C106D", "*> board ambient=15..40"),
	Mended:  board("Chapel bell", "RL vcc a 100", "RS b1 g 220", "RG g 0 1k", "XS1 a 0 g C106D", "*> XS1 pins=a,k,g", "*> board ambient=15..40"),
	Check: func(p *rule.Pass) {
		for _, a := range p.Accounts {
			if o := a.Stage.Order; o != nil && o.Followed {
				f := at(a.Stage.Anchor, rule.Remark, fmt.Sprintf("the terminals of %s were taken as %s, the only order that makes a working stage; declare it with pins=",
					rule.Name(a.Stage.Anchor.Designator), strings.Join(o.Wiring, ", ")))
				f.Stage = a.Stage.Anchor.Designator
				p.Report(f)
			}
		}
	},
}

var contradicted = &rule.Rule{
	ID: "pin-order-contradicted", Group: group, Title: "The wiring contradicts the terminal order of a part.",
	Why:     "In the order that was declared, or that the library expects, the part makes no working stage; in exactly one other order it does. Either the order or the wiring is wrong.",
	Formula: "no working stage in the order taken, one in another", Source: practice,
	Failing: board("Ferry bell", "RL vcc a 100", "RS b1 g 220", "RG g 0 1k", "XS1 a 0 g C106D", "*> XS1 pins=a,g,k", "*> board ambient=15..40"),
	Mended:  board("Ferry bell", "RL vcc a 100", "RS b1 g 220", "RG g 0 1k", "XS1 a 0 g C106D", "*> XS1 pins=a,k,g", "*> board ambient=15..40"),
	Check: func(p *rule.Pass) {
		for _, a := range p.Accounts {
			o := a.Stage.Order
			if o == nil {
				continue
			}
			grade := rule.Hold
			if o.Followed {
				grade = rule.Doubt
			}
			f := at(a.Stage.Anchor, grade, fmt.Sprintf("the terminals of %s were given as %s (%s), but only %s makes a working stage",
				rule.Name(a.Stage.Anchor.Designator), strings.Join(o.Taken, ", "), a.Stage.Anchor.Order, strings.Join(o.Wiring, ", ")))
			f.Stage = a.Stage.Anchor.Designator
			p.Report(f)
		}
	},
}

var intentRepeated = &rule.Rule{
	ID: "intent-repeated", Group: group, Title: "An intent key was given twice.",
	Why:     "Lines for one subject add up; where a key stands twice the last one counts, and the first may be a leftover.",
	Formula: "a key given twice for one subject", Source: practice,
	Failing: board("Tank stirrer", "*> R1 tol=1%", "*> R1 tol=2%"),
	Mended:  board("Tank stirrer", "*> R1 tol=1%"),
	Check: func(p *rule.Pass) {
		for _, r := range p.Circuit.Resets {
			p.Report(rule.Finding{Grade: rule.Remark, At: r.At, Parts: []string{r.Subject},
				Message: fmt.Sprintf("%s of %s was given before; this one counts", r.Key, rule.Name(r.Subject))})
		}
	},
}
