package wiring

import (
	"fmt"
	"strings"

	"standoff/netlist/circuit"
	"standoff/rules/rule"
)

func intentRepeated() *rule.Rule {
	return &rule.Rule{
		ID: "intent-repeated", Group: group, Title: "An intent key was given twice.",
		Why: "Lines for one subject add up; where a key stands twice the last one counts, and the first " +
			"may be a leftover.",
		Formula: "a key given twice for one subject", Source: practice,
		Failing: board("Tank stirrer", "*> R1 tol=1%", "*> R1 tol=2%"),
		Mended:  board("Tank stirrer", "*> R1 tol=1%"),
		Check: func(p *rule.Pass) {
			report, last := once(p), map[[2]string]int{}
			subject := func(r circuit.Reset) [2]string {
				return [2]string{strings.ToLower(r.Subject), strings.ToLower(r.Key)}
			}
			for i, r := range p.Circuit.Resets {
				last[subject(r)] = i
			}
			for i, r := range p.Circuit.Resets {
				if last[subject(r)] != i {
					continue // only the last one counts
				}
				report(rule.Finding{Grade: rule.Remark, At: r.At, Parts: []string{r.Subject},
					Message: fmt.Sprintf("%s of %s was given before; this one "+
						"counts", rule.Name(r.Key), rule.Name(r.Subject))})
			}
		},
	}
}
