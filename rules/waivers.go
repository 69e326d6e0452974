package rules

import (
	"fmt"
	"strings"

	"standoff/netlist"
	"standoff/netlist/circuit"
	"standoff/rules/rule"
)

// Waived is a finding that a waiver set aside.
type Waived struct {
	Finding rule.Finding
	Reason  string
	Line    int
}

const waiverBoard = "Pump house bell\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.22u\nXQ1 e b1 vcc 2N2646\nR3 b1 0 22\n"

// waiverRules documents the rules that Check judges itself.
func waiverRules() []*rule.Rule {
	nothing := func(*rule.Pass) {}
	return []*rule.Rule{
		{ID: "waiver-unused", Group: "Netlist", Title: "A waiver sets nothing aside.",
			Why:     "The finding it was written for is gone, or rule or designator are misspelt. A waiver that stays behind hides the next finding of its kind.",
			Formula: "no finding of that rule at that designator", Source: "common practice, no source",
			Failing: waiverBoard + "R2 vcc 0 10k\n*> waive timing-capacitor-small XQ1 : drawn from the old board\n*> waive base-two-resistor-missing XQ1 : the room is kept at one temperature\n.end\n",
			Mended:  waiverBoard + "R2 vcc 0 10k\n*> waive base-two-resistor-missing XQ1 : the room is kept at one temperature\n.end\n", Check: nothing},
		{ID: "waiver-unexplained", Group: "Netlist", Title: "A waiver gives no reason.",
			Why:     "Whoever reads the board next cannot tell a decision from a habit. The finding is set aside all the same.",
			Formula: "waive RULE DESIGNATOR without : reason", Source: "common practice, no source",
			Failing: waiverBoard + "*> waive base-two-resistor-missing XQ1\n.end\n",
			Mended:  waiverBoard + "*> waive base-two-resistor-missing XQ1 : the room is kept at one temperature\n.end\n", Check: nothing},
	}
}

// waive splits findings into those that stand and those set aside, and judges
// the waivers.
func waive(b *netlist.Board, findings []rule.Finding) (stand []rule.Finding, aside []Waived) {
	used := make([]bool, len(b.Circuit.Waivers))
	for _, f := range findings {
		i := waiverFor(b.Circuit.Waivers, f)
		if i < 0 {
			stand = append(stand, f)
			continue
		}
		used[i] = true
		w := b.Circuit.Waivers[i]
		aside = append(aside, Waived{f, w.Reason, w.At.Position().Line})
	}
	for i, w := range b.Circuit.Waivers {
		if !used[i] {
			stand = append(stand, rule.Finding{Rule: "waiver-unused", Grade: rule.Doubt, At: w.At, Parts: []string{w.Designator},
				Message: fmt.Sprintf("this waiver of %s at %s sets nothing aside", rule.Name(w.Rule), rule.Name(w.Designator))})
		}
		if w.Reason == "" {
			stand = append(stand, rule.Finding{Rule: "waiver-unexplained", Grade: rule.Doubt, At: w.At, Parts: []string{w.Designator},
				Message: "this waiver gives no reason; write one behind a colon"})
		}
	}
	return stand, aside
}

// waiverFor finds the waiver that names the rule and the stage or a part of a
// finding; -1 where there is none.
func waiverFor(waivers []circuit.Waiver, f rule.Finding) int {
	for i, w := range waivers {
		if w.Rule != f.Rule {
			continue
		}
		if strings.EqualFold(w.Designator, f.Stage) {
			return i
		}
		for _, p := range f.Parts {
			if strings.EqualFold(w.Designator, p) {
				return i
			}
		}
	}
	return -1
}
