package trigger

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var polarity = &rule.Rule{
	ID: "gate-polarity", Group: group,
	Title: "The pulse reaches the gate with the wrong sign.",
	Why: "A thyristor fires on a gate that goes positive against its cathode. Here the pulse leaves the " +
		"gate at or below its cathode.",
	Formula: "pulse at the open gate > 0",
	Source:  "definition of the device",
	Failing: `Gate buzzer
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 22
D1 g b1 DG
.model DG d
XS1 a g 0 C106D
R5 g 0 820
RL vcc a 100
.end
`,
	Mended: `Gate buzzer
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
	Check: fact("gate-polarity", "the pulse does not drive the gate positive against its cathode",
		"turn the part in the gate lead round", stage.GateSeries),
}
