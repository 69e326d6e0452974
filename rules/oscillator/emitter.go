package oscillator

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var discharge = []stage.Role{stage.EmitterSeries, stage.BaseOne}

var emitterSurge = &rule.Rule{
	ID: "emitter-surge-current", Group: group,
	Title: "The discharge drives more current through the emitter than it is rated for.",
	Why: "At the end of each ramp the capacitor empties through the emitter; only the on-resistance of the transistor and the resistors in the " +
		"emitter and base-one leads limit the current. Beyond the rated peak the junction is damaged a little at every pulse.",
	Formula: "V_P/(R_on + R_B1 + R_E) < I_E(pulse), unless the maker allows the capacitor without a resistor",
	Source:  "peak emitter current of the sheet; R_on from the guaranteed base-one pulse",
	Failing: deck2("Ice rink bell", "24", "47k", "22u", "2N4870", "4.7", "*> C1 kind=film", "*> all V tol=1%"),
	Mended:  deck2("Ice rink bell", "24", "47k", "22u", "2N4870", "47", "*> C1 kind=film", "*> all V tol=1%"),
	Check: each(rule.Case{Comparison: "discharge_peak_current", Place: discharge, Mend: discharge,
		Fails: "every discharge may damage the emitter", Value: "the peak emitter current", Limit: "the emitter is rated for"}),
}

// deck2 is deck with another transistor.
func deck2(title, supply, rt, ct, transistor, rb1 string, more ...string) string {
	text := title + "\nV1 vcc 0 " + supply + "\nR1 vcc e " + rt + "\nC1 e 0 " + ct + "\nXQ1 e b1 b2 " + transistor +
		"\nR2 vcc b2 330\nR3 b1 0 " + rb1 + "\n"
	for _, m := range more {
		text += m + "\n"
	}
	return text + ".end\n"
}

var emitterRMS = &rule.Rule{
	ID: "emitter-rms-current", Group: group,
	Title:   "Large pulses follow so fast that the emitter runs hot.",
	Why:     "A large capacitor discharged often puts more rms current through the emitter than it is rated for, though each single pulse may be within its peak.",
	Formula: "I_pk sqrt(tau/(2 T)) < I_E(rms), tau = (R_on + R_B1 + R_E) C",
	Source:  "rms of an exponential pulse (derived); rating of the sheet",
	Failing: deck("Stroboscope for a lathe", "20", "4.7k", "8.2u", "330", "4.7", "*> C1 kind=film", "*> R1 tol=1%"),
	Mended:  deck("Stroboscope for a lathe", "20", "47k", "8.2u", "330", "4.7", "*> C1 kind=film", "*> R1 tol=1%"),
	Check: each(rule.Case{Comparison: "emitter_current_rms", Place: []stage.Role{stage.TimingCapacitor},
		Mend: []stage.Role{stage.TimingResistor, stage.TimingCapacitor}, Fails: "the emitter runs hotter than it may",
		Value: "the rms emitter current", Limit: "the emitter is rated for"}),
}

var emitterReverse = &rule.Rule{
	ID: "emitter-reverse-voltage", Group: group,
	Title: "The empty capacitor puts more reverse voltage on the emitter than it stands.",
	Why: "While the capacitor is empty the emitter lies near the lower rail and base two near the upper one: nearly the whole supply stands in " +
		"reverse across emitter and base two. Beyond the rating the junction breaks down at every start of a ramp.",
	Formula: "V_B2 - V_E < V_B2E",
	Source:  "reverse emitter voltage of the sheet (2N2646: 30 V)",
	Failing: deck("Crane warning lamp", "33", "100k", "0.22u", "330", "15", "*> V1 tol=2%", "*> board ambient=10..35"),
	Mended:  deck("Crane warning lamp", "20", "100k", "0.22u", "330", "15", "*> V1 tol=2%", "*> board ambient=10..35"),
	Check: each(rule.Case{Comparison: "emitter_reverse_voltage", Place: nil, Mend: []stage.Role{stage.Supply},
		Fails: "the emitter breaks down in reverse at the start of every ramp", Value: "the reverse voltage from base two to the emitter",
		Limit: "it is rated for"}),
}
