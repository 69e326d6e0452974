// Package rules holds the catalogue of rules and runs it over a board: findings,
// waivers, what was not checked, cautions. It prints nothing.
package rules

import (
	"slices"

	"standoff/rules/oscillator"
	"standoff/rules/rule"
	"standoff/rules/trigger"
	"standoff/rules/wiring"
)

// Catalogue returns every rule in the order of the reference. The two rules on
// waivers are judged by Check itself, which alone knows what was set aside.
func Catalogue() []*rule.Rule {
	return slices.Concat(oscillator.Rules(), trigger.Rules(), wiring.Rules(), waiverRules())
}

// Find returns the rule of that name.
func Find(id string) (*rule.Rule, bool) {
	for _, r := range Catalogue() {
		if r.ID == id {
			return r, true
		}
	}
	return nil, false
}
