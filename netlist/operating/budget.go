package operating

import (
	"cmp"
	"math"
	"slices"

	"standoff/netlist/circuit"
	"standoff/netlist/numeric"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
)

// Budget says where the spread of a declared period (or frequency) comes from,
// and what would bring it inside the target.
type Budget struct {
	Figure    string          // "period", or "first_pulse" of a one-shot stage
	Low, High float64         // s, over all boards
	Target    quantity.Spread // s; High is +Inf where none was asked for
	Shares    []Share         // greatest first; their Parts add to 1
	// Met says that the target holds on every board.
	Met bool
	// Trimmer is the range in ohm that a trimmer in place of TrimmedPart has to
	// cover; every board set to the middle of the target then stays in it. Nil where
	// no trimmer does it. Service is by how much, as a ratio, the period of one and
	// the same board still varies with supply and temperature.
	Trimmer     *quantity.Spread
	TrimmedPart string
	Service     float64
	// Tolerance is the coarsest usual tolerance, as a share, of Parts with which
	// every board would meet the target; 0 where none does. Scale is the factor by
	// which the values have to change besides, 1 where they are right as they are.
	Tolerance float64
	Parts     []string
	Scale     float64
}

// Share is what one spread contributes.
type Share struct {
	Name      string
	Low, High float64 // the spread
	Unit      string
	Part      float64 // of the whole, 0..1
}

// Budget returns where the spread of the target figure comes from; false for a
// stage without a declared target, or one that some board keeps from running.
func (a *Account) Budget() (*Budget, bool) {
	if a.timing == nil {
		return nil, false
	}
	t := a.Stage.Anchor.Intent
	target := frequencyTarget(t.Frequency, t.Period)
	if target == nil || target.High <= 0 {
		return nil, false
	}
	m := a.timing
	b := &Budget{Figure: "period", Target: quantity.Spread{Low: 1 / target.High, High: 1 / target.Low}, Scale: 1}
	if m.isOneShot() {
		b.Figure = "first_pulse"
	}
	e := m.periods(m.box)
	if !(e.High < math.Inf(1)) || !(e.Low > 0) {
		return nil, false
	}
	b.Low, b.High = e.Low, e.High
	b.Met = b.Low >= b.Target.Low && b.High <= b.Target.High
	b.Shares = m.shares(e)
	if !b.Met {
		m.trimmer(b)
		m.tolerances(b)
	}
	return b, true
}

// target returns what the target is held against at the last evaluated point.
func (m *relaxation) target() float64 {
	if m.isOneShot() {
		return m.firstPulse()
	}
	return m.cycle.period
}

func (m *relaxation) periodAt(x []float64) float64 {
	m.evaluate(x)
	return m.target()
}

// periods returns the extremes of the period over a box.
func (m *relaxation) periods(box []numeric.Variable) numeric.Extreme {
	return m.extremesOver(box, m.target)
}

// extremesOver returns the extremes over a box of something that depends on the period
// as the figure does.
func (m *relaxation) extremesOver(box []numeric.Variable, of func() float64) numeric.Extreme {
	whole := m.box
	m.box = box
	defer func() { m.box = whole }()
	list := make([]sought, 1, 4)
	for _, s := range m.figuresSought() {
		if s.guide || s.gate {
			s.lowOnly, s.highOnly = true, true // only for its help
			list = append(list, s)
		}
	}
	for _, o := range m.outputs {
		if o.name == "period" {
			list[0] = sought{bent: o.bent, guided: o.guided, gated: o.gated, kinked: o.kinked}
		}
	}
	list[0].of = of
	return m.search(list)[0]
}

// shareSteps is into how many steps the way from one extreme to the other is cut.
const shareSteps = 32

// shares divides the spread among the variables. Along the straight line from the
// board with the shortest period to the one with the longest, each variable's
// part of the rise of ln T is summed (Aumann and Shapley's way to divide a cost,
// exact but for the cutting into steps; the small rest is divided in
// proportion). A variable that counts against the whole has a negative part.
func (m *relaxation) shares(e numeric.Extreme) []Share {
	n := len(m.box)
	sums := make([]float64, n)
	x := make([]float64, n)
	point := func(step float64) {
		for i := range x {
			x[i] = e.LowAt[i] + step/shareSteps*(e.HighAt[i]-e.LowAt[i])
		}
	}
	for k := range shareSteps {
		for i := range n {
			if e.LowAt[i] == e.HighAt[i] {
				continue
			}
			point(float64(k) + 0.5)
			half := (e.HighAt[i] - e.LowAt[i]) / shareSteps / 2
			middle := x[i]
			x[i] = middle - half
			before := m.periodAt(x)
			x[i] = middle + half
			sums[i] += math.Log(m.periodAt(x) / before)
		}
	}
	whole := 0.0
	for _, v := range sums {
		whole += v
	}
	var list []Share
	for i, v := range sums {
		if v != 0 && whole > 0 {
			list = append(list, Share{m.traits[i].name, m.box[i].Low, m.box[i].High, m.traits[i].unit, v / whole})
		}
	}
	slices.SortStableFunc(list, func(a, b Share) int { return cmp.Compare(b.Part, a.Part) })
	return list
}

