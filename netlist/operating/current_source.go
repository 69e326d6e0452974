package operating

import (
	"fmt"
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/network"
	"standoff/netlist/part"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
)

// regulated is a current source of the board at work in a mesh: what stands across
// it and what it needs to keep its current.
type regulated struct {
	element    *circuit.Element
	high, low  network.Node              // the voltage across counts from high to low
	least      func(x []float64) float64 // the voltage below which it leaves its range
	greatest   float64                   // its rating, +Inf for none
	amperes    func(x []float64) float64 // nil for a transistor: the network sets it
	from, upTo float64                   // the range of currents it can be set to; 0, +Inf for none
	mark       part.Mark
	assumed    bool // the least voltage is assumed
}

// What stands in for the figures of transistors (common practice, no source).
var (
	// assumedBaseEmitter is the base-emitter voltage of a silicon transistor at 25 deg C
	// from tens of microamperes to tens of milliamperes.
	assumedBaseEmitter = quantity.Spread{Low: 0.55, Nominal: 0.65, High: 0.75}
	// assumedGain is the current gain of a small-signal transistor.
	assumedGain = quantity.Spread{Low: 40, Nominal: 150, High: 500}
)

// saturation is the collector-emitter voltage in volt down to which a transistor is
// taken for a current source (common practice, no source).
const saturation = 0.3

// saturated is the collector-emitter voltage in volt below which a transistor surely is
// no current source any more.
const saturated = 0.1

// reverseGain is the current gain of a transistor run backwards, emitter and
// collector swapped (common practice, no source).
const reverseGain = 1

// activeParts lists the transistors and regulators that a stage counts as its own,
// those that could pull its capacitor down, and
// those that read its ramp.
func activeParts(s *stage.Stage) []*circuit.Element {
	var list []*circuit.Element
	for _, e := range s.Parts[stage.CurrentSource] {
		if isActive(e.Kind) {
			list = append(list, e)
		}
	}
	return append(append(list, s.Clamps...), s.Taps...)
}

func isActive(k circuit.Kind) bool {
	switch k {
	case circuit.NPN, circuit.PNP, circuit.NJF, circuit.PJF, circuit.SourceIC:
		return true
	}
	return false
}

// ends lists the nets on which an active part meets the rest: of a regulator that a
// resistor sets, not the net between the two.
func (b *bench) ends(e *circuit.Element) []circuit.NodeID {
	if e.Kind == circuit.NPN || e.Kind == circuit.PNP {
		return e.Nodes
	}
	high, low, _, ok := stage.RegulatorEnds(b.w, e)
	if !ok {
		return nil
	}
	return []circuit.NodeID{high, low}
}

// touches reports whether an active part hangs on a net of the area that no source
// fixes; within, whether all of its nets are in it.
func (b *bench) touches(e *circuit.Element, area *circuit.Area) bool {
	for _, n := range b.ends(e) {
		if area.HasNet(b.w, n) && !b.w.IsFixed(n) {
			return true
		}
	}
	return false
}

func (b *bench) within(e *circuit.Element, area *circuit.Area) bool {
	for _, n := range b.ends(e) {
		if !area.HasNet(b.w, n) {
			return false
		}
	}
	return true
}

// inside reports whether a resistor belongs to a regulator whose current it sets: the
// regulator's law counts it.
func (b *bench) inside(e *circuit.Element) bool {
	if e.Kind != circuit.Resistor {
		return false
	}
	for _, a := range b.active {
		if a.Kind == circuit.NPN || a.Kind == circuit.PNP {
			continue
		}
		if _, _, set, ok := stage.RegulatorEnds(b.w, a); ok && contains(set, e) {
			return true
		}
	}
	return false
}

// active adds a transistor or a regulator to the mesh.
func (m *mesh) active(e *circuit.Element) error {
	if m.have[e] {
		return nil
	}
	m.have[e], m.bends = true, true
	for _, n := range m.bench.ends(e) {
		if err := m.take(n); err != nil {
			return err
		}
	}
	if e.Kind == circuit.NPN || e.Kind == circuit.PNP {
		return m.transistor(e)
	}
	return m.regulator(e)
}

// transistor adds a bipolar transistor: two piecewise-linear junctions, of whose
// currents the gains' shares flow on to the far side (Ebers and Moll's transistor,
// straight in pieces). Early's effect is left out.
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
	m.junctions = append(m.junctions, junctionAt{forward.branch, nb, ne})
	if e.Kind == circuit.PNP {
		m.junctions[len(m.junctions)-1] = junctionAt{forward.branch, ne, nb}
	}
	back := m.junction(e, v, [3]network.Node{nb, nc, ne})
	back.gain = m.bench.exactGain(e)
	m.branches = append(m.branches, forward, back)
	high, low := nc, ne
	if e.Kind == circuit.PNP {
		high, low = ne, nc
	}
	m.sources = append(m.sources, &regulated{element: e, high: high, low: low, greatest: math.Inf(1), upTo: math.Inf(1), assumed: true,
		least: func([]float64) float64 { return saturation }})
	return nil
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

