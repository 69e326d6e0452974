package rules

import (
	"fmt"
	"strings"

	"standoff/netlist"
	"standoff/netlist/circuit"
	"standoff/netlist/operating"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

// trials bounds how often a board is worked out anew to prove advice.
const trials = 400

// decades is how far from the present value advice is looked for.
const decades = 3

// adviser looks for values that clear findings.
type adviser struct {
	board *netlist.Board
	known map[string]rule.Grade // worst grade of each finding on the board as it is
	left  int
}

// advise fills the advice of every finding that names something to change. A
// value is advised only after the whole board was worked out with it, the
// finding was gone, and nothing new or worse had come up.
func advise(b *netlist.Board, findings []rule.Finding) {
	a := &adviser{board: b, known: worst(run(b, Options{NoAdvice: true})), left: trials}
	for i := range findings {
		f := &findings[i]
		if f.Grade < rule.Doubt || f.NoAdvice != "" || len(f.Mend) == 0 {
			continue
		}
		a.find(f)
	}
}

func key(f rule.Finding) string { return f.Rule + "|" + strings.ToLower(f.Stage) }

func worst(list []rule.Finding) map[string]rule.Grade {
	m := map[string]rule.Grade{}
	for _, f := range list {
		m[key(f)] = max(m[key(f)], f.Grade)
	}
	return m
}

// find tries one part at a time, then resistor and capacitor together.
func (a *adviser) find(f *rule.Finding) {
	var tried []string
	for _, m := range f.Mend {
		e := m.Parts[0]
		if !changeable(e) {
			continue
		}
		tried = append(tried, e.Designator)
		if v, ok := a.single(*f, e); ok {
			f.Advice = []rule.Advice{{Part: e.Designator, Value: v, Text: quantity.Short(v)}}
			return
		}
	}
	if pair := a.pair(*f); pair != nil {
		f.Advice = pair
		return
	}
	switch {
	case len(tried) == 0:
		f.NoAdvice = "no single resistor or capacitor value decides this"
	case a.left <= 0:
		f.NoAdvice = fmt.Sprintf("no value was found within %d trials", trials)
	default:
		f.NoAdvice = "no preferred value of " + strings.Join(tried, ", ") + " alone clears it without raising something else" + a.window(f)
	}
}

// window tells when the window of timing resistance is empty.
func (a *adviser) window(f *rule.Finding) string {
	for _, account := range a.board.Accounts {
		if account.Stage.Anchor.Designator != f.Stage {
			continue
		}
		low, ok1 := account.Figure("timing_resistance_min")
		high, ok2 := account.Figure("timing_resistance_max")
		if ok1 && ok2 {
			return fmt.Sprintf(" (timing resistance has to lie between %s and %s on every board)",
				quantity.Format(low.High, "ohm"), quantity.Format(high.Low, "ohm"))
		}
	}
	return ""
}

// changeable reports whether a part has a value that one buys.
func changeable(e *circuit.Element) bool {
	return (e.Kind == circuit.Resistor || e.Kind == circuit.Capacitor) && e.HasValue && e.Value.Nominal > 0 && e.Intent.Travel == nil
}

// single looks for one preferred value, nearest to the present one first: E12
// in the whole range, then E24.
func (a *adviser) single(f rule.Finding, e *circuit.Element) (float64, bool) {
	for _, series := range []int{12, 24} {
		for _, v := range quantity.Candidates(e.Value.Nominal, series, decades) {
			if a.left <= 0 {
				return 0, false
			}
			if a.proves(f, map[string]float64{e.Designator: v}) {
				return v, true
			}
		}
	}
	return 0, false
}

// proves works the board out with other values and reports whether the finding
// is gone and nothing new or worse has come up.
func (a *adviser) proves(f rule.Finding, values map[string]float64) bool {
	a.left--
	now := worst(run(a.board.With(values), Options{NoAdvice: true}))
	if now[key(f)] >= rule.Doubt {
		return false
	}
	for k, g := range now {
		if g > a.known[k] {
			return false
		}
	}
	return true
}

// pair changes timing resistor and capacitor against each other, so that the
// period stays about what it is.
func (a *adviser) pair(f rule.Finding) []rule.Advice {
	s := a.stageOf(f)
	if s == nil || len(s.Parts[stage.TimingResistor]) != 1 || len(s.Parts[stage.TimingCapacitor]) != 1 {
		return nil
	}
	r, c := s.Parts[stage.TimingResistor][0], s.Parts[stage.TimingCapacitor][0]
	if !changeable(r) || !changeable(c) {
		return nil
	}
	product := r.Value.Nominal * c.Value.Nominal
	for _, v := range quantity.Candidates(r.Value.Nominal, 12, decades) {
		if a.left <= 0 {
			return nil
		}
		w := quantity.Nearest(product/v, 12)
		if a.proves(f, map[string]float64{r.Designator: v, c.Designator: w}) {
			return []rule.Advice{{Part: r.Designator, Value: v, Text: quantity.Short(v)}, {Part: c.Designator, Value: w, Text: quantity.Short(w)}}
		}
	}
	return nil
}

// stageOf returns the timing stage that a finding is about.
func (a *adviser) stageOf(f rule.Finding) *stage.Stage {
	for _, account := range a.board.Accounts {
		if account.Stage.Anchor.Designator == f.Stage && isTiming(account) {
			return account.Stage
		}
	}
	return nil
}

func isTiming(a *operating.Account) bool { return a.Stage.Kind == stage.UJTOscillator }
