package oscillator

import (
	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var divider = []stage.Role{stage.GateDivider}

var putGateDivider = &rule.Rule{
	ID: "put-gate-divider", Group: group,
	Title: "The gate divider of the programmable unijunction makes no stage of it.",
	Why: "The divider sets the peak voltage, and its resistance sets what currents the device needs. A gate " +
		"that stands as high as the capacitor can ever get never lets it fire; one near the lower rail lets " +
		"it conduct and never swing. Outside the gate resistances at which the maker measured, nobody knows " +
		"its peak and valley currents.",
	Formula: "V_V/0.9 < V_S + V_T < V_th of the charging network; R_G within the sheet's points, a tenth allowed",
	Source: "2N6027 data sheet: figures stated at R_G = 200 ohm, 10 kohm and 1 Mohm; " +
		"V_P = V_S + V_T: same sheet",
	Failing: `Beehive fan pulse
V1 vcc 0 12
R1 vcc a 330k
C1 a 0 1u
XP1 a g k 2N6027
R2 vcc g 1k
R3 g 0 100k
R4 k 0 47
.end
`,
	Mended: `Beehive fan pulse
V1 vcc 0 12
R1 vcc a 330k
C1 a 0 1u
XP1 a g k 2N6027
R2 vcc g 16k
R3 g 0 22k
R4 k 0 47
.end
`,
	Check: func(p *rule.Pass) {
		p.Timing(func(a *operating.Account) {
			cases := dividerCases()
			if k, ok := a.Comparison(cases[0].Comparison); ok && k.Fails() {
				cases = cases[:1] // all else follows from that
			}
			for _, c := range cases {
				p.Judge(a, c)
			}
		})
	},
}

// dividerCases lists what can be wrong with a divider.
func dividerCases() []rule.Case {
	return []rule.Case{{
		Comparison: "divider_gate_voltage", Place: divider, FailsOnly: true,
		Fails: "the stage does not swing: nothing lifts the gate",
		Value: "its voltage over the lower rail", Limit: "it needs more than",
	}, {
		Comparison: "divider_peak_voltage", Place: divider, Mend: divider, FailsOnly: true,
		Fails: "the stage never fires: the divider holds the gate too high",
		Value: "the peak voltage", Limit: "the capacitor reaches no more than",
	}, {
		Comparison: "divider_least_voltage", Place: divider, Mend: divider, FailsOnly: true,
		Fails: "the stage does not swing: the divider holds the gate too low",
		Value: "the peak voltage over 0.9", Limit: "the valley lies at",
	}, {
		Comparison: "gate_source_resistance_least", Place: divider, Mend: divider, FailsOnly: true,
		Fails: "nobody knows what currents the stage needs",
		Value: "the resistance of the divider", Limit: "the sheet begins at",
	}, {
		Comparison: "gate_source_resistance_greatest", Place: divider, Mend: divider, FailsOnly: true,
		Fails: "nobody knows what currents the stage needs",
		Value: "the resistance of the divider", Limit: "the sheet ends at",
	}}
}
