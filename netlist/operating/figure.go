// Package operating holds what the stages do: every figure with its spread and
// how it was worked out, and the comparisons of a figure with its limit at the
// worst corner. One file per topology; all physics of the project is here.
package operating

import (
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/part"
	"standoff/netlist/stage"
)

// Corner names the board on which a value is reached: variable -> value.
// Part values stand under the designator, device data under their symbol.
type Corner []Setting

// Setting is one variable of a corner.
type Setting struct {
	Name  string
	Value float64
	Unit  string
}

// Figure is one computed quantity over all boards. SI units without prefix.
type Figure struct {
	Name, Unit         string
	Low, Nominal, High float64
	LowAt, HighAt      Corner
	Working            string    // in words and numbers
	Assumed            []string  // what it rests on that nobody declared, in words
	Mark               part.Mark // worst mark of the data that entered
}

// Bound says on which side of the limit the value has to be.
type Bound string

// The bounds.
const (
	Min Bound = "min" // value must not be below the limit
	Max Bound = "max" // value must not be above the limit
)

// Comparison is a value held against its limit on the board where it comes off
// worst. Value and Limit belong to one and the same board.
type Comparison struct {
	Name         string // figure name; key for rules
	Value, Limit float64
	LimitName    string // figure or rating that is the limit: "peak_current_required"
	Bound        Bound
	Unit         string
	// Corner, Working and Assumed are filled where the limit is broken or nearly so,
	// and where rules draw lines of their own beside it.
	Corner  Corner
	Working string
	// Certain is false where the verdict rests on a memory value, an assumed
	// rating or a derating: a doubt at most. Because says which, in words.
	Certain bool
	Because string
	// Inexact lists assumptions that do not weaken the verdict but belong in the message.
	Assumed []string
}

// Fails reports whether the limit is broken.
func (c Comparison) Fails() bool {
	if c.Bound == Min {
		return c.Value < c.Limit
	}
	return c.Value > c.Limit
}

// Tight reports whether the limit is kept by less than a quarter of itself.
func (c Comparison) Tight() bool {
	if c.Bound == Min {
		return c.Value < 1.25*c.Limit
	}
	return c.Value > 0.75*c.Limit
}

// Unchecked is something that could not be worked out, and why.
type Unchecked struct {
	Rule    string // rule it keeps from being judged; "" for the whole stage
	Because string
}

// Account is everything worked out of one stage. It is not safe for use by
// several goroutines at once.
type Account struct {
	Stage       *stage.Stage
	Comparisons []Comparison
	Facts       map[string]bool // yes/no findings of the physics, by name
	Unchecked   []Unchecked
	uses        map[*circuit.Element]slot // what entered; nil where nothing was worked out
	model       *model                    // nil where nothing was worked out
	drifting    *drifting                 // nil where nothing drifts
	timing      *relaxation               // nil where the stage makes no time
	figures     []Figure                  // once they were asked for
}

// Figures returns what a worksheet shows, in its order. The bounds are searched
// for when they are asked for first: a verdict needs the comparisons only.
func (a *Account) Figures() []Figure {
	if a.figures != nil || a.model == nil {
		return a.figures
	}
	a.figures = a.model.allFigures()
	if a.drifting != nil {
		a.figures = append(a.figures, a.drifting.figure())
	}
	return a.figures
}

// Effort returns how much working the stage out costs, a plain stage of fifteen
// variables being 1: the search grows with the square of the variables, and looks
// around more where the charging network bends.
func (a *Account) Effort() float64 {
	if a.model == nil {
		return 0
	}
	free := 0.0
	for _, v := range a.model.box {
		if v.Low < v.High {
			free++
		}
	}
	effort := free * free / (15 * 15)
	switch {
	case a.model.scatter > 0:
		return effort * 64
	case a.model.grain > 0:
		return effort * 16
	}
	return effort
}

// Nominal returns a figure on the nominal board; NaN where there is none of that
// name.
func (a *Account) Nominal(name string) float64 {
	if a.model == nil {
		return math.NaN()
	}
	return a.model.nominalOf(name)
}

// Figure returns the figure of that name.
func (a *Account) Figure(name string) (Figure, bool) {
	for _, f := range a.Figures() {
		if f.Name == name {
			return f, true
		}
	}
	return Figure{}, false
}

// Comparison returns the comparison of that name.
func (a *Account) Comparison(name string) (Comparison, bool) {
	for _, c := range a.Comparisons {
		if c.Name == name {
			return c, true
		}
	}
	return Comparison{}, false
}
