package report_test

import (
	"bytes"
	"encoding/json"
	"reflect"
	"slices"
	"strings"
	"testing"

	"standoff/netlist"
	"standoff/rules"
	"standoff/rules/report"
)

// decoded reads JSON as maps, lists and values.
func decoded(t *testing.T, write func(*bytes.Buffer) error) map[string]any {
	t.Helper()
	var out bytes.Buffer
	if err := write(&out); err != nil {
		t.Fatal(err)
	}
	var doc map[string]any
	if err := json.Unmarshal(out.Bytes(), &doc); err != nil {
		t.Fatal(err)
	}
	return doc
}

// at walks into a document: strings are keys, numbers are places in a list.
func at(t *testing.T, doc any, path ...any) any {
	t.Helper()
	for _, p := range path {
		switch p := p.(type) {
		case string:
			m, ok := doc.(map[string]any)
			if !ok || !has(m, p) {
				t.Fatalf("nothing at %q of %v", p, path)
			}
			doc = m[p]
		case int:
			list, ok := doc.([]any)
			if !ok || p >= len(list) {
				t.Fatalf("nothing at %d of %v", p, path)
			}
			doc = list[p]
		}
	}
	return doc
}

func has(m map[string]any, key string) bool { _, ok := m[key]; return ok }

// The keys and types that scripts rely on.
func TestLintJSONHasTheShapeThatIsPromised(t *testing.T) {
	results := []*rules.Result{check(t, "stage.cir", stage), check(t, "bench.cir", bench)}
	doc := decoded(t, func(b *bytes.Buffer) error { return report.JSON(b, results) })
	for _, row := range []struct {
		path []any
		want any
	}{
		{[]any{"schema"}, "standoff.lint/1"},
		{[]any{"files", 0, "path"}, "stage.cir"},
		{[]any{"files", 0, "findings", 0, "rule"}, "timing-current-below-peak"},
		{[]any{"files", 0, "findings", 0, "grade"}, "hold"},
		{[]any{"files", 0, "findings", 0, "stage"}, "XQ1"},
		{[]any{"files", 0, "findings", 0, "parts"}, []any{"R1"}},
		{[]any{"files", 0, "findings", 0, "file"}, "stage.cir"},
		{[]any{"files", 0, "findings", 0, "line"}, 3.0},
		{[]any{"files", 0, "findings", 0, "column"}, 1.0},
		{[]any{"files", 0, "findings", 0, "figure", "name"}, "charging_current_at_peak"},
		{[]any{"files", 0, "findings", 0, "figure", "bound"}, "min"},
		{[]any{"files", 0, "findings", 0, "figure", "unit"}, "A"},
		{[]any{"files", 0, "findings", 0, "corner", "eta"}, 0.75},
		{[]any{"files", 0, "findings", 0, "advice", 0, "part"}, "R1"},
		{[]any{"files", 0, "waived"}, []any{}},
		{[]any{"files", 0, "problems"}, []any{}},
		{[]any{"files", 1, "findings", 0, "advice"}, []any{}},
		{[]any{"files", 1, "waived", 0, "rule"}, "value-suffix-suspect"},
		{[]any{"files", 1, "waived", 0, "reason"}, "the drawing office writes them so"},
		{[]any{"files", 1, "waived", 0, "line"}, 9.0},
		{[]any{"files", 1, "unchecked", 0, "stage"}, "X9"},
		{[]any{"files", 1, "cautions", 0, "kind"}, "mains"},
		{[]any{"files", 1, "problems", 0, "file"}, "bench.cir"},
		{[]any{"files", 1, "problems", 0, "line"}, 4.0},
		{[]any{"totals", "hold"}, 1.0},
		{[]any{"totals", "waived"}, 1.0},
		{[]any{"totals", "problems"}, 1.0},
	} {
		if got := at(t, doc, row.path...); !reflect.DeepEqual(got, row.want) {
			t.Errorf("%v is %v, want %v", row.path, got, row.want)
		}
	}
	for _, key := range []string{"message", "figure", "advice", "working"} {
		at(t, doc, "files", 0, "findings", 0, key)
	}
	value := at(t, doc, "files", 0, "findings", 0, "advice", 0, "value").(float64)
	text := at(t, doc, "files", 0, "findings", 0, "advice", 0, "text").(string)
	if value < 1e4 || value > 2.2e6 || !strings.HasSuffix(text, "k") && !strings.HasSuffix(text, "meg") {
		t.Errorf("advice %g %q", value, text)
	}
}

