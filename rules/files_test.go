package rules_test

import (
	"os"
	"strings"
	"testing"

	"standoff/rules/oscillator"
	"standoff/rules/rule"
	"standoff/rules/trigger"
	"standoff/rules/wiring"
)

// A rule is found under one name everywhere: its file is called as it is.
func TestEveryRuleHasItsFile(t *testing.T) {
	for group, list := range map[string][]*rule.Rule{"oscillator": oscillator.Rules(), "trigger": trigger.Rules(), "wiring": wiring.Rules()} {
		want := map[string]bool{group + ".go": true}
		for _, r := range list {
			want[strings.ReplaceAll(r.ID, "-", "_")+".go"] = true
		}
		files, err := os.ReadDir(group)
		if err != nil {
			t.Fatal(err)
		}
		for _, f := range files {
			if !want[f.Name()] && !strings.HasSuffix(f.Name(), "_test.go") {
				t.Errorf("%s/%s belongs to no rule", group, f.Name())
			}
			delete(want, f.Name())
		}
		for name := range want {
			t.Errorf("%s/%s is missing", group, name)
		}
	}
}
