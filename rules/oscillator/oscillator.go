// Package oscillator holds the rules on timing: will the stage start, keep
// running, keep its rate, and spare its transistor. A rule compares figures of
// the account; it computes nothing and never looks at text. One rule, one file.
package oscillator

import (
	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

// Rules returns the rules of this group in the order of the reference.
func Rules() []*rule.Rule {
	return []*rule.Rule{
		currentBelowPeak, currentAboveValley, capacitorSmall, capacitorLarge, capacitorLeak,
		emitterSurge, emitterRMS, emitterReverse, baseTwoMissing, baseTwoOff, baseOneMissing,
		frequencyOffTarget, frequencyDrift, interbaseHigh, interbaseLow, interbaseDissipation,
		putGateDivider, putGateVoltage, breakoverNotReached, sourceCompliance,
	}
}

const group = "Timing"

// timing is what sets the charging current, discharge what limits the pulse.
var (
	timing    = []stage.Role{stage.TimingResistor, stage.CurrentSource}
	discharge = []stage.Role{stage.EmitterSeries, stage.BaseOne}
)

// each judges the cases for every timing stage.
func each(cases ...rule.Case) func(*rule.Pass) {
	return func(p *rule.Pass) {
		p.Timing(func(a *operating.Account) {
			for _, c := range cases {
				p.Judge(a, c)
			}
		})
	}
}
