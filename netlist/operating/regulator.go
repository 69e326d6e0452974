package operating

import (
	"fmt"
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/network"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
)

// regulator adds a two-terminal current source: an ideal source that a diode
// bypasses backwards, behind a resistance. Below its least voltage the whole is that
// resistance, above it the current.
func (m *mesh) regulator(e *circuit.Element) error {
	wired, ok := stage.RegulatorOf(m.bench.w, e)
	if !ok {
		return fmt.Errorf("how %s is wired as a current source is not understood", e.Designator)
	}
	r, err := m.bench.law(e, &wired)
	if err != nil {
		return err
	}
	from, to, middle := m.node(wired.High), m.node(wired.Low), m.net.Node()
	r.element, r.high, r.low = e, from, to
	drop := m.net.Resistor(from, middle)
	source := m.net.Current(middle, to)
	bypass := m.net.Diode(to, middle)
	none := slot{index: -1, tempco: -1}
	m.branches = append(m.branches,
		meshBranch{branch: drop, slot: none, zener: -1,
			set: func(x []float64) float64 { return r.least(x) / r.amperes(x) }},
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
func (b *bench) law(e *circuit.Element, wired *stage.Regulator) (*regulated, error) {
	ohms, err := b.setting(wired.Set, wired.Foot)
	if err != nil {
		return nil, err
	}
	if e.Kind == circuit.NJF || e.Kind == circuit.PJF {
		return b.fieldEffect(e, ohms)
	}
	if e.Ratings == nil {
		return nil, fmt.Errorf("nothing is known of the part %s", partName(e))
	}
	r := &regulated{element: e, greatest: math.Inf(1), upTo: math.Inf(1)}
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
	if wired.Diode != nil {
		return r, b.withoutDrift(r, wired, ohms)
	}
	return r, b.perKelvin(r, e, ohms)
}

// leastSetting is the least resistance in ohm that sets a current: no more than a wire.
const leastSetting = 1e-3

// setting returns the resistance of the network that sets a current, nil for none.
// One end of it is the low end of the source, the other hangs on its third terminal.
func (b *bench) setting(set []*circuit.Element, low circuit.NodeID) (func(x []float64) float64, error) {
	if len(set) == 0 {
		return nil, nil
	}
	if len(set) == 1 {
		s := b.element(set[0])
		return func(x []float64) float64 { return max(b.value(s, x), leastSetting) }, nil
	}
	m := &mesh{bench: b, nodes: map[circuit.NodeID]network.Node{b.w.Net(low): 0},
		have: map[*circuit.Element]bool{}}
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
		return max(rise[at], leastSetting)
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
//	I = ratio v_per_k T/R_set, T in kelvin
//
// (LM134/234/334 data sheet, TI SNVS746E: 214 uV/K across the resistor, the whole
// n/(n - 1) times its current).
func (b *bench) perKelvin(r *regulated, e *circuit.Element, ohms func(x []float64) float64) error {
	volts, err := b.sense(r, e)
	if err != nil {
		return err
	}
	r.amperes = func(x []float64) float64 { return volts(x) / ohms(x) }
	b.setError(r, e)
	return nil
}

// withoutDrift gives a regulator the law of a current from which a diode takes the drift:
//
//	I = ratio (V_R/R_set + (V_R + V_D)/R_bypass), V_R = v_per_k T
//
// (LM134/234/334 data sheet, TI SNVS746E: zero temperature coefficient current source).
func (b *bench) withoutDrift(r *regulated, wired *stage.Regulator, ohms func(x []float64) float64) error {
	e := r.element
	volts, err := b.sense(r, e)
	if err != nil {
		return err
	}
	ratio, drop, bypass, least := b.ratio(e), b.drop(wired.Diode), b.element(wired.Bypass), r.least
	across := func(x []float64) float64 { return x[drop] + diodeDrift*(x[b.ambient]-25) }
	r.amperes = func(x []float64) float64 {
		v := volts(x)
		return v/ohms(x) + (v+ratio*across(x))/b.value(bypass, x)
	}
	r.least = func(x []float64) float64 { return least(x) + across(x) }
	b.setError(r, e)
	return nil
}

// ratio returns the whole current of a regulator over that of its setting resistor.
func (b *bench) ratio(e *circuit.Element) float64 {
	if v, ok := e.Ratings.Test("ratio"); ok {
		return v
	}
	return 1
}

// sense returns the voltage across the setting resistor of a regulator, times its ratio, and
// notes between which currents it works.
func (b *bench) sense(r *regulated, e *circuit.Element) (volts func(x []float64) float64, err error) {
	slope, ok := b.named(e, "v_per_k", "V/K")
	if !ok {
		return nil, fmt.Errorf("how a resistor sets the current of %s is unknown", partName(e))
	}
	if v, _, ok := e.Ratings.Limit("i_min"); ok {
		r.from = v
	}
	if v, _, ok := e.Ratings.Limit("i_max"); ok {
		r.upTo = v
	}
	r.slope = slope
	ratio := b.ratio(e)
	return func(x []float64) float64 { return x[slope] * (x[b.ambient] + 273.15) * ratio }, nil
}

// setError gives the sensing voltage the error of the sheet for the range in which the
// nominal current lies.
func (b *bench) setError(r *regulated, e *circuit.Element) {
	typical := b.box[r.slope].Nominal
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
			b.box[r.slope].Low, b.box[r.slope].High = typical*(1-share), typical*(1+share)
		}
	}
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
