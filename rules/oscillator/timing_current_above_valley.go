package oscillator

import (
	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var currentAboveValley = &rule.Rule{
	ID: "timing-current-above-valley", Group: group,
	Title: "The stage may fire once and stay on: the charging current holds the emitter in conduction.",
	Why: "After the discharge the emitter stops conducting only where its current falls below the valley " +
		"current I_V. Where the charging network supplies more, the transistor stays on, the emitter sits " +
		"at the valley voltage and the stage is dead until the supply is taken away. It happens first " +
		"with a part of low valley current, on a high supply, at the low end of a potentiometer. A programmable " +
		"unijunction asks for the I_V of its gate resistance, a breakover device for its holding current. A stage that " +
		"is declared latch=ok, or fires only thyristors that are, need not run on.",
	Formula: "(V_th - V_V)/R_th < I_V; below its test voltage I_V is carried over as I_V V_BB/V_test; derated " +
		"to 0.6 at 85 deg C and for 470 ohm or more at base two (a doubt)",
	Source: "Boylestad and Nashelsky, eq. 17.7; the sheets guarantee I_V at 20 V with 100 ohm; derating: " +
		"memory; PUT: 2N6027 data sheet, straight in logarithms over R_G",
	Failing: `Mist timer
V1 vcc 0 20
R1 vcc e 2.2k
C1 e 0 1u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
.end
`,
	Mended: `Mist timer
V1 vcc 0 20
R1 vcc e 10k
C1 e 0 1u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
.end
`,
	Check: func(p *rule.Pass) {
		p.Timing(func(a *operating.Account) {
			c := rule.Case{
				Comparison: "charging_current_at_valley", Place: timing, Mend: []stage.Role{stage.TimingResistor},
				Fails: "the stage may fire once and stay on",
				Value: "the charging current at the valley", Limit: "the {device} lets go below",
			}
			if k, ok := a.Comparison(c.Comparison); ok && !k.Fails() && !k.Tight() {
				c.Comparison, c.FailsOnly = "charging_current_at_valley_derated", true
			}
			p.Judge(a, c)
		})
	},
}
