package operating

import (
	"fmt"
	"math"
)

// lineFeed is a charging network whose sources swing: the voltage behind its
// resistance is offset + crest sin(2 pi f t). Exact for a linear network; rectifiers
// in it are not worked out.
type lineFeed struct {
	hertz         float64
	offset, crest float64 // V over the lower rail
	ohms          float64
}

// newLineFeed returns what feeds a mesh from a line, nil where nothing does.
func newLineFeed(m *mesh) (*lineFeed, error) {
	if len(m.sines) == 0 {
		return nil, nil
	}
	f := &lineFeed{}
	for _, e := range m.sines {
		if len(e.Wave.Args) < 3 || e.Wave.Args[2] <= 0 {
			return nil, fmt.Errorf("the frequency of %s is not known", e.Designator)
		}
		if f.hertz != 0 && f.hertz != e.Wave.Args[2] {
			return nil, fmt.Errorf("it is fed by sources of different frequencies")
		}
		f.hertz = e.Wave.Args[2]
	}
	if m.bends {
		return nil, fmt.Errorf("it is fed from the line through a rectifier, which is not worked out")
	}
	return f, nil
}

// response is the capacitor's voltage over the lower rail while it charges:
//
//	v(t) = offset + crest/sqrt(1 + (w tau)^2) sin(w t - phi) + k e^(-t/tau)
//
// with phi = atan(w tau) (linear first-order network on a sine; any textbook of
// circuit analysis).
type response struct {
	w, tau, offset, swing, phi, k float64
}

// from returns the response that has a voltage at a time.
func (f *lineFeed) from(t, volts, farads float64) response {
	r := response{w: 2 * math.Pi * f.hertz, tau: f.ohms * farads, offset: f.offset}
	r.phi = math.Atan(r.w * r.tau)
	r.swing = f.crest * math.Cos(r.phi)
	r.k = (volts - r.offset - r.swing*math.Sin(r.w*t-r.phi)) * math.Exp(t/r.tau)
	return r
}

func (r response) at(t float64) float64 {
	return r.offset + r.swing*math.Sin(r.w*t-r.phi) + r.k*math.Exp(-t/r.tau)
}

// responseSteps is into how many steps a half cycle is cut to bracket a crossing.
const responseSteps = 64

// reaches returns when the response passes a voltage upwards between two times.
func (r response) reaches(volts, from, to float64) (float64, bool) {
	step := (to - from) / responseSteps
	for k := 1; k <= responseSteps; k++ {
		low, high := from+float64(k-1)*step, from+float64(k)*step
		if r.at(high) < volts {
			continue
		}
		for range 50 {
			middle := low/2 + high/2
			if r.at(middle) < volts {
				low = middle
			} else {
				high = middle
			}
		}
		return high, true
	}
	return 0, false
}

// highest returns the highest voltage between two times, on a grid.
func (r response) highest(from, to float64) float64 {
	most := math.Inf(-1)
	for k := 0; k <= responseSteps; k++ {
		most = max(most, r.at(from+(to-from)*float64(k)/responseSteps))
	}
	return most
}

// maxPulses bounds the breakovers that are counted in a half cycle; more are told as
// infinitely many.
const maxPulses = 30

// alternating works out a half cycle of the line from an empty capacitor at the
// zero crossing.
func (m *breakoverModel) alternating(x []float64) {
	s, f := &m.s, m.line
	plus, ohms := m.charging.thevenin()
	m.standing.polarity = -1
	m.standing.load(x)
	m.charging.draw(0)
	minus, _ := m.charging.thevenin()
	f.offset, f.crest, f.ohms = (plus+minus)/2-s.lower, (plus-minus)/2, ohms
	sign := 1.0
	if f.crest < 0 {
		sign = -1 // the capacitor charges in the other half first: the same by symmetry
	}
	g := lineFeed{hertz: f.hertz, offset: sign * f.offset, crest: sign * f.crest, ohms: ohms}
	s.rth, s.vth = ohms, g.offset+g.crest+s.lower
	steady := g.from(0, 0, s.c)
	s.reach = g.offset + steady.swing
	half := 0.5 / f.hertz
	s.pulses, s.first = 0, math.Inf(1)
	t, volts := 0.0, 0.0
	for s.pulses < maxPulses {
		ramp := g.from(t, volts, s.c)
		at, ok := ramp.reaches(s.vp, t, half)
		if !ok {
			s.pulses += max(ramp.highest(t, half)-volts, 0) / (s.vp - volts)
			break
		}
		if s.pulses == 0 {
			s.first = at
		}
		s.pulses++
		t, volts = at+s.discharge, s.vv
	}
	if s.pulses >= maxPulses {
		s.pulses = math.Inf(1)
	}
	s.fires = !math.IsInf(s.first, 1)
	s.charge, s.ramp, s.period = math.Inf(1), 1, math.Inf(1)
	if s.fires {
		s.charge, s.period, s.ramp = s.first, half, 0
	}
}
