package part_test

import (
	"math"
	"testing"

	"standoff/netlist/part"
	"standoff/netlist/source"
)

func TestTheLibraryReadsWithoutAProblem(t *testing.T) {
	for _, p := range part.Problems() {
		t.Errorf("%s: %s", p.Span.Text(), p.Message)
	}
	seen := map[string]bool{}
	for _, r := range part.All() {
		if r.Source == "" || r.Kind == "" {
			t.Errorf("%s has no source or no kind", r.Name)
		}
		for _, n := range append([]string{r.Name}, r.Aliases...) {
			if seen[n] {
				t.Errorf("%s stands for two parts", n)
			}
			seen[n] = true
			if got, ok := part.Lookup(n); !ok || got != r {
				t.Errorf("Lookup(%q) does not give its own row", n)
			}
		}
		for symbol, f := range r.Figures {
			if f.Mark == part.Declared {
				t.Errorf("%s of %s has no mark of trust", symbol, r.Name)
			}
		}
	}
}

// Spot checks against the documents named in the rows.
func TestFiguresOfTheSheets(t *testing.T) {
	for _, c := range []struct {
		part, symbol string
		want         float64
		mark         part.Mark
	}{
		{"2N2646", "ip", 5e-6, part.Scan}, {"2N2646", "iv", 4e-3, part.Read}, {"2N2646", "vob1", 3, part.Memory},
		{"2N2647", "ip", 2e-6, part.Read}, {"2N2647", "iv", 8e-3, part.Read}, {"2N4870", "iv", 2e-3, part.Read},
		{"2N4871", "vob1", 5, part.Read}, {"2N5431", "vbb_min", 4, part.Read}, {"2N2646", "cap_direct", 10e-6, part.Scan},
		{"C106D", "vdrm", 400, part.Read}, {"C106", "igm", 0.2, part.Read}, {"c106b1", "igt", 200e-6, part.Read},
		{"2N5060", "vgd", 0.1, part.Read}, {"BT151-500R", "igt", 15e-3, part.Read}, {"BT151-500L", "igt", 5e-3, part.Read},
		{"2N6504", "igt_cold", 75e-3, part.Read}, {"C122B", "igt", 25e-3, part.Memory}, {"TIC126D", "vgt_cold", 2.5, part.Read},
		{"MCR100-6", "vdrm", 400, part.Read}, {"2N688", "igt", 60e-3, part.Read},
	} {
		r, ok := part.Lookup(c.part)
		if !ok {
			t.Errorf("%s is not in the library", c.part)
			continue
		}
		if got, mark, ok := r.Limit(c.symbol); !ok || math.Abs(got-c.want) > 1e-12 || mark != c.mark {
			t.Errorf("%s of %s = %g (mark %d), want %g (mark %d)", c.symbol, c.part, got, mark, c.want, c.mark)
		}
	}
}

// The makers' average and rms ratings of a half sine stand as 1 : 1.57.
func TestAverageAndRMSRatingsBelongTogether(t *testing.T) {
	for _, r := range part.All() {
		average, _, ok1 := r.Limit("it_av")
		rms, _, ok2 := r.Limit("it_rms")
		if ok1 && ok2 && (rms/average < 1.5 || rms/average > 1.65) {
			t.Errorf("%s: %g A average, %g A rms", r.Name, average, rms)
		}
	}
}

func TestDecoratedNames(t *testing.T) {
	for name, want := range map[string]string{"2n2646": "2N2646", "X2N2646": "2N2646", "Q2N2646": "2N2646", "C106D/NS": "C106D",
		"Q6.Q2N4871": "2N4871", "2N2646_k": "2N2646", "BT151-500": "BT151-500R", "NTE6401": "2N2646", "mcr100-8": "MCR100-8"} {
		if r, ok := part.Lookup(name); !ok || r.Name != want {
			t.Errorf("Lookup(%q) = %v, %v; want %s", name, r, ok, want)
		}
	}
	for _, name := range []string{"2N2648", "BC547", "2N264", "C10", "UJT", ""} {
		if r, ok := part.Lookup(name); ok {
			t.Errorf("Lookup(%q) = %s", name, r.Name)
		}
	}
}

func TestTypicalValuesAreNeverLimits(t *testing.T) {
	list, problems := part.ParseFile(source.New("p.cir", ".model A ujt(eta=0.6 ip_typ=1u iv=4m ip_vbb=25)\n"))
	if len(problems) > 0 {
		t.Fatal(problems[0].Message)
	}
	if _, _, ok := list[0].Limit("ip"); ok {
		t.Error("ip_typ became a limit")
	}
	if s, _, ok := list[0].Spread("eta"); !ok || s.Low != 0.6 || s.High != 0.6 {
		t.Error("eta=0.6 is exact")
	}
}

func TestBadCards(t *testing.T) {
	for text, want := range map[string]string{
		".model A ujt(etta=0.6)":                "etta is no rating of a ujt; did you mean eta?",
		".model A ujt(eta_min=0.8 eta_max=0.6)": "eta_min = 0.8 lies above eta_max = 0.6",
		".model A ujt(eta=1.2)":                 "eta: a stand-off ratio lies below 1",
		".model A ujt(eta=-0.6)":                "eta = -0.6 makes no sense for the intrinsic stand-off ratio",
		".model A scr(igt=0)":                   "igt = 0 A makes no sense for the gate trigger current, 25 deg C",
		".model A scr(igt=abc)":                 `igt: "abc" is not a number`,
		"R1 a b 1k":                             "a parts file holds .model cards only",
	} {
		_, problems := part.ParseFile(source.New("p.cir", text+"\n"))
		if len(problems) != 1 || problems[0].Message != want {
			t.Errorf("%s: got %v, want %q", text, problems, want)
		}
	}
	if _, problems := part.ParseFile(source.New("p.cir", ".model N npn(bf=50 tref=27)\n.model Z zener(v_breakdown=9)\n")); len(problems) > 0 {
		t.Error("models of other trades are no problem:", problems[0].Message)
	}
}

func BenchmarkLookup(b *testing.B) {
	for b.Loop() {
		part.Lookup("XC106D")
	}
}
