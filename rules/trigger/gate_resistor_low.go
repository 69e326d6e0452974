package trigger

import (
	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var resistorLow = &rule.Rule{
	ID: "gate-resistor-low", Group: group,
	Title: "The gate resistor takes the pulse away from the gate.",
	Why: "The resistor across the gate draws V_GT/R_GK before the gate gets anything. Here the drive would " +
		"fire the thyristor without it and does not with it.",
	Formula: "V_GT(cold)/R_GK < drive current - I_GT(cold)",
	Source: "footnote of the C106, 2N5060, MCR100 and MCR106 sheets: the resistor's current is not part of " +
		"I_GT",
	Failing: `Lathe brake
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 47
R4 b1 g 100
XS1 a g 0 BT151-500L
R5 g 0 10
RL vcc a 100
*> board ambient=15..35
.end
`,
	Mended: `Lathe brake
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 47
R4 b1 g 68
XS1 a g 0 BT151-500L
R5 g 0 470
RL vcc a 100
*> board ambient=15..35
.end
`,
	Check: func(p *rule.Pass) {
		p.Each(stage.SCRGate, func(a *operating.Account) {
			if k, ok := a.Comparison("gate_shunt_current"); ok && k.Limit <= 0 {
				return // too weak without any resistor: gate-pulse-weak tells
			}
			p.Judge(a, rule.Case{
				Comparison: "gate_shunt_current", Place: shunt, Mend: shunt, FailsOnly: true,
				Fails: "the gate resistor takes the pulse away",
				Value: "the current of the gate resistor", Limit: "the drive can spare",
			})
		})
	},
}
