package network

import (
	"math"
	"slices"
)

// Solver solves a compiled network for the Values it is given. It is not safe
// for use by several goroutines at once.
type Solver struct {
	// Values holds one value a branch: ohm, volt, ampere, or a diode's threshold.
	Values []float64

	branches []branch
	follow   []follower
	gains    []float64 // of the followers
	root     []int
	offsets  [][]offset
	row      []int // row of a node, -1 where its potential is fixed
	rows     int
	touched  [][]int

	matrix   []float64 // rows x rows, factorised in place
	rhs      []float64
	solution []float64
	shift    []float64 // offset of each node in volt
	diodes   []diodeState
	scale    float64   // share of the sources that counts, 1 but on the way to a solution
	solved   []float64 // Values of the last consistent solution; empty where there is none
}

// diodeState is the shape of one diode and the segment it is on.
type diodeState struct {
	branch                           Branch
	slope, breakdown, breakdownSlope float64
	segment                          int8 // -1 broken down, 0 blocking, 1 conducting
}

// leak ties every free node to the reference, in siemens, so that a node that
// hangs free still has an answer; 1e-15 S is far below any real insulation.
const leak = 1e-15

// wire is the least resistance in ohm: no more than a wire, and far enough from
// the largest resistor of a board for the arithmetic.
const wire = 1e-3

// blocking is the conductance of a blocking diode in siemens.
const blocking = 1e-12

func (s *Solver) allocate() {
	s.scale = 1
	s.matrix = make([]float64, s.rows*s.rows)
	s.rhs = make([]float64, s.rows)
	s.solution = make([]float64, s.rows)
	s.shift = make([]float64, len(s.root))
	s.gains = make([]float64, len(s.follow))
	for i, b := range s.branches {
		if b.kind == diode {
			d := diodeState{branch: Branch(i), slope: 1, breakdown: math.Inf(1), breakdownSlope: 1}
			s.diodes = append(s.diodes, d)
		}
	}
}

// SetDiode shapes a diode: slope resistance in ohm when it conducts, breakdown
// voltage (positive; +Inf for none) and the slope resistance there.
func (s *Solver) SetDiode(b Branch, slope, breakdown, breakdownSlope float64) {
	for i := range s.diodes {
		if d := &s.diodes[i]; d.branch == b {
			if d.slope != slope || d.breakdown != breakdown || d.breakdownSlope != breakdownSlope {
				s.solved = s.solved[:0]
			}
			d.slope, d.breakdown, d.breakdownSlope = slope, breakdown, breakdownSlope
		}
	}
}

// SetGain sets what share of a diode's current its followers carry, 0 .. below 1.
func (s *Solver) SetGain(d Branch, gain float64) {
	for i := range s.follow {
		if s.follow[i].diode == d && s.gains[i] != gain {
			s.gains[i], s.solved = gain, s.solved[:0]
		}
	}
}

// IsFixed reports whether voltage sources alone set the node's potential.
func (s *Solver) IsFixed(n Node) bool { return s.row[n] < 0 }

// Solve factorises the network for the present Values and solves it. It reports
// whether the diodes came to rest in a consistent state. Values that have not
// changed since are not solved anew.
func (s *Solver) Solve() bool {
	if len(s.solved) > 0 && slices.Equal(s.solved, s.Values) {
		return true
	}
	s.solved = s.solved[:0]
	s.shifts()
	for range 4 + 8*len(s.diodes) {
		s.held()
		if !s.flip() {
			s.solved = append(s.solved, s.Values...)
			return true
		}
	}
	if s.trace() {
		s.solved = append(s.solved, s.Values...)
		return true
	}
	return false
}

// held solves for the present Values and offsets with every diode on its segment.
func (s *Solver) held() {
	s.assemble()
	s.factorise()
	copy(s.solution, s.rhs)
	s.substitute(s.solution)
}

// SolveHeld solves for the present Values with every diode on the segment of the last
// solution, whether it agrees or not.
func (s *Solver) SolveHeld() {
	s.solved = s.solved[:0]
	s.shifts()
	s.held()
}

// shifts works out how far each node lies above its root.
func (s *Solver) shifts() {
	for i, list := range s.offsets {
		v := 0.0
		for _, o := range list {
			v += o.sign * s.Values[o.source]
		}
		s.shift[i] = v
	}
}

// assemble writes the conductance matrix and the injected currents.
func (s *Solver) assemble() {
	clear(s.matrix)
	clear(s.rhs)
	for i := range s.rows {
		s.matrix[i*s.rows+i] = leak
	}
	for i, b := range s.branches {
		switch b.kind {
		case resistor:
			s.stamp(b, 1/max(s.Values[i], wire), 0)
		case current:
			s.inject(b.a, -s.Values[i]*s.scale)
			s.inject(b.b, s.Values[i]*s.scale)
		}
	}
	for _, d := range s.diodes {
		g, e := d.line(s.Values[d.branch])
		s.stamp(s.branches[d.branch], g, e)
		for i, f := range s.follow {
			if f.diode == d.branch {
				s.stampFollower(f, s.gains[i]*g, e)
			}
		}
	}
}

