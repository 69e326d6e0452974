package operating

import (
	"fmt"
	"math"

	"standoff/netlist/circuit"
)

// lineFeed is a charging network whose sources swing.
type lineFeed struct {
	hertz      float64
	plus, less []float64 // values of the branches at the two crests
	*ride
}

// newLineFeed returns what feeds a mesh from a line, nil where nothing does.
func newLineFeed(m *mesh) (*lineFeed, error) {
	if len(m.sines) == 0 {
		return nil, nil
	}
	f := &lineFeed{}
	for _, e := range m.sines {
		args := e.Wave.Args
		if len(args) < 3 || args[2] <= 0 {
			return nil, fmt.Errorf("the frequency of %s is not known", e.Designator)
		}
		if f.hertz != 0 && f.hertz != args[2] {
			return nil, fmt.Errorf("it is fed by sources of different frequencies")
		}
		if len(args) > 4 && args[4] != 0 || len(m.sines) > 1 && len(args) > 3 && phased(args[3:]) {
			return nil, fmt.Errorf("%s is damped or shifted in time, which is not worked out", e.Designator)
		}
		f.hertz = args[2]
	}
	if len(m.sources) > 0 || m.amplifies() {
		return nil, fmt.Errorf("a current source that the line feeds is not worked out")
	}
	return f, nil
}

// phased reports whether delay or phase of a sine source is not zero.
func phased(rest []float64) bool {
	return rest[0] != 0 || len(rest) > 2 && rest[2] != 0
}

// amplifies reports whether a transistor stands in a mesh.
func (m *mesh) amplifies() bool {
	for i := range m.branches {
		if m.branches[i].gain > 0 {
			return true
		}
	}
	return false
}

// smoothing returns a capacitor in the charging network that is not the timing
// capacitor, nil where there is none.
func (m *mesh) smoothing(own []*circuit.Element) *circuit.Element {
	w := m.bench.w
	for _, e := range w.Circuit.Elements {
		if e.Kind != circuit.Capacitor || contains(own, e) {
			continue
		}
		for _, n := range e.Nodes {
			if _, inside := m.nodes[w.Net(n)]; inside && !w.IsFixed(n) {
				return e
			}
		}
	}
	return nil
}

// crests loads the values of a point at both crests.
func (f *lineFeed) crests(m *mesh, x []float64) {
	m.polarity = -1
	m.load(x)
	f.less = append(f.less[:0], m.solver.Values...)
	m.polarity = 1
	m.load(x)
	f.plus = append(f.plus[:0], m.solver.Values...)
}

// instant sets the sources to a share of their swing, -1 .. 1.
func (f *lineFeed) instant(m *mesh, share float64) {
	for i := range m.branches {
		if m.branches[i].sine {
			b := m.branches[i].branch
			m.solver.Values[b] = (f.plus[b]+f.less[b])/2 + share*(f.plus[b]-f.less[b])/2
		}
	}
}

// response is the capacitor's voltage over the lower rail while the network stays
// straight: from a time on
//
//	v(t) = offset + crest/sqrt(1 + (w tau)^2) sin(w t - phi) + k e^(-(t - t0)/tau)
//
// with phi = atan(w tau) (linear first-order network on a sine; any textbook of
// circuit analysis).
type response struct {
	w, tau, offset, swing, phi float64
	from, volts, k             float64
}

// newResponse returns the response of a network of offset + crest sin(w t) behind a time
// constant that has a voltage at a time.
func newResponse(w, tau, offset, crest float64) response {
	r := response{w: w, tau: tau, offset: offset, phi: math.Atan(w * tau)}
	r.swing = crest * math.Cos(r.phi)
	return r
}

// starting returns the response that has a voltage at a time.
func (r response) starting(t, volts float64) response {
	r.from, r.volts = t, volts
	r.k = volts - r.steady(t)
	return r
}

func (r response) steady(t float64) float64 { return r.offset + r.swing*math.Sin(r.w*t-r.phi) }

func (r response) at(t float64) float64 {
	return r.volts + r.steady(t) - r.steady(r.from) + r.k*math.Expm1(-(t-r.from)/r.tau)
}

// cycleSteps is into how many steps a cycle is cut to bracket a crossing.
const cycleSteps = 96

// steps calls f at times from one to another in steps of a cycle's part and stops where it says so;
// it returns the two times between which that was.
func (r response) steps(from, to float64, f func(t float64) bool) (before, after float64, found bool) {
	count := max(1, math.Ceil((to-from)*r.w/(2*math.Pi)*cycleSteps))
	before = from
	for k := 1.0; k <= count; k++ {
		after = from + (to-from)*k/count
		if f(after) {
			return before, after, true
		}
		before = after
	}
	return 0, 0, false
}

// bisect narrows down when a condition sets in, to far less than a microsecond.
func bisect(before, after float64, f func(t float64) bool) float64 {
	for range 26 {
		middle := before/2 + after/2
		if f(middle) {
			after = middle
		} else {
			before = middle
		}
	}
	return after
}

// root narrows down when the response passes a voltage upwards between two times (regula
// falsi, Illinois).
func (r *response) root(volts, before, after float64) float64 {
	below, above := r.at(before)-volts, r.at(after)-volts
	for range 40 {
		if after-before <= 1e-12*after || above <= 1e-10*volts {
			break
		}
		middle := after - above*(after-before)/(above-below)
		if !(middle > before && middle < after) {
			break
		}
		if miss := r.at(middle) - volts; miss >= 0 {
			after, above = middle, miss
			below /= 2
		} else {
			before, below = middle, miss
			above /= 2
		}
	}
	return after
}
