package trigger

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var latchingSlow = &rule.Rule{
	ID: "latching-too-slow", Group: group,
	Title: "The load current has not reached the latching current when the pulse ends.",
	Why: "A thyristor stays on only if its load carries the latching current before the gate pulse is " +
		"over. An inductive load takes time for it; a load that never carries it leaves the thyristor off " +
		"after every pulse.",
	Formula: "-(L/R) ln(1 - I_L R/V) < pulse width; V/R > I_L",
	Source: "Rashid, Power Electronics, ex. 10.11, with the latching " +
		"current in place of the holding current",
	Failing: `Solenoid plunger
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 15
R4 b1 g 220
XS1 a g 0 C106D
R5 g 0 1k
RL vcc x 100
L1 x a 2
*> XS1 load=inductive
.end
`,
	Mended: `Solenoid plunger
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 1u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 15
R4 b1 g 220
XS1 a g 0 C106D
R5 g 0 1k
RL vcc x 100
L1 x a 10m
*> XS1 load=inductive
.end
`,
	Check: each(rule.Case{
		Comparison: "latching_time", Place: []stage.Role{stage.Load},
		Fails: "the thyristor does not stay on after the pulse",
		Value: "the time to the latching current", Limit: "the pulse lasts",
	}),
}
