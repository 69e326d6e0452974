package report

import (
	"io"
	"path/filepath"
	"strings"

	"standoff/netlist/source"
	"standoff/rules"
	"standoff/rules/rule"
)

// The parts of SARIF 2.1.0 (OASIS) that are written.
type (
	sarifLog struct {
		Schema  string     `json:"$schema"`
		Version string     `json:"version"`
		Runs    []sarifRun `json:"runs"`
	}
	sarifRun struct {
		Tool       sarifTool     `json:"tool"`
		ColumnKind string        `json:"columnKind"`
		Results    []sarifResult `json:"results"`
	}
	sarifTool struct {
		Driver sarifDriver `json:"driver"`
	}
	sarifDriver struct {
		Name  string      `json:"name"`
		Rules []sarifRule `json:"rules"`
	}
	sarifRule struct {
		ID    string    `json:"id"`
		Short sarifText `json:"shortDescription"`
		Full  sarifText `json:"fullDescription"`
	}
	sarifText struct {
		Text string `json:"text"`
	}
	sarifResult struct {
		RuleID    string          `json:"ruleId"`
		Level     string          `json:"level"`
		Message   sarifText       `json:"message"`
		Locations []sarifLocation `json:"locations"`
		// Suppressions tells of the waiver that set a result aside.
		Suppressions []sarifSuppression `json:"suppressions,omitempty"`
	}
	sarifSuppression struct {
		Kind          string `json:"kind"`
		Justification string `json:"justification,omitempty"`
	}
	sarifLocation struct {
		Physical sarifPhysical `json:"physicalLocation"`
	}
	sarifPhysical struct {
		Artifact sarifArtifact `json:"artifactLocation"`
		Region   sarifRegion   `json:"region"`
	}
	sarifArtifact struct {
		URI string `json:"uri"`
	}
	sarifRegion struct {
		StartLine   int `json:"startLine"`
		StartColumn int `json:"startColumn"`
	}
)

var levels = map[rule.Grade]string{rule.Hold: "error", rule.Doubt: "warning", rule.Remark: "note"}

// SARIF writes the results as a SARIF 2.1.0 log. A card that could not be read
// is an error of the rule "unread".
func SARIF(w io.Writer, results []*rules.Result) error {
	run := sarifRun{ColumnKind: "unicodeCodePoints", Results: []sarifResult{}}
	run.Tool.Driver.Name = "standoff"
	run.Tool.Driver.Rules = []sarifRule{{"unread", sarifText{"A card could not be " +
		"read."}, sarifText{"The card was left out; the rest of the file was checked."}}}
	for _, r := range rules.Catalogue() {
		run.Tool.Driver.Rules = append(run.Tool.Driver.Rules, sarifRule{r.ID, sarifText{r.Title}, sarifText{r.Why}})
	}
	for _, r := range results {
		for _, p := range r.Problems {
			run.Results = append(run.Results,
				sarifResult{"unread", "error", sarifText{p.Message}, locations(r, p.Span), nil})
		}
		for _, f := range r.Findings {
			run.Results = append(run.Results, resultOf(r, f))
		}
		for _, w := range r.Waived {
			x := resultOf(r, w.Finding)
			x.Suppressions = []sarifSuppression{{"inSource", w.Reason}}
			run.Results = append(run.Results, x)
		}
	}
	return write(w, sarifLog{"https://json.schemastore.org/sarif-2.1.0.json", "2.1.0", []sarifRun{run}})
}

func resultOf(r *rules.Result, f rule.Finding) sarifResult {
	return sarifResult{f.Rule, levels[f.Grade], sarifText{message(f) + remedy(f)}, locations(r, f.At), nil}
}

// locations is where a result lies; one without a place lies at the start of the
// file.
func locations(r *rules.Result, at source.Span) []sarifLocation {
	p := at.Position()
	if at.IsZero() {
		p = source.Position{Path: r.Board.Path, Line: 1, Column: 1}
	}
	region := sarifRegion{max(p.Line, 1), max(p.Column, 1)}
	return []sarifLocation{{sarifPhysical{sarifArtifact{uri(p.Path)}, region}}}
}

// uri writes a path as a reference with everything unusual escaped: a relative one,
// or a file URI where the path is absolute.
func uri(path string) string {
	const hex = "0123456789ABCDEF"
	var b []byte
	if filepath.IsAbs(path) {
		b = append(b, "file://"...)
	}
	for _, c := range []byte(filepath.ToSlash(path)) {
		switch {
		case c >= 'a' && c <= 'z', c >= 'A' && c <= 'Z', c >= '0' && c <= '9', strings.IndexByte("/.-_~", c) >= 0:
			b = append(b, c)
		default:
			b = append(b, '%', hex[c>>4], hex[c&15])
		}
	}
	return string(b)
}
