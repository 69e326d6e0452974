// Package source holds texts as they were read and the places inside them.
//
// A place is a byte offset into the decoded text; lines and columns are worked
// out only when something is shown. The package knows no netlist syntax.
package source

import (
	"cmp"
	"slices"
	"sort"
	"sync"
	"unicode/utf8"
)

// File is one text as it was read.
type File struct {
	// Path is the name under which messages mention the file.
	Path string
	// Text is the whole content, decoded to UTF-8.
	Text string

	once  sync.Once
	lines []int32
}

// New returns a file that holds text under path.
func New(path, text string) *File { return &File{Path: path, Text: text} }

// Span is a stretch of bytes, Start <= offset < End, in a file.
// The zero Span means "no place".
type Span struct {
	File       *File
	Start, End int32
}

// IsZero reports whether the span names no place.
func (s Span) IsZero() bool { return s.File == nil }

// Text returns the bytes that the span covers.
func (s Span) Text() string {
	if s.File == nil {
		return ""
	}
	return s.File.Text[s.Start:s.End]
}

// Position is a place for people: line and column count from 1, the column in
// Unicode code points.
type Position struct {
	Path         string
	Line, Column int
}

// Position returns where the span starts.
func (s Span) Position() Position {
	if s.File == nil {
		return Position{}
	}
	return s.File.Position(s.Start)
}

// lineStarts returns the offset of every line's first byte.
func (f *File) lineStarts() []int32 {
	f.once.Do(func() {
		f.lines = append(f.lines, 0)
		for i := 0; i < len(f.Text); i++ {
			if f.Text[i] == '\n' {
				f.lines = append(f.lines, int32(i+1))
			}
		}
	})
	return f.lines
}

// Position returns the line and column of a byte offset.
func (f *File) Position(offset int32) Position {
	starts := f.lineStarts()
	offset = max(0, min(offset, int32(len(f.Text))))
	line := sort.Search(len(starts), func(i int) bool { return starts[i] > offset }) - 1
	column := utf8.RuneCountInString(f.Text[starts[line]:offset]) + 1
	return Position{Path: f.Path, Line: line + 1, Column: column}
}

// Line returns the text of a line counted from 1, without its end-of-line bytes.
func (f *File) Line(number int) string {
	starts := f.lineStarts()
	if number < 1 || number > len(starts) {
		return ""
	}
	end := int32(len(f.Text))
	if number < len(starts) {
		end = starts[number] - 1
	}
	text := f.Text[starts[number-1]:end]
	for len(text) > 0 && text[len(text)-1] == '\r' {
		text = text[:len(text)-1]
	}
	return text
}

// Problem is something that could not be read as it stands.
type Problem struct {
	Span    Span
	Message string
}

// SortProblems orders problems by path, place and message and drops repeats.
func SortProblems(problems []Problem) []Problem {
	slices.SortStableFunc(problems, func(a, b Problem) int {
		return cmp.Or(cmp.Compare(a.path(), b.path()), cmp.Compare(a.Span.Start, b.Span.Start),
			cmp.Compare(a.Message, b.Message))
	})
	return slices.Compact(problems)
}

func (p Problem) path() string {
	if p.Span.File == nil {
		return ""
	}
	return p.Span.File.Path
}
