package main

import (
	"fmt"

	"github.com/spf13/cobra"

	"standoff/rules"
	"standoff/rules/report"
	"standoff/rules/rule"
)

func newRules(s *streams) *cobra.Command {
	var format string
	c := &cobra.Command{
		Use: "rules [RULE]", Short: "Lists the rules, or explains one in full",
		Args: cobra.MaximumNArgs(1),
		RunE: func(_ *cobra.Command, args []string) error { return showRules(s, format, args) },
	}
	c.Flags().StringVar(&format, "format", "terminal", "terminal, markdown or json")
	return c
}

func showRules(s *streams, format string, args []string) error {
	list := rules.Catalogue()
	if len(args) == 1 {
		r, ok := rules.Find(args[0])
		if !ok {
			return fmt.Errorf("there is no rule %q; standoff rules lists them", args[0])
		}
		list = []*rule.Rule{r}
	}
	switch format {
	case "json":
		return report.RulesJSON(s.out, list)
	case "markdown":
		report.RulesMarkdown(s.out, list)
		return nil
	case "terminal":
	default:
		return fmt.Errorf("--format is terminal, markdown or json, not %q", format)
	}
	paint, err := s.paint("auto")
	if err != nil {
		return err
	}
	if len(args) == 1 {
		paint.Explain(s.out, list[0])
	} else {
		paint.RuleList(s.out, list)
	}
	return nil
}
