package wiring

import (
	"strings"

	"standoff/rules/rule"
)

func groundMissing() *rule.Rule {
	return &rule.Rule{
		ID: "ground-missing", Group: group, Title: "No node is ground.",
		Why: "Nothing on the board is node 0 or gnd, so no voltage has a reference, and a ground that was " +
			"meant is not " +
			"connected. Other programs refuse such a netlist.",
		Formula: "no card names node 0 or gnd", Source: practice,
		Failing: strings.ReplaceAll(board("Sluice gate timer"), " 0 ", " com "),
		Mended:  board("Sluice gate timer"),
		Check: func(p *rule.Pass) {
			if !p.Circuit.GroundNamed && len(p.Circuit.Elements) > 0 {
				p.Report(about(p.Circuit.Elements[0], rule.Hold, "no node is ground: no card names node 0 or gnd"))
			}
		},
	}
}