// junctionVolts returns the threshold of a transistor's junction: the base-emitter
// voltage of its type with its drift, and what the single transistor differs by where
// others of the type stand beside it. The slope resistance at the working point takes
// kT/q of it.
func (b *bench) junctionVolts(e *circuit.Element) func(x []float64) float64 {
	kind, own := b.baseEmitter(e), -1
	for _, other := range b.active {
		if other != e && other.Kind == e.Kind && other.PartName == e.PartName {
			own = b.assumed("mismatch of "+e.Designator, "V", mismatch, "assumed")
			break
		}
	}
	return func(x []float64) float64 {
		v := x[kind] + diodeDrift*(x[b.ambient]-25) - thermal
		if own >= 0 {
			v += x[own]
		}
		return v
	}
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

// junctionAt is a base-emitter junction in the solver: anode and cathode.
type junctionAt struct {
	branch network.Branch
	a, c   network.Node
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
		for _, j := range m.junctions {
			if !m.solver.Conducts(j.branch) {
				continue
			}
			slope := m.solver.Slope(j.branch)
			amperes := (m.solver.Voltage(j.a) - m.solver.Voltage(j.c) - m.solver.Values[j.branch]) / slope
			m.solver.SetDiode(j.branch, min(max(thermal/max(amperes, 1e-12), leastSlope), greatestSlope), math.Inf(1), 1)
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

// regulator adds a two-terminal current source: an ideal source that a diode
// bypasses backwards, behind a resistance. Below its least voltage the whole is that
// resistance, above it the current.
func (m *mesh) regulator(e *circuit.Element) error {
	high, low, set, ok := stage.RegulatorEnds(m.bench.w, e)
	if !ok {
		return fmt.Errorf("how %s is wired as a current source is not understood", e.Designator)
	}
	r, err := m.bench.law(e, set, low)
	if err != nil {
		return err
	}
	from, to, middle := m.node(high), m.node(low), m.net.Node()
	r.element, r.high, r.low = e, from, to
	drop := m.net.Resistor(from, middle)
	source := m.net.Current(middle, to)
	bypass := m.net.Diode(to, middle)
	none := slot{index: -1, tempco: -1}
	m.branches = append(m.branches,
		meshBranch{branch: drop, slot: none, zener: -1, set: func(x []float64) float64 { return r.least(x) / r.amperes(x) }},
		meshBranch{branch: source, slot: none, zener: -1, set: r.amperes},
		meshBranch{branch: bypass, slot: none, zener: -1, set: func([]float64) float64 { return 0 }})
	m.shapes = append(m.shapes, shape{bypass, bypassSlope})
	m.sources = append(m.sources, r)
	return nil
}

// bypassSlope is the resistance in ohm of the diode that bypasses an ideal source
// backwards, small against any resistance of a current source.
const bypassSlope = 1e-2

// law returns the current of a regulator with what it needs to keep it.
func (b *bench) law(e *circuit.Element, set []*circuit.Element, low circuit.NodeID) (*regulated, error) {
	ohms, err := b.setting(set, low)
	if err != nil {
		return nil, err
	}
	if e.Kind == circuit.NJF || e.Kind == circuit.PJF {
		return b.fieldEffect(e, ohms)
	}
	if e.Ratings == nil {
		return nil, fmt.Errorf("nothing is known of the part %s", partName(e))
	}
	r := &regulated{greatest: math.Inf(1), upTo: math.Inf(1)}
	least := 1.0
	if v, _, ok := e.Ratings.Limit("v_min"); ok {
		least = v
	} else {
		r.assumed = true
	}
	r.least = func([]float64) float64 { return least }
	if v, mark, ok := e.Ratings.Limit("v_max"); ok {
		r.greatest, r.mark = v, mark
	}
	if ohms == nil {
		i, ok := b.named(e, "i", "A")
		if !ok {
			return nil, fmt.Errorf("the current of %s is unknown", partName(e))
		}
		r.amperes = func(x []float64) float64 { return x[i] }
		return r, nil
	}
	return r, b.perKelvin(r, e, ohms)
}

// setting returns the resistance of the network that sets a current, nil for none.
// One end of it is the low end of the source, the other hangs on its third terminal.
func (b *bench) setting(set []*circuit.Element, low circuit.NodeID) (func(x []float64) float64, error) {
	if len(set) == 0 {
		return nil, nil
	}
	if len(set) == 1 {
		s := b.element(set[0])
		return func(x []float64) float64 { return b.value(s, x) }, nil
	}
	m := &mesh{bench: b, nodes: map[circuit.NodeID]network.Node{b.w.Net(low): 0}, have: map[*circuit.Element]bool{}}
	for _, e := range set {
		for _, n := range e.Nodes {
			n = b.w.Net(n)
			if _, known := m.nodes[n]; !known {
				m.nodes[n] = m.net.Node()
			}
		}
		if err := m.element(e); err != nil {
			return nil, err
		}
	}
	far, ok := b.farEnd(set, low)
	if !ok {
		return nil, fmt.Errorf("the resistors that set its current are not understood")
	}
	if err := m.compile(); err != nil {
		return nil, err
	}
	rise, at := make([]float64, m.solver.Nodes()), m.nodes[far]
	return func(x []float64) float64 {
		m.load(x)
		m.solver.Solve()
		m.solver.Transfer(at, rise)
		return rise[at]
	}, nil
}

// farEnd returns the net of a setting network on which the regulator itself hangs.
func (b *bench) farEnd(set []*circuit.Element, low circuit.NodeID) (circuit.NodeID, bool) {
	for _, e := range set {
		for _, n := range e.Nodes {
			for _, p := range b.w.On(n) {
				if isActive(p.Element.Kind) && b.w.Net(n) != b.w.Net(low) {
					return b.w.Net(n), true
				}
			}
		}
	}
	return 0, false
}

// named adds a figure of an element's card under the element's own name.
func (b *bench) named(e *circuit.Element, symbol, unit string) (int, bool) {
	i, ok := b.rating(e.Ratings, symbol, unit)
	if ok {
		b.traits[i].name = symbol + " of " + e.Designator
	}
	return i, ok
}

// perKelvin gives a regulator the law of a current that a resistor sets:
//
//	I = v_per_k T ratio/R_set, T in kelvin
//
// (LM134/234/334 data sheet, TI SNVS746E: 214 uV/K across the resistor, the whole
// n/(n - 1) times its current). The error of v_per_k is that of the sheet for the
// range in which the nominal current lies.
func (b *bench) perKelvin(r *regulated, e *circuit.Element, ohms func(x []float64) float64) error {
	slope, ok := b.named(e, "v_per_k", "V/K")
	if !ok {
		return fmt.Errorf("how a resistor sets the current of %s is unknown", partName(e))
	}
	ratio := 1.0
	if v, ok := e.Ratings.Test("ratio"); ok {
		ratio = v
	}
	r.amperes = func(x []float64) float64 {
		return x[slope] * (x[b.ambient] + 273.15) * ratio / ohms(x)
	}
	typical := b.box[slope].Nominal
	nominal := r.amperes((&model{bench: b}).nominal())
	for _, class := range []struct {
		error, edge string
		beyond      func(edge float64) bool
	}{
		{"set_error_small", "i_small", func(edge float64) bool { return nominal < edge }},
		{"set_error_large", "i_large", func(edge float64) bool { return nominal > edge }},
	} {
		edge, ok := e.Ratings.Test(class.edge)
		if share, _, known := e.Ratings.Limit(class.error); ok && known && class.beyond(edge) {
			b.box[slope].Low, b.box[slope].High = typical*(1-share), typical*(1+share)
		}
	}
	if v, _, ok := e.Ratings.Limit("i_min"); ok {
		r.from = v
	}
	if v, _, ok := e.Ratings.Limit("i_max"); ok {
		r.upTo = v
	}
	return nil
}

// fieldEffect gives a junction field-effect transistor with its gate behind its own
// source resistor the current at which both agree:
//
//	I = I_DSS (1 - I R_S/V_P)^2
//
// (square law of the saturated channel; Bell, Solid State Pulse Circuits, ex. 9-4).
// Drain to gate needs V_P whatever the resistor. I_DSS is the card's idss, or beta
// vto^2. The drift of both is left out.
func (b *bench) fieldEffect(e *circuit.Element, ohms func(x []float64) float64) (*regulated, error) {
	pinch, ok := cardSpread(e, "vto")
	if !ok {
		return nil, fmt.Errorf("the pinch-off voltage of %s (vto) is unknown", partName(e))
	}
	if pinch.Low < 0 {
		pinch = quantity.Spread{Low: -pinch.High, Nominal: -pinch.Nominal, High: -pinch.Low}
	}
	full, ok := cardSpread(e, "idss")
	name, unit := "I_DSS", "A"
	square := !ok
	if square {
		if full, ok = cardSpread(e, "beta"); !ok {
			return nil, fmt.Errorf("the saturation current of %s (idss, or beta) is unknown", partName(e))
		}
		name, unit = "beta", "A/V^2"
	}
	if !(pinch.Low > 0) || !(full.Low > 0) {
		return nil, fmt.Errorf("the card of %s makes no sense", partName(e))
	}
	p := b.add(trait{name: "V_P of " + e.Designator, unit: "V"}, pinch)
	d := b.add(trait{name: name + " of " + e.Designator, unit: unit}, full)
	r := &regulated{greatest: math.Inf(1), upTo: math.Inf(1), least: func(x []float64) float64 { return x[p] }}
	r.amperes = func(x []float64) float64 {
		limit := x[d]
		if square {
			limit *= x[p] * x[p]
		}
		if ohms == nil {
			return limit
		}
		r := ohms(x)
		root := (math.Sqrt(x[p]*x[p]+4*limit*r*x[p]) - x[p]) / (2 * limit * r)
		return limit * root * root
	}
	return r, nil
}

// across returns the voltage across a source in the last solution.
func (m *mesh) across(r *regulated) float64 {
	return m.solver.Voltage(r.high) - m.solver.Voltage(r.low)
}
