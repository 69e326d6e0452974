// Package rules holds the catalogue of rules and runs it over a board. What goes
// in is a board that was read and worked out; what comes out is findings, waived
// findings, what was not checked, and cautions. It prints nothing.
package rules

import (
	"slices"
	"sync"

	"standoff/rules/oscillator"
	"standoff/rules/rule"
	"standoff/rules/trigger"
	"standoff/rules/wiring"
)

// catalogue is made on first use: whoever asks for a part list pays for no rule.
var catalogue = sync.OnceValue(func() []*rule.Rule {
	return slices.Concat(oscillator.Rules(), trigger.Rules(), wiring.Rules(), waiverRules())
})

// Catalogue returns every rule in the order of the reference. The two rules on
// waivers are judged by Check itself, which alone knows what was set aside.
func Catalogue() []*rule.Rule { return slices.Clone(catalogue()) }

// Find returns the rule of that name.
func Find(id string) (*rule.Rule, bool) {
	for _, r := range catalogue() {
		if r.ID == id {
			return r, true
		}
	}
	return nil, false
}
