package oscillator

import (
	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var baseTwoOff = &rule.Rule{
	ID: "base-two-resistor-off", Group: group,
	Title: "The base-two resistor is far from the value that compensates.",
	Why: "A base-two resistor that is much too small leaves the drift of the emitter diode, one that is " +
		"much too large turns it around. It is judged by the drift that it causes on the nominal board, " +
		"never by its value.",
	Formula: "drift of the nominal board by the transistor alone < 1 % per 10 K",
	Source:  "limit: common practice, no source; law: see base-two-resistor-missing",
	Failing: `Seismograph time marks
V1 vcc 0 24
R1 vcc e 100k
C1 e 0 4.7u
XQ1 e b1 b2 2N2646
R2 vcc b2 10k
R3 b1 0 22
*> C1 kind=film
.end
`,
	Mended: `Seismograph time marks
V1 vcc 0 24
R1 vcc e 100k
C1 e 0 4.7u
XQ1 e b1 b2 2N2646
R2 vcc b2 270
R3 b1 0 22
*> C1 kind=film
.end
`,
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			if a.Facts["base-two-missing"] {
				return // base-two-resistor-missing tells
			}
			p.Judge(a, rule.Case{
				Comparison: "base_two_drift", Place: []stage.Role{stage.BaseTwo}, Mend: []stage.Role{stage.BaseTwo},
				FailsOnly: true, Percent: true,
				Fails: "the base-two resistor makes the rate drift with temperature",
				Value: "the drift per 10 K of the nominal board", Limit: "a compensated stage stays below",
			})
		})
	},
}
