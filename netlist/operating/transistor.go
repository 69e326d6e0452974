package operating

import (
	"fmt"
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/network"
	"standoff/netlist/quantity"
)

// saturation is the collector-emitter voltage in volt down to which a transistor is
// taken for a current source (common practice, no source).
const saturation = 0.3

// saturated is the collector-emitter voltage in volt below which a transistor surely is
// no current source any more.
const saturated = 0.15

// reverseGain is the current gain of a transistor run backwards, emitter and
// collector swapped (common practice, no source).
const reverseGain = 1

// transistor adds a bipolar transistor: two piecewise-linear junctions, of whose
// currents the gains' shares flow on to the far side (Ebers and Moll's transistor,
// straight in pieces), and the rise of the current with the voltage where the card gives vaf.
func (m *mesh) transistor(e *circuit.Element) error {
	c, okC := e.Pin("collector")
	b, okB := e.Pin("base")
	emitter, okE := e.Pin("emitter")
	if !okC || !okB || !okE {
		return fmt.Errorf("the terminals of %s are not known", e.Designator)
	}
	v := m.bench.junctionVolts(e)
	nc, nb, ne := m.node(c), m.node(b), m.node(emitter)
	forward := m.junction(e, v, [3]network.Node{nb, ne, nc})
	forward.gain = m.bench.gain(e)
	j := junctionAt{branch: forward.branch, a: nb, c: ne, own: m.bench.mismatched(e)}
	if e.Kind == circuit.PNP {
		j.a, j.c = ne, nb
	}
	m.junctions = append(m.junctions, j)
	back := m.junction(e, v, [3]network.Node{nb, nc, ne})
	back.gain = m.bench.exactGain(e)
	m.branches = append(m.branches, forward, back)
	if v, ok := cardSpread(e, "vaf"); ok && v.Low > 0 {
		m.early(e, v, [2]network.Node{nc, ne})
	}
	high, low := nc, ne
	if e.Kind == circuit.PNP {
		high, low = ne, nc
	}
	m.sources = append(m.sources, &regulated{element: e, high: high, low: low,
		greatest: math.Inf(1), upTo: math.Inf(1), assumed: true,
		least: func([]float64) float64 { return saturation }})
	return nil
}

// early adds the output resistance of a transistor, V_AF over the current of its last junction on
// the nominal board (Early's effect; SPICE's vaf).
func (m *mesh) early(e *circuit.Element, volts quantity.Spread, ends [2]network.Node) {
	v := m.bench.add(trait{name: "vaf of " + e.Designator, unit: "V"}, volts)
	k := len(m.junctions) - 1
	m.branches = append(m.branches, meshBranch{branch: m.net.Resistor(ends[0], ends[1]),
		slot: slot{index: -1, tempco: -1}, zener: -1,
		set: func(x []float64) float64 {
			if m.junctions[k].slope == 0 {
				return math.Inf(1)
			}
			return x[v] * m.junctions[k].slope / thermal
		}})
}

// junction adds one junction of a transistor: from base to near (npn), with its
// share flowing on from far.
func (m *mesh) junction(e *circuit.Element, volts func(x []float64) float64, nodes [3]network.Node) meshBranch {
	base, near, far := nodes[0], nodes[1], nodes[2]
	mb := meshBranch{kind: circuit.Diode, slot: slot{index: -1, tempco: -1}, zener: -1, set: volts}
	if e.Kind == circuit.NPN {
		mb.branch = m.net.Diode(base, near)
		m.net.Follow(mb.branch, far, base)
	} else {
		mb.branch = m.net.Diode(near, base)
		m.net.Follow(mb.branch, base, far)
	}
	return mb
}

// thermal is the thermal voltage kT/q in volt at 25 deg C: a junction's slope
// resistance is this over its current.
const thermal = 0.0257

// mismatch is by how much the base-emitter voltages of two transistors of one type
// differ at the same current and temperature, in volt (common practice, no source).
var mismatch = quantity.Spread{Low: -0.01, High: 0.01}

// junctionVolts returns the threshold of a transistor's junctions: the base-emitter
// voltage of its type with its drift, less the kT/q that the slope resistance takes at
// the working point.
func (b *bench) junctionVolts(e *circuit.Element) func(x []float64) float64 {
	kind := b.baseEmitter(e)
	return func(x []float64) float64 { return x[kind] + diodeDrift*(x[b.ambient]-25) - thermal }
}

