package rules_test

import (
	"fmt"
	"io/fs"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"standoff/fixtures"
	"standoff/netlist"
	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
	"standoff/rules"
	"standoff/rules/rule"
)

// A board written another way gets the same verdicts. Decks here are one card a
// line, as the rule reference has them; each rewriting keeps the circuit.

// verdicts lists rules and grades of holds and doubts, in order.
func verdicts(t *testing.T, text string) []string {
	t.Helper()
	b, err := netlist.ReadText("t.cir", []byte(text), netlist.Options{})
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range b.Problems {
		t.Fatalf("line %d: %s\n%s", p.Span.Position().Line, p.Message, text)
	}
	var list []string
	for _, f := range rules.Check(b, rules.Options{NoAdvice: true}).Findings {
		if f.Grade >= rule.Doubt {
			list = append(list, f.Rule+" "+f.Grade.String())
		}
	}
	slices.Sort(list)
	return list
}

// line is one card of a simple deck.
type line struct {
	text    string
	fields  []string
	element *circuit.Element // nil for anything but an element
}

// split takes a deck apart; elements are looked up on the board itself.
func split(t *testing.T, text string) (title string, lines []line) {
	t.Helper()
	b, err := netlist.ReadText("t.cir", []byte(text), netlist.Options{})
	if err != nil {
		t.Fatal(err)
	}
	byLine := map[int]*circuit.Element{}
	for _, e := range b.Circuit.Elements {
		byLine[e.At.Position().Line] = e
	}
	all := strings.Split(strings.TrimRight(text, "\n"), "\n")
	for i, l := range all[1:] {
		if strings.TrimSpace(l) != "" && !strings.EqualFold(l, ".end") {
			lines = append(lines, line{l, strings.Fields(l), byLine[i+2]})
		}
	}
	return all[0], lines
}

func joinDeck(title string, lines []string) string {
	return title + "\n" + strings.Join(lines, "\n") + "\n"
}

func texts2(lines []line) []string {
	list := make([]string, len(lines))
	for i, l := range lines {
		list[i] = l.text
	}
	return list
}

func passive(e *circuit.Element) bool {
	return e.Kind == circuit.Resistor || e.Kind == circuit.Capacitor
}

// rewritings by name.
var rewritings = map[string]func(title string, lines []line) string{
	"renamed nodes": func(title string, lines []line) string {
		var out []string
		for _, l := range lines {
			f := slices.Clone(l.fields)
			if l.element != nil {
				for i := 1; i <= len(l.element.Nodes); i++ {
					if f[i] != "0" && !strings.EqualFold(f[i], "gnd") {
						f[i] = "/sheet/" + strings.Repeat("q", len(f[i])) + f[i] + "-+"
					}
				}
			}
			out = append(out, strings.Join(f, " "))
		}
		return joinDeck(title, out)
	},
	"renamed designators": func(title string, lines []line) string {
		names := map[string]string{}
		for _, l := range lines {
			if l.element != nil {
				names[strings.ToLower(l.fields[0])] = l.fields[0] + "_b2"
			}
		}
		var out []string
		for _, l := range lines {
			f := slices.Clone(l.fields)
			for i := range f {
				nodes := 0
				if l.element != nil {
					nodes = len(l.element.Nodes)
				}
				intent := f[0] == "*>" && (i == 1 || i == 3 && f[1] == "waive")
				if name, ok := names[strings.ToLower(f[i])]; ok && (i == 0 || intent || l.element != nil && i > nodes) {
					f[i] = name
				}
			}
			out = append(out, strings.Join(f, " "))
		}
		return joinDeck(title, out)
	},
	"shuffled cards": func(title string, lines []line) string {
		list := texts2(lines)
		r := rand.New(rand.NewPCG(7, 7))
		r.Shuffle(len(list), func(i, j int) { list[i], list[j] = list[j], list[i] })
		return joinDeck(title, list)
	},
	"other number forms": func(title string, lines []line) string {
		var out []string
		for _, l := range lines {
			f := slices.Clone(l.fields)
			if l.element != nil && len(f) > 3 {
				if n, err := quantity.Parse(f[3]); err == nil && passive(l.element) {
					f[3] = fmt.Sprintf("%.12e", n.Value)
				}
			}
			out = append(out, strings.Join(f, "\t "))
		}
		return joinDeck(title, out)
	},
	"upper case": func(title string, lines []line) string { return joinDeck(title, upper(texts2(lines))) },
	"CR LF": func(title string, lines []line) string {
		return strings.ReplaceAll(joinDeck(title, texts2(lines)), "\n", "\r\n")
	},
	"continued cards": func(title string, lines []line) string {
		var out []string
		for _, l := range lines {
			text := l.text
			if l.element != nil {
				text = strings.Join(l.fields, "\n* between\n\n + ")
			}
			out = append(out, text)
		}
		return joinDeck(title, out)
	},
	"split resistors and capacitors": func(title string, lines []line) string {
		var out []string
		for _, l := range lines {
			f := l.fields
			all := strings.ToLower(strings.Join(texts2(lines), "\n"))
			named := strings.Contains(all, "*> "+strings.ToLower(f[0])+" ")
			if l.element == nil || named || len(f) != 4 || l.element.Value.Nominal == 0 {
				out = append(out, l.text)
				continue
			}
			v := l.element.Value.Nominal
			switch l.element.Kind {
			case circuit.Resistor:
				out = append(out, fmt.Sprintf("%sa %s split%s %g", f[0], f[1], f[0], v/2),
					fmt.Sprintf("%sb split%s %s %g", f[0], f[0], f[2], v/2))
			case circuit.Capacitor:
				out = append(out, fmt.Sprintf("%sa %s %s %g", f[0], f[1], f[2], v/4),
					fmt.Sprintf("%sb %s %s %g", f[0], f[1], f[2], 3*v/4))
			default:
				out = append(out, l.text)
			}
		}
		return joinDeck(title, out)
	},
	"values as parameters": func(title string, lines []line) string {
		var out []string
		for i, l := range lines {
			f := slices.Clone(l.fields)
			if l.element != nil && len(f) == 4 && passive(l.element) {
				out = append(out, fmt.Sprintf(".param val%d={%s/2}", i, f[3]))
				f[3] = fmt.Sprintf("{2*val%d}", i)
			}
			out = append(out, strings.Join(f, " "))
		}
		return joinDeck(title, out)
	},
	"inside a subcircuit": func(title string, lines []line) string {
		inner, outer := []string{".subckt wrapped vcc"}, []string{}
		for _, l := range lines {
			if strings.HasPrefix(l.text, "*> board") {
				outer = append(outer, l.text)
			} else {
				inner = append(inner, l.text)
			}
		}
		return joinDeck(title, append(append(inner, ".ends", "Xw vcc wrapped"), outer...))
	},
}

