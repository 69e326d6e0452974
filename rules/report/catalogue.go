package report

import (
	"fmt"
	"io"
	"strings"

	"github.com/fatih/color"

	"standoff/netlist/part"
	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/rules/rule"
)

type ruleDoc struct {
	ID      string `json:"id"`
	Group   string `json:"group"`
	Title   string `json:"title"`
	Why     string `json:"why"`
	Formula string `json:"formula"`
	Source  string `json:"source"`
	Failing string `json:"failing"`
	Mended  string `json:"mended"`
}

// RulesJSON writes rules for programs.
func RulesJSON(w io.Writer, list []*rule.Rule) error {
	docs := []ruleDoc{}
	for _, r := range list {
		docs = append(docs, ruleDoc{r.ID, r.Group, r.Title, r.Why, r.Formula, r.Source, r.Failing, r.Mended})
	}
	return write(w, map[string]any{"schema": "standoff.rules/1", "rules": docs})
}

// RulesMarkdown writes the reference of the rules.
func RulesMarkdown(w io.Writer, list []*rule.Rule) {
	fmt.Fprint(w, "# Rules\n\nWritten by `standoff rules --format markdown`; do not edit. Each failing "+
		"netlist yields its rule and each mended one does not: a test runs them.\n")
	group := ""
	for _, r := range list {
		if r.Group != group {
			group = r.Group
			fmt.Fprintf(w, "\n## %s\n", group)
		}
		fmt.Fprintf(w, "\n### %s\n\n%s\n\n%s\n\n", r.ID, r.Title, r.Why)
		fmt.Fprintf(w, "Formula: `%s`\n\nSource: %s\n\n", r.Formula, r.Source)
		fmt.Fprintf(w, "Fails:\n\n```\n%s```\n\nMended:\n\n```\n%s```\n", r.Failing, r.Mended)
	}
}

// RuleList writes one line a rule.
func (t Terminal) RuleList(w io.Writer, list []*rule.Rule) {
	group := ""
	for _, r := range list {
		if r.Group != group {
			if group != "" {
				fmt.Fprintln(w)
			}
			group = r.Group
			fmt.Fprintln(w, t.paint(group, color.Bold))
		}
		fmt.Fprintf(w, "  %-28s %s\n", r.ID, r.Title)
	}
}

// Explain writes one rule in full.
func (t Terminal) Explain(w io.Writer, r *rule.Rule) {
	fmt.Fprintf(w, "%s  (%s)\n\n", t.paint(r.ID, color.Bold), r.Group)
	for _, text := range []string{r.Title, r.Why, "Formula: " + r.Formula, "Source: " + r.Source} {
		for _, line := range wrap(text, t.columns()-2) {
			fmt.Fprintf(w, "  %s\n", line)
		}
		fmt.Fprintln(w)
	}
	for _, x := range [][2]string{{"fails", r.Failing}, {"mended", r.Mended}} {
		fmt.Fprintf(w, "  %s\n", t.paint(x[0], color.Bold))
		for _, line := range strings.Split(strings.TrimRight(x[1], "\n"), "\n") {
			fmt.Fprintf(w, "    %s\n", line)
		}
		fmt.Fprintln(w)
	}
}

// PartList writes one line a part.
func (t Terminal) PartList(w io.Writer, list []*part.Ratings) {
	for _, r := range list {
		alias := ""
		if len(r.Aliases) > 0 {
			alias = "  also " + strings.Join(r.Aliases, " ")
		}
		fmt.Fprintf(w, "%-12s %-6s %s%s\n", r.Name, r.Kind, trust(r), alias)
	}
}

// trust says how far the row as a whole can be trusted.
func trust(r *part.Ratings) string { return r.Texts["mark"] }

func markWords(m part.Mark) string {
	switch m {
	case part.Declared:
		return "declared"
	case part.Read:
		return "read"
	case part.Scan:
		return "damaged scan"
	case part.Memory:
		return "from memory"
	}
	return "assumed"
}

// Part writes one part's ratings.
func (t Terminal) Part(w io.Writer, r *part.Ratings) {
	fmt.Fprintf(w, "%s  %s\n  source: %s\n", t.paint(r.Name, color.Bold), r.Kind, source.Visible(r.Source))
	if len(r.Aliases) > 0 {
		fmt.Fprintf(w, "  also sold as: %s\n", strings.Join(r.Aliases, " "))
	}
	if roles := part.NetlistOrder(r.Kind); roles != nil {
		fmt.Fprintf(w, "  order on a card: %s\n", strings.Join(roles, " "))
	}
	fmt.Fprintf(w, "\n  %-12s %12s %12s %12s  %-13s %s\n", "", "min", "typ", "max", "trust", "")
	for _, s := range part.Symbols(r.Kind) {
		f, ok := r.Figures[s.Name]
		if !ok {
			continue
		}
		cell := func(v float64, has bool) string {
			if !has {
				return "-"
			}
			return quantity.Format(v, s.Unit)
		}
		fmt.Fprintf(w, "  %-12s %12s %12s %12s  %-13s %s\n", s.Name, cell(f.Min, f.HasMin), cell(f.Typ, f.HasTyp),
			cell(f.Max, f.HasMax), markWords(f.Mark), s.Meaning)
	}
}
