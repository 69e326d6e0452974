package operating

import (
	"fmt"
	"math"
	"slices"

	"standoff/netlist/stage"
)

// maxPulses bounds the breakovers that are counted in a half cycle; more are told as
// infinitely many.
const maxPulses = 30

// onTheLine readies what follows the capacitor where the line feeds the stage; where it feeds a
// reservoir, the stage counts as one on dc.
func (m *breakoverModel) onTheLine() error {
	if m.line == nil {
		return nil
	}
	own := m.stage.Parts[stage.TimingCapacitor]
	reservoir := m.standing.smoothing(own)
	if reservoir == nil {
		m.line.ride = &ride{feed: m.line, charging: m.charging, sign: 1, turn: 1}
		return nil
	}
	second := m.standing.smoothing(append(slices.Clone(own), reservoir))
	if second != nil || !contains(m.stage.Parts[stage.Reservoir], reservoir) {
		return fmt.Errorf("%s stands in what the line charges it through, which is not worked out",
			reservoir.Designator)
	}
	var err error
	m.smooth, err = m.newSmoothFeed(reservoir)
	m.line = nil
	return err
}

// alternating works the stage out on the line: from an empty capacitor at the zero crossing
// that begins the half cycle which charges it.
func (m *breakoverModel) alternating(x []float64) {
	s, f := &m.s, m.line
	r := f.ride
	f.crests(m.standing, x)
	r.lower, r.farads, r.bleed, r.sign = s.lower, s.c, m.leaking(x)/s.vp, m.sign
	m.firstCrest()
	m.gains.ready = false
	m.paced, m.reached = false, false
	s.first, s.pulses, s.period = math.Inf(1), 0, math.Inf(1)
	s.charge, s.ramp = math.Inf(1), 1
	s.atPeak = m.deliverable()
	s.fires = s.atPeak > 0
}

// extent works out, when it is asked for, how high the capacitor gets while nothing breaks over,
// and how low.
func (m *breakoverModel) extent() *breakoverState {
	if m.line != nil && !m.reached {
		m.reached = true
		steady := m.line.ride.settled()
		m.s.reach, m.s.reverse = steady.most, max(-steady.least, 0)
	}
	return &m.s
}

// pace works out, when it is asked for, when the stage breaks over.
func (m *breakoverModel) pace() {
	if m.paced {
		return
	}
	m.paced = true
	s, r := &m.s, m.line.ride
	s.first = r.climb(0, 0, s.vp, &m.gains)
	m.count()
	if math.IsInf(s.first, 1) {
		return
	}
	s.charge, s.ramp, s.period = s.first, 0, 0.5/m.line.hertz
	if m.charging.bends {
		s.period = r.climb(0, s.vv, s.vp, &m.gains) + s.discharge
	}
}

// firstCrest finds which crest of the line charges the capacitor in its direction.
func (m *breakoverModel) firstCrest() {
	r, s := m.line.ride, &m.s
	r.turn = 1
	r.set(1)
	m.charging.draw(0)
	plus := r.idle()
	s.vth, s.rth = m.charging.thevenin()
	r.set(-1)
	m.charging.draw(0)
	if minus := r.idle(); minus > plus {
		r.turn = -1
		s.vth, s.rth = m.charging.thevenin()
	}
	if m.charging.bends { // as it is while its rectifiers lead
		r.piece(0.25/m.line.hertz, s.vv)
		s.rth = m.charging.transfer[m.charging.node]
	}
}

// count works out how many breakovers fall into the first half cycle, as if the device let go
// after each.
func (m *breakoverModel) count() {
	s, r := &m.s, m.line.ride
	half := 0.5 / m.line.hertz
	t, volts := 0.0, 0.0
	for s.pulses < maxPulses && t < half {
		tr := r.across(t, volts, half, s.vp)
		if !tr.stopped {
			s.pulses += max(tr.most-volts, 0) / (s.vp - volts)
			return
		}
		s.pulses++
		t, volts = tr.at+s.discharge, s.vv
	}
	if s.pulses >= maxPulses {
		s.pulses = math.Inf(1)
	}
}

// deliverable returns the greatest current that the network feeds into the capacitor at V_BO: at the
// crest, or where the capacitor, lagging behind, gets there later in the half cycle, then (at its own
// crest where it does not). A rectifier keeps the voltage for the next crest.
func (m *breakoverModel) deliverable() float64 {
	s, r := &m.s, m.line.ride
	angle := math.Pi / 2
	if !m.charging.bends {
		p := r.piece(0, 0)
		angle = max(angle, p.phi+math.Asin(min((s.vp-p.offset)/math.Abs(p.swing), 1)))
	}
	return s.c*r.slope(angle/r.omega(), s.vp) + r.bleed*s.vp
}

// slope returns how fast the capacitor's voltage rises at a time and voltage.
func (r *ride) slope(t, volts float64) float64 {
	p := r.piece(t, volts)
	return p.swing*p.w*math.Cos(p.w*t-p.phi) - p.k/p.tau
}

// lineDirection finds which way a line-fed capacitor charges: the way the device leads, if it
// leads one way only, else the way in which the nominal board gets farther.
func (m *breakoverModel) lineDirection(faces bool) {
	r, x := m.line.ride, m.nominal()
	if _, _, oneSided := m.ratings.Limit("vr"); oneSided {
		if !faces {
			m.sign = -1
		}
		return
	}
	if !m.charging.bends {
		return
	}
	m.evaluate(x)
	r.sign = 1
	if low, high := r.bounds(); -low > high {
		m.sign = -1
	}
}
