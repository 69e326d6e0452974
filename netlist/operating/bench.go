package operating

import (
	"fmt"
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/numeric"
	"standoff/netlist/part"
	"standoff/netlist/quantity"
)

// trait says what a variable is and how far it can be trusted.
type trait struct {
	name, unit string
	memory     bool    // the figure is from memory: what depends on it is a doubt
	about      float64 // the factor within which a figure from memory is sure, 0 for two
	doubtLow   bool    // the low end is assumed, nobody published it
	doubtHigh  bool    // the high end is assumed
	note       string  // what is assumed, in words; "" where nothing is
}

// factors returns what a figure from memory is multiplied with to see whether a verdict
// rests on it.
func (t trait) factors() [2]float64 {
	if t.about == 0 {
		return [2]float64{0.5, 2}
	}
	return [2]float64{1 / t.about, t.about}
}

// bench collects the variables of a stage: everything that differs from board
// to board. Physics adds variables while it builds its model and reads their
// values at a point of the box.
type bench struct {
	w       *circuit.Wiring
	box     []numeric.Variable
	traits  []trait
	ambient int // index of the ambient temperature
	slots   map[*circuit.Element]slot
	types   map[string]int     // variable of the base-emitter voltage of a type of transistor
	active  []*circuit.Element // transistors and regulators that a stage counts as its own
	// ignoreTempco takes every board part as free of drift.
	ignoreTempco bool
}

// slot is where an element's value stands and how it drifts.
type slot struct {
	index  int
	tempco int // index of the temperature coefficient in 1/K; -1 for none
	class  int // index of a change that does not go straight with temperature; 0 for none
}

// newBench starts a bench with the ambient temperature of the board.
func newBench(w *circuit.Wiring) *bench {
	b := &bench{w: w, slots: map[*circuit.Element]slot{}}
	a := w.Circuit.Board.Ambient
	a.Nominal = min(max(25, a.Low), a.High)
	b.ambient = b.add(trait{name: "ambient", unit: "deg C"}, a)
	b.box[b.ambient].Curved, b.box[b.ambient].Pivot = true, true
	return b
}

// add adds a variable and returns its index.
func (b *bench) add(t trait, s quantity.Spread) int {
	b.box = append(b.box, numeric.Variable{Low: s.Low, Nominal: s.Nominal, High: s.High})
	b.traits = append(b.traits, t)
	return len(b.box) - 1
}

// units of elements by kind.
var units = map[circuit.Kind]string{circuit.Resistor: "ohm", circuit.Capacitor: "F", circuit.Inductor: "H",
	circuit.VoltageSource: "V", circuit.CurrentSource: "A"}

// element adds the value of an element, once.
func (b *bench) element(e *circuit.Element) slot {
	if s, ok := b.slots[e]; ok {
		return s
	}
	t := trait{name: e.Designator, unit: units[e.Kind]}
	if e.Basis == circuit.BasisDefault {
		t.note = "spread of " + e.Designator + ": default"
	}
	s := slot{index: b.add(t, e.Value), tempco: -1}
	b.drifts(e, &s)
	b.slots[e] = s
	return s
}

// value returns an element's value at a point, at that point's temperature.
func (b *bench) value(s slot, x []float64) float64 {
	if s.tempco < 0 && s.class == 0 || b.ignoreTempco {
		return x[s.index]
	}
	heat := x[b.ambient] - 25
	v := x[s.index]
	if s.tempco >= 0 {
		v *= 1 + x[s.tempco]*heat
	}
	if s.class > 0 {
		v *= 1 + x[s.class]*min(math.Abs(heat)/classReach, 1)
	}
	return v
}

// rating adds a figure of a part as a variable and reports whether it is known.
// name is the symbol under which corners show it.
func (b *bench) rating(r *part.Ratings, symbol, unit string) (int, bool) {
	s, mark, ok := r.Spread(symbol)
	if !ok {
		return -1, false
	}
	t := trait{name: symbol, unit: unit}
	switch {
	case mark == part.Assumed:
		t.doubtLow, t.doubtHigh = true, true
		t.note = fmt.Sprintf("%s of %s is published on one side only", symbol, r.Name)
	case mark >= part.Memory:
		t.memory, t.note = true, fmt.Sprintf("%s of %s is from memory", symbol, r.Name)
	}
	return b.add(t, s), true
}

// assumed adds a variable that nobody published, with the habit that stands in.
func (b *bench) assumed(name, unit string, s quantity.Spread, why string) int {
	note := fmt.Sprintf("%s %s: %s", name, spreadText(s, unit), why)
	return b.add(trait{name: name, unit: unit, doubtLow: true, doubtHigh: true, note: note}, s)
}

func spreadText(s quantity.Spread, unit string) string {
	if s.IsExact() {
		return quantity.Format(s.Low, unit)
	}
	return quantity.Format(s.Low, unit) + " .. " + quantity.Format(s.High, unit)
}
