package rule_test

import (
	"strings"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/operating"
	"standoff/netlist/source"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

// element returns a part with a place of its own.
func element(name string, line int) *circuit.Element {
	file := source.New("t.cir", strings.Repeat("\n", line-1)+name+" a b 1k\n")
	start := int32(line - 1)
	return &circuit.Element{Designator: name,
		NameAt: source.Span{File: file, Start: start, End: start + int32(len(name))}}
}

// account is a timing stage with one comparison.
func account(k operating.Comparison) *operating.Account {
	s := &stage.Stage{Kind: stage.UJTOscillator, Anchor: element("XQ1", 5),
		Parts: map[stage.Role][]*circuit.Element{stage.TimingResistor: {element("R1", 2), element("R7", 8)}}}
	k.Name, k.Unit = "charging_current_at_peak", "A"
	return &operating.Account{Stage: s, Comparisons: []operating.Comparison{k}}
}

func judge(a *operating.Account, c rule.Case) []rule.Finding {
	var list []rule.Finding
	p := rule.NewPass(&circuit.Circuit{}, []*operating.Account{a}, func(f rule.Finding) {
		list = append(list, f)
	})
	c.Comparison, c.Fails = "charging_current_at_peak", "it never fires"
	c.Value, c.Limit = "the charging current", "the transistor needs"
	p.Each(stage.UJTOscillator, func(a *operating.Account) { p.Judge(a, c) })
	return list
}

func TestGradeFollowsMarginAndCertainty(t *testing.T) {
	at := func(value float64, bound operating.Bound, certain bool) operating.Comparison {
		return operating.Comparison{Value: value, Limit: 8e-6, Bound: bound, Certain: certain,
			Because: "I_P is from memory"}
	}
	for name, row := range map[string]struct {
		k    operating.Comparison
		c    rule.Case
		want rule.Grade // 0 means silence
	}{
		"broken":                        {at(7.9e-6, operating.Min, true), rule.Case{}, rule.Hold},
		"broken, not certain":           {at(7.9e-6, operating.Min, false), rule.Case{}, rule.Doubt},
		"broken, rule is a doubt":       {at(7.9e-6, operating.Min, true), rule.Case{Most: rule.Doubt}, rule.Doubt},
		"kept by less than a quarter":   {at(9.9e-6, operating.Min, true), rule.Case{}, rule.Doubt},
		"kept, margin does not matter":  {at(9.9e-6, operating.Min, true), rule.Case{FailsOnly: true}, 0},
		"kept by a quarter":             {at(10.1e-6, operating.Min, true), rule.Case{}, 0},
		"above the greatest":            {at(8.1e-6, operating.Max, true), rule.Case{}, rule.Hold},
		"below it by less than quarter": {at(6.1e-6, operating.Max, true), rule.Case{}, rule.Doubt},
		"well below the greatest":       {at(5.9e-6, operating.Max, true), rule.Case{}, 0},
	} {
		var got rule.Grade
		for _, f := range judge(account(row.k), row.c) {
			got = f.Grade
		}
		if got != row.want {
			t.Errorf("%s: grade %v, want %v", name, got, row.want)
		}
	}
}

func TestAFindingTellsFigureLimitAndWhyItIsNoHold(t *testing.T) {
	k := operating.Comparison{Value: 3e-6, Limit: 5e-6, Bound: operating.Min, Because: "I_P is from memory",
		Corner: operating.Corner{{Name: "eta", Value: 0.7}}, Working: "2 V/660 kohm",
		Assumed: []string{"spread of R1: default"}}
	f := judge(account(k), rule.Case{Mend: []stage.Role{stage.TimingResistor}})[0]
	want := "it never fires: the charging current is 3 uA, the transistor needs 5 uA (below the limit); " +
		"no more than a doubt because I_P is from memory"
	if f.Message != want {
		t.Errorf("message %q", f.Message)
	}
	figure := rule.Figure{Name: "charging_current_at_peak", Value: 3e-6, Limit: 5e-6, Bound: "min", Unit: "A"}
	if f.Figure == nil || *f.Figure != figure {
		t.Errorf("figure %+v", f.Figure)
	}
	if len(f.Corner) != 1 || f.Working != "2 V/660 kohm" || len(f.Assumed) != 1 {
		t.Errorf("corner %v, working %q, assumed %v", f.Corner, f.Working, f.Assumed)
	}
	if len(f.Mend) != 2 || f.Mend[0].Parts[0].Designator != "R1" {
		t.Errorf("mend %v", f.Mend)
	}
}

func TestPlaceIsTheFirstRoleThatExistsElseTheAnchor(t *testing.T) {
	a := account(operating.Comparison{})
	a.Stage.DrivenBy = &stage.Stage{Anchor: element("XQ9", 9),
		Parts: map[stage.Role][]*circuit.Element{stage.BaseOne: {element("R3", 3)}}}
	for _, row := range []struct {
		roles []stage.Role
		line  int
		parts string
	}{
		{[]stage.Role{stage.CurrentSource, stage.TimingResistor}, 2, "R1 R7"},
		{[]stage.Role{stage.CurrentSource}, 5, "XQ1"},
		{[]stage.Role{stage.BaseOne}, 3, "R3"}, // the driver's
		{nil, 5, "XQ1"},
	} {
		f := rule.Finding{}.Placed(a, row.roles...)
		line, parts := f.At.Position().Line, strings.Join(f.Parts, " ")
		if line != row.line || parts != row.parts || f.Stage != "XQ1" {
			t.Errorf("%v: line %d, parts %v, stage %s", row.roles, line, f.Parts, f.Stage)
		}
	}
}

func TestAnIncompleteStageIsNotJudged(t *testing.T) {
	a := account(operating.Comparison{Value: 1, Limit: 2, Bound: operating.Min, Certain: true})
	a.Stage.Gap = "no capacitor"
	if list := judge(a, rule.Case{}); len(list) > 0 {
		t.Errorf("%v", list)
	}
}

func TestBadDeclarationsAreRefused(t *testing.T) {
	sound := rule.Rule{ID: "node-dangling", Group: "g", Title: "t", Why: "w", Formula: "-", Source: "s",
		Failing: "f", Mended: "m", Check: func(*rule.Pass) {}}
	if err := sound.Validate(); err != nil {
		t.Error(err)
	}
	for what, spoil := range map[string]func(*rule.Rule){
		"rule \"\"":        func(r *rule.Rule) { r.ID = "" },
		"hyphens":          func(r *rule.Rule) { r.ID = "Node" },
		"hyphens between":  func(r *rule.Rule) { r.ID = "node--dangling" },
		"words":            func(r *rule.Rule) { r.ID = "node-" },
		"no why":           func(r *rule.Rule) { r.Why = " " },
		"no source":        func(r *rule.Rule) { r.Source = "" },
		"no mended":        func(r *rule.Rule) { r.Mended = "" },
		"checks nothing":   func(r *rule.Rule) { r.Check = nil },
		"no failing netli": func(r *rule.Rule) { r.Failing = "" },
	} {
		r := sound
		spoil(&r)
		if err := r.Validate(); err == nil || !strings.Contains(err.Error(), what) {
			t.Errorf("%s: %v", what, err)
		}
	}
}
