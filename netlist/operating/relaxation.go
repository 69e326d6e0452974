package operating

import (
	"fmt"
	"math"
	"strings"

	"standoff/netlist/circuit"
	"standoff/netlist/network"
	"standoff/netlist/part"
	"standoff/netlist/stage"
)

// relaxation is what all oscillators have in common that fill a capacitor
// through a network and empty it into a device: UJT, PUT and breakover device
// each add how the device fires and what it asks for. A gate stage sees its
// driver as a relaxation, whatever the device.
type relaxation struct {
	model
	stage    *stage.Stage
	ratings  *part.Ratings
	standing *mesh // what charges, the device off
	charging *charging
	caps     *capacitorNet
	pulse    *mesh // what the discharge flows into
	spread   []float64
	mouth    network.Node   // the outlet in pulse
	spout    network.Branch // the pulse, where diodes stand in its way
	cycle    *cycle         // the result at the last evaluated point

	terminal string // where the device takes the charge in, in words
	leaks    bool   // the device leaks besides the capacitors
	falls    bool   // the capacitor charges below the lower rail
	// bentWindow says that the valley side of the window bends too.
	bentWindow bool
	// follows says that the valley may lie so near the peak that it follows it: some
	// variables count there only.
	follows bool

	source     *regulated // the current source on the capacitor, nil where none is
	room, most float64    // voltage across it at the peak and at the valley

	// What a gate stage wants to know of its driver.
	outlet       circuit.NodeID     // where the pulse comes out
	keepOff      []*circuit.Element // what the pulse does not flow through
	point        []float64          // the point that was evaluated last
	share        int                // variable of the on-resistance
	pulseFarads  float64            // least capacitor with which the maker specifies the pulse; 0 for any
	quietWorking func() string      // where the voltage before the pulse comes from
}

// cycle is one period at one point. Voltages V over the lower rail but for vth
// and the rails themselves, which count from the reference; currents A, times s.
type cycle struct {
	c                         float64 // timing capacitance
	vth, rth                  float64 // charging network at the peak, as the capacitor sees it
	lower, upper              float64 // rails
	vp, vv                    float64 // capacitor when the device fires, and when it stops
	atPeak, atValley          float64 // charging current
	ip, iv                    float64 // what the device asks for at the peak, and lets go below; NaN where unknown
	drop, on, r1, re          float64 // discharge path: constant drop, device, what hangs on the outlet, lead
	rise                      float64 // threshold of diodes behind the outlet
	charge, discharge, period float64
	ramp                      float64 // nonlinearity of the ramp
	leak                      float64
	fires                     bool
}

// newRelaxation starts a model.
func newRelaxation(w *circuit.Wiring, s *stage.Stage) relaxation {
	m := relaxation{stage: s, ratings: s.Anchor.Ratings, model: model{bench: newBench(w)}, share: -1}
	m.active = activeParts(s)
	return m
}

// newDriver builds the model of whatever fires a gate.
func newDriver(w *circuit.Wiring, s *stage.Stage) (*relaxation, error) {
	switch s.Kind {
	case stage.UJTOscillator:
		m, err := newUJT(w, s)
		if err != nil {
			return nil, err
		}
		return &m.relaxation, nil
	case stage.PUTOscillator:
		m, err := newPUT(w, s)
		if err != nil {
			return nil, err
		}
		return &m.relaxation, nil
	case stage.BreakoverOscillator:
		m, err := newBreakover(w, s)
		if err != nil {
			return nil, err
		}
		if m.line != nil || m.sign < 0 || m.blocked {
			return nil, fmt.Errorf("only positive pulses on a dc supply are worked out")
		}
		return &m.relaxation, nil
	}
	return nil, fmt.Errorf("a %s as a driver is not worked out", s.Kind)
}

// readyToCharge compiles the standing mesh with the capacitor's net as the place
// where current is drawn.
func (m *relaxation) readyToCharge(capacitor circuit.NodeID) error {
	m.charging = newCharging(m.standing, capacitor)
	if err := m.standing.compile(); err != nil {
		return err
	}
	m.charging.transfer = make([]float64, m.standing.solver.Nodes())
	if len(m.standing.junctions) > 0 {
		m.charging.slopes(m.nominal(), m.standing.node(m.stage.Nodes["lower"]))
	}
	for _, r := range m.standing.sources {
		if r.element == m.stage.Source {
			m.source, m.charging.watched = r, r
		}
	}
	return nil
}

// sourceAtBothEnds returns the charging current at the valley and notes what stands across a
// current source at both ends of the ramp; the network stands at the peak.
func (m *relaxation) sourceAtBothEnds(valley float64) (amperes float64) {
	m.room = m.charging.across
	amperes = m.charging.current(valley)
	m.most = m.charging.across
	return amperes
}

// capacitors readies the capacitor network at its net.
func (m *relaxation) capacitors(at circuit.NodeID) error {
	var err error
	m.caps, err = newCapacitorNet(m.bench, m.stage.Parts[stage.TimingCapacitor], at)
	return err
}

