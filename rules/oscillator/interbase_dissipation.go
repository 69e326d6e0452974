package oscillator

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var interbaseDissipation = &rule.Rule{
	ID: "interbase-dissipation", Group: group,
	Title: "The transistor gets hotter than it may.",
	Why: "The bar conducts all the time and turns V_BB^2/R_BB into heat; the emitter adds the energy of " +
		"every discharge. What the case may dissipate falls with the ambient temperature.",
	Formula: "V_BB^2/R_BB + C V_P^2 f/2 < P_D - slope (T_A - 25 deg C)",
	Source:  "power and derating of the sheet (2N2646: 300 mW, 3 mW/K)",
	Failing: `Boiler room sequencer
V1 vcc 0 28
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 10
*> V1 tol=2%
*> board ambient=40..90
.end
`,
	Mended: `Boiler room sequencer
V1 vcc 0 16
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 10
*> V1 tol=2%
*> board ambient=40..90
.end
`,
	Check: each(rule.Case{
		Comparison: "interbase_power", Mend: []stage.Role{stage.BaseTwo},
		Fails: "the transistor gets hotter than it may",
		Value: "the power in it", Limit: "it may take at this ambient",
	}),
}
