package main

import (
	"fmt"
	"slices"

	"github.com/spf13/cobra"

	"standoff/netlist"
	"standoff/rules"
	"standoff/rules/report"
	"standoff/rules/rule"
)

type lintFlags struct {
	read                  readFlags
	format, failAt, color string
	only, skip            []string
}

func newLint(s *streams) *cobra.Command {
	f := &lintFlags{}
	c := &cobra.Command{
		Use: "lint [PATH...]", Short: "Checks netlists",
		Long: "Checks netlists. PATH is a file, a folder (searched for .cir .net .sp .spice .ckt .cki) or - for\n" +
			"standard input; without one the current folder is searched. Findings go to standard output, troubles\n" +
			"to standard error.\n\n" +
			"Exit status: 0 nothing at or above --fail-at, 1 something, 2 the job could not be done. A card that\n" +
			"cannot be read counts as a hold.",
		RunE: func(_ *cobra.Command, args []string) error { return lint(s, f, args) },
	}
	c.Flags().StringVar(&f.format, "format", "terminal", "terminal, lines, json or sarif")
	c.Flags().StringVar(&f.failAt, "fail-at", "hold",
		"hold, doubt, remark or never: the least grade that makes the exit status 1")
	c.Flags().StringSliceVar(&f.only, "only", nil, "`RULE[,RULE]`: judge these rules only")
	c.Flags().StringSliceVar(&f.skip, "skip", nil, "`RULE[,RULE]`: leave these rules out")
	c.Flags().StringVar(&f.color, "color", "auto", "auto, always or never")
	f.read.add(c)
	return c
}

// failing gives --fail-at a meaning; never lies above every grade.
func failing(name string) (rule.Grade, error) {
	for g := rule.Remark; g <= rule.Hold; g++ {
		if g.String() == name {
			return g, nil
		}
	}
	if name == "never" {
		return rule.Hold + 1, nil
	}
	return 0, fmt.Errorf("--fail-at is hold, doubt, remark or never, not %q", name)
}

func lint(s *streams, f *lintFlags, args []string) error {
	failAt, err := failing(f.failAt)
	if err != nil {
		return err
	}
	if !slices.Contains([]string{"terminal", "lines", "json", "sarif"}, f.format) {
		return fmt.Errorf("--format is terminal, lines, json or sarif, not %q", f.format)
	}
	paint, err := s.paint(f.color)
	if err != nil {
		return err
	}
	for _, id := range slices.Concat(f.only, f.skip) {
		if _, ok := rules.Find(id); !ok {
			return fmt.Errorf("there is no rule %q; standoff rules lists them", id)
		}
	}
	opts, err := f.read.options(s)
	if err != nil {
		return err
	}
	results, err := each(s, args, opts, func(b *netlist.Board) *rules.Result {
		return rules.Check(b, rules.Options{Only: f.only, Skip: f.skip})
	})
	if err != nil {
		return err
	}
	if err := writeLint(s, f.format, paint, results); err != nil {
		return err
	}
	if worst(results) >= failAt {
		return errFound
	}
	return nil
}

func writeLint(s *streams, format string, paint report.Terminal, results []*rules.Result) error {
	switch format {
	case "json":
		return report.JSON(s.out, results)
	case "sarif":
		return report.SARIF(s.out, results)
	case "lines":
		report.Lines(s.out, results)
	default:
		paint.Lint(s.out, results)
	}
	return nil
}

// worst returns the worst grade found; a card that could not be read counts as
// a hold.
func worst(results []*rules.Result) rule.Grade {
	var g rule.Grade
	for _, r := range results {
		if len(r.Problems) > 0 {
			g = rule.Hold
		}
		for _, f := range r.Findings {
			g = max(g, f.Grade)
		}
	}
	return g
}
