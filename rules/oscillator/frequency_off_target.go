package oscillator

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var frequencyOffTarget = &rule.Rule{
	ID: "frequency-off-target", Group: group,
	Title: "Some boards miss the declared frequency or period.",
	Why: "With every part spread, tolerance, supply, temperature and all of a potentiometer's travel " +
		"counted, the rate leaves the declared target on some boards. The worksheet divides " +
		"the spread among the parts. Of a stage that is declared latch=ok the time from an empty capacitor to the " +
		"first pulse counts.",
	Formula: "T = R_th C ln((V_th - V_V)/(V_th - V_P)) + (R_on + R_B1 + " +
		"R_E) C ln(V_P/V_V) within the target",
	Source: "Boylestad and Nashelsky, eq. 17.13 and below",
	Failing: `Aquarium dosing timer
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 1u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
*> XQ1 period=90m..110m
.end
`,
	Mended: `Aquarium dosing timer
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 1u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
*> XQ1 period=40m..170m
.end
`,
	Check: each(
		missed("frequency_lowest", "the lowest frequency"), missed("frequency_highest", "the highest frequency"),
		missed("period_shortest", "the shortest period"), missed("period_longest", "the longest period")),
}

// missed judges one end of the rate against the declared target. The target
// itself is the margin, so there is no doubt near its ends.
func missed(comparison, value string) rule.Case {
	return rule.Case{
		Comparison: comparison, Place: timing, FailsOnly: true,
		Mend:  []stage.Role{stage.TimingResistor, stage.TimingCapacitor},
		Fails: "some boards miss the target", Value: value, Limit: "the target asks for",
	}
}
