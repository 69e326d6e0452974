package operating

import "math"

// ride follows a capacitor on the line through the straight pieces of its charging
// network: within a piece the voltage is a response in closed form, and a piece ends
// where a diode changes its state. Exact for the piecewise-linear network but for the
// time of a change, which is met within 2 ns.
type ride struct {
	feed                  *lineFeed
	charging              *charging
	lower, farads         float64
	bleed                 float64 // siemens across the capacitor: what leaks, as a conductance
	sign, turn            float64 // direction of the charge; which crest comes first
	here, driven, swung   []float64
	level, byVolts, bySin []float64 // room of each diode: level + byVolts v + bySin sin(w t)
}

// instantly is the share of a cycle by which a change of state is passed.
const instantly = 1e-7

func (r *ride) omega() float64 { return 2 * math.Pi * r.feed.hertz }
func (r *ride) cycle() float64 { return 1 / r.feed.hertz }
func (r *ride) over() float64 {
	return r.sign * (r.charging.mesh.solver.Voltage(r.charging.node) - r.lower)
}
func (r *ride) idle() float64   { v, _ := r.charging.thevenin(); return r.sign * (v - r.lower) }
func (r *ride) set(sin float64) { r.feed.instant(r.charging.mesh, r.turn*sin) }

// piece returns the response from a time and voltage on, and readies the room that
// its diodes have.
func (r *ride) piece(t, volts float64) response {
	c, sin := r.charging, math.Sin(r.omega()*t)
	solver := c.mesh.solver
	r.set(sin)
	c.held = math.NaN()
	if !c.bends {
		c.draw(0)
	} else {
		c.seize(r.lower + r.sign*volts)
	}
	first, ohms := r.idle(), c.transfer[c.node]
	if c.bends {
		r.here = solver.Headroom(r.here[:0])
		at := r.over()
		probe := solver.Values[c.probe]
		solver.Values[c.probe] += r.sign / ohms
		solver.SolveHeld()
		r.driven = solver.Headroom(r.driven[:0])
		down := r.over() - at
		solver.Values[c.probe] = probe
		r.set(sin + 1)
		solver.SolveHeld()
		r.swung = solver.Headroom(r.swung[:0])
		r.room(at, sin, down, r.over()-at)
	} else {
		r.set(sin + 1)
		c.draw(0)
	}
	crest := r.idle() - first
	c.held = math.NaN()
	share := 1 / (1 + r.bleed*ohms)
	return newResponse(r.omega(), share*ohms*r.farads, share*(first-crest*sin), share*crest).starting(t, volts)
}

// room works out how the room of every diode goes with the capacitor's voltage and the
// sources, from three solutions.
func (r *ride) room(volts, sin, down, rise float64) {
	r.level, r.byVolts, r.bySin = r.level[:0], r.byVolts[:0], r.bySin[:0]
	for i, here := range r.here {
		b, s := 0.0, 0.0
		if !math.IsInf(here, 0) {
			b = (r.driven[i] - here) / down
			s = r.swung[i] - here - b*rise
		}
		r.byVolts, r.bySin = append(r.byVolts, b), append(r.bySin, s)
		r.level = append(r.level, here-b*volts-s*sin)
	}
}

// left reports whether a diode has left its segment at a time.
func (r *ride) left(p *response, t float64) bool {
	v, sin := p.at(t), math.Sin(r.omega()*t)
	for i, level := range r.level {
		if level+r.byVolts[i]*v+r.bySin[i]*sin < 0 {
			return true
		}
	}
	return false
}

// stretch returns the response from a time on and until when it holds.
func (r *ride) stretch(t, volts, until float64) (response, float64) {
	p := r.piece(t, volts)
	if !r.charging.bends {
		return p, until
	}
	tiny := instantly * r.cycle()
	left := func(t float64) bool { return r.left(&p, t) }
	if left(t + tiny) {
		return p, min(t+tiny, until)
	}
	before, after, found := p.steps(t+tiny, until, left)
	if !found {
		return p, until
	}
	return p, min(bisect(before, after, left)+tiny, until)
}

// maxStretches bounds the pieces of one cycle.
const maxStretches = 200

// across goes from one time to another and returns the voltage there, the highest and the
// lowest on the way, and when a voltage was passed upwards first: the ride ends there.
func (r *ride) across(t, volts, until, stop float64) trip {
	tr := trip{volts: volts, most: volts, least: volts, at: until}
	for n := 0; t < until; n++ {
		p, end := r.stretch(t, volts, until)
		if n >= maxStretches {
			end = until
		}
		before, after, found := p.steps(t, end, func(t float64) bool {
			v := p.at(t)
			tr.most, tr.least = max(tr.most, v), min(tr.least, v)
			return v >= stop
		})
		if found {
			tr.at, tr.volts, tr.stopped, tr.most = p.root(stop, before, after), stop, true, stop
			return tr
		}
		t, volts = end, p.at(end)
	}
	tr.volts = volts
	return tr
}

