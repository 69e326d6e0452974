package source_test

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf8"

	"standoff/netlist/source"
)

func TestDecode(t *testing.T) {
	for _, c := range []struct{ name, data, want string }{
		{"UTF-8", "R1 µ", "R1 µ"},
		{"UTF-8 with a mark", "\xef\xbb\xbfR1", "R1"},
		{"Latin-1 bytes", "4\xb5F", "4µF"},
		{"UTF-16 little end first", "\xff\xfeR\x001\x00\n\x00", "R1\n"},
		{"UTF-16 big end first", "\xfe\xff\x00R\x001", "R1"},
		{"empty", "", ""},
	} {
		if got, err := source.Decode([]byte(c.data)); err != nil || got != c.want {
			t.Errorf("%s: got %q, %v; want %q", c.name, got, err, c.want)
		}
	}
	if _, err := source.Decode([]byte("\x7fELF\x00\x01")); err == nil {
		t.Error("binary data is no text")
	}
}

func TestPositions(t *testing.T) {
	f := source.New("a.cir", "µµ x\r\nsecond\nlast")
	for offset, want := range map[int32][2]int{0: {1, 1}, 5: {1, 4}, 8: {2, 1}, 10: {2, 3}, 15: {3, 1}, 99: {3, 5}} {
		if p := f.Position(offset); p.Line != want[0] || p.Column != want[1] {
			t.Errorf("offset %d: got %d:%d, want %v", offset, p.Line, p.Column, want)
		}
	}
	if f.Line(1) != "µµ x" || f.Line(3) != "last" || f.Line(4) != "" {
		t.Errorf("lines %q %q %q", f.Line(1), f.Line(3), f.Line(4))
	}
}

func TestVisible(t *testing.T) {
	for text, want := range map[string]string{"plain": "plain", "a\x1b[31mb": `a\x1b[31mb`, "tab\there": "tab here", "\x9b": `\x9b`,
		"over\u202eride": `over\u{202e}ride`, "Ω µ é": "Ω µ é", "zero\u200bwidth": `zero\u{200b}width`, "bell\a": `bell\x07`} {
		if got := source.Visible(text); got != want {
			t.Errorf("%q: got %q, want %q", text, got, want)
		}
	}
}

// tree lays files out: a board with its parts beside it, and secrets outside.
func tree(t *testing.T) (board string) {
	t.Helper()
	dir := t.TempDir()
	for name, text := range map[string]string{"board/top.cir": "t", "board/lib/a.lib": "* a", "outside/secret.lib": "* s", "other/b.lib": "* b"} {
		path := filepath.Join(dir, name)
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	if err := os.Symlink(filepath.Join(dir, "outside/secret.lib"), filepath.Join(dir, "board/link.lib")); err != nil {
		t.Skip("no symlinks here")
	}
	return filepath.Join(dir, "board")
}

func TestIncludesStayInsideTheFolder(t *testing.T) {
	board := tree(t)
	top := filepath.Join(board, "top.cir")
	file, err := source.Read(top, source.Limits{})
	if err != nil {
		t.Fatal(err)
	}
	l := source.NewLoader(top, []string{filepath.Join(board, "../other")}, source.Limits{})
	for path, want := range map[string]string{
		"lib/a.lib": "", `lib\a.lib`: "", "b.lib": "", filepath.Join(board, "lib/a.lib"): "",
		"../outside/secret.lib": "outside", "link.lib": "outside", "/etc/passwd": "outside", "gone.lib": "is not there", "lib": "is a folder",
	} {
		_, err := l.Load(file, path)
		if want == "" && err != nil || want != "" && (err == nil || !strings.Contains(err.Error(), want)) {
			t.Errorf("%s: %v, want %q", path, err, want)
		}
	}
}

func TestReadRefusesWhatIsNoFile(t *testing.T) {
	dir := t.TempDir()
	big := filepath.Join(dir, "big.cir")
	if err := os.WriteFile(big, make([]byte, 100), 0o600); err != nil {
		t.Fatal(err)
	}
	for path, want := range map[string]string{dir: "is a folder", filepath.Join(dir, "x"): "does not exist", "/dev/zero": "no regular file", big: "at most 10"} {
		if _, err := source.Read(path, source.Limits{FileBytes: 10}); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", path, err, want)
		}
	}
}

func TestBrief(t *testing.T) {
	if got := source.Brief("R1: short"); got != "R1: short" {
		t.Error(got)
	}
	got := source.Brief("R1: " + strings.Repeat("\u03a9", 50_000) + " is out of range")
	if len(got) > 700 || !strings.HasPrefix(got, "R1: \u03a9") || !strings.HasSuffix(got, "out of range") || !utf8.ValidString(got) {
		t.Errorf("%d bytes: %s", len(got), got)
	}
}
