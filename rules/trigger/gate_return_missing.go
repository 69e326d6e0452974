package trigger

import (
	"standoff/rules/rule"
)

var returnMissing = &rule.Rule{
	ID: "gate-return-missing", Group: group,
	Title: "The gate has no dc path to its cathode.",
	Why: "Without a path for leakage from gate to cathode the gate floats up by itself and the thyristor " +
		"fires when hot, or when its voltage rises steeply.",
	Formula: "a dc path from gate to cathode other than through the thyristor",
	Source:  "common practice, no source",
	Failing: `Egg turner
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 22
D1 b1 g DG
.model DG d
XS1 a g 0 C106D
RL vcc a 100
.end
`,
	Mended: `Egg turner
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 22
D1 b1 g DG
.model DG d
XS1 a g 0 C106D
R5 g 0 820
RL vcc a 100
.end
`,
	Check: fact("gate-return-missing",
		"leakage has no way from the gate: there is no dc path from gate to cathode",
		"add a resistor from gate to cathode; 1 kohm is what most sheets are stated with"),
}
