package oscillator

import (
	"fmt"

	"standoff/netlist/operating"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var interbaseLow = &rule.Rule{
	ID: "interbase-voltage-low", Group: group,
	Title: "The supply is too low for a dependable pulse.",
	Why: "Peak and valley lie close together on a low supply: the ramp is short, the pulse small, the peak " +
		"current high. Below 5 V common types do not work dependably; below 9 V they lack margin. Types " +
		"specified for low voltage have their own limit.",
	Formula: "V_BB >= V_BB(min) of the sheet; else hold below 5 V, doubt below 9 V",
	Source:  "common practice, no source; V_BB(min): 2N5431 sheet (4 V), 2N2840 sheet (1.5 V)",
	Failing: `Toy lighthouse
V1 vcc 0 4.5
R1 vcc e 47k
C1 e 0 1u
XQ1 e b1 b2 2N2646
R2 vcc b2 100
R3 b1 0 22
.end
`,
	Mended: `Toy lighthouse
V1 vcc 0 12
R1 vcc e 47k
C1 e 0 1u
XQ1 e b1 b2 2N2646
R2 vcc b2 390
R3 b1 0 22
.end
`,
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			k, ok := a.Comparison("interbase_voltage_low")
			tight := k.LimitName == "habit" && k.Value < dependableVoltage
			if !ok || !k.Fails() && !tight {
				return
			}
			f := rule.Finding{Grade: rule.Doubt}
			if k.Fails() && k.Certain {
				f.Grade = rule.Hold
			}
			text := "the stage does not work dependably: the interbase voltage is %s, it needs %s"
			if !k.Fails() {
				k.Limit = dependableVoltage
				text = "short ramp and small pulse: the interbase voltage is %s; below %s margin is lacking"
			}
			f.Message = fmt.Sprintf(text, quantity.Format(k.Value, k.Unit), quantity.Format(k.Limit, k.Unit))
			p.Report(f.For(a, k, rule.Case{Mend: []stage.Role{stage.BaseTwo}}))
		})
	},
}

// dependableVoltage is the interbase voltage in volt below which common types
// lack margin (common practice, no source).
const dependableVoltage = 9.0
