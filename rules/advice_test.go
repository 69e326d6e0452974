package rules_test

import (
	"io/fs"
	"math"
	"strings"
	"testing"

	"standoff/fixtures"
	"standoff/netlist"
	"standoff/netlist/quantity"
	"standoff/rules"
	"standoff/rules/rule"
)

// full reads and judges a board, advice and all.
func full(t *testing.T, text string) *rules.Result {
	t.Helper()
	b, err := netlist.ReadText("t.cir", []byte(text), netlist.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return rules.Check(b, rules.Options{})
}

// rewrite puts advised values into the text itself, as whoever follows the advice
// does.
func rewrite(t *testing.T, r *rules.Result, text string, advice []rule.Advice) string {
	t.Helper()
	for _, a := range advice {
		for _, e := range r.Board.Circuit.Elements {
			if e.Designator == a.Part {
				line := e.At.Text()
				value := e.ValueAt.Text()
				at := strings.LastIndex(line, value)
				text = strings.Replace(text, line, line[:at]+a.Text+line[at+len(value):], 1)
			}
		}
	}
	return text
}

// standing lists rule and stage or part of all holds and doubts.
func standing(r *rules.Result) map[string]rule.Grade {
	m := map[string]rule.Grade{}
	for _, f := range r.Findings {
		k := f.Rule + " " + f.Stage
		if f.Stage == "" {
			k += strings.Join(f.Parts, " ")
		}
		m[k] = max(m[k], f.Grade)
	}
	return m
}

// Every advice of every broken board that is kept here, followed in the text,
// clears its finding and raises nothing.
func TestAdviceThatIsFollowedClearsTheFindingAndRaisesNothing(t *testing.T) {
	var decks []string
	for _, pattern := range []string{"boards/broken_*.cir", "rules/*/fires*.cir"} {
		files, err := fs.Glob(fixtures.Files, pattern)
		if err != nil {
			t.Fatal(err)
		}
		for _, file := range files {
			data, err := fixtures.Files.ReadFile(file)
			if err != nil {
				t.Fatal(err)
			}
			decks = append(decks, string(data))
		}
	}
	count := 0
	for i, text := range decks {
		if testing.Short() && i%4 > 0 {
			count++ // not looked at
			continue
		}
		before := full(t, text)
		had := standing(before)
		for _, f := range before.Findings {
			if len(f.Advice) == 0 || strings.Contains(f.Advice[0].Part, ".") {
				continue
			}
			count++
			other := rewrite(t, before, text, f.Advice)
			if other == text {
				t.Errorf("%s was not found in the text", rules.Words(f.Advice))
			}
			has := standing(full(t, other))
			if g := has[f.Rule+" "+f.Stage]; g >= rule.Doubt {
				t.Errorf("%s: %s does not clear %s\n%s", f.Stage, rules.Words(f.Advice), f.Rule, other)
			}
			for k, g := range has {
				if g > had[k] {
					t.Errorf("%s raises %s\n%s", rules.Words(f.Advice), k, other)
				}
			}
		}
	}
	if count < 20 {
		t.Errorf("only %d findings had advice", count)
	}
}

const dusk = `Dusk lamp flasher
V1 vcc 0 20
R1 vcc e RVALUE
C1 e 0 CVALUE
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
`

func duskWith(r, c, more string) string {
	return strings.NewReplacer("RVALUE", r, "CVALUE", c).Replace(dusk) + more
}

func findingOf(r *rules.Result, id string) *rule.Finding {
	for i := range r.Findings {
		if r.Findings[i].Rule == id {
			return &r.Findings[i]
		}
	}
	return nil
}

// Among the values that clear a finding the nearest of E12 is advised: every
// nearer one was tried here one by one, in the text, and leaves or raises something.
func TestTheNearestValueIsAdvised(t *testing.T) {
	f := findingOf(full(t, duskWith("2.2meg", "1u", "")), "timing-current-below-peak")
	if f == nil || len(f.Advice) != 1 || f.Advice[0].Part != "R1" {
		t.Fatalf("%+v", f)
	}
	away := math.Abs(math.Log(f.Advice[0].Value / 2.2e6))
	for _, v := range quantity.Candidates(2.2e6, 12, 3) {
		if math.Abs(math.Log(v/2.2e6)) > away-1e-9 {
			break
		}
		if clears := len(full(t, duskWith(quantity.Short(v), "1u", "")).Findings) == 0; clears {
			t.Errorf("%s is nearer than %s and clears it too", quantity.Short(v), f.Advice[0].Text)
		}
	}
}

// Where the period is declared, resistor and capacitor have to change together.
func TestResistorAndCapacitorChangeTogetherWhereOneAloneWillNotDo(t *testing.T) {
	text := duskWith("2.2meg", "1u", "*> XQ1 period=1.2..4.4\n*> all R tol=1%\n*> C1 tol=5% kind=film\n*> "+
		"V1 tol=1%\n")
	before := full(t, text)
	f := findingOf(before, "timing-current-below-peak")
	if f == nil || len(f.Advice) != 2 {
		t.Fatalf("%+v", f)
	}
	after := full(t, rewrite(t, before, text, f.Advice))
	if findingOf(after, "timing-current-below-peak") != nil || findingOf(after, "frequency-off-target") != nil {
		t.Errorf("%s: %v", rules.Words(f.Advice), texts(after))
	}
}

func TestNoAdviceSaysWhy(t *testing.T) {
	narrow := ".model NARROW ujt(eta=0.65 rbb=7k rbb_tc=0.005 ip_max=100u iv_min=150u vob1_min=3)\n"
	for name, row := range map[string]struct{ text, id, want string }{
		"the window is empty": {strings.Replace(duskWith("100k", "1u", narrow), "2N2646", "NARROW", 1),
			"timing-current-below-peak", "the window of timing resistance is empty"},
		"the spreads are too wide": {duskWith("100k", "1u", "*> XQ1 period=90m..100m\n"),
			"frequency-off-target", "the spreads alone make the period vary"},
		"nothing has a value": {duskWith("100k", "1u", "*> R1 travel=100k..3meg\n"),
			"timing-current-below-peak", "no single resistor or capacitor value decides this"},
	} {
		f := findingOf(full(t, row.text), row.id)
		if f == nil || len(f.Advice) > 0 || !strings.Contains(f.NoAdvice, row.want) {
			t.Errorf("%s: %+v", name, f)
		}
	}
}
