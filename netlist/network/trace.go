package network

import (
	"math"
	"slices"
)

// traceSteps bounds how many ends of segments are passed on the way to the solution,
// for each diode.
const traceSteps = 64

// traceStarts is from how many states a way is sought: of diodes that come to their
// ends together the way may miss one, and one that does not start at rest may lead
// back beyond its start.
const traceStarts = 16

// trace looks for the solution where moving all diodes at once goes round in a circle.
// It starts at rest, with all sources at nothing, and lets them rise together; at every
// end of a diode's segment only that diode moves, and the way goes on in the direction
// in which it gets into its new segment, be it with the sources falling again
// (Katzenelson's method, 1965, with turns; memory). Where that fails, the ways start from
// arbitrary potentials, which are the solution with the right currents injected
// into every node, and those currents are taken away.
func (s *Solver) trace() bool {
	full := slices.Clone(s.shift)
	defer func() {
		s.scale = 1
		copy(s.shift, full)
	}()
	for seed := range traceStarts {
		t := tracer{s: s, full: full, onwards: 1, last: -1,
			residue: make([]float64, s.rows), direction: make([]float64, s.rows)}
		t.start(seed)
		if t.arrives() {
			return true
		}
	}
	return false
}

// tracer is the state of a way to the solution.
type tracer struct {
	s         *Solver
	full      []float64 // offsets of the nodes with the sources at their values
	residue   []float64 // injected at the start
	direction []float64 // change of the solution on the way
	rising    float64   // share of the sources that rises on the way: all or nothing
	gone      float64   // how much of the way lies behind: 0 .. 1
	onwards   float64   // +1 forward, -1 back
	last      int       // the diode that moved last, -1 for none
	into      int8      // which way it moved
}

// start sets out from rest, or from potentials that no network has by design, with
// every diode on the segment that belongs to them.
func (t *tracer) start(seed int) {
	s := t.s
	if seed == 0 {
		t.rising = 1
		for i := range s.diodes {
			s.diodes[i].segment = 0
		}
		return
	}
	t.stand(1)
	for i := range s.solution {
		_, part := math.Modf(float64(i+1+seed*s.rows) * math.Phi)
		s.solution[i] = part - 0.5
	}
	for i := range s.diodes {
		d := &s.diodes[i]
		d.segment = d.asked(s.across(d), s.Values[d.branch])
	}
	s.assemble()
	for i := range t.residue {
		sum := -s.rhs[i]
		for j, v := range s.solution {
			sum += s.matrix[i*s.rows+j] * v
		}
		t.residue[i] = sum
	}
}

// stand has the sources at a share of their values.
func (t *tracer) stand(share float64) {
	t.s.scale = share
	for i, v := range t.full {
		t.s.shift[i] = v * share
	}
}

// arrives goes the way and reports whether it ends at the solution.
func (t *tracer) arrives() bool {
	for range 64 + traceSteps*len(t.s.diodes) {
		if !t.aim() {
			return false
		}
		at, step := t.next()
		if t.onwards > 0 && (at < 0 || t.gone+step >= 1) {
			t.stand(1)
			t.s.held()
			return true
		}
		if at < 0 {
			return false
		}
		t.pass(at, step)
	}
	return false
}

// aim solves where the way stands now and works out where it leads; false where the
// network has no answer there.
func (t *tracer) aim() bool {
	s := t.s
	if t.rising > 0 {
		t.stand(0)
		s.assemble()
		copy(t.direction, s.rhs)
		t.stand(1)
		s.assemble()
		for i := range t.direction {
			t.direction[i] = s.rhs[i] - t.direction[i]
		}
		t.stand(t.gone)
	}
	s.assemble()
	s.factorise()
	for i, v := range t.residue {
		s.solution[i] = s.rhs[i] + (1-t.gone)*v
		if t.rising == 0 {
			t.direction[i] = -v
		}
	}
	s.substitute(s.solution)
	s.substitute(t.direction)
	if t.last >= 0 {
		slope := t.slope(&s.diodes[t.last])
		if slope == 0 || slope != slope {
			return false
		}
		t.onwards = 1
		if slope*float64(t.into) < 0 {
			t.onwards = -1
		}
	}
	return true
}

// slope returns how the voltage across a diode changes on the way.
func (t *tracer) slope(d *diodeState) float64 {
	b := t.s.branches[d.branch]
	return t.change(b.a) - t.change(b.b)
}

// change returns how the potential of a node changes on the way.
func (t *tracer) change(n Node) float64 {
	v := t.rising * t.full[n]
	if i := t.s.row[n]; i >= 0 {
		v += t.direction[i]
	}
	return v
}

// next returns the diode that comes to the end of its segment first, -1 for none, and
// what share of the way lies between.
func (t *tracer) next() (first int, step float64) {
	first, step = -1, math.Inf(1)
	for i := range t.s.diodes {
		d := &t.s.diodes[i]
		slope := t.slope(d) * t.onwards
		low, high := d.ends(t.s.Values[d.branch])
		end := high
		if slope < 0 {
			end = low
		}
		if slope == 0 || math.IsInf(end, 0) {
			continue
		}
		if way := max((end-t.s.across(d))/slope, 0); way < step {
			first, step = i, way
		}
	}
	return first, step
}

// ends returns the voltages between which a diode is on its segment.
func (d *diodeState) ends(threshold float64) (low, high float64) {
	switch d.segment {
	case 1:
		return threshold, math.Inf(1)
	case -1:
		return math.Inf(-1), -d.breakdown
	}
	return -d.breakdown, threshold
}

// pass goes on to the end of a diode's segment and moves the diode.
func (t *tracer) pass(at int, step float64) {
	d := &t.s.diodes[at]
	t.gone += step * t.onwards
	t.last, t.into = at, 1
	if t.slope(d)*t.onwards < 0 {
		t.into = -1
	}
	d.segment += t.into
}