// trip is what across found.
type trip struct {
	volts, most, least float64
	at                 float64
	stopped            bool
}

// whole returns a whole cycle from a voltage at the zero crossing.
func (r *ride) whole(volts float64) trip { return r.across(0, volts, r.cycle(), math.Inf(1)) }

// settled returns the cycle in which the voltage repeats while nothing breaks over: the voltage at
// the zero crossing is found by halving, since a higher start always ends higher.
func (r *ride) settled() trip {
	if !r.charging.bends {
		p := r.piece(0, 0)
		return trip{most: p.offset + math.Abs(p.swing), least: p.offset - math.Abs(p.swing)}
	}
	low, high := r.bounds()
	for range settling {
		middle := low/2 + high/2
		if r.whole(middle).volts > middle {
			low = middle
		} else {
			high = middle
		}
	}
	return r.whole(low)
}

// settling is how often the way to the settled voltage is halved: to 0.01 % of it.
const settling = 14

// bounds returns between which voltages the network can bring the capacitor at all.
func (r *ride) bounds() (low, high float64) {
	low, high = 0, 0
	for _, sin := range [...]float64{-1, 0, 1} {
		r.set(sin)
		r.charging.draw(0)
		low, high = min(low, r.over()), max(high, r.over())
	}
	return low, high
}

// nodes is how many voltages the gain of a cycle is worked out at.
const nodes = 9

// gains is how a whole cycle raises the capacitor, for any voltage at its beginning in a range, by
// polynomials through Chebyshev points.
type gains struct {
	at, gain, crest, weight [nodes]float64
	ready                   bool
}

func (g *gains) work(r *ride, low, high float64) {
	for k := range nodes {
		angle := math.Pi * (float64(k) + 0.5) / nodes
		g.at[k] = (low+high)/2 + (high-low)/2*math.Cos(angle)
		g.weight[k] = math.Sin(angle) * float64(1-2*(k%2))
		tr := r.whole(g.at[k])
		g.gain[k], g.crest[k] = tr.volts-g.at[k], tr.most-g.at[k]
	}
	g.ready = true
}

// from returns gain and crest over the start for a voltage (barycentric formula).
func (g *gains) from(volts float64) (gain, crest float64) {
	sum := 0.0
	for k := range nodes {
		d := volts - g.at[k]
		if d == 0 {
			return g.gain[k], g.crest[k]
		}
		w := g.weight[k] / d
		sum, gain, crest = sum+w, gain+w*g.gain[k], crest+w*g.crest[k]
	}
	return gain / sum, crest / sum
}

// directCycles are followed one by one before whole cycles are taken from a polynomial;
// fineness is the greatest share of the way that is taken at once then.
const (
	directCycles = 8
	fineness     = 1e-4
	longest      = 100000
	maxRounds    = 20
)

// climb returns when the capacitor reaches a voltage from another, +Inf where it does
// not.
func (r *ride) climb(t, volts, goal float64, g *gains) float64 {
	cycle := r.cycle()
	shift := math.Floor(t/cycle) * cycle
	if !r.charging.bends {
		if p := r.piece(t, volts); p.offset+math.Abs(p.swing)+max(p.k, 0) < goal {
			return math.Inf(1)
		}
	}
	tr := r.across(t-shift, volts, cycle, goal)
	rounds := 0
	for n := 0; !tr.stopped; n++ {
		shift += cycle
		if n >= directCycles {
			if !r.charging.bends {
				return math.Inf(1) // it repeats
			}
			if !g.ready {
				g.work(r, min(0, volts), goal)
			}
			ahead, ok := r.skip(&tr.volts, goal, g)
			if rounds++; !ok || rounds > maxRounds {
				return math.Inf(1)
			}
			shift, n = shift+ahead*cycle, 0
		}
		tr = r.across(0, tr.volts, cycle, goal)
	}
	return shift + tr.at
}

// skip takes whole cycles at once until the next may reach the goal.
func (r *ride) skip(volts *float64, goal float64, g *gains) (cycles float64, ok bool) {
	step := fineness * (goal - *volts)
	for range longest {
		gain, crest := g.from(*volts)
		if *volts+1.02*crest >= goal {
			return cycles, true
		}
		if gain <= 1e-12*goal {
			return cycles, false
		}
		count := max(1, math.Floor(step/gain))
		*volts, cycles = *volts+count*gain, cycles+count
	}
	return cycles, false
}
