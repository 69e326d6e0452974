package numeric

import (
	"math"
)

// Variable is one side of the box: anything from Low to High may happen.
type Variable struct {
	Low, Nominal, High float64
	// Curved asks for a look between the ends: set it where an output may have
	// its extreme inside, as over a temperature that one part compensates for
	// another. Every other variable is searched at its ends only.
	Curved bool
}

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
func Extremes(box []Variable, n int, f Function) []Extreme {
	s := newSearch(box, n, f)
	s.start()
	for round := 0; round < maxRounds; round++ {
		if !s.exploreAll() {
			break
		}
	}
	return s.extremes()
}

// maxRounds bounds the search; boards seen so far need three.
const maxRounds = 24

// interior lists where a curved variable is looked at between its ends.
var interior = [...]float64{0.2, 0.4, 0.6, 0.8}

// search is the state of one call of Extremes.
type search struct {
	box     []Variable
	free    []int // variables that vary
	n       int
	f       Function
	x, y    []float64
	nominal []float64
	moves   []bool // output j, variable i at j*len(box)+i
	best    []best // 2n: low of output j at 2j, high at 2j+1
}

// best is the best point of one output in one direction.
type best struct {
	value    float64
	at       []float64
	explored bool
}

func newSearch(box []Variable, n int, f Function) *search {
	s := &search{box: box, n: n, f: f}
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

// set stores a better point. A gain within rounding does not ask for another
// exploration.
func (b *best) set(v float64, x []float64) {
	if math.Abs(v-b.value) > 1e-12*math.Abs(v) || b.value != b.value || math.IsInf(b.value, 0) {
		b.explored = false
	}
	b.value = v
	copy(b.at, x)
}

// start evaluates the nominal point, the ends of every variable around it, and
// the corner that each output's signs point to.
func (s *search) start() {
	for i, v := range s.box {
		s.x[i] = v.Nominal
	}
	s.try()
	s.nominal = append([]float64(nil), s.y...)
	// sign[i*n+j] is the end of free variable i that makes output j greatest.
	sign := make([]int8, len(s.free)*s.n)
	lowY := make([]float64, s.n)
	for k, i := range s.free {
		v := s.box[i]
		s.x[i] = v.Low
		s.try()
		copy(lowY, s.y)
		s.x[i] = v.High
		s.try()
		for j := range s.y {
			s.moves[j*len(s.box)+i] = s.y[j] != lowY[j] || s.y[j] != s.nominal[j]
			switch {
			case s.y[j] > lowY[j]:
				sign[k*s.n+j] = 1
			case s.y[j] < lowY[j]:
				sign[k*s.n+j] = -1
			}
		}
		s.x[i] = v.Nominal
	}
	for j := 0; j < s.n; j++ {
		s.corner(sign, j, 1)
		s.corner(sign, j, -1)
	}
}

// corner tries the corner at which output j should be greatest (direction 1)
// or least (direction -1).
func (s *search) corner(sign []int8, j int, direction int8) {
	for k, i := range s.free {
		v := s.box[i]
		switch sign[k*s.n+j] * direction {
		case 1:
			s.x[i] = v.High
		case -1:
			s.x[i] = v.Low
		default:
			s.x[i] = v.Nominal
		}
	}
	s.try()
}

// exploreAll explores every best point that has not been looked around yet and
// reports whether there was one.
func (s *search) exploreAll() bool {
	found := false
	point := make([]float64, len(s.box))
	for b := range s.best {
		if s.best[b].explored || s.best[b].value != s.best[b].value {
			continue
		}
		found = true
		copy(point, s.best[b].at)
		s.markExplored(point)
		s.explore(point, b)
	}
	return found
}

// markExplored marks every output whose best point this is.
func (s *search) markExplored(point []float64) {
	for i := range s.best {
		if same(s.best[i].at, point) {
			s.best[i].explored = true
		}
	}
}

func same(a, b []float64) bool {
	for i := range a {
		if a[i] != b[i] {
			return false
		}
	}
	return true
}

// explore moves one variable at a time away from the point. Curved variables
// are looked at inside too, and refined for the output that asked.
func (s *search) explore(point []float64, asked int) {
	copy(s.x, point)
	for _, i := range s.free {
		v := s.box[i]
		for _, end := range [2]float64{v.Low, v.High} {
			if end != point[i] {
				s.x[i] = end
				s.try()
			}
		}
		if v.Curved {
			for _, share := range interior {
				s.x[i] = v.Low + share*(v.High-v.Low)
				s.try()
			}
			if inside := s.best[asked].at[i]; inside > v.Low && inside < v.High {
				copy(s.x, s.best[asked].at)
				s.refine(i, asked)
				copy(s.x, point)
			}
		}
		s.x[i] = point[i]
	}
}

// refine narrows variable i around the best point of one output by golden
// section; the point itself and its outputs are updated through try.
func (s *search) refine(i, asked int) {
	v := s.box[i]
	width := 0.2 * (v.High - v.Low)
	centre := s.best[asked].at[i]
	low, high := math.Max(v.Low, centre-width), math.Min(v.High, centre+width)
	j, sense := asked/2, 1.0
	if asked%2 == 1 {
		sense = -1
	}
	at := func(x float64) float64 {
		s.x[i] = x
		s.try()
		return sense * s.y[j]
	}
	const golden = 0.6180339887498949
	a, b := high-golden*(high-low), low+golden*(high-low)
	fa, fb := at(a), at(b)
	for k := 0; k < 24 && high-low > 1e-6*(v.High-v.Low); k++ {
		if fa < fb {
			high, b, fb = b, a, fa
			a = high - golden*(high-low)
			fa = at(a)
		} else {
			low, a, fa = a, b, fb
			b = low + golden*(high-low)
			fb = at(b)
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