func upper(list []string) []string {
	out := make([]string, len(list))
	for i, l := range list {
		out[i] = strings.ToUpper(l)
		if strings.HasPrefix(l, "*> waive") {
			out[i] = l
		}
	}
	return out
}

// sensitive names the rewritings that change what a rule is about.
func sensitive(id, rewriting string) bool {
	switch id {
	case "node-dangling", "node-name-near-miss":
		return rewriting == "renamed nodes" || rewriting == "inside a subcircuit"
	case "value-suffix-suspect", "part-shorted", "designator-repeated", "node-no-dc-path":
		return rewriting != "CR LF" && rewriting != "upper case" && rewriting != "continued cards"
	case "ground-missing":
		return rewriting == "inside a subcircuit" || rewriting == "shuffled cards"
	case "waiver-unused", "waiver-unexplained":
		return rewriting == "inside a subcircuit"
	}
	return false
}

// plainDeck strips comments from a fixture, so that a card is a line; ok is false
// where cards are continued or nested.
func plainDeck(text string) (plain string, ok bool) {
	lines := strings.Split(text, "\n")
	out := lines[:1]
	for _, l := range lines[1:] {
		low := strings.ToLower(l)
		if strings.HasPrefix(l, "+") || strings.HasPrefix(low, ".subckt") || strings.HasPrefix(low, ".param") {
			return "", false
		}
		if strings.HasPrefix(l, "*") && !strings.HasPrefix(l, "*>") || strings.TrimSpace(l) == "" {
			continue
		}
		l, _, _ = strings.Cut(l, ";")
		out = append(out, strings.TrimRight(l, " "))
	}
	return strings.Join(out, "\n") + "\n", true
}

func TestWholeBoardsWrittenAnotherWayGetTheSameVerdicts(t *testing.T) {
	count := 0
	files, err := fs.Glob(fixtures.Files, "boards/*.cir")
	if err != nil {
		t.Fatal(err)
	}
	for i, file := range files {
		if testing.Short() && i%4 > 0 {
			continue
		}
		data, err := fixtures.Files.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		text, ok := plainDeck(string(data))
		if !ok {
			continue
		}
		count++
		want := verdicts(t, text)
		title, lines := split(t, text)
		for name, rewrite := range rewritings {
			other := rewrite(title, lines)
			if got := verdicts(t, other); !slices.Equal(got, want) {
				t.Errorf("%s, %s:\n got %v\nwant %v\n%s", file, name, got, want, other)
			}
		}
	}
	if count < 10 && !testing.Short() {
		t.Errorf("only %d boards could be rewritten", count)
	}
}

func TestTheSameBoardWrittenAnotherWayGetsTheSameVerdicts(t *testing.T) {
	for _, r := range rules.Catalogue() {
		for which, text := range map[string]string{"failing": r.Failing, "mended": r.Mended} {
			want := verdicts(t, text)
			title, lines := split(t, text)
			for name, rewrite := range rewritings {
				if sensitive(r.ID, name) {
					continue
				}
				other := rewrite(title, lines)
				if got := verdicts(t, other); !slices.Equal(got, want) {
					t.Errorf("%s, %s, %s:\n got %v\nwant %v\n%s", r.ID, which, name, got, want, other)
				}
			}
		}
	}
}
