package report_test

import (
	"bytes"
	"encoding/json"
	"flag"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
	"unicode"
	"unicode/utf8"

	"standoff/netlist"
	"standoff/rules"
	"standoff/rules/report"
)

var update = flag.Bool("update", false, "write the expected outputs anew")

func check(t *testing.T, path, text string) *rules.Result {
	t.Helper()
	b, err := netlist.ReadText(path, []byte(text), netlist.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return rules.Check(b, rules.Options{})
}

// bench is a board with one of everything that a screen shows and no physics in it.
const bench = `Sand blaster pulser, first draft
V1 vcc 0 SIN(0 325 50)
R1 vcc spare 4k7
R2 vcc 0 {2*+}
R2 vcc 0 1k
R3 vcc vcd 1k
C1 vcc 0 1u
X9 vcc 0 ZZ99
*> waive value-suffix-suspect R1 : the drawing office writes them so
*> waive part-shorted C1 : was turned round
`

// stage is a board whose stage fails.
const stage = `Buoy lamp
V1 vcc 0 20
R1 vcc e 2.2meg
C1 e 0 1u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
`

func golden(t *testing.T, name string, got []byte) {
	t.Helper()
	path := filepath.Join("testdata", name)
	if *update {
		if err := os.WriteFile(path, got, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Errorf("%s differs (go test ./rules/report -update writes it anew):\n%s", path, got)
	}
}

func TestScreens(t *testing.T) {
	results := []*rules.Result{check(t, "boards/blaster.cir", bench)}
	var terminal, narrow, lines bytes.Buffer
	report.Terminal{Width: 100}.Lint(&terminal, results)
	golden(t, "lint.txt", terminal.Bytes())
	report.Terminal{Width: 50}.Lint(&narrow, results)
	golden(t, "narrow.txt", narrow.Bytes())
	report.Lines(&lines, results)
	golden(t, "lines.txt", lines.Bytes())
}

// Every line is FILE:LINE:COLUMN: GRADE: MESSAGE [RULE].
func TestLinesAreOfTheGNUForm(t *testing.T) {
	var out bytes.Buffer
	report.Lines(&out, []*rules.Result{check(t, "a b.cir", bench), check(t, "stage.cir", stage)})
	form := regexp.MustCompile(`^[^:]+:\d+:\d+: ((hold|doubt|remark): .* \[[a-z-]+\]|problem: .*)$`)
	for line := range strings.Lines(out.String()) {
		if !form.MatchString(strings.TrimSuffix(line, "\n")) {
			t.Errorf("%q", line)
		}
	}
}

// Without colour nothing is lost: the coloured screen says the same words.
func TestColourAddsNothing(t *testing.T) {
	results := []*rules.Result{check(t, "a.cir", bench), check(t, "b.cir", stage)}
	var plain, coloured bytes.Buffer
	report.Terminal{Width: 100}.Lint(&plain, results)
	report.Terminal{Width: 100, Colour: true}.Lint(&coloured, results)
	stripped := regexp.MustCompile("\x1b\\[[0-9;]*m").ReplaceAll(coloured.Bytes(), nil)
	if !bytes.Equal(stripped, plain.Bytes()) {
		t.Errorf("coloured, less its colours:\n%s\nplain:\n%s", stripped, plain.Bytes())
	}
	if bytes.Equal(coloured.Bytes(), plain.Bytes()) {
		t.Error("no colour at all")
	}
}

// A screen keeps to its width, but for words that are longer.
func TestScreensKeepToTheirWidth(t *testing.T) {
	long := strings.Replace(stage, "2.2meg", "2.2meg ; "+strings.Repeat("note ", 60), 1)
	long = strings.ReplaceAll(long, " e ", " "+strings.Repeat("e", 90)+" ")
	for _, width := range []int{50, 72, 100} {
		var out bytes.Buffer
		report.Terminal{Width: width}.Lint(&out, []*rules.Result{check(t, "long.cir", long)})
		for line := range strings.Lines(out.String()) {
			if n := utf8.RuneCountInString(strings.TrimRight(line, "\n")); n > width {
				t.Errorf("width %d: %d columns: %q", width, n, line)
			}
		}
	}
}

// The carets stand below the subject, however the line is written.
func TestCaretsStandBelowTheSubject(t *testing.T) {
	for name, card := range map[string]string{
		"plain":       "R9 vcc 0 1M",
		"tabs":        "R9\tvcc\t0\t1M",
		"non-ASCII":   "R9 höhe 0 1M",
		"continued":   "R9 vcc\n* between\n+ 0 1M",
		"far out":     "R9 vcc" + strings.Repeat(" ", 150) + "0 1M",
		"long behind": "R9 vcc 0 1M ; " + strings.Repeat("x", 200),
		"control":     "R9 vcc 0 1M ; \x1b[31m",
	} {
		var out bytes.Buffer
		text := "t\nV1 vcc 0 1\nR8 höhe 0 1k\nV2 höhe 0 1\n" + card + "\n"
		report.Terminal{Width: 80}.Lint(&out, []*rules.Result{check(t, "t.cir", text)})
		lines := strings.Split(out.String(), "\n")
		found := false
		for i, line := range lines {
			if from := strings.Index(line, "^"); from >= 0 && strings.Contains(lines[i-1], "1M") {
				above := []rune(lines[i-1])
				at := utf8.RuneCountInString(line[:from])
				found = at+2 <= len(above) && string(above[at:at+2]) == "1M" && strings.Count(line, "^") == 2
			}
		}
		if !found {
			t.Errorf("%s:\n%s", name, out.String())
		}
	}
}

// hostile names and words that would steer a terminal, a browser or a reader of
// JSON, wherever a netlist may hold them.
const hostile = "\x1b]0;owned\x07 \u009b31m \u202eevil <script>\n" +
	"V1 vcc 0 325\nR\x1bc vcc sp\u202eare 1k\nX9 vcc 0 ZZ\x9b\u200bZ\nR2 vcc 0 {\x07}\nR3 vcc\u2028x 0 1M\n" +
	"*> waive no\x1b[2J-such R\x07 : <b>\u202e\x1b[0m</b>\n" +
	"*> waive node-dangling R\x1bc : \x1b]8;;http://x\x07\n"

func TestNoOutputIsHijacked(t *testing.T) {
	r := check(t, "b\x1b[1m\u202eoard\n.cir", hostile)
	r.Board.Path = "b\x1b[1m\u202eoard\n.cir"
	results := []*rules.Result{r}
	write := map[string]func(*bytes.Buffer) error{
		"terminal": func(b *bytes.Buffer) error { report.Terminal{Width: 80}.Lint(b, results); return nil },
		"lines":    func(b *bytes.Buffer) error { report.Lines(b, results); return nil },
		"json":     func(b *bytes.Buffer) error { return report.JSON(b, results) },
		"sarif":    func(b *bytes.Buffer) error { return report.SARIF(b, results) },
		"worksheet": func(b *bytes.Buffer) error {
			report.Terminal{Width: 80}.Worksheet(b, []*netlist.Board{r.Board})
			return nil
		},
		"worksheet json": func(b *bytes.Buffer) error { return report.WorksheetJSON(b, []*netlist.Board{r.Board}) },
	}
	for name, f := range write {
		var out bytes.Buffer
		if err := f(&out); err != nil {
			t.Errorf("%s: %v", name, err)
		}
		for _, c := range out.String() {
			if c != '\n' && !unicode.IsPrint(c) {
				t.Errorf("%s: %U reaches the output", name, c)
				break
			}
		}
		if strings.Contains(out.String(), "<script>") && name != "terminal" && name != "worksheet" {
			t.Errorf("%s: a tag reaches the output", name)
		}
	}
}

// JSON holds the names as they are in the netlist.
func TestJSONKeepsTheText(t *testing.T) {
	var out bytes.Buffer
	if err := report.JSON(&out, []*rules.Result{check(t, "a.cir", hostile)}); err != nil {
		t.Fatal(err)
	}
	var doc struct {
		Files []struct {
			Findings []struct{ Parts []string }
			Waived   []struct{ Reason string }
		}
	}
	if err := json.Unmarshal(out.Bytes(), &doc); err != nil {
		t.Fatal(err)
	}
	if len(doc.Files[0].Waived) != 1 || !strings.HasPrefix(doc.Files[0].Waived[0].Reason, "\x1b]8") {
		t.Errorf("%+v", doc.Files[0].Waived)
	}
}
