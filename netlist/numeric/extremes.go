package numeric

import (
	"math"
	"slices"
)

// Extreme is the least and the greatest value of one output over the box, with
// the points at which they are reached.
type Extreme struct {
	Low, Nominal, High float64
	LowAt, HighAt      []float64
	// Moves tells for each variable whether taking it from end to end around the
	// nominal point moved the output.
	Moves []bool
}

// Function computes all outputs y at the point x. It must not keep either slice.
// An output may be infinite; NaN means undefined there and is passed over.
type Function func(x, y []float64)

// Hints tell Extremes what it could not see from samples.
type Hints struct {
	// Bent lists outputs that may have their extremes between the ends of variables
	// that bend.
	Bent []int
	// Guides lists outputs on which others (Guided) depend only beyond a threshold:
	// where a variable does not seem to move one of those, the ends that suit a
	// guide are tried for it as well.
	Guides []int
	// Guided lists the outputs that depend on a guide in that way.
	Guided []int
	// Gated lists outputs of which some are 0, infinite or undefined unless output
	// Gate is great enough. Where that is so at the nominal point, nothing seems to
	// move them: then what moves the gate is taken to move them too.
	Gated []int
	Gate  int
	// Corners is how many corners are tried besides, spread evenly by a fixed sequence:
	// for outputs whose extremes lie on the far side of a saddle.
	Corners int
	// Grain is the relative change of an output below which a variable does not count
	// as moving it; 0 means rounding.
	Grain float64
	// Kinked lists outputs whose best point has to be looked around for variables
	// that move them only there.
	Kinked []int
	// LowOnly and HighOnly list outputs of which one extreme is of no interest; it
	// is then no more than the best that was met by the way.
	LowOnly, HighOnly []int
	// Settled reports that the extreme met so far of an output of which one extreme
	// counts is so far from mattering that it need not be explored; nil for none.
	Settled func(j int, extreme float64) bool
	// One computes output j alone, where that costs less than all of them; nil
	// where it does not. It serves while the surroundings of one best point are
	// explored.
	One func(x []float64, j int) float64
}

// Extremes returns the extremes of n outputs of f over the box.
//
// Method: one search for all outputs at once. The ends of every variable are
// tried around the nominal point; each output's own best guess at a corner
// follows from the signs seen; then every best point found so far is explored
// by moving one variable at a time until no output improves. For an output that
// is monotone in each variable (whatever the direction, and even where the
// direction depends on the other variables) a point that no single move
// improves is the extreme for all networks of resistors met here; a test holds
// this against random sampling. The work grows with the square of the number of
// variables, not with 2 to its power.
func Extremes(box []Variable, n int, f Function, hints Hints) []Extreme {
	s := newSearch(box, n, f)
	s.guides, s.one, s.grain = hints.Guides, hints.One, max(hints.Grain, 1e-11)
	for _, j := range hints.Guided {
		s.guided[j] = true
	}
	for _, j := range hints.Bent {
		s.bent[j] = true
	}
	for _, j := range hints.Kinked {
		s.kinked[j] = true
	}
	s.gated, s.gate = hints.Gated, hints.Gate
	for _, j := range hints.LowOnly {
		s.best[2*j+1].idle = true
	}
	for _, j := range hints.HighOnly {
		s.best[2*j].idle = true
	}
	s.start(hints.Corners)
	s.settle(hints.Settled)
	for round := 0; round < maxRounds; round++ {
		if !s.exploreAll() {
			break
		}
	}
	return s.extremes()
}

// maxRounds bounds the search; boards seen so far need three.
const maxRounds = 24

// search is the state of one call of Extremes.
type search struct {
	box     []Variable
	free    []int // variables that vary
	n       int
	f       Function
	x, y    []float64
	nominal []float64
	moves   []bool // output j, variable i at j*len(box)+i
	bent    []bool
	guides  []int
	one     func(x []float64, j int) float64
	alone   bool // the present exploration serves one output only
	guided  []bool
	kinked  []bool
	grain   float64
	gated   []int
	gate    int
	tried   map[uint64]bool // hashes of corners that were tried
	best    []best          // 2n: low of output j at 2j, high at 2j+1
}