// readyToEmpty readies what the discharge flows into and the resistors in the
// lead of the device; outlet and keepOff are set.
func (m *relaxation) readyToEmpty() error {
	var err error
	m.pulse, err = newMesh(m.bench, []circuit.NodeID{m.outlet, m.stage.Nodes["lower"]}, func(e *circuit.Element) bool {
		return contains(m.keepOff, e)
	})
	if err != nil {
		return err
	}
	if m.pulse.bends {
		m.spout = m.pulse.net.Current(0, m.pulse.node(m.outlet))
	}
	if err := m.pulse.compile(); err != nil {
		return err
	}
	m.spread, m.mouth = make([]float64, m.pulse.solver.Nodes()), m.pulse.node(m.outlet)
	for _, e := range m.stage.Parts[stage.EmitterSeries] {
		m.element(e)
	}
	return nil
}

// outside works out the resistance of the discharge outside the device.
func (m *relaxation) outside(x []float64) {
	s := m.cycle
	m.pulse.load(x)
	m.pulse.solver.Solve()
	m.pulse.solver.Transfer(m.mouth, m.spread)
	s.r1 = m.spread[m.mouth]
	s.rise = 0
	if s.r1 > noPath && m.pulse.bends {
		m.throughDiodes()
	}
	if s.r1 > noPath {
		s.r1, s.rise = 0, 0 // the outlet hangs on a gate alone: the gate carries the pulse
	}
	s.re = 0
	for _, e := range m.stage.Parts[stage.EmitterSeries] {
		s.re += m.value(m.slots[e], x)
	}
}

// pulseAmperes is the current in ampere with which diodes in the way of the pulse are
// made to lead.
const pulseAmperes = 0.01

// throughDiodes works out resistance and threshold of what hangs on the outlet where
// only a pulse opens the way.
func (m *relaxation) throughDiodes() {
	s, solver := m.cycle, m.pulse.solver
	solver.Values[m.spout] = pulseAmperes
	solver.Solve()
	solver.Transfer(m.mouth, m.spread)
	s.r1 = m.spread[m.mouth]
	s.rise = solver.Voltage(m.mouth) - solver.Voltage(m.pulse.node(m.stage.Nodes["lower"])) - s.r1*pulseAmperes
	solver.Values[m.spout] = 0
}

// fill works out charge time, period and nonlinearity from the peak and valley
// of the cycle and its discharge time. A stage that never fires has an infinite
// period.
func (m *relaxation) fill() {
	s := m.cycle
	if !s.fires {
		s.charge, s.period, s.ramp = math.Inf(1), math.Inf(1), 1
		return
	}
	s.charge, s.ramp = m.charging.time(s)
	s.ramp = straight(s.ramp)
	s.period = s.charge + s.discharge
}

// bendsKink has everything looked around for variables that move it only far from
// the nominal board, where the charging network bends, and guided by the voltage
// across a current source: it hides what moves the charging current elsewhere.
func (m *relaxation) bendsKink() {
	if !m.charging.bends {
		return
	}
	m.grain = 1e-7 // an ideal source has 1 Tohm here
	if m.source != nil {
		m.scatter = scattered
	}
	turns := m.source != nil // more current leaves less room for it: the best lies between
	for _, r := range m.standing.sources {
		m.turnsInside(r)
	}
	for i := range m.outputs {
		o := &m.outputs[i]
		o.bent = o.bent || turns
		o.kinked, o.guide = true, o.guide || o.name == "current_source_voltage"
		o.guided = o.guided || !o.guide
	}
	for i := range m.contests {
		c := &m.contests[i]
		c.bent = c.bent || turns
		c.kinked, c.guided = true, true
	}
}

// turnsInside has what sets a current source looked at between its ends.
func (m *relaxation) turnsInside(r *regulated) {
	if m.source == nil {
		return
	}
	for i := range m.traits {
		if strings.HasSuffix(m.traits[i].name, " of "+r.element.Designator) {
			m.box[i].Bends = true
		}
	}
	for _, role := range [...]stage.Role{stage.CurrentSource, stage.TimingResistor} {
		for _, e := range m.stage.Parts[role] {
			if s, known := m.slots[e]; known {
				m.box[s.index].Bends = true
			}
			for i := range m.traits {
				if m.traits[i].name == "bv of "+e.Designator {
					m.box[i].Bends = true
				}
			}
		}
	}
}

// scattered is how many corners of a stage with a current source are tried besides:
// it saturates on some boards, and what is worst lies beyond.
const scattered = 256

// straight takes a departure of less than a millionth for none: it is below what the
// arithmetic resolves.
func straight(departure float64) float64 {
	if departure < 1e-6 {
		return 0
	}
	return departure
}

func (m *relaxation) frequency() float64 { return 1 / m.cycle.period }
