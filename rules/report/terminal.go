package report

import (
	"cmp"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"github.com/fatih/color"

	"standoff/netlist/operating"
	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/rules"
	"standoff/rules/rule"
)

// Terminal writes for someone at a bench: Width columns, in colour or not.
// Without colour nothing is lost.
type Terminal struct {
	Width  int
	Colour bool
}

func (t Terminal) paint(text string, attributes ...color.Attribute) string {
	c := color.New(attributes...)
	if t.Colour {
		c.EnableColor()
	} else {
		c.DisableColor()
	}
	return c.Sprint(text)
}

func (t Terminal) grade(g rule.Grade) string {
	switch g {
	case rule.Hold:
		return t.paint("HOLD", color.FgRed, color.Bold)
	case rule.Doubt:
		return t.paint("DOUBT", color.FgYellow, color.Bold)
	}
	return t.paint("REMARK", color.FgCyan)
}

// Lint writes the results file by file.
func (t Terminal) Lint(w io.Writer, results []*rules.Result) {
	for i, r := range results {
		if i > 0 {
			fmt.Fprintln(w)
		}
		t.file(w, r)
	}
	if len(results) > 1 {
		fmt.Fprintf(w, "\n%d boards: %s\n", len(results), summary(Count(results)))
	}
}

func (t Terminal) file(w io.Writer, r *rules.Result) {
	title := r.Board.Circuit.Title
	if title != "" {
		title = "  " + source.Visible(title)
	}
	fmt.Fprintf(w, "%s%s\n", t.paint(source.Visible(r.Board.Path), color.Bold), title)
	for _, p := range r.Problems {
		fmt.Fprintf(w, "\n  %s  %s\n", t.paint("UNREAD", color.FgRed, color.Bold), place(r, p.Span))
		t.text(w, p.Message)
		t.card(w, p.Span)
	}
	for _, f := range r.Findings {
		fmt.Fprintf(w, "\n  %s  %s  %s  %s\n", t.grade(f.Grade), place(r, f.At), t.paint(f.Rule, color.Bold),
			source.Visible(about(f)))
		t.finding(w, f)
	}
	t.list(w, "set aside by waivers", len(r.Waived), func(i int) string {
		x := r.Waived[i]
		return fmt.Sprintf("%s at %s, line %d: %s", x.Finding.Rule, about(x.Finding), x.Line,
			cmp.Or(x.Reason, "no reason given"))
	})
	t.list(w, "not checked", len(r.Unchecked), func(i int) string {
		x := r.Unchecked[i]
		if x.Rule == "" {
			return x.Stage + ": " + x.Because
		}
		return fmt.Sprintf("%s at %s: %s", x.Rule, x.Stage, x.Because)
	})
	t.list(w, "take care", len(r.Cautions), func(i int) string { return r.Cautions[i].Message })
	if said := len(r.Problems) + len(r.Findings) + len(r.Waived) + len(r.Unchecked) + len(r.Cautions); said > 0 {
		fmt.Fprintln(w)
	}
	t.summary(w, t.stages(r)+summary(Count([]*rules.Result{r})))
}

// about names what a finding concerns: its stage, else its parts, the first few of
// them.
func about(f rule.Finding) string {
	const few = 4
	if f.Stage != "" {
		return f.Stage
	}
	if more := len(f.Parts) - few; more > 0 {
		return fmt.Sprintf("%s and %d more", strings.Join(f.Parts[:few], " "), more)
	}
	return strings.Join(f.Parts, " ")
}

// place names a line, and its file where that is not the board's own.
func place(r *rules.Result, at source.Span) string {
	p := at.Position()
	if at.IsZero() || at.File == r.Board.File {
		return fmt.Sprintf("line %d", max(p.Line, 1))
	}
	return fmt.Sprintf("%s line %d", source.Visible(p.Path), p.Line)
}

// summary writes the last line of a file.
func (t Terminal) summary(w io.Writer, text string) {
	for i, line := range wrap(text, t.columns()-4) {
		fmt.Fprintf(w, "  %s%s\n", strings.Repeat("  ", min(i, 1)), line)
	}
}

func (t Terminal) stages(r *rules.Result) string {
	var names []string
	for _, a := range r.Board.Accounts {
		names = append(names, fmt.Sprintf("%s %s", a.Stage.Kind, source.Visible(a.Stage.Anchor.Designator)))
	}
	if len(names) == 0 {
		return "no stage found; "
	}
	return strings.Join(names, ", ") + ": "
}

func summary(t Totals) string {
	text := fmt.Sprintf("%d hold, %d doubt, %d remark", t.Hold, t.Doubt, t.Remark)
	for _, x := range []struct {
		n    int
		word string
	}{{t.Waived, "waived"}, {t.Unchecked, "unchecked"}, {t.Problems, "unread"}} {
		if x.n > 0 {
			text += fmt.Sprintf(", %d %s", x.n, x.word)
		}
	}
	return text
}

