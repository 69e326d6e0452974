package trigger

import (
	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var resistorMissing = &rule.Rule{
	ID: "gate-resistor-missing", Group: group,
	Title: "The gate has no resistor as low as the one its sheet is stated with.",
	Why: "Sensitive-gate thyristors block, and resist steep voltages, only with a resistor from gate to " +
		"cathode. With more resistance their own leakage may fire them when hot.",
	Formula: "dc resistance gate to cathode through everything connected <= R_GK of the sheet",
	Source:  "blocking conditions of the sheets (C106, TIC106, MCR100, BT149: 1 kohm)",
	Failing: `Reed organ tremulant
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 22
D1 b1 g DG
.model DG d
XS1 a g 0 C106D
R5 g 0 10k
RL vcc a 100
.end
`,
	Mended: `Reed organ tremulant
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
	Check: func(p *rule.Pass) {
		p.Each(stage.SCRGate, func(a *operating.Account) {
			if a.Facts["gate-return-missing"] {
				return // gate-return-missing tells
			}
			p.Judge(a, rule.Case{
				Comparison: "gate_shunt_resistance", Place: shunt, Mend: shunt, FailsOnly: true,
				Fails: "leakage and steep voltages may fire the thyristor",
				Value: "the resistance from gate to cathode", Limit: "its sheet is stated with",
			})
		})
	},
}
