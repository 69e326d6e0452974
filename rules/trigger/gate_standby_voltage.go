package trigger

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var standby = &rule.Rule{
	ID: "gate-standby-voltage", Group: group,
	Title: "The standing voltage at base one may fire a hot thyristor.",
	Why: "The bar current flows through the base-one resistor all the time. The voltage that it leaves on " +
		"the gate has to stay below what a hot thyristor is guaranteed not to trigger on, or it fires as " +
		"soon as the supply comes up.",
	Formula: "V1 R_B1/(R_B1 + R_BB + R_B2), through the gate network < V_GD",
	Source:  "Boylestad and Nashelsky, eq. 17.9; V_GD of the sheet, hot",
	Failing: `Fog horn relay
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 100
R4 b1 g 47
XS1 a g 0 C106D
R5 g 0 10k
RL vcc a 100
.end
`,
	Mended: `Fog horn relay
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 22
R4 b1 g 47
XS1 a g 0 C106D
R5 g 0 10k
RL vcc a 100
.end
`,
	Check: each(rule.Case{
		Comparison: "gate_standby_voltage",
		Place:      []stage.Role{stage.BaseOne, stage.GateSeries},
		Mend:       []stage.Role{stage.BaseOne, stage.GateShunt, stage.GateSeries},
		Fails:      "a hot thyristor may fire by itself",
		Value:      "the standing voltage on the gate", Limit: "it is sure not to fire below",
	}),
}
