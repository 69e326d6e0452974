package rules_test

import (
	"bytes"
	"slices"
	"strings"
	"testing"

	"standoff/netlist"
	"standoff/rules"
	"standoff/rules/report"
)

const bell = `Pump house bell
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 0.22u
XQ1 e b1 vcc 2N2646
R3 b1 0 22
`

func ids(r *rules.Result) string {
	var list []string
	for _, f := range r.Findings {
		list = append(list, f.Rule)
	}
	slices.Sort(list)
	return strings.Join(list, " ")
}

func checkWith(t *testing.T, text string, opts rules.Options) *rules.Result {
	t.Helper()
	b, err := netlist.ReadText("t.cir", []byte(text), netlist.Options{})
	if err != nil {
		t.Fatal(err)
	}
	opts.NoAdvice = true
	return rules.Check(b, opts)
}

func TestWaivers(t *testing.T) {
	const waiver = "*> waive base-two-resistor-missing XQ1 : one temperature\n"
	for name, row := range map[string]struct {
		text   string
		opts   rules.Options
		stand  string
		waived int
	}{
		"none":             {bell, rules.Options{}, "base-two-resistor-missing", 0},
		"one":              {bell + waiver, rules.Options{}, "", 1},
		"other case":       {bell + strings.Replace(waiver, "XQ1", "xq1", 1), rules.Options{}, "", 1},
		"its rule skipped": {bell + waiver, rules.Options{Skip: []string{"base-two-resistor-missing"}}, "", 0},
		"another rule only": {bell + waiver,
			rules.Options{Only: []string{"frequency-drift", "waiver-unused"}}, "", 0},
		"unused": {bell + waiver + "*> waive gate-overdrive XQ1 : old\n", rules.Options{},
			"waiver-unused", 1},
		"unused, not asked for": {bell + waiver + "*> waive gate-overdrive XQ1 : old\n",
			rules.Options{Skip: []string{"waiver-unused"}}, "", 1},
		"of no part": {bell + waiver + "*> waive gate-overdrive XQ7 : " +
			"old\n", rules.Options{}, "waiver-unused", 1},
		"without reason": {bell + "*> waive base-two-resistor-missing " +
			"XQ1\n", rules.Options{}, "waiver-unexplained", 1},
		"by a part of a netlist rule": {bell + waiver + "R9 b1 spare 1k\n*> waive node-dangling R9 : a test " +
			"point\n",
			rules.Options{}, "", 2},
	} {
		r := checkWith(t, row.text, row.opts)
		if ids(r) != row.stand || len(r.Waived) != row.waived {
			t.Errorf("%s: findings %q, %d waived", name, ids(r), len(r.Waived))
		}
	}
}

func TestAnUnusedWaiverSaysWhatIsWrongWithIt(t *testing.T) {
	for waiver, want := range map[string]string{
		"gate-overdriven XQ1 : x":     "there is no such rule",
		"gate-overdrive XQ7 : x":      "there is no such part",
		"gate-overdrive XQ1 : x":      "the rule finds nothing there",
		"timing-capacitor-leak r1 :x": "the rule finds nothing there",
	} {
		f := findingOf(checkWith(t, bell+"*> waive "+waiver+"\n", rules.Options{}), "waiver-unused")
		if f == nil || !strings.Contains(f.Message, want) {
			t.Errorf("%s: %+v", waiver, f)
		}
	}
}

// A waiver inside a subcircuit stands for every instance and is told of once.
func TestAWaiverInASubcircuit(t *testing.T) {
	inner := strings.ReplaceAll(strings.TrimPrefix(bell, "Pump house bell\nV1 vcc 0 20\n"), "vcc", "v")
	text := "t\nV1 vcc 0 20\n.subckt stage v\n" + inner + "*> waive base-two-resistor-missing XQ1 : one " +
		"temperature\n" +
		"*> waive gate-overdrive XQ1 : old\n.ends\nXa vcc stage\nXb vcc stage\n"
	r := checkWith(t, text, rules.Options{})
	if ids(r) != "waiver-unused" || len(r.Waived) != 2 {
		t.Errorf("findings %q, %d waived", ids(r), len(r.Waived))
	}
}

func TestCautions(t *testing.T) {
	for source, want := range map[string]string{
		"V1 a 0 20":                      "",
		"V1 a 0 48":                      "voltage",
		"V1 a 0 -325":                    "voltage stored-charge",
		"V1 a 0 SIN(0 325 50)":           "mains stored-charge",
		"V1 a 0 SIN(0 17 50)":            "",
		"V1 a 0 SIN(0 40.4 50)":          "mains stored-charge", // 5 % up it is above 42.4 V
		"V1 a 0 AC 230":                  "mains stored-charge",
		"V1 a 0 AC 1":                    "",
		"V1 a 0 PULSE(0 100 0 1u 1u 1m)": "mains stored-charge",
		"V1 a 0 PWL(0 0 1 5 2 -90)":      "mains stored-charge",
		"V1 a 0 5\n*> board mains=230":   "mains stored-charge",
		"V1 a 0 SIN(0 12 400)":           "",
	} {
		var kinds []string
		for _, c := range checkWith(t, "t\n"+source+"\nR1 a 0 1k\nC1 a 0 1u\n", rules.Options{}).Cautions {
			kinds = append(kinds, c.Kind)
		}
		if got := strings.Join(kinds, " "); got != want {
			t.Errorf("%s: %q, want %q", source, got, want)
		}
	}
}

func TestWhatIsNotCheckedIsTold(t *testing.T) {
	for card, want := range map[string]string{
		"XQ9 b1 vcc 0 2N6027": "no capacitor stands at the anode",
		"XT1 vcc b1 0 BTA16":  "",
		"X9 vcc b1 0 ZZ99":    "nothing is known of the part ZZ99",
	} {
		r := checkWith(t, bell+card+"\n", rules.Options{})
		found := slices.ContainsFunc(r.Unchecked, func(u rules.Unchecked) bool {
			return strings.HasPrefix(card, u.Stage+" ") && strings.Contains(u.Because, want)
		})
		if !found {
			t.Errorf("%s: %v", card, r.Unchecked)
		}
	}
	only := checkWith(t, bell, rules.Options{Only: []string{"node-dangling"}})
	for _, u := range only.Unchecked {
		if u.Rule != "" && u.Rule != "node-dangling" {
			t.Errorf("only node-dangling was asked for, and %s is told as unchecked", u.Rule)
		}
	}
}

// The same board gives the same bytes, in whatever order things were found.
func TestTheSameInputGivesTheSameBytes(t *testing.T) {
	text := bell + "R1 vcc e 2.2meg\nR9 b1 spare 98k\nX9 vcc b1 0 ZZ99\n*> waive gate-overdrive XQ1 : old\n"
	var first bytes.Buffer
	for i := range 5 {
		var out bytes.Buffer
		results := []*rules.Result{full(t, text)}
		if err := report.JSON(&out, results); err != nil {
			t.Fatal(err)
		}
		if err := report.SARIF(&out, results); err != nil {
			t.Fatal(err)
		}
		report.Terminal{Width: 100}.Lint(&out, results)
		if i == 0 {
			first = out
		} else if !bytes.Equal(first.Bytes(), out.Bytes()) {
			t.Fatal("two runs differ")
		}
	}
}
