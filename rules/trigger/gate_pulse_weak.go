package trigger

import (
	"standoff/rules/rule"
)

var pulseWeak = &rule.Rule{
	ID: "gate-pulse-weak", Group: group,
	Title: "The trigger pulse may not fire the thyristor.",
	Why: "At the end of the ramp the capacitor discharges through the unijunction into base one. What " +
		"reaches the gate has to pass the thyristor's greatest trigger voltage and current at the coldest " +
		"ambient, and feed the gate resistor besides. Where it does not, some thyristors sold under that " +
		"number never fire.",
	Formula: "i_G at v_G = V_GT: load line of V_P behind R_on through the gate network > I_GT(cold) + " +
		"V_GT(cold)/R_GK",
	Source: "must-trigger box: Teccor AN1008, Dynex AN4840; R_on from the guaranteed base-one pulse of the " +
		"sheet",
	Failing: `Bird scarer
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 22
R4 b1 g 470
XS1 a g 0 BT151-500R
RL vcc a 100
*> board ambient=0..40
.end
`,
	Mended: `Bird scarer
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2647
R2 vcc b2 220
R3 b1 0 33
R4 b1 g 68
XS1 a g 0 BT151-500L
RL vcc a 100
*> board ambient=0..40
.end
`,
	Check: each(
		rule.Case{
			Comparison: "gate_pulse_current", Place: lead, Mend: lead,
			Fails: "the thyristor may not fire",
			Value: "the pulse current at the gate", Limit: "gate and gate resistor need",
		},
		rule.Case{
			Comparison: "gate_pulse_voltage", Place: lead, Mend: lead, FailsOnly: true,
			Fails: "the thyristor may not fire",
			Value: "the pulse at the open gate", Limit: "the gate needs",
		}),
}
