package oscillator

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var sourceCompliance = &rule.Rule{
	ID: "current-source-compliance", Group: group,
	Title: "The current source leaves its range before the ramp is over.",
	Why: "A transistor, field-effect transistor, regulator diode or three-terminal source keeps its current " +
		"only while enough voltage stands across it. Near the peak of the ramp the least is left: there a " +
		"transistor saturates and the ramp bends over, late or never reaching the peak. With the capacitor " +
		"empty the most stands across it, and a circuit may break down; and a resistor can ask it for a " +
		"current outside its range.",
	Formula: "V_source at V_P > V_CE(sat) of 0.3 V, V_P of the channel, or V_min of the sheet; at the valley " +
		"< V_max; I_min < I < I_max; C > I over the slew rate",
	Source: "LM334: TI SNVS746E, at least 1 V, at most 30 V (ST), 1 uA .. 10 mA; transistor saturated below " +
		"0.3 V: common practice, no source",
	Failing: `Seed drill pulse, linear ramp
V1 vcc 0 12
XI1 vcc e 1N5303
C1 e 0 2.2u
XQ2 e b1 b2 2N2647
R2 vcc b2 330
R3 b1 0 47
*> C1 kind=film
.end
`,
	Mended: `Seed drill pulse, linear ramp
V1 vcc 0 15
XI1 vcc e 1N5303
C1 e 0 2.2u
XQ2 e b1 b2 2N2647
R2 vcc b2 330
R3 b1 0 47
*> C1 kind=film
.end
`,
	Check: each(rule.Case{
		Comparison: "current_source_voltage", Place: source,
		Fails: "the ramp bends over before it reaches the peak",
		Value: "what is left across the current source at the peak", Limit: "it needs",
	}, rule.Case{
		Comparison: "current_source_voltage_greatest", Place: source,
		Fails: "the current source may break down while the capacitor is empty",
		Value: "the voltage across the current source", Limit: "it stands",
	}, rule.Case{
		Comparison: "current_source_slew", Place: []stage.Role{stage.TimingCapacitor},
		Mend: []stage.Role{stage.TimingCapacitor}, FailsOnly: true,
		Fails: "the ramp rises faster than the current source follows",
		Value: "the timing capacitor", Limit: "it follows with",
	}, rule.Case{
		Comparison: "current_source_least", Place: timing, Mend: timingOnly, FailsOnly: true,
		Fails: "the current source is set below its range",
		Value: "its current", Limit: "its range begins at",
	}, rule.Case{
		Comparison: "current_source_greatest", Place: timing, Mend: timingOnly, FailsOnly: true,
		Fails: "the current source is set above its range",
		Value: "its current", Limit: "its range ends at",
	}),
}

// source is the current source itself, timingOnly what sets its current.
var (
	source     = []stage.Role{stage.CurrentSource}
	timingOnly = []stage.Role{stage.TimingResistor}
)
