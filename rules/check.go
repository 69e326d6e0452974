package rules

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"standoff/netlist"
	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/rules/rule"
)

// Options choose rules; empty lists choose all and skip none.
type Options struct {
	Only, Skip []string
	NoAdvice   bool // leave advice out, as while proving advice
}

// Unchecked is something that was not judged, and why.
type Unchecked struct {
	Rule, Stage, Because string
}

// Caution is a word on safety.
type Caution struct{ Kind, Message string }

// Result is everything that is said of a board.
type Result struct {
	Board     *netlist.Board
	Findings  []rule.Finding
	Waived    []Waived
	Unchecked []Unchecked
	Cautions  []Caution
	Problems  []source.Problem
}

// Check runs the rules over a board. The result is in a fixed order.
func Check(b *netlist.Board, opts Options) *Result {
	r := &Result{Board: b, Problems: b.Problems}
	found := run(b, opts)
	r.Findings, r.Waived = waive(b, found)
	r.Findings = slices.DeleteFunc(r.Findings, func(f rule.Finding) bool { return !opts.chooses(f.Rule) })
	if !opts.NoAdvice {
		advise(b, r.Findings)
	}
	sortFindings(r.Findings)
	slices.SortStableFunc(r.Waived, func(a, b Waived) int { return compare(a.Finding, b.Finding) })
	r.Unchecked = unchecked(b)
	r.Cautions = cautions(b.Circuit)
	return r
}

func (o Options) chooses(id string) bool {
	return (len(o.Only) == 0 || slices.Contains(o.Only, id)) && !slices.Contains(o.Skip, id)
}

// run collects the findings of the chosen rules.
func run(b *netlist.Board, opts Options) []rule.Finding {
	var list []rule.Finding
	for _, r := range Catalogue() {
		if !opts.chooses(r.ID) {
			continue
		}
		r.Check(rule.NewPass(b.Circuit, b.Accounts, func(f rule.Finding) {
			f.Rule = r.ID
			list = append(list, f)
		}))
	}
	return list
}

func sortFindings(list []rule.Finding) { slices.SortStableFunc(list, compare) }

func compare(a, b rule.Finding) int {
	pa, pb := a.At.Position(), b.At.Position()
	return cmp.Or(cmp.Compare(pa.Path, pb.Path), cmp.Compare(a.At.Start, b.At.Start), cmp.Compare(a.Rule, b.Rule),
		cmp.Compare(a.Stage, b.Stage), cmp.Compare(a.Message, b.Message))
}

// unchecked lists what could not be judged.
func unchecked(b *netlist.Board) []Unchecked {
	var list []Unchecked
	for _, a := range b.Accounts {
		for _, u := range a.Unchecked {
			list = append(list, Unchecked{u.Rule, a.Stage.Anchor.Designator, u.Because})
		}
	}
	for _, e := range b.Circuit.Elements {
		if why := noStage(e); why != "" {
			list = append(list, Unchecked{"", e.Designator, why})
		}
	}
	return list
}

// noStage says why no stage stands around an element that could anchor one.
func noStage(e *circuit.Element) string {
	switch e.Kind {
	case circuit.PUT:
		return "stages around a programmable unijunction transistor are not worked out yet"
	case circuit.Triac:
		return "gate stages of triacs are not worked out yet"
	case circuit.Diac:
		return "stages around a breakover device are not worked out yet"
	case circuit.SourceIC:
		return "current-source circuits are not worked out yet"
	case circuit.Optotriac:
		return "opto-triac stages are not worked out yet"
	case circuit.Unknown:
		if e.Letter == 'X' {
			return fmt.Sprintf("nothing is known of the part %s", source.Visible(e.PartName))
		}
	}
	return ""
}

// touchSafe is the voltage in volt up to which bare parts may be touched in a
// dry place: 42.4 V peak, 60 V dc (IEC 60950-1; the dc figure from memory).
const touchSafePeak, touchSafeDC = 42.4, 60.0

// cautions gives the usual words where mains or stored charge can hurt someone.
func cautions(c *circuit.Circuit) []Caution {
	var list []Caution
	mains, high := c.Board.Mains != nil, 0.0
	for _, e := range c.Elements {
		if e.Kind != circuit.VoltageSource || !e.HasValue {
			continue
		}
		v := math.Max(math.Abs(e.Value.Low), math.Abs(e.Value.High))
		switch e.Wave.Kind {
		case "dc", "":
			high = math.Max(high, v)
		case "ac":
			mains = mains || v*math.Sqrt2 > touchSafePeak
		default:
			mains = mains || v > touchSafePeak
		}
	}
	if mains {
		list = append(list, Caution{"mains", "parts of this board lie on the mains or a voltage that can kill. Isolate before touching, keep to local codes, " +
			"and leave the work to people licensed for it. This report replaces no inspection."})
	}
	if mains || high > touchSafeDC {
		list = append(list, Caution{"stored-charge", "capacitors on this board can stay charged after the supply is gone. Discharge them through a resistor and measure before touching."})
	} else if high > touchSafePeak {
		list = append(list, Caution{"voltage", "a supply of up to " + quantity.Format(high, "V") + " is no longer harmless in wet places."})
	}
	return list
}
