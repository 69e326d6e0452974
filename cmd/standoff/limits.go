package main

import (
	"fmt"
	"strconv"
	"strings"

	"standoff/netlist"
)

// standardFileBytes is the greatest file that is read unless --limit says otherwise.
const standardFileBytes = 64 << 20

// limit is one bound on what a netlist may ask for, as --limit names it.
type limit struct {
	name, help string
	set        func(o *netlist.Options, n int)
}

// limits lists the bounds that a user may move.
func limits() []limit {
	return []limit{
		{"file-bytes", "bytes of one file or of standard input, 64 MiB",
			func(o *netlist.Options, n int) { o.FileLimits.FileBytes = int64(n) }},
		{"elements", "elements, and uses of subcircuits, after flattening, 2000000",
			func(o *netlist.Options, n int) { o.Limits.Elements = n }},
		{"depth", "subcircuits or includes inside one another, 40",
			func(o *netlist.Options, n int) { o.Limits.Depth = n }},
		{"includes", "files included, 1000", func(o *netlist.Options, n int) { o.Limits.Includes = n }},
		{"expression-depth", "parameters and operators that hang on one another, 2000",
			func(o *netlist.Options, n int) { o.Limits.ExpressionDepth = n }},
	}
}

// limitsHelp says what they are, for the help text.
func limitsHelp() string {
	var b strings.Builder
	b.WriteString("Limits (--limit NAME=N moves one; brackets in an expression stay within 200, a card within\n100000 words):\n")
	for _, l := range limits() {
		fmt.Fprintf(&b, "  %-18s %s\n", l.name, l.help)
	}
	return b.String()
}

// setLimits takes the --limit flags over.
func setLimits(o *netlist.Options, flags []string) error {
	for _, flag := range flags {
		name, text, _ := strings.Cut(flag, "=")
		n, err := strconv.Atoi(text)
		if err != nil || n <= 0 {
			return fmt.Errorf("--limit is NAME=N with N above 0, not %q", flag)
		}
		known := false
		for _, l := range limits() {
			if l.name == name {
				l.set(o, n)
				known = true
			}
		}
		if !known {
			return fmt.Errorf("--limit knows no %q; standoff lint --help lists the limits", name)
		}
	}
	return nil
}
