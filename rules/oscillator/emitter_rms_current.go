package oscillator

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var emitterRMS = &rule.Rule{
	ID: "emitter-rms-current", Group: group,
	Title: "Large pulses follow so fast that the emitter runs hot.",
	Why: "A large capacitor discharged often puts more rms current through the emitter than it is rated " +
		"for, though each single pulse may be within its peak.",
	Formula: "I_pk sqrt(tau/(2 T)) < I_E(rms), tau = (R_on + R_B1 + R_E) C",
	Source:  "rms of an exponential pulse (derived); rating of the sheet",
	Failing: `Stroboscope for a lathe
V1 vcc 0 20
R1 vcc e 4.7k
C1 e 0 8.2u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 4.7
*> C1 kind=film
*> R1 tol=1%
.end
`,
	Mended: `Stroboscope for a lathe
V1 vcc 0 20
R1 vcc e 47k
C1 e 0 8.2u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 4.7
*> C1 kind=film
*> R1 tol=1%
.end
`,
	Check: each(rule.Case{
		Comparison: "emitter_current_rms",
		Place:      []stage.Role{stage.TimingCapacitor},
		Mend:       []stage.Role{stage.TimingResistor, stage.TimingCapacitor},
		Fails:      "the emitter runs hotter than it may",
		Value:      "the rms emitter current", Limit: "the emitter is rated for",
	}),
}
