package part

import (
	"testing"

	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// The cards of the library are split without the grammar; both must see the same.
func TestPlainCardsReadAsTheGrammarReadsThem(t *testing.T) {
	l := library()
	count := 0
	for _, text := range l.texts {
		deck := syntax.Parse(source.New("library", text), false)
		for _, p := range deck.Problems {
			t.Errorf("%v: %s", p.Span.Position(), p.Message)
		}
		for _, s := range deck.Statements {
			if s.Model == nil {
				t.Fatalf("%q is no card", text[s.Start:s.End])
			}
			count++
			samePairs(t, s.Model, text[s.Start:])
		}
	}
	if count < 250 {
		t.Errorf("only %d cards", count)
	}
}

func samePairs(t *testing.T, want *syntax.Model, text string) {
	t.Helper()
	got, _ := plainModel(text)
	name := want.Name.Text
	if got.Name.Text != name || got.Type.Text != want.Type.Text || len(want.Flags) > 0 {
		t.Fatalf("%s %s: read as %s %s", name, want.Type.Text, got.Name.Text, got.Type.Text)
	}
	if len(got.Pairs) != len(want.Pairs) {
		t.Fatalf("%s: %d settings, by the grammar %d", name, len(got.Pairs), len(want.Pairs))
	}
	for i, p := range got.Pairs {
		w := want.Pairs[i]
		same := p.Key.Text == w.Key.Text && p.Value.Text == w.Value.Text && p.Value.Quoted == w.Value.Quoted
		if !same || w.Value.Expr != nil {
			t.Errorf("%s: %s=%s, by the grammar %s=%s", name, p.Key.Text, p.Value.Text, w.Key.Text, w.Value.Text)
		}
		if start := int(p.Value.Start); text[start:start+len(p.Value.Text)] != p.Value.Text {
			t.Errorf("%s: setting %d does not stand at its place", name, i)
		}
	}
}

// Every name is found at its own card, in the table of places as well.
func TestTheTableHasRoom(t *testing.T) {
	used := 0
	for _, p := range library().slots {
		if p != 0 {
			used++
		}
	}
	if used < 700 || used > len(library().slots)*2/3 {
		t.Errorf("%d of %d slots are used", used, len(library().slots))
	}
}

// What the first look-up of a process costs: the scan for names, and one card.
func BenchmarkFirstLookup(b *testing.B) {
	for b.Loop() {
		l := newCatalogue()
		if l.find("2N2646") == nil {
			b.Fatal("not found")
		}
	}
}

func BenchmarkLaterLookup(b *testing.B) {
	for b.Loop() {
		Lookup("XC106D/NS")
	}
}

func BenchmarkUnknownLookup(b *testing.B) {
	for b.Loop() {
		Lookup("Q2N3904")
	}
}
