package main

import (
	"fmt"
	"strings"

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
		Long: "Checks netlists. PATH is a file, a folder (searched for .cir .net .sp .spice .ckt .cki) or - " +
			"for standard input;\n" +
			"without one the current folder is searched.",
		RunE: func(_ *cobra.Command, args []string) error { return lint(s, f, args) },
	}
	c.Flags().StringVar(&f.format, "format", "terminal", "terminal, lines, json or sarif")
	c.Flags().StringVar(&f.failAt, "fail-at", "hold", "hold, doubt, remark or never: the least grade that "+
		"makes the exit status 1")
	c.Flags().StringSliceVar(&f.only, "only", nil, "judge these rules only")
	c.Flags().StringSliceVar(&f.skip, "skip", nil, "leave these rules out")
	c.Flags().StringVar(&f.color, "color", "auto", "auto, always or never")
	f.read.add(c)
	return c
}

// grades gives --fail-at a meaning; never lies above every grade.
var grades = map[string]rule.Grade{"hold": rule.Hold, "doubt": rule.Doubt, "remark": rule.Remark, "never": rule.Hold + 1}

func lint(s *streams, f *lintFlags, args []string) error {
	failAt, ok := grades[f.failAt]
	if !ok {
		return fmt.Errorf("--fail-at is hold, doubt, remark or never, not %q", f.failAt)
	}
	if !strings.Contains(" terminal lines json sarif ", " "+f.format+" ") {
		return fmt.Errorf("--format is terminal, lines, json or sarif, not %q", f.format)
	}
	paint, err := s.paint(f.color)
	if err != nil {
		return err
	}
	for _, id := range append(append([]string{}, f.only...), f.skip...) {
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
	if s.status == 0 && worst(results) >= failAt {
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
