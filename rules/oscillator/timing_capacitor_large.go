package oscillator

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var capacitorLarge = &rule.Rule{
	ID: "timing-capacitor-large", Group: group,
	Title: "The timing capacitor is larger than the emitter may discharge without a resistor.",
	Why: "The makers allow a capacitor to be discharged straight into the emitter only up to a size. A " +
		"larger one needs enough resistance in the emitter or base-one lead to keep the pulse below the " +
		"rated peak emitter current, or the junction is damaged a little at every pulse. For a programmable " +
		"unijunction the makers limit the energy.",
	Formula: "C > C_direct of the sheet while R_B1 + R_E < V_P/I_E(pulse); PUT: C V_P^2/2 < energy of the sheet",
	Source:  "2N2646 data sheet: 2 A by discharge of at most 10 uF and 30 V; 2N6027 data sheet: 250 uJ",
	Failing: `Slow flasher for a signpost
V1 vcc 0 20
R1 vcc e 47k
C1 e 0 47u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 4.7
*> C1 kind=film
.end
`,
	Mended: `Slow flasher for a signpost
V1 vcc 0 20
R1 vcc e 47k
C1 e 0 4.7u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 4.7
*> C1 kind=film
.end
`,
	Check: each(rule.Case{
		Comparison: "capacitor_energy",
		Place:      []stage.Role{stage.TimingCapacitor}, Mend: []stage.Role{stage.TimingCapacitor},
		Fails: "every discharge strains the {device}",
		Value: "the energy of the timing capacitor", Limit: "the maker allows",
	}, rule.Case{
		Comparison: "timing_capacitance_direct",
		Place:      []stage.Role{stage.TimingCapacitor},
		Mend:       []stage.Role{stage.EmitterSeries, stage.TimingCapacitor}, FailsOnly: true,
		Fails: "every discharge strains the emitter, since there is not enough " +
			"resistance in its path",
		Value: "the timing capacitor", Limit: "the maker allows without a resistor up to",
	}),
}
