// Package trigger holds the rules on gates: will the thyristor fire when it
// should, stay quiet when it should not, and survive its own gate pulse. A rule
// compares figures of the account; it computes nothing.
package trigger

import (
	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

// Rules returns the rules of this group in the order of the reference.
func Rules() []*rule.Rule {
	return []*rule.Rule{pulseWeak, pulseShort, standby, resistorMissing, resistorLow, overdrive, reverse, returnMissing,
		polarity, latchingSlow}
}

const group = "Gates"

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

// deck writes a small board of the reference: an oscillator on 20 V whose base
// one drives a thyristor.
func deck(title, ct, rb1, series, scr, shunt, load string, more ...string) string {
	text := title + "\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 " + ct + "\nXQ1 e b1 b2 2N2647\nR2 vcc b2 220\nR3 b1 0 " + rb1 + "\n"
	gate := "b1"
	if series != "" {
		gate = "g"
		text += series + "\n"
	}
	text += "XS1 a " + gate + " 0 " + scr + "\n"
	if shunt != "" {
		text += "R5 " + gate + " 0 " + shunt + "\n"
	}
	text += "RL vcc a " + load + "\n"
	for _, m := range more {
		text += m + "\n"
	}
	return text + ".end\n"
}

var lead = []stage.Role{stage.GateSeries, stage.GateShunt}