// mismatched adds by how much the base-emitter voltage of a transistor differs from that of others
// of its type that stand beside it; -1 where none does.
func (b *bench) mismatched(e *circuit.Element) int {
	for _, other := range b.active {
		if other != e && other.Kind == e.Kind && other.PartName == e.PartName {
			return b.assumed("mismatch of "+e.Designator, "V", mismatch, "assumed")
		}
	}
	return -1
}

// baseEmitter adds the base-emitter voltage of a type of transistor, once: the card's
// vbe, else assumed. It returns the variable.
func (b *bench) baseEmitter(e *circuit.Element) int {
	key := string(e.Kind) + " " + e.PartName
	if i, known := b.types[key]; known {
		return i
	}
	var i int
	if v, ok := cardSpread(e, "vbe"); ok {
		i = b.add(trait{name: "V_BE of " + e.Designator, unit: "V"}, v)
	} else {
		i = b.assumed("V_BE of "+e.Designator, "V", assumedBaseEmitter, "assumed")
	}
	if b.types == nil {
		b.types = map[string]int{}
	}
	b.types[key] = i
	return i
}

// junctionAt is a base-emitter junction in the solver: anode and cathode, the slope resistance at
// its working current - 0 until that is known -, and the variable of its mismatch, -1 for none.
type junctionAt struct {
	branch network.Branch
	a, c   network.Node
	slope  float64
	own    int
}

// shape sets the slope resistance of a junction at a point. A mismatch counts there: at the same
// voltage the currents of two junctions stand in the ratio exp(mismatch q/kT), however large they are.
func (j *junctionAt) shape(s *network.Solver, x []float64) {
	slope := max(j.slope, leastSlope)
	if j.own >= 0 {
		slope *= math.Exp(x[j.own] / thermal)
	}
	s.SetDiode(j.branch, slope, math.Inf(1), 1)
}

// Slope resistances of junctions lie between these, in ohm: those of 25 mA and of
// 1 uA.
const leastSlope, greatestSlope = 1, 25e3

// slopes sets the slope resistance of every base-emitter junction to that of its
// current on the nominal board with the capacitor near the lower rail. It is kept for
// all boards: within one decade of current the straight line is off by some tens of
// millivolts, which the spread of the threshold covers.
func (c *charging) slopes(nominal []float64, lower network.Node) {
	m := c.mesh
	for range 8 {
		m.load(nominal)
		c.draw(0)
		c.seize(m.solver.Voltage(lower) + 1)
		for i := range m.junctions {
			j := &m.junctions[i]
			if !m.solver.Conducts(j.branch) {
				continue
			}
			volts := m.solver.Voltage(j.a) - m.solver.Voltage(j.c) - m.solver.Values[j.branch]
			amperes := volts / max(j.slope, leastSlope)
			j.slope = min(max(thermal/max(amperes, 1e-12), leastSlope), greatestSlope)
		}
	}
	c.held = math.NaN()
}

// gain adds the current gain: the card's bf - from half to twice of it where no
// ends are given - else assumed.
func (b *bench) gain(e *circuit.Element) int {
	v, ok := cardSpread(e, "bf")
	if ok && !v.IsExact() {
		return b.add(trait{name: "gain of " + e.Designator}, v)
	}
	why := "assumed"
	if ok && v.Nominal > 0 {
		v, why = quantity.Spread{Low: v.Nominal / 2, Nominal: v.Nominal, High: 2 * v.Nominal}, "half to twice the card's, assumed"
	} else {
		v = assumedGain
	}
	return b.assumed("gain of "+e.Designator, "", v, why)
}

// exactGain adds the gain of a transistor run backwards.
func (b *bench) exactGain(e *circuit.Element) int {
	return b.add(trait{name: "reverse gain of " + e.Designator}, quantity.Exact(reverseGain))
}

// cardSpread returns a figure of a card of SPICE's own types: name_min and name_max,
// or name alone.
func cardSpread(e *circuit.Element, name string) (quantity.Spread, bool) {
	if e.Ratings == nil {
		return quantity.Spread{}, false
	}
	get := func(key string) (float64, bool) {
		f, ok := e.Ratings.Figures[key]
		return f.Typ, ok && f.HasTyp
	}
	typical, ok := get(name)
	low, hasLow := get(name + "_min")
	high, hasHigh := get(name + "_max")
	if !ok && !(hasLow && hasHigh) {
		return quantity.Spread{}, false
	}
	s := quantity.Spread{Low: typical, Nominal: typical, High: typical}
	if hasLow && hasHigh {
		s.Low, s.High = min(low, high), max(low, high)
		if !ok {
			s.Nominal = (low + high) / 2
		}
	}
	return s, true
}
