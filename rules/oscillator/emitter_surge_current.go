package oscillator

import (
	"standoff/rules/rule"
)

var emitterSurge = &rule.Rule{
	ID: "emitter-surge-current", Group: group,
	Title: "The discharge drives more current through the emitter than it is rated for.",
	Why: "At the end of each ramp the capacitor empties through the emitter; only the on-resistance of the " +
		"transistor and the resistors in the emitter and base-one leads limit the current. Beyond the " +
		"rated peak the junction is damaged a little at every pulse. The same goes for the repetitive peak " +
		"current of a programmable unijunction or a breakover device.",
	Formula: "V_P/(R_on + R_B1 + R_E) < I_E(pulse), unless the maker " +
		"allows the capacitor without a resistor",
	Source: "peak emitter current of the sheet; R_on from the guaranteed base-one pulse",
	Failing: `Ice rink bell
V1 vcc 0 24
R1 vcc e 47k
C1 e 0 22u
XQ1 e b1 b2 2N4870
R2 vcc b2 330
R3 b1 0 4.7
*> C1 kind=film
*> all V tol=1%
.end
`,
	Mended: `Ice rink bell
V1 vcc 0 24
R1 vcc e 47k
C1 e 0 22u
XQ1 e b1 b2 2N4870
R2 vcc b2 330
R3 b1 0 47
*> C1 kind=film
*> all V tol=1%
.end
`,
	Check: each(rule.Case{
		Comparison: "discharge_peak_current", Place: discharge, Mend: discharge,
		Fails: "every discharge may damage the {device}",
		Value: "the peak {terminal} current", Limit: "the {terminal} is rated for",
	}),
}
