package oscillator

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var interbaseHigh = &rule.Rule{
	ID: "interbase-voltage-high", Group: group,
	Title: "The voltage between the bases is above the rating.",
	Why: "The bar of the transistor is rated for a voltage between the bases. Above it the part may break " +
		"down or heat up beyond rescue.",
	Formula: "V_BB < V_B2B1",
	Source:  "interbase voltage of the sheet (2N2646: 35 V)",
	Failing: `Hoist interlock timer
V1 vcc 0 40
R1 vcc e 220k
C1 e 0 0.22u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 10
*> V1 tol=2%
.end
`,
	Mended: `Hoist interlock timer
V1 vcc 0 20
R1 vcc e 220k
C1 e 0 0.22u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 10
*> V1 tol=2%
.end
`,
	Check: each(rule.Case{
		Comparison: "interbase_voltage", Mend: []stage.Role{stage.BaseTwo},
		Fails: "the transistor may break down between its bases",
		Value: "the interbase voltage", Limit: "it is rated for",
	}),
}
