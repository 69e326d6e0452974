package report

import (
	"fmt"
	"io"
	"strings"

	"github.com/fatih/color"

	"standoff/netlist"
	"standoff/netlist/operating"
	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/netlist/stage"
	"standoff/rules"
)

// Worksheet writes every stage with its roles and figures.
func (t Terminal) Worksheet(w io.Writer, boards []*netlist.Board) {
	for i, b := range boards {
		if i > 0 {
			fmt.Fprintln(w)
		}
		fmt.Fprintf(w, "%s  %s\n", t.paint(source.Visible(b.Path), color.Bold), source.Visible(b.Circuit.Title))
		if len(b.Accounts) == 0 {
			fmt.Fprintln(w, "\n  no stage found")
		}
		for _, a := range b.Accounts {
			t.stage(w, a)
		}
		loose := rules.Unstaged(b)
		t.list(w, "in no stage", len(loose), func(i int) string { return loose[i].Stage + ": " + loose[i].Because })
		t.list(w, "could not be read", len(b.Problems), func(i int) string {
			return Place(b.Problems[i].Span) + ": " + b.Problems[i].Message
		})
	}
}

func (t Terminal) stage(w io.Writer, a *operating.Account) {
	s := a.Stage
	fmt.Fprintf(w, "\n  %s  %s %s\n", t.paint(string(s.Kind), color.Bold), source.Visible(s.Anchor.Designator),
		source.Visible(s.Anchor.PartName))
	roles, from := order(a)
	fmt.Fprintf(w, "    %-20s %s (%s)\n", "terminals", strings.Join(roles, " "), from)
	for _, role := range stage.Roles {
		var names []string
		for _, e := range s.Parts[role] {
			names = append(names, source.Visible(e.Designator))
		}
		if len(names) > 0 {
			fmt.Fprintf(w, "    %-20s %s\n", role, strings.Join(names, " "))
		}
	}
	for _, g := range s.Drives {
		fmt.Fprintf(w, "    %-20s %s\n", "drives", source.Visible(g.Anchor.Designator))
	}
	if len(a.Figures()) > 0 {
		fmt.Fprintf(w, "\n    %-32s %12s %12s %12s\n", "", "low", "nominal", "high")
	}
	for _, f := range a.Figures() {
		show := func(v float64) string { return quantity.Format(v, f.Unit) }
		fmt.Fprintf(w, "    %-32s %12s %12s %12s\n", f.Name, show(f.Low), show(f.Nominal), show(f.High))
		for _, line := range wrap(source.Visible(f.Working), t.columns()-8) {
			fmt.Fprintf(w, "        %s\n", line)
		}
	}
	t.budget(w, a)
	rests := gathered(notes(a))
	t.list(w, "  rests on", len(rests), func(i int) string { return rests[i] })
	t.list(w, "  not worked out", len(a.Unchecked), func(i int) string {
		u := a.Unchecked[i]
		if u.Rule != "" {
			return u.Rule + ": " + u.Because
		}
		return u.Because
	})
}

// budget writes where the spread of a declared period comes from.
func (t Terminal) budget(w io.Writer, a *operating.Account) {
	b, ok := a.Budget()
	if !ok {
		return
	}
	fmt.Fprintf(w, "\n    %s %s .. %s, wanted %s .. %s\n", b.Figure, quantity.Format(b.Low, "s"), quantity.Format(b.High, "s"),
		quantity.Format(b.Target.Low, "s"), quantity.Format(b.Target.High, "s"))
	fmt.Fprintln(w, "    where its spread comes from")
	for _, s := range b.Shares {
		fmt.Fprintf(w, "      %-24s %12s .. %-12s %6.1f %%\n", source.Visible(s.Name), quantity.Format(s.Low, s.Unit),
			quantity.Format(s.High, s.Unit), s.Part*100)
	}
	for _, text := range rules.Remedies(b) {
		for i, line := range wrap(text, t.columns()-6) {
			fmt.Fprintf(w, "    %s %s\n", map[bool]string{true: "-", false: " "}[i == 0], line)
		}
	}
}

// notes gathers the assumptions of all figures, each once.
func notes(a *operating.Account) []string {
	var list []string
	seen := map[string]bool{}
	for _, f := range a.Figures() {
		for _, n := range f.Assumed {
			if !seen[n] {
				seen[n] = true
				list = append(list, n)
			}
		}
	}
	return list
}