// isService tells what changes in service from what differs from board to board.
func (m *relaxation) isService() []bool {
	service := make([]bool, len(m.box))
	service[m.ambient] = true
	for e, s := range m.slots {
		if e.Kind == circuit.VoltageSource || e.Kind == circuit.CurrentSource {
			service[s.index] = true
		}
	}
	return service
}

// trimmer looks whether a trimmer would meet the target: it takes up what differs
// from board to board, and leaves what changes in service.
func (m *relaxation) trimmer(b *Budget) {
	part := m.trimmed()
	if part == nil {
		return
	}
	at := m.slots[part].index
	service := m.isService()
	set := make([]float64, len(m.box)) // a board as it was set: nominal service
	settled := func(x []float64) float64 {
		copy(set, x)
		for i := range set {
			if service[i] {
				set[i] = m.box[i].Nominal
			}
		}
		return m.periodAt(set)
	}
	e := m.extremesOver(m.box, func() float64 {
		x, period := m.point, m.target()
		share := period / settled(x)
		m.evaluate(x) // what else is read there
		return share
	})
	b.Service = e.High / e.Low
	if !(b.Service <= b.Target.High/b.Target.Low) {
		return
	}
	aim := math.Sqrt(b.Target.Low / e.Low * b.Target.High / e.High)
	box := slices.Clone(m.box)
	for i := range box {
		if service[i] || i == at {
			box[i].Low, box[i].High = box[i].Nominal, box[i].Nominal
		}
	}
	ends := m.periods(box)
	shortest, ok := m.trimmedTo(ends.HighAt, at, aim)
	longest, also := m.trimmedTo(ends.LowAt, at, aim)
	if ok && also {
		b.TrimmedPart, b.Trimmer = part.Designator, &quantity.Spread{Low: shortest, Nominal: math.Sqrt(shortest * longest), High: longest}
	}
}

// trimmedTo returns the value of one variable with which a board has a period.
func (m *relaxation) trimmedTo(x []float64, at int, aim float64) (float64, bool) {
	x = slices.Clone(x)
	low, high := x[at]/100, x[at]*100
	period := func(v float64) float64 {
		x[at] = v
		return m.periodAt(x)
	}
	if !(period(low) <= aim && period(high) >= aim) {
		return 0, false
	}
	for range 60 {
		middle := math.Sqrt(low * high)
		if period(middle) < aim {
			low = middle
		} else {
			high = middle
		}
	}
	// The stage has to run there and not merely to stop.
	return high, !math.IsInf(period(high*(1+1e-9)), 1)
}

// trimmed returns the timing resistor that matters most; nil where there is none,
// or where one is adjustable already.
func (m *relaxation) trimmed() *circuit.Element {
	var best *circuit.Element
	for _, e := range m.stage.Parts[stage.TimingResistor] {
		if _, known := m.slots[e]; !known || e.Kind != circuit.Resistor {
			continue
		}
		if e.Intent.Travel != nil {
			return nil
		}
		if best == nil || e.Value.Nominal > best.Value.Nominal {
			best = e
		}
	}
	return best
}

// usualTolerances are those in which resistors and film capacitors are sold.
var usualTolerances = [...]float64{0.2, 0.1, 0.05, 0.02, 0.01, 0.005, 0.001}

// tolerances looks for the coarsest tolerance of the timing resistors and
// capacitors with which the target is met, with the values as they are or scaled.
func (m *relaxation) tolerances(b *Budget) {
	var parts []*circuit.Element
	for _, role := range [2]stage.Role{stage.TimingResistor, stage.TimingCapacitor} {
		for _, e := range m.stage.Parts[role] {
			if s, known := m.slots[e]; known && e.Intent.Travel == nil && m.box[s.index].Low < m.box[s.index].High {
				parts = append(parts, e)
				b.Parts = append(b.Parts, e.Designator)
			}
		}
	}
	for _, t := range usualTolerances {
		box := slices.Clone(m.box)
		var narrower []string
		for _, e := range parts {
			i := m.slots[e].index
			v := quantity.Tolerance(box[i].Nominal, t, t)
			if v.Low > box[i].Low || v.High < box[i].High {
				narrower = append(narrower, e.Designator)
				box[i].Low, box[i].High = max(v.Low, box[i].Low), min(v.High, box[i].High)
			}
		}
		if len(narrower) == 0 {
			continue
		}
		e := m.periods(box)
		if e.High/e.Low <= b.Target.High/b.Target.Low {
			b.Tolerance, b.Parts = t, narrower
			if e.Low < b.Target.Low || e.High > b.Target.High {
				b.Scale = math.Sqrt(b.Target.Low / e.Low * b.Target.High / e.High)
			}
			return
		}
	}
}
