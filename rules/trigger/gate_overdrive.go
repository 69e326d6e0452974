package trigger

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var overdrive = &rule.Rule{
	ID: "gate-overdrive", Group: group,
	Title: "The trigger pulse is more than the gate stands.",
	Why: "Small thyristors have small gates: 0.2 A for a C106, 0.1 W for many TO-92 types. A capacitor " +
		"emptied through a few ohm exceeds that. It is a hold where resistors on the board set the " +
		"current, a doubt where it hangs on the driver's own on-resistance.",
	Formula: "shorted-gate current < I_GM; E^2/(4 R) of the drive < P_GM",
	Source:  "upper bounds for any gate characteristic (straight load line); ratings of the sheet",
	Failing: `Pinball bumper
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 33
R4 b1 g 10
XS1 a g 0 C106D
R5 g 0 1k
RL vcc a 100
.end
`,
	Mended: `Pinball bumper
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 15
R4 b1 g 220
XS1 a g 0 C106D
R5 g 0 1k
RL vcc a 100
.end
`,
	Check: each(
		rule.Case{
			Comparison: "gate_peak_current", Place: lead, Mend: []stage.Role{stage.GateSeries}, FailsOnly: true,
			Fails: "the pulse may damage the gate",
			Value: "the peak gate current", Limit: "the gate is rated for",
		},
		rule.Case{
			Comparison: "gate_peak_power", Place: lead, Mend: []stage.Role{stage.GateSeries}, FailsOnly: true,
			Fails: "the pulse may damage the gate",
			Value: "the peak gate power", Limit: "the gate is rated for",
		}),
}
