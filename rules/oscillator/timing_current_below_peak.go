package oscillator

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var currentBelowPeak = &rule.Rule{
	ID: "timing-current-below-peak", Group: group,
	Title: "The stage may never fire: too little current reaches the emitter at the peak.",
	Why: "Near the peak voltage the emitter begins to conduct, and the timing resistor has to supply the " +
		"peak-point current I_P before the transistor can snap over. Where it supplies less, the " +
		"capacitor stops a little short of the peak and stays there: the stage is silent. It happens " +
		"first with a part of high stand-off ratio, in the cold, on a low supply. A programmable " +
		"unijunction asks for the I_P of its gate resistance, a breakover device for its breakover current.",
	Formula: "(V_th - V_P)/R_th > I_P; below its test voltage I_P is carried over as I_P (V_test/V_BB)^1.3",
	Source: "Boylestad and Nashelsky, Electronic Devices and Circuit Theory, eq. 17.6; I_P against V_BB: " +
		"2N5431 data sheet (0.4 uA at 25 V, 4 uA at 4 V); PUT: 2N6027 data sheet",
	Failing: `Well pump cycle timer
V1 vcc 0 12
R1 vcc e 4.7meg
C1 e 0 1u
XQ1 e b1 b2 2N2646
R2 vcc b2 470
R3 b1 0 22
.end
`,
	Mended: `Well pump cycle timer
V1 vcc 0 12
R1 vcc e 100k
C1 e 0 1u
XQ1 e b1 b2 2N2646
R2 vcc b2 470
R3 b1 0 22
.end
`,
	Check: each(rule.Case{
		Comparison: "charging_current_at_peak", Place: timing, Mend: []stage.Role{stage.TimingResistor},
		Fails: "the stage may never fire",
		Value: "the charging current at the peak", Limit: "the {device} needs",
	}),
}
