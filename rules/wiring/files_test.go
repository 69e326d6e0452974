package wiring_test

import (
	"os"
	"strings"
	"testing"

	"standoff/rules/wiring"
)

// A rule is found under one name everywhere: its file is called as it is.
func TestEveryRuleHasItsFile(t *testing.T) {
	want := map[string]bool{"wiring.go": true, "files_test.go": true, "wiring_test.go": true}
	for _, r := range wiring.Rules() {
		want[strings.ReplaceAll(r.ID, "-", "_")+".go"] = true
	}
	files, err := os.ReadDir(".")
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range files {
		if !want[f.Name()] {
			t.Errorf("%s belongs to no rule", f.Name())
		}
		delete(want, f.Name())
	}
	for name := range want {
		t.Errorf("%s is missing", name)
	}
}
