package operating

import (
	"math"

	"standoff/netlist/numeric"
	"standoff/netlist/part"
)

// model is a stage ready to be computed: variables, a function that works the
// stage out at one point of the box, and what is read off afterwards.
type model struct {
	*bench
	// evaluate works the stage out at x; outputs and contests read the result
	// through their closures.
	evaluate func(x []float64)
	outputs  []output
	contests []contest
	grain    float64 // relative change that counts as none
	scatter  int     // corners to try besides
}

// output is one figure to be.
type output struct {
	name, unit string
	of         func() float64
	working    func() string // at the last evaluated point
	bent       bool          // its extremes may lie between the ends of a variable
	guide      bool          // others depend on it beyond a threshold
	guided     bool          // it depends on a guide in that way
	gate       bool          // others (gated) are degenerate unless it is positive
	gated      bool
	kinked     bool // some variables move it only far from the nominal board
}

// contest is one comparison to be.
type contest struct {
	name, limitName, unit string
	bound                 Bound
	value, limit          func() float64
	guided                bool // the worst point depends on a guide beyond a threshold
	gated                 bool // degenerate unless the gate is positive
	kinked                bool // some variables move it only far from the nominal board
	// habit says that rules draw lines of their own beside the limit.
	habit bool
	// limitMark is the trust in the limit; because says what else makes the
	// verdict a doubt at most.
	limitMark part.Mark
	because   string
	// there says the same of the point at which the contest fails, "" for nothing.
	there func() string
	// surely is the value at or below which a least limit is broken whatever it is.
	surely  float64
	working func() string
	bent    bool // its worst point may lie between the ends of a variable
}

// ratio is what is driven to its extreme: value over limit.
func (c *contest) ratio() float64 {
	value, limit := c.value(), c.limit()
	if limit <= 0 {
		return math.Inf(1)
	}
	return value / limit
}

// figure appends an output.
func (m *model) figure(name, unit string, of func() float64, working func() string) {
	m.outputs = append(m.outputs, output{name: name, unit: unit, of: of, working: working})
}

// last returns the output appended last.
func (m *model) last() *output { return &m.outputs[len(m.outputs)-1] }

// compare appends a contest.
func (m *model) compare(c contest) { m.contests = append(m.contests, c) }

// allFigures works out every output over the box.
func (m *model) allFigures() []Figure {
	extremes := m.search(m.figuresSought())
	m.evaluate(m.nominal())
	figures := make([]Figure, 0, len(m.outputs))
	for j, o := range m.outputs {
		e := extremes[j]
		if math.IsNaN(e.Nominal) {
			continue
		}
		figures = append(figures, Figure{Name: o.name, Unit: o.unit, Low: e.Low, Nominal: e.Nominal, High: e.High,
			LowAt: m.corner(e.LowAt, e.Moves), HighAt: m.corner(e.HighAt, e.Moves),
			Working: o.working(), Assumed: m.assumptions(e.Moves), Mark: m.mark(e.Moves)})
	}
	return figures
}

// allComparisons works out the worst point of every contest.
func (m *model) allComparisons() []Comparison {
	sought := m.contestsSought()
	extremes := m.search(sought)
	comparisons := make([]Comparison, 0, len(m.contests)+4)
	for k := range m.contests {
		if c, ok := m.decide(k, extremes[k]); ok {
			comparisons = append(comparisons, c)
		}
	}
	return comparisons
}

// nominalOf returns an output at the nominal point, NaN where there is none of
// that name.
func (m *model) nominalOf(name string) float64 {
	for _, o := range m.outputs {
		if o.name == name {
			m.evaluate(m.nominal())
			return o.of()
		}
	}
	return math.NaN()
}

// sought is one function of the board whose extremes are looked for.
type sought struct {
	of                  func() float64
	bent, guide, guided bool
	exact               bool // the value counts, not only whether a limit is near
	gate, gated, kinked bool
	lowOnly, highOnly   bool
}

