package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

const small = `Corridor lamp
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 %gu
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
`

// folder writes so many boards, in an order that is not that of their names.
func folder(t testing.TB, count int) string {
	t.Helper()
	dir := t.TempDir()
	for i := range count {
		name := filepath.Join(dir, fmt.Sprintf("board%04d.cir", (i*7919)%count))
		if err := os.WriteFile(name, fmt.Appendf(nil, small, 1+float64(i%7)), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return dir
}

// Files are checked on all cores and told in the order of their names.
func TestFilesAreToldInTheOrderOfNames(t *testing.T) {
	dir := folder(t, 101)
	var out, trouble bytes.Buffer
	if status := run([]string{"lint", "--format", "json", dir}, strings.NewReader(""), &out, &trouble); status != 0 {
		t.Fatalf("status %d: %s", status, trouble.String())
	}
	var doc struct{ Files []struct{ Path string } }
	if err := json.Unmarshal(out.Bytes(), &doc); err != nil {
		t.Fatal(err)
	}
	var paths []string
	for _, f := range doc.Files {
		paths = append(paths, f.Path)
	}
	if len(paths) != 101 || !slices.IsSorted(paths) {
		t.Errorf("%d files: %v", len(paths), paths)
	}
}

// full is a writer on a full disk.
type full struct{}

func (full) Write([]byte) (int, error) { return 0, io.ErrShortWrite }

func TestAReportThatCannotBeWrittenIsAFailure(t *testing.T) {
	var trouble bytes.Buffer
	status := run([]string{"rules"}, strings.NewReader(""), full{}, &trouble)
	if status != exitFailed || !strings.Contains(trouble.String(), "could not be written") {
		t.Errorf("status %d: %s", status, trouble.String())
	}
}

func BenchmarkFolderOf1000Boards(b *testing.B) {
	dir := folder(b, 1000)
	for b.Loop() {
		if status := run([]string{"lint", dir}, strings.NewReader(""), io.Discard, io.Discard); status != 0 {
			b.Fatal(status)
		}
	}
}

func BenchmarkOneBoard(b *testing.B) {
	path := filepath.Join(folder(b, 1), "board0000.cir")
	for b.Loop() {
		if status := run([]string{"lint", path}, strings.NewReader(""), io.Discard, io.Discard); status != 0 {
			b.Fatal(status)
		}
	}
}
