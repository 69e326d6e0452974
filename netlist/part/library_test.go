package part_test

import (
	"math"
	"slices"
	"strings"
	"testing"

	"standoff/netlist/part"
)

func TestTheLibraryReadsWithoutAProblem(t *testing.T) {
	for _, p := range part.Problems() {
		t.Errorf("%s: %s", p.Span.Text(), p.Message)
	}
	seen := map[string]bool{}
	for _, r := range part.All() {
		if r.Source == "" || r.Kind == "" || r.Origin != "library" {
			t.Errorf("%s has no source, no kind or no origin", r.Name)
		}
		for _, n := range append([]string{r.Name}, r.Aliases...) {
			if seen[n] {
				t.Errorf("%s stands for two parts", n)
			}
			seen[n] = true
			if n != strings.ToUpper(n) {
				t.Errorf("%s is not in upper case", n)
			}
			if got, ok := part.Lookup(strings.ToLower(n)); !ok || got != r {
				t.Errorf("Lookup(%q) does not give its own row", n)
			}
		}
	}
}

func TestEveryFigureIsKnownAndMarked(t *testing.T) {
	for _, r := range part.All() {
		for symbol, f := range r.Figures {
			s, known := part.SymbolOf(r.Kind, symbol)
			if !known || s.Meaning == "" {
				t.Errorf("%s of %s is no known symbol", symbol, r.Name)
			}
			for _, v := range []struct {
				has  bool
				mark part.Mark
			}{{f.HasMin, f.MinMark}, {f.HasTyp, f.TypMark}, {f.HasMax, f.MaxMark}, {true, f.Mark}} {
				if v.has && (v.mark < part.Read || v.mark > part.Memory) {
					t.Errorf("%s of %s has no mark of trust", symbol, r.Name)
				}
			}
			memory := strings.Contains(f.Source, "memory")
			if f.Mark != part.Memory {
				memory = !strings.HasPrefix(f.Source, "memory")
			}
			if f.Source == "" || !memory {
				t.Errorf("%s of %s: mark %d does not go with the source %q", symbol, r.Name, f.Mark, f.Source)
			}
			if _, _, ok := r.Limit(symbol); ok && !f.HasMin && !f.HasMax {
				t.Errorf("%s of %s: a typical value became a limit", symbol, r.Name)
			}
		}
	}
}

func TestAllIsSortedAndHoldsEveryFamily(t *testing.T) {
	all := part.All()
	if !slices.IsSortedFunc(all, func(a, b *part.Ratings) int { return strings.Compare(a.Name, b.Name) }) {
		t.Error("All is not in order")
	}
	count := map[part.Kind]int{}
	for _, r := range all {
		count[r.Kind]++
	}
	for kind, least := range map[part.Kind]int{
		part.UJT: 50, part.PUT: 11, part.SCR: 200, part.Triac: 150, part.Diac: 30, part.CurrentSource: 34,
		part.Optotriac: 20,
	} {
		if count[kind] < least {
			t.Errorf("%d parts are a %s, want %d", count[kind], kind, least)
		}
	}
}

// A family name stands for its voltage classes and has no blocking voltage.
func TestFamilies(t *testing.T) {
	for family, classes := range map[string]map[string]float64{
		"C106": {"C106Q": 15, "C106Y": 30, "C106F": 50, "C106A": 100, "C106B": 200, "C106C": 300, "C106D": 400,
			"C106E": 500, "C106M": 600},
		"TIC106": {"TIC106F": 50, "TIC106A": 100, "TIC106D": 400, "TIC106M": 600, "TIC106S": 700, "TIC106N": 800},
		"MCR100": {"MCR100-3": 100, "MCR100-4": 200, "MCR100-5": 300, "MCR100-6": 400, "MCR100-7": 500,
			"MCR100-8": 600},
		"BT149":  {"BT149B": 200, "BT149D": 400, "BT149E": 500, "BT149G": 600},
		"BT136":  {"BT136-500": 500, "BT136-600": 600, "BT136-800": 800},
		"MAC97A": {"MAC97A4": 200, "MAC97A6": 400, "MAC97A8": 600},
		"TIC226": {"TIC226D": 400, "TIC226M": 600, "TIC226S": 700, "TIC226N": 800},
	} {
		base, ok := part.Lookup(family)
		if !ok {
			t.Errorf("%s is not in the library", family)
			continue
		}
		if _, _, has := base.Limit("vdrm"); has {
			t.Errorf("%s is a family and blocks no certain voltage", family)
		}
		for name, volts := range classes {
			r, _ := part.Lookup(name)
			if r == nil || r.Name != name || r.Figures["igt"] != base.Figures["igt"] {
				t.Errorf("%s is no class of %s", name, family)
				continue
			}
			if v, _, _ := r.Limit("vdrm"); v != volts {
				t.Errorf("%s blocks %g V, want %g", name, v, volts)
			}
			if v, _, ok := r.Limit("vrrm"); ok != (r.Kind == part.SCR) || ok && v != volts {
				t.Errorf("%s blocks %g V backwards (%v)", name, v, ok)
			}
		}
	}
}

// A card whose own name is a class makes no family.
func TestNumberedFamilies(t *testing.T) {
	for name, volts := range map[string]float64{
		"2N5060": 30, "2N5061": 60, "2N5062": 100, "2N5064": 200, "2N6394": 50, "2N6395": 100,
		"2N6397": 400, "2N6399": 800, "2N1842": 25, "2N1850": 500, "2N681": 25, "2N692": 800,
		"BT151-500R": 500, "BT151-500L": 500, "BT151-650L": 650, "2N6073A": 400, "2N6344": 600,
		"2N6349A": 800, "TN1215-600": 600, "BTA12-700CW": 700, "T1235-600": 600,
	} {
		r, ok := part.Lookup(name)
		if !ok || r.Name != name && !slices.Contains(r.Aliases, name) {
			t.Errorf("Lookup(%q) = %v", name, r)
			continue
		}
		if v, _, _ := r.Limit("vdrm"); v != volts {
			t.Errorf("%s blocks %g V, want %g", name, v, volts)
		}
	}
}

func near(a, b float64) bool { return math.Abs(a-b) <= 1e-9*math.Abs(b) }

func lookup(t *testing.T, name string) *part.Ratings {
	t.Helper()
	r, ok := part.Lookup(name)
	if !ok {
		t.Fatalf("%s is not in the library", name)
	}
	return r
}
