// Package oscillator holds the rules on timing: will the stage start, keep
// running, keep its rate, and spare its transistor. A rule compares figures of
// the account; it computes nothing.
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
	}
}

const group = "Timing"

// each judges the cases for every unijunction oscillator.
func each(cases ...rule.Case) func(*rule.Pass) {
	return func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			for _, c := range cases {
				p.Judge(a, c)
			}
		})
	}
}

// deck writes a small board of the reference: title, supply, timing resistor,
// capacitor, base-two and base-one resistors, and more cards.
func deck(title, supply, rt, ct, rb2, rb1 string, more ...string) string {
	text := title + "\nV1 vcc 0 " + supply + "\nR1 vcc e " + rt + "\nC1 e 0 " + ct + "\nXQ1 e b1 b2 2N2646\n"
	if rb2 != "" {
		text += "R2 vcc b2 " + rb2 + "\n"
	} else {
		text = text[:len(text)-len("XQ1 e b1 b2 2N2646\n")] + "XQ1 e b1 vcc 2N2646\n"
	}
	text += "R3 b1 0 " + rb1 + "\n"
	for _, m := range more {
		text += m + "\n"
	}
	return text + ".end\n"
}

var timing = []stage.Role{stage.TimingResistor, stage.CurrentSource}

var discharge = []stage.Role{stage.EmitterSeries, stage.BaseOne}

// deck2 is deck with another transistor.
func deck2(title, supply, rt, ct, transistor, rb1 string, more ...string) string {
	text := title + "\nV1 vcc 0 " + supply + "\nR1 vcc e " + rt + "\nC1 e 0 " + ct + "\nXQ1 e b1 b2 " + transistor +
		"\nR2 vcc b2 330\nR3 b1 0 " + rb1 + "\n"
	for _, m := range more {
		text += m + "\n"
	}
	return text + ".end\n"
}
