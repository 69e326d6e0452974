package main

import (
	"fmt"

	"github.com/spf13/cobra"

	"standoff/netlist/part"
)

func newParts(s *streams) *cobra.Command {
	return &cobra.Command{
		Use: "parts [PART]", Short: "Lists the part library, or one part's ratings with their source",
		Args: cobra.MaximumNArgs(1),
		RunE: func(_ *cobra.Command, args []string) error { return showParts(s, args) },
	}
}

func showParts(s *streams, args []string) error {
	paint, err := s.paint("auto")
	if err != nil {
		return err
	}
	if len(args) == 0 {
		paint.PartList(s.out, part.All())
		return nil
	}
	r, ok := part.Lookup(args[0])
	if !ok {
		return fmt.Errorf("the library has no part %q; standoff parts lists them", args[0])
	}
	paint.Part(s.out, r)
	return nil
}
