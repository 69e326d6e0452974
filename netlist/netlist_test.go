package netlist_test

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"standoff/netlist"
	"standoff/netlist/circuit"
	"standoff/netlist/part"
	"standoff/netlist/stage"
)

const oscillator = `Metronome
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 100n
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
`

func read(t *testing.T, text string, opts netlist.Options) *netlist.Board {
	t.Helper()
	b, err := netlist.ReadText("t.cir", []byte(text), opts)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func TestABoardIsWorkedOut(t *testing.T) {
	b := read(t, oscillator, netlist.Options{})
	if len(b.Problems) > 0 || b.NothingRead || b.Circuit.Title != "Metronome" || b.Path != "t.cir" {
		t.Fatalf("got %+v", b)
	}
	if len(b.Stages) != 1 || b.Stages[0].Kind != stage.UJTOscillator || len(b.Accounts) != 1 {
		t.Fatalf("%d stages, %d accounts", len(b.Stages), len(b.Accounts))
	}
	period := periodOf(t, b)
	if period < 5e-3 || period > 20e-3 {
		t.Errorf("the period is %g s", period)
	}
	slow := b.With(map[string]float64{"R1": 200e3})
	if got := periodOf(t, slow); got < 1.8*period || got > 2.2*period {
		t.Errorf("twice the resistance makes a period of %g s from %g s", got, period)
	}
	if again := periodOf(t, b); again != period {
		t.Error("the board itself has to stay as it was")
	}
}

func periodOf(t *testing.T, b *netlist.Board) float64 {
	t.Helper()
	f, ok := b.Accounts[0].Figure("period")
	if !ok {
		t.Fatal("no period was worked out")
	}
	return f.Nominal
}

func TestNothingRead(t *testing.T) {
	for text, want := range map[string]bool{
		"":                               true,
		"Dear Sir,\nthank you.\n":        true,
		"title\n* a comment\n":           true,
		"title\nR1 a\n":                  true,
		"title\n.end\n":                  true,
		"title\nR1 a 0 1k\n":             false,
		".model D d\n":                   false,
		".subckt s a\nR1 a 0 1\n.ends\n": false,
	} {
		if b := read(t, text, netlist.Options{}); b.NothingRead != want {
			t.Errorf("%q: nothing read is %v", text, b.NothingRead)
		}
	}
}

func TestWhatCannotBeText(t *testing.T) {
	if _, err := netlist.ReadText("t.cir", []byte("R1 a 0 \x00"), netlist.Options{}); err == nil {
		t.Error("binary data is no netlist")
	}
	for _, path := range []string{t.TempDir(), filepath.Join(t.TempDir(), "gone.cir")} {
		if _, err := netlist.Read(path, netlist.Options{}); err == nil {
			t.Errorf("%s cannot be read", path)
		}
	}
}

// write makes the files of a folder.
func write(t *testing.T, files map[string]string) string {
	t.Helper()
	dir := t.TempDir()
	for name, text := range files {
		path := filepath.Join(dir, filepath.FromSlash(name))
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return dir
}

func TestIncludesStayInTheFolder(t *testing.T) {
	dir := write(t, map[string]string{
		"board/top.cir":   "top\n.include sub/a.inc\n.include ../other/b.inc\nR1 a 0 1k\n",
		"board/sub/a.inc": "R2 a 0 2k\n.include c.inc\n",
		"board/sub/c.inc": "R3 a 0 3k\n",
		"other/b.inc":     "R4 a 0 4k\n",
	})
	top := filepath.Join(dir, "board", "top.cir")
	b, err := netlist.Read(top, netlist.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if got := names(b); got != "R2 R3 R1" || len(b.Problems) != 1 {
		t.Errorf("read %s, told %v", got, b.Problems)
	}
	b, err = netlist.Read(top, netlist.Options{IncludeDirs: []string{filepath.Join(dir, "other")}})
	if err != nil {
		t.Fatal(err)
	}
	if got := names(b); got != "R2 R3 R4 R1" || len(b.Problems) != 0 {
		t.Errorf("read %s, told %v", got, b.Problems)
	}
}

func names(b *netlist.Board) string {
	var list []string
	for _, e := range b.Circuit.Elements {
		list = append(list, e.Designator)
	}
	return strings.Join(list, " ")
}

func TestOptionsReachTheCircuit(t *testing.T) {
	ours := &part.Ratings{Name: "2N2646", Kind: part.UJT, Origin: "mine.cir"}
	b := read(t, oscillator, netlist.Options{Parts: []*part.Ratings{ours}})
	if got := b.Stages[0].Anchor.Ratings.Origin; got != "mine.cir" {
		t.Errorf("the ratings come from %s", got)
	}
	b = read(t, oscillator, netlist.Options{Limits: circuit.Limits{Elements: 3}})
	if len(b.Circuit.Elements) != 3 || len(b.Problems) != 1 {
		t.Errorf("%d elements, %v", len(b.Circuit.Elements), b.Problems)
	}
}
