package oscillator

import (
	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var frequencyDrift = &rule.Rule{
	ID: "frequency-drift", Group: group,
	Title: "The rate drifts with temperature.",
	Why: "Over the declared ambient range, with everything else unchanged, the rate of a board moves: by " +
		"the junctions of the devices, the bar, a current source, the temperature coefficients of the parts and " +
		"the class of a ceramic capacitor. Where that alone leaves the target, no trimming helps.",
	Formula: "(greatest - least frequency)/frequency of the nominal board over the ambient range; hold where " +
		"it leaves the target, doubt above 1 % per 10 K",
	Source: "limit: common practice, no source; ceramic classes C0G, X7R, Y5V: EIA-198",
	Failing: `Tide gauge sampler
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 4.7u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
*> C1 kind=film tempco=3000
.end
`,
	Mended: `Tide gauge sampler
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 4.7u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
*> C1 kind=film tempco=200
.end
`,
	Check: func(p *rule.Pass) {
		p.Timing(func(a *operating.Account) {
			for _, name := range []string{"frequency_drift_lowest", "frequency_drift_highest"} {
				if k, ok := a.Comparison(name); ok && k.Fails() {
					p.Judge(a, driftOutOfTarget(name))
					return
				}
			}
			p.Judge(a, rule.Case{
				Comparison: "frequency_drift_per_10k", Place: []stage.Role{stage.TimingCapacitor},
				Mend: []stage.Role{stage.BaseTwo}, FailsOnly: true, Most: rule.Doubt, Percent: true,
				Fails: "the rate drifts with temperature",
				Value: "the drift per 10 K of the nominal board", Limit: "a steady stage stays below",
			})
		})
	},
}

// driftOutOfTarget judges one end of the nominal board's rate over the ambient range.
func driftOutOfTarget(comparison string) rule.Case {
	return rule.Case{
		Comparison: comparison, Place: []stage.Role{stage.TimingCapacitor}, FailsOnly: true,
		Fails: "temperature alone moves the rate out of the target",
		Value: "the frequency of the nominal board", Limit: "the target asks for",
	}
}