func TestWorksheetJSONHasTheShapeThatIsPromised(t *testing.T) {
	b := check(t, "stage.cir", stage+"XQ9 a b c ZZ99\n").Board
	doc := decoded(t, func(out *bytes.Buffer) error { return report.WorksheetJSON(out, []*netlist.Board{b}) })
	for _, row := range []struct {
		path []any
		want any
	}{
		{[]any{"schema"}, "standoff.worksheet/1"},
		{[]any{"files", 0, "path"}, "stage.cir"},
		{[]any{"files", 0, "stages", 0, "kind"}, "ujt-oscillator"},
		{[]any{"files", 0, "stages", 0, "anchor"}, "XQ1"},
		{[]any{"files", 0, "stages", 0, "part"}, "2N2646"},
		{[]any{"files", 0, "stages", 0, "roles", "timing-resistor"}, []any{"R1"}},
		{[]any{"files", 0, "stages", 0, "roles", "supply"}, []any{"V1"}},
		{[]any{"files", 0, "stages", 0, "drives"}, []any{}},
		{[]any{"files", 0, "stages", 0, "figures", "period", "unit"}, "s"},
		{[]any{"files", 0, "stages", 0, "terminal_order_from"}, "library order"},
		{[]any{"files", 0, "problems"}, []any{}},
		{[]any{"files", 0, "unchecked", 0, "stage"}, "XQ9"},
	} {
		if got := at(t, doc, row.path...); !reflect.DeepEqual(got, row.want) {
			t.Errorf("%v is %v, want %v", row.path, got, row.want)
		}
	}
	period := at(t, doc, "files", 0, "stages", 0, "figures", "period").(map[string]any)
	low, nominal, high := period["low"].(float64), period["nominal"].(float64), period["high"].(float64)
	if !(0 < low && low < nominal && nominal < high) || period["working"] == "" {
		t.Errorf("period %v", period)
	}
}

// What readers of SARIF 2.1.0 rely on; above all a region with a start line.
func TestSARIF(t *testing.T) {
	results := []*rules.Result{check(t, "a b/stage.cir", stage), check(t, "/x/bench.cir", bench)}
	doc := decoded(t, func(b *bytes.Buffer) error { return report.SARIF(b, results) })
	if at(t, doc, "version") != "2.1.0" || at(t, doc, "runs", 0, "columnKind") != "unicodeCodePoints" {
		t.Errorf("%v", doc["version"])
	}
	var known []string
	for i := range at(t, doc, "runs", 0, "tool", "driver", "rules").([]any) {
		known = append(known, at(t, doc, "runs", 0, "tool", "driver", "rules", i, "id").(string))
	}
	suppressed := 0
	list := at(t, doc, "runs", 0, "results").([]any)
	for _, result := range list {
		if id := at(t, result, "ruleId").(string); !slices.Contains(known, id) {
			t.Errorf("the rule %s is not among those of the tool", id)
		}
		if level := at(t, result, "level").(string); !slices.Contains([]string{"error", "warning", "note"}, level) {
			t.Errorf("level %s", level)
		}
		if at(t, result, "message", "text") == "" {
			t.Error("no message")
		}
		place := at(t, result, "locations", 0, "physicalLocation")
		if at(t, place, "region", "startLine").(float64) < 1 || at(t, place, "region", "startColumn").(float64) < 1 {
			t.Errorf("%v", place)
		}
		uri := at(t, place, "artifactLocation", "uri")
		if uri != "a%20b/stage.cir" && uri != "file:///x/bench.cir" {
			t.Errorf("uri %v", uri)
		}
		if s, ok := result.(map[string]any)["suppressions"]; ok {
			suppressed++
			if at(t, s, 0, "kind") != "inSource" || at(t, s, 0, "justification") != "the drawing office writes them so" {
				t.Errorf("%v", s)
			}
		}
	}
	if want := 1 + 4 + 1 + 1; len(list) != want || suppressed != 1 {
		t.Errorf("%d results, want %d; %d suppressed", len(list), want, suppressed)
	}
}

// Nothing infinite or undefined reaches JSON as a number.
func TestFiguresWithoutEndAreNull(t *testing.T) {
	endless := strings.Replace(stage, "2.2meg", "100meg", 1)
	var out bytes.Buffer
	if err := report.JSON(&out, []*rules.Result{check(t, "t.cir", endless)}); err != nil {
		t.Fatal(err)
	}
	for _, word := range []string{"Inf", "NaN"} {
		if strings.Contains(out.String(), word) {
			t.Errorf("%s in the document", word)
		}
	}
}

func TestTheCatalogueInEveryForm(t *testing.T) {
	list := rules.Catalogue()
	var markdown, screen, one bytes.Buffer
	report.RulesMarkdown(&markdown, list)
	report.Terminal{Width: 80}.RuleList(&screen, list)
	doc := decoded(t, func(b *bytes.Buffer) error { return report.RulesJSON(b, list) })
	for i, r := range list {
		if !strings.Contains(markdown.String(), "\n### "+r.ID+"\n") || !strings.Contains(screen.String(), "\n  "+r.ID) {
			t.Errorf("%s is missing", r.ID)
		}
		if at(t, doc, "rules", i, "id") != r.ID || at(t, doc, "rules", i, "failing") != r.Failing {
			t.Errorf("%s in JSON: %v", r.ID, at(t, doc, "rules", i))
		}
	}
	report.Terminal{Width: 80}.Explain(&one, list[0])
	for _, part := range []string{list[0].ID, "Formula: ", "Source: ", "fails\n", "mended\n", "\n    " + list[0].Failing[:10]} {
		if !strings.Contains(one.String(), part) {
			t.Errorf("%q is missing in\n%s", part, one.String())
		}
	}
}
