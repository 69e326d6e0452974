package rules

import (
	"strings"
	"testing"

	"standoff/netlist"
	"standoff/rules/rule"
)

const slow = `Beacon
V1 vcc 0 20
R1 vcc e 2.2meg
C1 e 0 1u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
`

func beacon(t testing.TB) *netlist.Board {
	t.Helper()
	b, err := netlist.ReadText("t.cir", []byte(slow), netlist.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func TestTheHuntStopsWhereItsTrialsEndAndSaysSo(t *testing.T) {
	b := beacon(t)
	found := run(b, Options{})
	a := &adviser{board: b, now: judged(b, found), trials: 2}
	a.all(gather(found))
	if f := found[0]; len(f.Advice) > 0 || !strings.Contains(f.NoAdvice, "within 2 trials") {
		t.Errorf("%v %q", f.Advice, f.NoAdvice)
	}
}

// A value that makes a figure impossible to work out, so that its rule is silent,
// is no remedy.
func TestSilenceIsNoRemedy(t *testing.T) {
	finding := func(f rule.Finding) map[string]rule.Finding { return map[string]rule.Finding{key(f): f} }
	over := func(value float64) *rule.Figure { return &rule.Figure{Value: value, Limit: 1, Bound: "max"} }
	was := rule.Finding{Rule: "a", Stage: "XQ1", Grade: rule.Doubt, Figure: over(2)}
	with := func(change func(*rule.Finding)) verdict {
		f := was
		change(&f)
		return verdict{worst: finding(f)}
	}
	before := verdict{worst: finding(was), silent: map[string]bool{"|xq1": true}}
	for name, row := range map[string]struct {
		now  verdict
		want string
	}{
		"the same":       {before, ""},
		"better":         {with(func(f *rule.Finding) { f.Grade = rule.Remark }), ""},
		"about as bad":   {with(func(f *rule.Finding) { f.Figure = over(2.1) }), ""},
		"further over":   {with(func(f *rule.Finding) { f.Figure = over(3) }), "makes worse a at XQ1"},
		"of worse grade": {with(func(f *rule.Finding) { f.Grade = rule.Hold }), "makes worse a at XQ1"},
		"new":            {with(func(f *rule.Finding) { f.Rule, f.Grade = "b", rule.Remark }), "raises b at XQ1"},
		"new on a part": {with(func(f *rule.Finding) { f.Stage, f.Parts = "", []string{"R1"} }),
			"raises a at R1"},
		"a rule silenced": {verdict{silent: map[string]bool{"gate-pulse-weak|XS1": true}},
			"keeps gate-pulse-weak from being judged at XS1"},
	} {
		if got := row.now.worseThan(before); got != row.want {
			t.Errorf("%s: %q, want %q", name, got, row.want)
		}
	}
}

func BenchmarkCheckWithAdvice(b *testing.B) {
	board := beacon(b)
	for b.Loop() {
		Check(board, Options{})
	}
}

func BenchmarkCheck(b *testing.B) {
	board := beacon(b)
	for b.Loop() {
		Check(board, Options{NoAdvice: true})
	}
}
