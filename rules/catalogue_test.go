package rules_test

import (
	"slices"
	"testing"

	"standoff/netlist"
	"standoff/rules"
	"standoff/rules/rule"
)

func check(t *testing.T, name, text string) *rules.Result {
	t.Helper()
	b, err := netlist.ReadText(name+".cir", []byte(text), netlist.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return rules.Check(b, rules.Options{NoAdvice: true})
}

func TestEveryRuleIsDeclaredInFull(t *testing.T) {
	seen := map[string]bool{}
	for _, r := range rules.Catalogue() {
		if err := r.Validate(); err != nil {
			t.Error(err)
		}
		if seen[r.ID] {
			t.Errorf("%s stands twice in the catalogue", r.ID)
		}
		seen[r.ID] = true
	}
}

// Every failing netlist of the reference yields its rule and nothing worse from another
// (an inferred order always contradicts the usual one); every mended one yields neither
// its rule nor any hold.
func TestTheNetlistsOfTheReferenceDoWhatTheySay(t *testing.T) {
	for _, r := range rules.Catalogue() {
		t.Run(r.ID, func(t *testing.T) {
			fails := check(t, "failing", r.Failing)
			own := rule.Grade(0)
			for _, f := range fails.Findings {
				if f.Rule == r.ID {
					own = max(own, f.Grade)
				}
			}
			if own == 0 {
				t.Errorf("the failing netlist does not yield it: %v", texts(fails))
			}
			for _, f := range fails.Findings {
				inferred := r.ID == "pin-order-assumed" && f.Rule == "pin-order-contradicted"
				if f.Rule != r.ID && f.Grade > own && !inferred {
					t.Errorf("the failing netlist yields something worse: %s %s", f.Rule, f.Message)
				}
			}
			for _, p := range append(slices.Clone(fails.Problems), check(t, "mended", r.Mended).Problems...) {
				t.Errorf("problem: %s", p.Message)
			}
			for _, f := range check(t, "mended", r.Mended).Findings {
				if f.Rule == r.ID || f.Grade == rule.Hold {
					t.Errorf("the mended netlist yields %s %s: %s", f.Grade, f.Rule, f.Message)
				}
			}
		})
	}
}

func texts(r *rules.Result) []string {
	var list []string
	for _, f := range r.Findings {
		list = append(list, f.Grade.String()+" "+f.Rule+": "+f.Message)
	}
	for _, u := range r.Unchecked {
		list = append(list, "unchecked "+u.Rule+" "+u.Because)
	}
	return list
}
