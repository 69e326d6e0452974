// Package trigger holds the rules on gates: will the thyristor fire when it
// should, stay quiet when it should not, and survive its own gate pulse. A rule
// compares figures of the account; it computes nothing and never looks at text.
// One rule, one file.
package trigger

import (
	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

// Rules returns the rules of this group in the order of the reference.
func Rules() []*rule.Rule {
	return []*rule.Rule{
		pulseWeak, pulseShort, standby, resistorMissing, resistorLow, overdrive, reverse, returnMissing,
		polarity, latchingSlow,
	}
}

const group = "Gates"

// lead is what brings the pulse to the gate, shunt what lies across the gate.
var (
	lead  = []stage.Role{stage.GateSeries, stage.BaseOne}
	shunt = []stage.Role{stage.GateShunt}
)

// each judges the cases for every gate stage.
func each(cases ...rule.Case) func(*rule.Pass) {
	return func(p *rule.Pass) {
		p.Each(stage.SCRGate, func(a *operating.Account) {
			for _, c := range cases {
				p.Judge(a, c)
			}
		})
	}
}

// fact reports a yes/no finding of the physics as a hold.
func fact(name, message, noAdvice string, place ...stage.Role) func(*rule.Pass) {
	return func(p *rule.Pass) {
		p.Each(stage.SCRGate, func(a *operating.Account) {
			if a.Facts[name] {
				p.Report(rule.Finding{Grade: rule.Hold, Message: message, NoAdvice: noAdvice}.Placed(a, place...))
			}
		})
	}
}
