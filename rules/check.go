package rules

import (
	"cmp"
	"slices"

	"standoff/netlist"
	"standoff/netlist/source"
	"standoff/rules/rule"
)

// Options choose rules; empty lists choose all and skip none.
type Options struct {
	Only, Skip []string
	NoAdvice   bool // leave advice out, as while proving advice
}

// Result is everything that is said of a board.
type Result struct {
	Board     *netlist.Board
	Findings  []rule.Finding
	Waived    []Waived
	Unchecked []Unchecked
	Cautions  []Caution
	Problems  []source.Problem
}

// Check runs the rules over a board. The result is in a fixed order: by file,
// place and rule.
func Check(b *netlist.Board, opts Options) *Result {
	r := &Result{Board: b, Problems: b.Problems, Unchecked: unchecked(b, opts), Cautions: cautions(b.Circuit)}
	found := run(b, opts)
	r.Findings, r.Waived = waive(b.Circuit, found)
	r.Findings = append(r.Findings, judgeWaivers(b.Circuit, r.Waived, opts)...)
	slices.SortStableFunc(r.Findings, compare)
	slices.SortStableFunc(r.Waived, func(a, b Waived) int { return compare(a.Finding, b.Finding) })
	if !opts.NoAdvice {
		advise(b, r.Findings)
	}
	return r
}

func (o Options) chooses(id string) bool {
	return (len(o.Only) == 0 || slices.Contains(o.Only, id)) && !slices.Contains(o.Skip, id)
}

// run collects the findings of the chosen rules.
func run(b *netlist.Board, opts Options) []rule.Finding {
	var list []rule.Finding
	for _, r := range catalogue() {
		if !opts.chooses(r.ID) {
			continue
		}
		p := rule.NewPass(b.Circuit, b.Accounts, func(f rule.Finding) {
			f.Rule = r.ID
			list = append(list, f)
		})
		p.File = b.File
		r.Check(p)
	}
	return list
}

// path is the file that a finding lies in.
func path(f rule.Finding) string {
	if f.At.File == nil {
		return ""
	}
	return f.At.File.Path
}

// compare orders findings by file, place, rule and then whatever tells them
// apart, so that the order never depends on how they were found.
func compare(a, b rule.Finding) int {
	return cmp.Or(
		cmp.Compare(path(a), path(b)), cmp.Compare(a.At.Start, b.At.Start), cmp.Compare(a.Rule, b.Rule),
		cmp.Compare(a.Stage, b.Stage), cmp.Compare(b.Grade, a.Grade), cmp.Compare(a.Message, b.Message))
}
