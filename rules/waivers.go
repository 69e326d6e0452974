package rules

import (
	"fmt"
	"strings"
	"sync"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/rules/rule"
)

// Waived is a finding that a waiver set aside.
type Waived struct {
	Finding rule.Finding
	Reason  string
	Line    int         // of the waiver
	At      source.Span // the waiver
}

const waiverBoard = `Pump house bell
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 vcc 2N2646
R3 b1 0 22
`

const explained = "*> waive base-two-resistor-missing XQ1 : the room is kept at one temperature\n"

// waiverRules documents the rules that Check judges itself.
func waiverRules() []*rule.Rule {
	nothing := func(*rule.Pass) {}
	return []*rule.Rule{
		{ID: "waiver-unused", Group: "Netlist", Title: "A waiver sets nothing aside.",
			Why: "The finding it was written for is gone, or rule or designator are misspelt. A waiver that " +
				"stays behind " +
				"hides the next finding of its kind. A waiver of a rule that was left out of this run is not judged.",
			Formula: "no finding of that rule at that designator", Source: "common practice, no source",
			Failing: waiverBoard + "*> waive timing-capacitor-small XQ1 : drawn from the old " +
				"board\n" + explained + ".end\n",
			Mended: waiverBoard + explained + ".end\n", Check: nothing},
		{ID: "waiver-unexplained", Group: "Netlist", Title: "A waiver gives no reason.",
			Why: "Whoever reads the board next cannot tell a decision from a habit. The finding is set aside " +
				"all the same.",
			Formula: "waive RULE DESIGNATOR without : reason", Source: "common practice, no source",
			Failing: waiverBoard + "*> waive base-two-resistor-missing XQ1\n.end\n",
			Mended:  waiverBoard + explained + ".end\n", Check: nothing},
	}
}

// waive splits findings into those that stand and those that a waiver sets aside.
func waive(c *circuit.Circuit, findings []rule.Finding) (stand []rule.Finding, aside []Waived) {
	for _, f := range findings {
		if w := waiverFor(c.Waivers, f); w != nil {
			aside = append(aside, Waived{f, w.Reason, w.At.Position().Line, w.At})
		} else {
			stand = append(stand, f)
		}
	}
	return stand, aside
}

// waiverFor finds the waiver that names the rule and the stage or a part of a
// finding; nil where there is none.
func waiverFor(waivers []circuit.Waiver, f rule.Finding) *circuit.Waiver {
	for i := range waivers {
		w := &waivers[i]
		if !strings.EqualFold(w.Rule, f.Rule) {
			continue
		}
		if f.Stage != "" && strings.EqualFold(w.Designator, f.Stage) {
			return w
		}
		for _, p := range f.Parts {
			if strings.EqualFold(w.Designator, p) {
				return w
			}
		}
	}
	return nil
}

// judgeWaivers tells waivers that set nothing aside or give no reason. A waiver in
// a subcircuit stands for every instance and is judged once.
func judgeWaivers(c *circuit.Circuit, aside []Waived, opts Options) []rule.Finding {
	used, judged := map[source.Span]bool{}, map[source.Span]bool{}
	for _, w := range aside {
		used[w.At] = true
	}
	onBoard := sync.OnceValue(func() map[string]bool { return designators(c) })
	var list []rule.Finding
	tell := func(w circuit.Waiver, id, message string) {
		if opts.chooses(id) {
			list = append(list, rule.Finding{Rule: id, Grade: rule.Doubt, At: w.At, Parts: []string{w.Designator},
				Message: message})
		}
	}
	for _, w := range c.Waivers {
		if judged[w.At] {
			continue
		}
		judged[w.At] = true
		if !used[w.At] && opts.chooses(strings.ToLower(w.Rule)) {
			why := "the rule finds nothing there"
			if _, known := Find(strings.ToLower(w.Rule)); !known {
				why = "there is no such rule (standoff rules lists them)"
			} else if !onBoard()[strings.ToLower(w.Designator)] {
				why = "there is no such part on this board"
			}
			tell(w, "waiver-unused", fmt.Sprintf("this waiver of %s at %s sets nothing aside: %s", rule.Name(w.Rule),
				rule.Name(w.Designator), why))
		}
		if w.Reason == "" {
			tell(w, "waiver-unexplained", "this waiver gives no reason; write one behind a colon")
		}
	}
	return list
}

// designators returns the names of all parts, in lower case.
func designators(c *circuit.Circuit) map[string]bool {
	names := make(map[string]bool, len(c.Elements))
	for _, e := range c.Elements {
		names[strings.ToLower(e.Designator)] = true
	}
	return names
}
