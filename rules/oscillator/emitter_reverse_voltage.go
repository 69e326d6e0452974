package oscillator

import (
	"standoff/rules/rule"
)

var emitterReverse = &rule.Rule{
	ID: "emitter-reverse-voltage", Group: group,
	Title: "The empty capacitor puts more reverse voltage on the emitter than it stands.",
	Why: "While the capacitor is empty the emitter lies near the lower rail and base two near the upper " +
		"one: nearly the whole supply stands in reverse across emitter and base two. Beyond the rating " +
		"the junction breaks down at every start of a ramp. A breakover device that leads one way only takes " +
		"what the line or a turned supply puts across it the other way.",
	Formula: "V_B2 - V_E < V_B2E",
	Source:  "reverse emitter voltage of the sheet (2N2646: 30 V)",
	Failing: `Crane warning lamp
V1 vcc 0 33
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 15
*> V1 tol=2%
*> board ambient=10..35
.end
`,
	Mended: `Crane warning lamp
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 15
*> V1 tol=2%
*> board ambient=10..35
.end
`,
	Check: each(rule.Case{
		Comparison: "emitter_reverse_voltage",
		Fails:      "the emitter breaks down in reverse at the start of every ramp",
		Value:      "the reverse voltage from base two to the emitter", Limit: "it is rated for",
	}, rule.Case{
		Comparison: "device_reverse_voltage",
		Fails:      "the {device} leads one way only and breaks down the other way",
		Value:      "the reverse voltage across it", Limit: "it is rated for",
	}),
}