// figuresSought lists the outputs.
func (m *model) figuresSought() []sought {
	list := make([]sought, len(m.outputs))
	for j, o := range m.outputs {
		list[j] = sought{of: o.of, bent: o.bent, guide: o.guide, guided: o.guided, gate: o.gate, gated: o.gated, kinked: o.kinked}
	}
	return list
}

// contestsSought lists the contests, and behind them the outputs that guide
// some.
func (m *model) contestsSought() []sought {
	list := make([]sought, len(m.contests), len(m.contests)+2)
	guided, gated := false, false
	for k := range m.contests {
		c := &m.contests[k]
		guided, gated = guided || c.guided, gated || c.gated
		list[k] = sought{of: c.ratio, bent: c.bent, guided: c.guided, gated: c.gated, kinked: c.kinked,
			exact: c.habit || c.gated, lowOnly: c.bound == Min, highOnly: c.bound == Max}
	}
	for _, o := range m.outputs {
		if o.guide && guided || o.gate && gated {
			list = append(list, sought{of: o.of, guide: o.guide && guided, gate: o.gate, lowOnly: true, highOnly: true})
		}
	}
	return list
}

// farOff is how many times over its limit a value stays so that its worst corner
// needs no exploring: the corners tried before are right to within a few per cent.
const farOff = 8

// slackOf is by how much, relatively, the bounds of an output are moved outwards.
// The extreme of a bent one is looked for between the ends of variables on a coarse
// grid only. Of the others, parts that are coupled through a rail by less than a
// millionth may turn round together.
func slackOf(bent bool) float64 {
	if bent {
		return 5e-3
	}
	return 1e-6
}

// search looks for the extremes over the box.
func (m *model) search(list []sought) []numeric.Extreme {
	hints := numeric.Hints{Grain: m.grain, Corners: m.scatter, One: func(x []float64, j int) float64 {
		m.evaluate(x)
		return list[j].of()
	}}
	hints.Settled = func(j int, extreme float64) bool {
		s := &list[j]
		return !s.exact && (s.lowOnly && extreme > farOff || s.highOnly && extreme < 1/farOff)
	}
	mark := func(to *[]int, j int, yes bool) {
		if yes {
			*to = append(*to, j)
		}
	}
	for j, s := range list {
		mark(&hints.Bent, j, s.bent)
		mark(&hints.Guides, j, s.guide)
		mark(&hints.Guided, j, s.guided)
		mark(&hints.Gated, j, s.gated)
		mark(&hints.Kinked, j, s.kinked)
		if s.gate {
			hints.Gate = j
		}
		mark(&hints.LowOnly, j, s.lowOnly)
		mark(&hints.HighOnly, j, s.highOnly)
	}
	extremes := numeric.Extremes(m.box, len(list), func(x, y []float64) {
		m.evaluate(x)
		for j := range list {
			y[j] = list[j].of()
		}
	}, hints)
	for j := range extremes {
		e, slack := &extremes[j], slackOf(list[j].bent)
		if e.Low == e.High {
			continue // nothing moves it
		}
		e.Low -= slack * math.Abs(e.Low)
		e.High += slack * math.Abs(e.High)
	}
	return extremes
}

// decide turns the worst point of a contest into a comparison.
func (m *model) decide(k int, e numeric.Extreme) (Comparison, bool) {
	c := &m.contests[k]
	at := e.HighAt
	if c.bound == Min {
		at = e.LowAt
	}
	if math.IsNaN(e.Low) {
		return Comparison{}, false
	}
	m.evaluate(at)
	result := Comparison{Name: c.name, Value: c.value(), Limit: c.limit(), LimitName: c.limitName,
		Bound: c.bound, Unit: c.unit, Certain: true}
	if c.habit || result.Fails() || result.Tight() { // nobody asks how a limit was kept with ease
		result.Corner, result.Working, result.Assumed = m.corner(at, e.Moves), c.working(), m.assumptions(e.Moves)
	}
	if result.Fails() {
		result.Certain, result.Because = m.certainty(k, at)
	}
	return result, true
}

