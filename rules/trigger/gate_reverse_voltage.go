package trigger

import (
	"standoff/rules/rule"
)

var reverse = &rule.Rule{
	ID: "gate-reverse-voltage", Group: group,
	Title: "The gate is driven further negative than it stands.",
	Why: "A gate junction breaks down in reverse at 5 to 10 V. A negative bias beyond the rating damages " +
		"it slowly.",
	Formula: "V_KG < V_GRM",
	Source:  "reverse gate voltage of the sheet",
	Failing: `Winch guard
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 22
R4 b1 g 100
XS1 a g 0 C106D
RL vcc a 100
VB n 0 -12
R6 n g 47
.end
`,
	Mended: `Winch guard
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 22
R4 b1 g 47
XS1 a g 0 C106D
RL vcc a 100
VB n 0 -12
R6 n g 470
.end
`,
	Check: each(rule.Case{
		Comparison: "gate_reverse_voltage", Place: shunt, Mend: shunt,
		Fails: "the gate breaks down in reverse",
		Value: "the reverse gate voltage", Limit: "the gate is rated for",
	}),
}
