package oscillator

import (
	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var capacitorLeak = &rule.Rule{
	ID: "timing-capacitor-leak", Group: group,
	Title: "The capacitor's own leakage takes the current that should fire the stage.",
	Why: "A leaking capacitor draws its leakage from the timing resistor. At the peak only the rest is " +
		"left for the emitter; where that is less than the peak current, the ramp stops short and the " +
		"stage is silent, at first on hot days, since leakage doubles every 10 K. What a programmable unijunction " +
		"leaks from gate to anode counts besides, and alone where the capacitor is taken as free of leakage.",
	Formula: "(V_th - V_P)/R_th - I_leak > I_P; I_leak as declared, or 0.01 C V or 3 uA for an electrolytic, " +
		"doubling every 10 K",
	Source: "leakage: catalogue figure of the makers; doubling: common practice, no source",
	Failing: `Orchard frost alarm timer
V1 vcc 0 20
R1 vcc e 220k
C1 e 0 10u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
*> C1 kind=electrolytic leak=20u
.end
`,
	Mended: `Orchard frost alarm timer
V1 vcc 0 20
R1 vcc e 220k
C1 e 0 10u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
*> C1 kind=film leak=10n
.end
`,
	Check: func(p *rule.Pass) {
		p.Timing(func(a *operating.Account) {
			if k, ok := a.Comparison("charging_current_at_peak"); ok && (k.Fails() || k.Tight()) {
				return // too little current without any leakage
			}
			c := rule.Case{
				Comparison: "charging_current_after_leakage",
				Place:      []stage.Role{stage.TimingCapacitor}, Mend: []stage.Role{stage.TimingResistor},
				Fails: "the capacitor's leakage may keep the stage from firing",
				Value: "the charging current at the peak less the leakage", Limit: "the {device} needs",
			}
			if !a.Facts["capacitor-leaks"] { // the device does, alone
				c.Place, c.Fails = timing, "the leakage of the {device} itself may keep the stage from firing"
				c.Value = "the charging current at the peak less that leakage"
			}
			p.Judge(a, c)
		})
	},
}
