package operating

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/netlist/stage"
	"standoff/netlist/syntax"
)

func accountOf(t *testing.T, text string) *Account {
	t.Helper()
	c, problems := circuit.Build(syntax.Parse(source.New("t.cir", text), true), circuit.Options{})
	if len(problems) > 0 {
		t.Fatalf("%s\n%v", text, problems[0].Message)
	}
	return Compute(c, stage.Recognise(c))[0]
}

// delay is a board on which only what is named varies.
const delay = `One-shot vent delay
V1 vcc 0 20
R1 vcc e %s
C1 e 0 10u
XQ1 e 0 vcc UX
.model UX ujt(eta_min=%g eta_max=%g rbb=6k vd=0.5 vv=2 ip=5u iv=4m vob1_min=5 vob1_max=5 vob1_c=10n)
*> XQ1 period=%g..%g
*> board ambient=25..25
*> all V tol=%s
*> R1 tol=%s
*> C1 tol=%s
`

// Of a period R C ln(...) the parts of R and C are those of their own ratios.
func TestSharesOfResistorAndCapacitor(t *testing.T) {
	a := accountOf(t, fmt.Sprintf(delay, "100k", 0.6, 0.6, 0.9, 1.0, "0", "5%", "20%"))
	b, ok := a.Budget()
	if !ok || len(b.Shares) != 2 {
		t.Fatalf("%+v", b)
	}
	r, c := math.Log(1.05/0.95), math.Log(1.2/0.8)
	if s := b.Shares[0]; s.Name != "C1" || math.Abs(s.Part-c/(r+c)) > 1e-3 {
		t.Errorf("%+v, want %g", s, c/(r+c))
	}
	if s := b.Shares[1]; s.Name != "R1" || math.Abs(s.Part-r/(r+c)) > 1e-3 {
		t.Errorf("%+v, want %g", s, r/(r+c))
	}
}

// Shares add to the whole on every random board that runs.
func TestSharesAddToTheWhole(t *testing.T) {
	tried := 0
	for seed := uint64(0); seed < 120; seed++ {
		a := accountOf(t, randomDeck(seed)+"*> X1 period=1..2\n")
		b, ok := a.Budget()
		if !ok {
			continue
		}
		tried++
		sum := 0.0
		for _, s := range b.Shares {
			sum += s.Part
		}
		if math.Abs(sum-1) > 1e-9 {
			t.Errorf("seed %d: %g", seed, sum)
		}
	}
	if tried < 20 {
		t.Errorf("only %d boards run", tried)
	}
}

// The trimmer's ends bring the extreme boards into the target, and its range is
// no wider than they need.
func TestTrimmerMeetsTheTarget(t *testing.T) {
	a := accountOf(t, fmt.Sprintf(delay, "100k", 0.5, 0.7, 0.9, 1.0, "2%", "5%", "20%"))
	b, ok := a.Budget()
	if !ok || b.Trimmer == nil || b.TrimmedPart != "R1" {
		t.Fatalf("%+v", b)
	}
	if b.Service < 1 || b.Service > 1.05 {
		t.Errorf("service %g", b.Service)
	}
	for _, end := range []struct{ eta, c, r float64 }{{0.5, 8, b.Trimmer.High}, {0.7, 12, b.Trimmer.Low}} {
		text := fmt.Sprintf(delay, fmt.Sprint(end.r), end.eta, end.eta, 0.9, 1.0, "2%", "0", "0")
		text = strings.Replace(text, "C1 e 0 10u", fmt.Sprintf("C1 e 0 %gu", end.c), 1)
		if now, ok := accountOf(t, text).Budget(); !ok || !now.Met {
			t.Errorf("%g ohm: %+v", end.r, now)
		}
	}
}

// The tolerance named meets the target when the board is built with it, and the
// next coarser one does not.
func TestToleranceMeetsTheTarget(t *testing.T) {
	deck := func(r, tol string) string {
		return fmt.Sprintf(delay, r, 0.58, 0.6, 0.84, 0.96, "1%", tol, tol)
	}
	b, ok := accountOf(t, deck("100k", "20%")).Budget()
	if !ok || b.Tolerance == 0 {
		t.Fatalf("%+v", b)
	}
	r := fmt.Sprint(100e3 * b.Scale)
	if now, ok := accountOf(t, deck(r, fmt.Sprint(b.Tolerance))).Budget(); !ok || !now.Met {
		t.Errorf("%g: %+v", b.Tolerance, now)
	}
	for i, tol := range usualTolerances {
		if i+1 < len(usualTolerances) && usualTolerances[i+1] == b.Tolerance {
			if now, _ := accountOf(t, deck(r, fmt.Sprint(tol))).Budget(); now == nil || now.High/now.Low <= now.Target.High/now.Target.Low {
				t.Errorf("%g would do too", tol)
			}
		}
	}
}
