package main

import (
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"standoff/netlist"
	"standoff/rules/report"
)

func newWorksheet(s *streams) *cobra.Command {
	var read readFlags
	var format string
	c := &cobra.Command{
		Use: "worksheet PATH...", Short: "Prints every recognised stage with its figures and how they were " +
			"worked out",
		Args: cobra.MinimumNArgs(1),
		RunE: func(_ *cobra.Command, args []string) error { return worksheet(s, read, format, args) },
	}
	c.Flags().StringVar(&format, "format", "terminal", "terminal or json")
	read.add(c)
	return c
}

func worksheet(s *streams, read readFlags, format string, args []string) error {
	switch format {
	case "terminal", "json":
	case "html":
		return errors.New("worksheet --format html is not built yet; use terminal or json")
	default:
		return fmt.Errorf("--format is terminal or json, not %q", format)
	}
	opts, err := read.options(s)
	if err != nil {
		return err
	}
	boards, err := each(s, args, opts, func(b *netlist.Board) *netlist.Board { return b })
	if err != nil {
		return err
	}
	if format == "json" {
		return report.WorksheetJSON(s.out, boards)
	}
	paint, _ := s.paint("auto")
	paint.Worksheet(s.out, boards)
	return nil
}
