package wiring

import (
	"fmt"
	"strings"

	"standoff/netlist/circuit"
	"standoff/rules/rule"
)

func designatorRepeated() *rule.Rule {
	return &rule.Rule{
		ID: "designator-repeated", Group: group, Title: "Two parts have the same designator.",
		Why: "One of the two is a copy that was not renamed: on the board, in the parts list or in the " +
			"placement one of " +
			"them will be missing.",
		Formula: "a designator used twice in one scope", Source: practice,
		Failing: board("Stage curtain timer", "R2 vcc 0 10k"),
		Mended:  board("Stage curtain timer", "R4 vcc 0 10k"),
		Check: func(p *rule.Pass) {
			report := once(p)
			count := timesTold(p.Circuit.Repeats)
			for _, r := range p.Circuit.Repeats {
				n := count[strings.ToLower(r.Designator)]
				if count[strings.ToLower(r.Designator)] = 0; n == 0 {
					continue
				}
				first, here := r.First.Position(), r.At.Position()
				where := fmt.Sprintf("line %d", first.Line)
				if first.Path != here.Path {
					where += " of " + rule.Name(first.Path)
				}
				report(rule.Finding{Grade: rule.Hold, At: r.At, Parts: []string{r.Designator},
					Message: fmt.Sprintf("%s stands %s; the first is on %s", rule.Name(r.Designator), times(n), where)})
			}
		},
	}
}

// timesTold counts the repeats of each designator: a part copied a thousand times
// is one fault.
func timesTold(repeats []circuit.Repeat) map[string]int {
	count := map[string]int{}
	for _, r := range repeats {
		count[strings.ToLower(r.Designator)]++
	}
	return count
}

func times(repeats int) string {
	if repeats == 1 {
		return "twice"
	}
	return fmt.Sprintf("%d times", repeats+1)
}
