package trigger

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var pulseShort = &rule.Rule{
	ID: "gate-pulse-short", Group: group,
	Title: "The trigger pulse is over before the thyristor has turned on.",
	Why: "Trigger currents of the sheets hold for pulses of 20 us and more. A shorter pulse needs more " +
		"current in proportion; a pulse that falls below the required current too early, or before the " +
		"turn-on time, leaves the thyristor off.",
	Formula: "time above the required current > max(t_gt, 20 us I_required/I_pulse)",
	Source: "20 us: trigger data of TIC106, TYN1212; constant charge: conservative reading of the inverse law " +
		"of pulse width",
	Failing: `Photo flash trigger
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 10n
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 22
R4 b1 g 100
XS1 a g 0 BT151-500L
RL vcc a 100
*> board ambient=15..35
.end
`,
	Mended: `Photo flash trigger
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 1u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 47
R4 b1 g 47
XS1 a g 0 BT151-500L
RL vcc a 100
*> board ambient=15..35
.end
`,
	Check: each(rule.Case{
		Comparison: "gate_pulse_width",
		Place:      []stage.Role{stage.TimingCapacitor},
		Mend:       []stage.Role{stage.GateSeries, stage.BaseOne, stage.TimingCapacitor},
		Fails:      "the pulse is over before the thyristor is on",
		Value:      "the usable pulse width", Limit: "turning on takes",
	}),
}