// columns is the width that is written to: no less than 40.
func (t Terminal) columns() int { return max(t.Width, 40) }

// text writes a paragraph indented and wrapped.
func (t Terminal) text(w io.Writer, text string) {
	for _, line := range wrap(source.Visible(text), t.columns()-6) {
		fmt.Fprintf(w, "      %s\n", line)
	}
}

// card shows the source line with the subject marked by carets. Of a line that is
// too long the stretch around the subject is shown.
func (t Terminal) card(w io.Writer, at source.Span) {
	if at.IsZero() {
		return
	}
	p := at.Position()
	line := []rune(at.File.Line(p.Line))
	subject, _, _ := strings.Cut(at.Text(), "\n")
	shown := []rune(source.Visible(string(line)))
	before := utf8.RuneCountInString(source.Visible(string(line[:min(p.Column-1, len(line))])))
	marked := max(1, utf8.RuneCountInString(source.Visible(strings.TrimRight(subject, "\r"))))
	const gap = "..."
	room := t.columns() - 8
	if from := before + min(marked, room/2) - room + len(gap); from > 0 {
		shown = append([]rune(gap), shown[from+len(gap):]...)
		before -= from
	}
	if len(shown) > room {
		shown = append(shown[:room-len(gap)], []rune(gap)...)
	}
	carets := strings.Repeat("^", max(1, min(marked, room-before)))
	fmt.Fprintf(w, "%5d | %s\n      | %s%s\n", p.Line, string(shown), strings.Repeat(" ", before), carets)
}

func (t Terminal) finding(w io.Writer, f rule.Finding) {
	t.text(w, f.Message)
	t.card(w, f.At)
	if f.Figure != nil {
		t.labelled(w, "figure", f.Figure.Name+" "+quantity.Format(f.Figure.Value, f.Figure.Unit)+bound(f.Figure))
	}
	if f.Working != "" {
		t.labelled(w, "working", f.Working)
	}
	if len(f.Corner) > 0 {
		t.labelled(w, "on the board with", Settings(f.Corner))
	}
	if len(f.Assumed) > 0 {
		t.labelled(w, "rests on", strings.Join(gathered(f.Assumed), "; "))
	}
	switch {
	case len(f.Advice) > 0:
		t.labelled(w, "mend", rules.Words(f.Advice)+" clears it; the whole board was worked out anew with it")
	case f.NoAdvice != "":
		t.labelled(w, "mend", f.NoAdvice)
	}
}

// gathered brings all default spreads of a list into one entry, at its end.
func gathered(notes []string) []string {
	var list, spreads []string
	for _, n := range notes {
		name, ok := strings.CutPrefix(n, "spread of ")
		if name, also := strings.CutSuffix(name, ": default"); ok && also {
			spreads = append(spreads, name)
		} else {
			list = append(list, n)
		}
	}
	if len(spreads) > 0 {
		list = append(list, "default spreads of "+strings.Join(spreads, ", "))
	}
	return list
}

// bound tells the limit of a figure.
func bound(f *rule.Figure) string {
	if f.Bound == "min" {
		return ", wanted at least " + quantity.Format(f.Limit, f.Unit)
	}
	return ", wanted at most " + quantity.Format(f.Limit, f.Unit)
}

// labelled writes a paragraph with what it is in front.
func (t Terminal) labelled(w io.Writer, label, text string) {
	for i, line := range wrap(source.Visible(label+": "+text), t.columns()-8) {
		if i == 0 {
			line = t.paint(label, color.Faint) + strings.TrimPrefix(line, label)
		}
		fmt.Fprintf(w, "      %s%s\n", strings.Repeat("  ", min(i, 1)), line)
	}
}

// Settings writes a corner in words.
func Settings(c operating.Corner) string {
	var words []string
	for _, s := range c {
		words = append(words, s.Name+" "+quantity.Format(s.Value, s.Unit))
	}
	return strings.Join(words, ", ")
}

func (t Terminal) list(w io.Writer, heading string, n int, line func(int) string) {
	if n == 0 {
		return
	}
	fmt.Fprintf(w, "\n  %s\n", heading)
	for i := range n {
		for k, part := range wrap(source.Visible(line(i)), t.columns()-8) {
			lead := "    - "
			if k > 0 {
				lead = "      "
			}
			fmt.Fprintf(w, "%s%s\n", lead, part)
		}
	}
}

// wrap breaks text between words at a width in characters.
func wrap(text string, width int) []string {
	var lines []string
	line := ""
	for _, word := range strings.Fields(text) {
		if line != "" && utf8.RuneCountInString(line)+1+utf8.RuneCountInString(word) > width {
			lines = append(lines, line)
			line = ""
		}
		if line != "" {
			line += " "
		}
		line += word
	}
	return append(lines, line)
}
