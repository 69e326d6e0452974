package report

import (
	"fmt"
	"io"
	"strings"

	"standoff/netlist/source"
	"standoff/rules"
	"standoff/rules/rule"
)

// Lines writes one finding a line, in the form of the GNU Coding Standards:
// FILE:LINE:COLUMN: GRADE: MESSAGE [RULE]. A card that could not be read is a
// problem in place of a grade, and has no rule.
func Lines(w io.Writer, results []*rules.Result) {
	for _, r := range results {
		for _, p := range r.Problems {
			fmt.Fprintf(w, "%s: problem: %s\n", Place(p.Span), oneLine(p.Message))
		}
		for _, f := range r.Findings {
			fmt.Fprintf(w, "%s: %s: %s [%s]\n", Place(f.At), f.Grade, oneLine(message(f)+remedy(f)), f.Rule)
		}
	}
}

// Place writes a place as FILE:LINE:COLUMN.
func Place(at source.Span) string {
	p := at.Position()
	return fmt.Sprintf("%s:%d:%d", source.Visible(p.Path), p.Line, p.Column)
}

// oneLine brings text onto one line on which nothing can steer a terminal.
func oneLine(text string) string { return source.Visible(strings.Join(strings.Fields(text), " ")) }

// message is what a finding says where nothing but its place stands beside it: on
// a card in a subcircuit only the stage tells the instance.
func message(f rule.Finding) string {
	if f.Stage == "" {
		return f.Message
	}
	return f.Stage + ": " + f.Message
}

// remedy tells what mends a finding, as the end of its message.
func remedy(f rule.Finding) string {
	if len(f.Advice) == 0 {
		return ""
	}
	return "; " + rules.Words(f.Advice) + " clears it (recomputed)"
}
