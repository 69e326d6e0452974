package operating

import (
	"fmt"
	"math"

	"standoff/netlist/numeric"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
)

// driftGrid is at how many temperatures a drift is sampled: both ends and the
// middle. A parabola through them finds an extreme between; the curve bends
// little over any ambient range.
const driftGrid = 3

// drifting is what a stage needs to have its drift worked out: the point is
// loaded, the frequency read.
type drifting struct {
	*model
	frequency func() float64
}

// over returns the least and greatest frequency over the ambient range with
// everything else as in x, which is left with its ambient changed.
func (d drifting) over(x []float64) (low, high float64) { return d.around(x, math.NaN()) }

// around is over where the frequency at the nominal ambient is known already.
func (d drifting) around(x []float64, nominal float64) (low, high float64) {
	a := d.box[d.ambient]
	var f [driftGrid]float64
	low, high = math.Inf(1), math.Inf(-1)
	for i := range f {
		x[d.ambient] = a.Low + (a.High-a.Low)*float64(i)/(driftGrid-1)
		if f[i] = nominal; x[d.ambient] != a.Nominal || nominal != nominal {
			d.evaluate(x)
			f[i] = d.frequency()
		}
		low, high = min(low, f[i]), max(high, f[i])
	}
	for i := 1; i < driftGrid-1; i++ {
		if v, ok := vertex(f[i-1], f[i], f[i+1]); ok {
			low, high = min(low, v), max(high, v)
		}
	}
	return low, high
}

// vertex returns the extreme of the parabola through three equally spaced
// values where it lies between the outer two.
func vertex(a, b, c float64) (float64, bool) {
	bend := a - 2*b + c
	if bend == 0 || math.IsInf(bend, 0) || bend != bend {
		return 0, false
	}
	t := (a - c) / (2 * bend)
	if t <= -1 || t >= 1 {
		return 0, false
	}
	return b - (a-c)*t/4, true
}

// relative returns the drift over the ambient range relative to the frequency
// at the nominal ambient; 0 where the stage does not run.
func (d drifting) relative(x []float64) float64 {
	a := d.box[d.ambient]
	x[d.ambient] = a.Nominal
	d.evaluate(x)
	f := d.frequency()
	if f <= 0 {
		return 0
	}
	low, high := d.around(x, f)
	return (high - low) / f
}

// span returns the width of the ambient range in K.
func (d drifting) span() float64 { return d.box[d.ambient].High - d.box[d.ambient].Low }

// figure returns frequency_drift with its spread.
func (d drifting) figure() Figure {
	box := append([]numeric.Variable(nil), d.box...)
	a := box[d.ambient].Nominal
	box[d.ambient] = numeric.Variable{Low: a, Nominal: a, High: a}
	point := make([]float64, len(box))
	e := numeric.Extremes(box, 1, func(x, y []float64) {
		copy(point, x)
		y[0] = d.relative(point)
	}, numeric.Hints{})[0]
	return Figure{Name: "frequency_drift", Low: e.Low, Nominal: e.Nominal, High: e.High,
		LowAt: d.corner(e.LowAt, e.Moves), HighAt: d.corner(e.HighAt, e.Moves), Assumed: d.assumptions(e.Moves),
		Mark: d.mark(e.Moves), Working: d.working()}
}

func (d drifting) working() string {
	return fmt.Sprintf("(greatest - least frequency)/frequency over %s .. %s, all else unchanged",
		show(d.box[d.ambient].Low, "deg C"), show(d.box[d.ambient].High, "deg C"))
}

// driftHabit is the drift per 10 K above which a timing stage is called
// drifting (common practice, no source).
const driftHabit = 0.01

// comparisons returns what the drift is held against: the habit, and the
// declared target with temperature alone moving the nominal board.
func (d drifting) comparisons(target *quantity.Spread) []Comparison {
	nominal := Comparison{Working: d.working() + " (nominal board)"}
	list := []Comparison{nominal}
	list[0].Name, list[0].Value, list[0].Limit = "frequency_drift_per_10k", d.relative(d.nominal())*10/d.span(), driftHabit
	list[0].LimitName, list[0].Bound, list[0].Because = "habit", Max, "1 % per 10 K is a habit, not a rating"
	if target == nil {
		return list
	}
	x := d.nominal()
	low, high := d.over(x)
	add := func(name string, bound Bound, value, limit float64) {
		c := Comparison{Name: name, Value: value, Limit: limit, LimitName: "target", Bound: bound,
			Unit: "Hz", Working: nominal.Working}
		c.Because = d.memoryOf(c)
		c.Certain = c.Because == ""
		list = append(list, c)
	}
	add("frequency_drift_lowest", Min, low, target.Low)
	add("frequency_drift_highest", Max, high, target.High)
	return list
}

// memoryOf returns the note of a figure from memory without which a broken end of the
// target would be kept: with half or twice of it, or what its trait says; "" where there is none.
func (d drifting) memoryOf(c Comparison) string {
	if !c.Fails() {
		return ""
	}
	for i, t := range d.traits {
		if !t.memory {
			continue
		}
		for _, factor := range t.factors() {
			x := d.nominal()
			x[i] *= factor
			low, high := d.over(x)
			if c.Bound == Min && low >= c.Limit || c.Bound == Max && high <= c.Limit {
				return t.note
			}
		}
	}
	return ""
}

// nominal returns the nominal point.
func (m *model) nominal() []float64 {
	x := make([]float64, len(m.box))
	for i, v := range m.box {
		x[i] = v.Nominal
	}
	return x
}

// frequencyTarget returns the declared target as a frequency, nil where there
// is none.
func frequencyTarget(frequency, period *quantity.Spread) *quantity.Spread {
	switch {
	case frequency != nil:
		return frequency
	case period != nil && period.Low > 0:
		return &quantity.Spread{Low: 1 / period.High, High: 1 / period.Low}
	}
	return nil
}

// baseTwo adds what the base-two resistor, or its absence, costs: the drift of
// the transistor alone on the nominal board, board parts taken as free of drift.
func (a *Account) baseTwo(m *ujtModel) {
	a.Facts["base-two-missing"] = len(m.stage.Parts[stage.BaseTwo]) == 0
	d := drifting{&m.model, m.frequency}
	if m.v.tc < 0 || d.span() == 0 || m.interbase() <= 0 || m.charging.bends {
		return // the drift of diodes and transistors that charge is not the bar's
	}
	m.ignoreTempco = true
	x := m.nominal()
	low, high := d.over(x)
	m.ignoreTempco = false
	m.evaluate(m.nominal())
	f := m.frequency()
	if f <= 0 {
		return
	}
	a.Comparisons = append(a.Comparisons, Comparison{Name: "base_two_drift", Value: (high - low) / f * 10 / d.span(),
		Limit: driftHabit, LimitName: "habit", Bound: Max, Certain: false,
		Because: "1 % per 10 K is a habit, not a rating",
		Working: fmt.Sprintf("frequency of the nominal board from %s to %s over %s .. %s", show(low, "Hz"), show(high, "Hz"),
			show(d.box[d.ambient].Low, "deg C"), show(d.box[d.ambient].High, "deg C"))})
	t := m.stage.Anchor.Intent
	if target := frequencyTarget(t.Frequency, t.Period); target != nil {
		a.Facts["base-two-drift-breaks-target"] = low < target.Low || high > target.High
	}
}