// best is the best point of one output in one direction.
type best struct {
	value    float64
	at       []float64
	explored bool
	idle     bool // of no interest
}

func newSearch(box []Variable, n int, f Function) *search {
	s := &search{box: box, n: n, f: f, tried: make(map[uint64]bool, 8*n), bent: make([]bool, n), guided: make([]bool, n), kinked: make([]bool, n)}
	s.x, s.y = make([]float64, len(box)), make([]float64, n)
	s.best = make([]best, 2*n)
	s.moves = make([]bool, n*len(box))
	backing := make([]float64, 2*n*len(box))
	for i := range s.best {
		s.best[i].at, backing = backing[:len(box):len(box)], backing[len(box):]
		s.best[i].value = math.NaN()
	}
	for i, v := range box {
		if v.Low < v.High {
			s.free = append(s.free, i)
		}
	}
	return s
}

// try evaluates the point s.x and lets every output profit from it.
func (s *search) try() {
	s.f(s.x, s.y)
	for j, v := range s.y {
		if v != v {
			continue
		}
		low, high := &s.best[2*j], &s.best[2*j+1]
		if !(v >= low.value) {
			low.set(v, s.x)
		}
		if !(v <= high.value) {
			high.set(v, s.x)
		}
	}
}

// tryFor is try for the sake of one best point: where an output can be computed
// alone, only that is. It returns the value.
func (s *search) tryFor(asked int) float64 {
	j := asked / 2
	if s.one == nil || !s.alone {
		s.try()
		return s.y[j]
	}
	v := s.one(s.x, j)
	b := &s.best[asked]
	if asked%2 == 0 && !(v >= b.value) || asked%2 == 1 && !(v <= b.value) {
		if v == v {
			b.set(v, s.x)
		}
	}
	return v
}

// tryAlone is tryFor of one output alone.
func (s *search) tryAlone(asked int) float64 {
	s.alone = true
	return s.tryFor(asked)
}

// set stores a better point. A gain within rounding does not ask for another
// exploration.
func (b *best) set(v float64, x []float64) {
	if math.Abs(v-b.value) > 1e-12*math.Abs(v) || b.value != b.value || math.IsInf(b.value, 0) {
		b.explored = false
	}
	b.value = v
	copy(b.at, x)
}

// start evaluates the nominal point, the ends of every variable around it and
// around each end of every pivot, and the corners that each output's
// signs point to there. The signs at the ends matter: what a temperature
// coefficient does depends on the side of the reference temperature.
func (s *search) start(scattered int) {
	for i, v := range s.box {
		s.x[i] = v.Nominal
	}
	s.try()
	s.nominal = append([]float64(nil), s.y...)
	shut := s.shut()
	base := make([]float64, s.n)
	s.influences(base, func(v Variable) float64 { return v.Low }, func(v Variable) float64 { return v.High })
	s.influences(base, func(v Variable) float64 { return v.High }, func(v Variable) float64 { return v.Low })
	s.corners(-1, 0)
	for _, i := range s.free {
		if s.box[i].Pivot {
			s.corners(i, s.box[i].Low)
			s.corners(i, s.box[i].High)
		}
	}
	s.scatter(scattered)
	if shut != nil {
		s.open(2*s.gate + 1)
	}
	for _, j := range shut {
		own, gate := s.movesOf(2*j), s.movesOf(2*s.gate)
		for i, m := range gate {
			own[i] = own[i] || m
		}
	}
	for j := range s.n {
		if s.kinked[j] || slices.Contains(shut, j) {
			s.opened(2 * j)
			s.opened(2*j + 1)
		}
	}
}

func (s *search) extremes() []Extreme {
	result := make([]Extreme, s.n)
	for j := range result {
		low, high := s.best[2*j], s.best[2*j+1]
		result[j] = Extreme{Low: low.value, Nominal: s.nominal[j], High: high.value,
			LowAt: low.at, HighAt: high.at, Moves: s.moves[j*len(s.box) : (j+1)*len(s.box)]}
	}
	return result
}