// stampFollower adds a current g (va - vb - e) of a diode's voltage that flows from
// one node to another.
func (s *Solver) stampFollower(f follower, g, e float64) {
	d := s.branches[f.diode]
	a, b := s.row[d.a], s.row[d.b]
	inject := g * (s.shift[d.a] - s.shift[d.b] - e)
	for k, i := range [2]int{s.row[f.from], s.row[f.to]} {
		if i < 0 {
			continue
		}
		sign := float64(1 - 2*k)
		s.rhs[i] -= sign * inject
		if a >= 0 {
			s.matrix[i*s.rows+a] += sign * g
		}
		if b >= 0 {
			s.matrix[i*s.rows+b] -= sign * g
		}
	}
}

// line returns conductance and voltage offset of the segment a diode is on:
// i = g (v - e). What it leads when blocking flows on every segment, so that the
// characteristic has no step.
func (d *diodeState) line(threshold float64) (g, e float64) {
	switch d.segment {
	case 1:
		g = 1 / d.slope
		return g + blocking, threshold * g / (g + blocking)
	case -1:
		g = 1 / d.breakdownSlope
		return g + blocking, -d.breakdown * g / (g + blocking)
	}
	return blocking, 0
}

// stamp adds a branch with i = g (va - vb - e).
func (s *Solver) stamp(b branch, g, e float64) {
	i, j := s.row[b.a], s.row[b.b]
	if i == j && i < 0 {
		return
	}
	inject := g * (s.shift[b.a] - s.shift[b.b] - e)
	if i >= 0 {
		s.matrix[i*s.rows+i] += g
		s.rhs[i] -= inject
	}
	if j >= 0 {
		s.matrix[j*s.rows+j] += g
		s.rhs[j] += inject
	}
	if i >= 0 && j >= 0 {
		s.matrix[i*s.rows+j] -= g
		s.matrix[j*s.rows+i] -= g
	}
}

func (s *Solver) inject(n Node, amperes float64) {
	if i := s.row[n]; i >= 0 {
		s.rhs[i] += amperes
	}
}

// factorise eliminates in place; below the diagonal stay the factors. Without
// followers the matrix is symmetric and positive; with gains below one it is what
// conductances make of it, and no pivoting is needed either (a test compares with a
// general solver).
func (s *Solver) factorise() {
	m := s.rows
	for k, list := range s.touched {
		pivot := 1 / s.matrix[k*m+k]
		for _, i := range list {
			factor := s.matrix[i*m+k] * pivot
			if factor == 0 {
				continue
			}
			for _, j := range list {
				s.matrix[i*m+j] -= factor * s.matrix[k*m+j]
			}
			s.matrix[i*m+k] = factor
		}
	}
}

// substitute solves for one right side in place.
func (s *Solver) substitute(v []float64) {
	m := s.rows
	for k, list := range s.touched {
		for _, i := range list {
			v[i] -= s.matrix[i*m+k] * v[k]
		}
	}
	for k := m - 1; k >= 0; k-- {
		sum := v[k]
		for _, j := range s.touched[k] {
			sum -= s.matrix[k*m+j] * v[j]
		}
		v[k] = sum / s.matrix[k*m+k]
	}
}

// flip moves every diode to the segment its voltage asks for and reports whether any
// moved. A conducting diode stays while its current is forward.
func (s *Solver) flip() bool {
	moved := false
	for i := range s.diodes {
		d := &s.diodes[i]
		if segment := d.asked(s.across(d), s.Values[d.branch]); segment != d.segment {
			d.segment, moved = segment, true
		}
	}
	return moved
}

// across returns the voltage across a diode in the last solution.
func (s *Solver) across(d *diodeState) float64 {
	b := s.branches[d.branch]
	return s.Voltage(b.a) - s.Voltage(b.b)
}

// asked returns the segment that belongs to a voltage.
func (d *diodeState) asked(volts, threshold float64) int8 {
	switch {
	case volts > threshold:
		return 1
	case volts < -d.breakdown:
		return -1
	}
	return 0
}

// Conducts reports whether a diode conducts forward in the last solution.
func (s *Solver) Conducts(b Branch) bool {
	for _, d := range s.diodes {
		if d.branch == b {
			return d.segment == 1
		}
	}
	return false
}

// Voltage returns the potential of a node against the reference.
func (s *Solver) Voltage(n Node) float64 {
	if i := s.row[n]; i >= 0 {
		return s.solution[i] + s.shift[n]
	}
	return s.shift[n]
}

// Transfer fills ohms with the rise of every node, in volt per ampere, for a
// current injected into node n (taken out at the reference), diodes staying on
// their segments. ohms needs one entry a node, the reference included.
func (s *Solver) Transfer(n Node, ohms []float64) {
	clear(s.rhs)
	i := s.row[n]
	if i < 0 {
		clear(ohms)
		return
	}
	s.rhs[i] = 1
	s.substitute(s.rhs)
	for node := range ohms {
		if r := s.row[node]; r >= 0 {
			ohms[node] = s.rhs[r]
		} else {
			ohms[node] = 0
		}
	}
}

// Nodes returns how many nodes there are, the reference included.
func (s *Solver) Nodes() int { return len(s.root) }