// certainty reports whether a failing contest fails without anything from
// memory and whatever the assumed values really are.
func (m *model) certainty(k int, at []float64) (bool, string) {
	c := &m.contests[k]
	m.evaluate(at)
	nothing := c.bound == Min && c.value() <= c.surely // fails whatever the limit
	because := c.because
	if because == "" && c.there != nil {
		because = c.there()
	}
	if because != "" && !nothing {
		return false, because
	}
	if c.limitMark >= part.Memory && !nothing {
		return false, "the limit is " + markWords(c.limitMark)
	}
	if note := m.memoryIn(k, at); note != "" {
		return false, note
	}
	box, note := m.favourable(k, at)
	if note == "" {
		return true, ""
	}
	e := numeric.Extremes(box, 1, func(x, y []float64) {
		m.evaluate(x)
		y[0] = c.ratio()
	}, numeric.Hints{})[0]
	if c.bound == Min && e.Low < 1 || c.bound == Max && e.High > 1 {
		return true, ""
	}
	return false, note
}

func markWords(mark part.Mark) string {
	if mark == part.Memory {
		return "from memory"
	}
	return "assumed"
}

// memoryIn returns the note of a figure from memory on which a contest rests at
// a point, "" where there is none. A contest rests on a figure where half or
// twice of it would turn the verdict or move the margin by more than a twentieth:
// a period does not rest on the pulse amplitude that the discharge time uses. Of a figure
// that is sure within a factor, only what turns the verdict within that factor counts.
func (m *model) memoryIn(k int, at []float64) string {
	x := append([]float64(nil), at...)
	m.evaluate(x)
	c := &m.contests[k]
	here := c.ratio()
	for i, t := range m.traits {
		if !t.memory {
			continue
		}
		for _, factor := range t.factors() {
			x[i] = at[i] * factor
			m.evaluate(x)
			there := c.ratio()
			turned := c.bound == Min && there >= 1 || c.bound == Max && there <= 1
			if turned || t.about == 0 && math.Abs(there-here) > math.Abs(here)/20 {
				return t.note
			}
		}
		x[i] = at[i]
	}
	return ""
}

// favourable returns the box with every assumed value fixed at the end that
// suits a contest best (or at its published end), and the notes of those that
// matter.
func (m *model) favourable(k int, at []float64) ([]numeric.Variable, string) {
	c := &m.contests[k]
	box := append([]numeric.Variable(nil), m.box...)
	x := append([]float64(nil), at...)
	note := ""
	for i, t := range m.traits {
		if !t.doubtLow && !t.doubtHigh {
			continue
		}
		ratio := func(v float64) float64 {
			x[i] = v
			m.evaluate(x)
			return c.ratio()
		}
		low, high := ratio(box[i].Low), ratio(box[i].High)
		best := box[i].High
		if t.doubtLow && t.doubtHigh && (low > high) == (c.bound == Min) {
			best = box[i].Low
		} else if !t.doubtLow {
			best = box[i].Low
		}
		if low != high {
			note = join(note, t.note)
		}
		box[i] = numeric.Variable{Low: best, Nominal: best, High: best}
		x[i] = best
	}
	return box, note
}

func join(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}

// corner names the variables that matter at a point.
func (m *model) corner(at []float64, moves []bool) Corner {
	count := 0
	for i := range at {
		if moves[i] {
			count++
		}
	}
	corner := make(Corner, 0, count)
	for i, v := range at {
		if moves[i] {
			corner = append(corner, Setting{m.traits[i].name, v, m.traits[i].unit})
		}
	}
	return corner
}

// assumptions lists the notes of the variables that matter.
func (m *model) assumptions(moves []bool) []string {
	var list []string
	for i, t := range m.traits {
		if moves[i] && t.note != "" {
			list = append(list, t.note)
		}
	}
	return list
}

// mark returns the worst trust among the variables that matter.
func (m *model) mark(moves []bool) part.Mark {
	mark := part.Declared
	for i, t := range m.traits {
		switch {
		case !moves[i]:
		case t.doubtLow || t.doubtHigh:
			return part.Assumed
		case t.memory:
			mark = part.Memory
		}
	}
	return mark
}
