package rules

import (
	"fmt"
	"slices"
	"strings"

	"standoff/netlist"
	"standoff/rules/rule"
)

// verdict is what was said of a board, in a form in which two boards compare.
type verdict struct {
	worst  map[string]rule.Finding // by key
	silent map[string]bool         // what was not judged: rule|stage
}

// key says which findings are the same one on two boards: those of one rule on
// one stage, or, where they concern no stage, on one part.
func key(f rule.Finding) string {
	where := f.Stage
	if where == "" && len(f.Parts) > 0 {
		where = f.Parts[0]
	}
	return f.Rule + "|" + strings.ToLower(where)
}

// judged takes the verdict of a board.
func judged(b *netlist.Board, findings []rule.Finding) verdict {
	v := verdict{map[string]rule.Finding{}, map[string]bool{}}
	for _, f := range findings {
		k := key(f)
		if w, known := v.worst[k]; !known || f.Grade > w.Grade || f.Grade == w.Grade && excess(f) > excess(w) {
			v.worst[k] = f
		}
	}
	for _, u := range unchecked(b, Options{}) {
		v.silent[u.Rule+"|"+strings.ToLower(u.Stage)] = true
	}
	return v
}

// excess is how many times over its limit a figure is.
func excess(f rule.Finding) float64 {
	switch {
	case f.Figure == nil:
		return 1
	case f.Figure.Bound == "min":
		return f.Figure.Limit / f.Figure.Value
	}
	return f.Figure.Value / f.Figure.Limit
}

// worse reports whether a finding is worse than the same one before: of a worse
// grade, or a tenth further over its limit.
func worse(now, before rule.Finding) bool {
	if now.Grade != before.Grade {
		return now.Grade > before.Grade
	}
	return now.Grade >= rule.Doubt && excess(now) > 1.1*excess(before)
}

// worseThan names something that is new or worse in v, or that was judged before
// and is no longer; "" where there is nothing.
func (v verdict) worseThan(before verdict) string {
	var keys []string
	for k, f := range v.worst {
		if worse(f, before.worst[k]) {
			keys = append(keys, k)
		}
	}
	if len(keys) > 0 {
		k := slices.Min(keys)
		f := v.worst[k]
		where := f.Stage
		if where == "" && len(f.Parts) > 0 {
			where = f.Parts[0]
		}
		what := "raises"
		if _, known := before.worst[k]; known {
			what = "makes worse"
		}
		return fmt.Sprintf("%s %s at %s", what, f.Rule, rule.Name(where))
	}
	for k := range v.silent {
		if !before.silent[k] {
			keys = append(keys, k)
		}
	}
	if len(keys) > 0 {
		id, where, _ := strings.Cut(slices.Min(keys), "|")
		if id == "" {
			id = "the stage"
		}
		return fmt.Sprintf("keeps %s from being judged at %s", id, rule.Name(where))
	}
	return ""
}
