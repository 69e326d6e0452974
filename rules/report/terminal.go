package report

import (
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
		fmt.Fprintln(w)
		t.head(w, t.paint("UNREAD", color.FgRed, color.Bold), p.Span, "")
		t.text(w, p.Message)
		t.card(w, p.Span)
	}
	for _, f := range r.Findings {
		fmt.Fprintln(w)
		t.finding(w, f)
	}
	t.list(w, "set aside by waivers", len(r.Waived), func(i int) string {
		x := r.Waived[i]
		return fmt.Sprintf("%s at %s, line "+
			"%d: %s", x.Finding.Rule, source.Visible(x.Finding.Stage), x.Line, source.Visible(x.Reason))
	})
	t.list(w, "not checked", len(r.Unchecked), func(i int) string {
		x := r.Unchecked[i]
		if x.Rule == "" {
			return x.Stage + ": " + x.Because
		}
		return fmt.Sprintf("%s at %s: %s", x.Rule, x.Stage, x.Because)
	})
	t.list(w, "take care", len(r.Cautions), func(i int) string { return r.Cautions[i].Message })
	fmt.Fprintf(w, "\n  %s\n", t.stages(r)+summary(Count([]*rules.Result{r})))
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

// head writes the grade, the place and the rule.
func (t Terminal) head(w io.Writer, grade string, at source.Span, id string) {
	p := at.Position()
	fmt.Fprintf(w, "  %s  line %d  %s\n", grade, p.Line, id)
}

// text writes a paragraph indented and wrapped.
func (t Terminal) text(w io.Writer, text string) {
	for _, line := range wrap(source.Visible(text), max(t.Width, 40)-6) {
		fmt.Fprintf(w, "      %s\n", line)
	}
}

// card shows the source line with the subject marked.
func (t Terminal) card(w io.Writer, at source.Span) {
	if at.IsZero() {
		return
	}
	p := at.Position()
	line := at.File.Line(p.Line)
	shown := source.Visible(line)
	before := utf8.RuneCountInString(source.Visible(string([]rune(line)[:min(p.Column-1, utf8.RuneCountInString(line))])))
	marked := max(1, utf8.RuneCountInString(source.Visible(strings.SplitN(at.Text(), "\n", 2)[0])))
	if room := max(t.Width, 40) - 10; utf8.RuneCountInString(shown) > room {
		shown = string([]rune(shown)[:room-3]) + "..."
		marked = max(1, min(marked, room-before))
	}
	fmt.Fprintf(w, "%5d | %s\n", p.Line, shown)
	if before < max(t.Width, 40)-10 {
		fmt.Fprintf(w, "      | %s%s\n", strings.Repeat(" ", before), strings.Repeat("^", marked))
	}
}

func (t Terminal) finding(w io.Writer, f rule.Finding) {
	t.head(w, t.grade(f.Grade), f.At, t.paint(f.Rule, color.Bold))
	t.text(w, f.Message)
	t.card(w, f.At)
	if f.Working != "" {
		t.labelled(w, "working", source.Visible(f.Working))
	}
	if len(f.Corner) > 0 {
		t.labelled(w, "on the board with", Settings(f.Corner))
	}
	switch {
	case len(f.Advice) > 0:
		var words []string
		for _, a := range f.Advice {
			words = append(words, source.Visible(a.Part)+" = "+a.Text)
		}
		t.labelled(w, "mend", t.paint(strings.Join(words, " with "), color.FgGreen)+" clears it; the board "+
			"was worked out anew with it")
	case f.NoAdvice != "":
		t.labelled(w, "mend", source.Visible(f.NoAdvice))
	}
}

func (t Terminal) labelled(w io.Writer, label, text string) {
	for i, line := range wrap(label+": "+text, max(t.Width, 40)-6) {
		indent := "      "
		if i > 0 {
			indent = "        "
		}
		fmt.Fprintf(w, "%s%s\n", indent, line)
	}
}

// Settings writes a corner in words.
func Settings(c operating.Corner) string {
	var words []string
	for _, s := range c {
		words = append(words, source.Visible(s.Name)+" "+quantity.Format(s.Value, s.Unit))
	}
	return strings.Join(words, ", ")
}

func (t Terminal) list(w io.Writer, heading string, n int, line func(int) string) {
	if n == 0 {
		return
	}
	fmt.Fprintf(w, "\n  %s\n", heading)
	for i := range n {
		for k, part := range wrap(source.Visible(line(i)), max(t.Width, 40)-8) {
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

// Lines writes one finding a line: FILE:LINE:COLUMN: GRADE: MESSAGE [RULE].
func Lines(w io.Writer, results []*rules.Result) {
	for _, r := range results {
		for _, p := range r.Problems {
			at := p.Span.Position()
			fmt.Fprintf(w, "%s:%d:%d: problem: %s\n", source.Visible(at.Path), at.Line, at.Column, oneLine(p.Message))
		}
		for _, f := range r.Findings {
			at := f.At.Position()
			fmt.Fprintf(w, "%s:%d:%d: %s: %s%s "+
				"[%s]\n", source.Visible(at.Path), at.Line, at.Column, f.Grade, oneLine(f.Message), mend(f), f.Rule)
		}
	}
}

func oneLine(text string) string { return source.Visible(strings.Join(strings.Fields(text), " ")) }

func mend(f rule.Finding) string {
	if len(f.Advice) == 0 {
		return ""
	}
	var words []string
	for _, a := range f.Advice {
		words = append(words, source.Visible(a.Part)+" = "+a.Text)
	}
	return "; " + strings.Join(words, " with ") + " clears it"
}
