package main

import (
	"bytes"
	"os"
	"strings"
	"testing"
)

// RULES.md is what the rules themselves say.
func TestTheRuleReferenceIsFresh(t *testing.T) {
	var fresh, trouble bytes.Buffer
	status := run([]string{"rules", "--format", "markdown"}, strings.NewReader(""), &fresh, &trouble)
	if status != 0 {
		t.Fatal(trouble.String())
	}
	kept, err := os.ReadFile("../../RULES.md")
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(kept, fresh.Bytes()) {
		t.Error("RULES.md is stale; write it anew: go run ./cmd/standoff rules --format markdown > RULES.md")
	}
}
