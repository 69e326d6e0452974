package rules

import (
	"fmt"
	"slices"
	"strings"

	"standoff/netlist/circuit"
	"standoff/netlist/operating"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

// decades is how far from the present value advice is looked for.
const decades = 3

// hunt is the search for what clears the findings of one rule on one stage.
type hunt struct {
	*adviser
	findings []*rule.Finding
	left     int
	blocked  string // what the nearest value that clears the findings would raise
}

// tell writes the outcome into the findings.
func (h *hunt) tell(advice []rule.Advice, none string) {
	for _, f := range h.findings {
		f.Advice, f.NoAdvice = advice, none
	}
}

// run tries one part at a time, then resistor and capacitor together.
func (h *hunt) run() (advice []rule.Advice, none string) {
	var tried []string
	for _, f := range h.findings {
		for _, m := range f.Mend {
			e := m.Parts[0]
			if !changeable(e) || slices.Contains(tried, e.Designator) {
				continue
			}
			tried = append(tried, e.Designator)
			if advice := h.single(e); advice != nil {
				return advice, ""
			}
		}
	}
	if advice := h.pair(); advice != nil {
		return advice, ""
	}
	return nil, h.none(tried)
}

// changeable reports whether a part has a value that one buys.
func changeable(e *circuit.Element) bool {
	return (e.Kind == circuit.Resistor || e.Kind == circuit.Capacitor) && e.HasValue && e.Value.Nominal > 0 &&
		e.Intent.Travel == nil
}

// candidates returns the preferred values to try in place of v: E12 in the whole
// range first, then what E24 has besides, each nearest first.
func candidates(v float64) []float64 {
	list := quantity.Candidates(v, 12, decades)
	for _, c := range quantity.Candidates(v, 24, decades) {
		if !slices.Contains(list, c) {
			list = append(list, c)
		}
	}
	return list
}

// single looks for one value of one part.
func (h *hunt) single(e *circuit.Element) []rule.Advice {
	for _, v := range candidates(e.Value.Nominal) {
		if change := []rule.Advice{value(e, v)}; h.left > 0 && h.proves(change) {
			return change
		}
	}
	return nil
}

func value(e *circuit.Element, v float64) rule.Advice {
	return rule.Advice{Part: e.Designator, Value: v, Text: quantity.Short(v)}
}

// pair changes timing resistor and capacitor against each other, so that the
// period stays about what it is.
func (h *hunt) pair() []rule.Advice {
	r, c := h.timing()
	if r == nil {
		return nil
	}
	product := r.Value.Nominal * c.Value.Nominal
	for _, series := range []int{12, 24} {
		for _, v := range quantity.Candidates(r.Value.Nominal, series, decades) {
			change := []rule.Advice{value(r, v), value(c, quantity.Nearest(product/v, series))}
			if h.left > 0 && h.proves(change) {
				return change
			}
		}
	}
	return nil
}

// timing returns the one timing resistor and the one capacitor of the findings'
// stage, or of the stage that fires it.
func (h *hunt) timing() (r, c *circuit.Element) {
	s := h.account().Stage
	if len(s.Parts[stage.TimingCapacitor]) == 0 && s.DrivenBy != nil {
		s = s.DrivenBy
	}
	if len(s.Parts[stage.TimingResistor]) != 1 || len(s.Parts[stage.TimingCapacitor]) != 1 {
		return nil, nil
	}
	r, c = s.Parts[stage.TimingResistor][0], s.Parts[stage.TimingCapacitor][0]
	if !changeable(r) || !changeable(c) {
		return nil, nil
	}
	return r, c
}

// account returns the account of the stage that the findings are about; an empty
// one where they are about none.
func (h *hunt) account() *operating.Account {
	for _, a := range h.board.Accounts {
		if strings.EqualFold(a.Stage.Anchor.Designator, h.findings[0].Stage) {
			return a
		}
	}
	return &operating.Account{Stage: &stage.Stage{Anchor: &circuit.Element{}}}
}

// proves reports whether the findings are gone on the board with other values and
// nothing new or worse has come up.
func (h *hunt) proves(change []rule.Advice) bool {
	h.left--
	values := map[string]float64{}
	for _, c := range change {
		values[c.Part] = c.Value
	}
	if h.stands(values) {
		return false
	}
	other := h.board.With(values)
	found := run(other, Options{})
	if slices.ContainsFunc(found, h.same) {
		return false
	}
	raised := judged(other, found).worseThan(h.now)
	if raised != "" && h.blocked == "" {
		h.blocked = Words(change) + " would clear it, but " + raised
	}
	return raised == ""
}

// same reports whether a finding, of this board or another, is one of those that
// are hunted.
func (h *hunt) same(f rule.Finding) bool {
	return f.Grade >= rule.Doubt && key(f) == key(*h.findings[0])
}

// stands reports whether the findings are still there with other values. Only
// their own stage is worked out and only their rule is asked, since most values
// fail here.
func (h *hunt) stands(values map[string]float64) bool {
	r, known := Find(h.findings[0].Rule)
	if !known || h.findings[0].Stage == "" {
		return false
	}
	anchor := h.account().Stage.Anchor.Index
	c := h.board.Circuit.With(values)
	stages := slices.DeleteFunc(stage.Recognise(c), func(s *stage.Stage) bool {
		return s.Anchor.Index != anchor
	})
	stands := false
	r.Check(rule.NewPass(c, operating.Compute(c, stages), func(f rule.Finding) {
		f.Rule = r.ID
		stands = stands || h.same(f)
	}))
	return stands
}

// none says why there is no advice.
func (h *hunt) none(tried []string) string {
	if len(tried) == 0 {
		return "no single resistor or capacitor value decides this"
	}
	text := "no preferred value of " + strings.Join(tried, " or ") + " clears it"
	if h.left <= 0 {
		text = fmt.Sprintf("no value was found within %d trials", h.trials)
	}
	for _, more := range []string{h.blocked, h.window(), h.spreads()} {
		if more != "" {
			text += "; " + more
		}
	}
	return text
}

// window says what the timing resistance may be on every board, where the figures
// tell.
func (h *hunt) window() string {
	f := h.findings[0].Figure
	if f == nil || !strings.HasPrefix(f.Name, "charging_current") {
		return ""
	}
	a := h.account()
	low, least := a.Figure("timing_resistance_min")
	high, most := a.Figure("timing_resistance_max")
	if !least || !most {
		return ""
	}
	if low.High >= high.Low {
		return fmt.Sprintf("the window of timing resistance is empty: at least %s and at most %s over all boards",
			quantity.Format(low.High, "ohm"), quantity.Format(high.Low, "ohm"))
	}
	return fmt.Sprintf("the timing resistance has to lie between %s and %s on every board",
		quantity.Format(low.High, "ohm"), quantity.Format(high.Low, "ohm"))
}

// spreads tells what besides other values would meet a target.
func (h *hunt) spreads() string {
	if h.findings[0].Rule != "frequency-off-target" {
		return ""
	}
	budget, ok := h.account().Budget()
	if !ok {
		return ""
	}
	return remedy(budget)
}

// Words writes a change as a netlist would: "R1 = 680k with C1 = 100n".
func Words(change []rule.Advice) string {
	words := make([]string, len(change))
	for i, c := range change {
		words[i] = rule.Name(c.Part) + " = " + c.Text
	}
	return strings.Join(words, " with ")
}
