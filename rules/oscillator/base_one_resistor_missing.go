package oscillator

import (
	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var baseOneMissing = &rule.Rule{
	ID: "base-one-resistor-missing", Group: group,
	Title: "Base one has no resistor: the bar current flows into the gate.",
	Why: "Some milliamperes flow through the bar all the time. Without a resistor from base one to its " +
		"rail they have no way but the gate, and a sensitive thyristor fires as soon as the supply comes " +
		"up.",
	Formula: "a dc resistance from base one to its rail other than through a gate",
	Source:  "common practice, no source",
	Failing: `Clock chime striker
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
D1 b1 g DG
.model DG d
XS1 coil g 0 BT151-500R
R5 g 0 330
RL vcc coil 100
.end
`,
	Mended: `Clock chime striker
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
D1 b1 g DG
.model DG d
XS1 coil g 0 BT151-500R
R5 g 0 330
RL vcc coil 100
.end
`,
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			if !a.Facts["base-one-missing"] {
				return
			}
			p.Report(rule.Finding{Grade: rule.Hold,
				Message:  "the bar current has no way but the gate: no resistor stands from base one to its rail",
				NoAdvice: "add a resistor of 22 to 47 ohm from base one to its rail"}.Placed(a))
		})
	},
}
