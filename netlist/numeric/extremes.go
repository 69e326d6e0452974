package numeric

import (
	"math"
	"slices"
)

// Variable is one side of the box: anything from Low to High may happen.
type Variable struct {
	Low, Nominal, High float64
	// Curved asks for a look between the ends: set it where an output may have
	// its extreme inside, as over a temperature that one part compensates for
	// another. Every other variable is searched at its ends only.
	Curved bool
	// Pivot says that the direction in which other variables push depends on this
	// one, as what a temperature coefficient does depends on the temperature.
	Pivot bool
	// Bends says that a bent output may have its extreme between the ends of this
	// variable.
	Bends bool
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

// settle marks what need not be explored.
func (s *search) settle(settled func(j int, extreme float64) bool) {
	if settled == nil {
		return
	}
	for b := range s.best {
		if !s.best[b].idle && s.best[b^1].idle && !s.kinked[b/2] && settled(b/2, s.best[b].value) {
			s.best[b].idle = true
		}
	}
}

// scatter tries corners that a fixed sequence picks.
func (s *search) scatter(count int) {
	state := uint64(88172645463325252)
	for range count {
		for i, v := range s.box {
			s.x[i] = v.Nominal
		}
		for _, i := range s.free { // xorshift (Marsaglia 2003)
			state ^= state << 13
			state ^= state >> 7
			state ^= state << 17
			s.x[i] = s.box[i].Low
			if state>>32&1 == 1 {
				s.x[i] = s.box[i].High
			}
		}
		s.try()
	}
}

// maxRounds bounds the search; boards seen so far need three.
const maxRounds = 24

// interior lists where a curved variable is looked at between its ends.
var interior = [...]float64{1. / 3, 2. / 3}

// wide is the ratio of its ends from which a variable is looked at on a
// logarithmic grid as well.
const wide = 8

// look calls f for every place inside a variable where it is looked at.
func (v Variable) look(f func(x float64)) {
	for _, share := range interior {
		f(v.Low + share*(v.High-v.Low))
	}
	if v.Low > 0 && v.High > wide*v.Low {
		for k := 1.0; k < 5; k++ {
			f(v.Low * math.Pow(v.High/v.Low, k/5))
		}
	}
}

// beside returns the neighbours of a place among those where a variable is looked
// at.
func (v Variable) beside(x float64) (below, above float64) {
	below, above = v.Low, v.High
	v.look(func(y float64) {
		if y < x && y > below {
			below = y
		}
		if y > x && y < above {
			above = y
		}
	})
	return below, above
}

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

// shut lists the gated outputs where any of them is degenerate at the nominal
// point, and has them follow the gate.
func (s *search) shut() []int {
	closed := slices.ContainsFunc(s.gated, func(j int) bool {
		v := s.nominal[j]
		return v == 0 || v != v || math.IsInf(v, 0)
	})
	if !closed {
		return nil
	}
	for _, j := range s.gated {
		s.guided[j] = true
	}
	if !slices.Contains(s.guides, s.gate) {
		s.guides = append(slices.Clone(s.guides), s.gate)
	}
	return s.gated
}

// open climbs to the best point of the gate; every output profits on the way.
func (s *search) open(gate int) {
	b := &s.best[gate]
	for range maxRounds {
		if b.explored || b.value != b.value {
			return
		}
		b.explored, s.alone = true, false
		s.explore(slices.Clone(b.at), gate)
	}
}

// opened notes what moves an output around its best point, where a gate is open or
// a threshold passed.
func (s *search) opened(b int) {
	if s.best[b].idle {
		return
	}
	at := slices.Clone(s.best[b].at)
	moved := s.movesOf(b)
	copy(s.x, at)
	here := s.tryAlone(b)
	for _, i := range s.free {
		if moved[i] {
			continue
		}
		for _, end := range [2]float64{s.box[i].Low, s.box[i].High} {
			s.x[i] = end
			moved[i] = moved[i] || s.differ(s.tryAlone(b), here)
		}
		s.x[i] = at[i]
	}
}

// corners takes the signs around the nominal point, with variable fixed (where
// it is not negative) standing at a value, and tries the corners they point to.
func (s *search) corners(fixed int, value float64) {
	for i, v := range s.box {
		s.x[i] = v.Nominal
	}
	if fixed >= 0 {
		s.x[fixed] = value
	}
	// sign[k*n+j] is how free variable k pushes output j.
	sign := make([]int8, len(s.free)*s.n)
	lowY := make([]float64, s.n)
	for k, i := range s.free {
		if i == fixed {
			continue
		}
		v := s.box[i]
		s.x[i] = v.Low
		s.try()
		copy(lowY, s.y)
		s.x[i] = v.High
		s.try()
		for j := range s.y {
			if s.differ(s.y[j], lowY[j]) || fixed < 0 && s.differ(s.y[j], s.nominal[j]) {
				s.moves[j*len(s.box)+i] = true
			}
			sign[k*s.n+j] = s.push(lowY[j], s.y[j])
		}
		s.x[i] = v.Nominal
	}
	for j := range s.n {
		for _, direction := range [2]int8{1, -1} {
			s.corner(sign, j, direction, fixed, -1, 0)
			for _, g := range s.guides {
				if s.guided[j] {
					s.corner(sign, j, direction, fixed, g, 1)
					s.corner(sign, j, direction, fixed, g, -1)
				}
			}
		}
	}
}

// push says which end of a variable makes an output greatest: 1 for the high, -1 for
// the low one, 2 and -2 where it moves it by more than a thousandth, 0 for neither.
func (s *search) push(low, high float64) int8 {
	switch {
	case !s.differ(low, high):
		return 0
	case math.Abs(high-low) <= 1e-3*math.Min(math.Abs(low), math.Abs(high)):
		if high > low {
			return 1
		}
		return -1
	case high > low:
		return 2
	case high < low:
		return -2
	}
	return 0
}

// influences notes which variables move which outputs around a corner of the
// box: away from the nominal point other limits may bind.
func (s *search) influences(base []float64, at, away func(Variable) float64) {
	for i, v := range s.box {
		s.x[i] = at(v)
	}
	s.try()
	copy(base, s.y)
	for _, i := range s.free {
		v := s.box[i]
		s.x[i] = away(v)
		s.try()
		for j := range s.y {
			if s.differ(s.y[j], base[j]) {
				s.moves[j*len(s.box)+i] = true
			}
		}
		s.x[i] = at(v)
	}
}

// differ reports whether two values of an output differ by more than the grain.
func (s *search) differ(a, b float64) bool {
	return a != b && !(math.Abs(a-b) <= s.grain*math.Min(math.Abs(a), math.Abs(b)))
}

// corner tries the corner at which output j should be greatest (direction 1)
// or least (direction -1), unless it was tried before. Variables that do not
// move it, or hardly, stand where they suit the guide (if one is given).
func (s *search) corner(sign []int8, j int, direction int8, fixed, guide int, toward int8) {
	for k, i := range s.free {
		v := s.box[i]
		push := sign[k*s.n+j] * direction
		if weak := push > -2 && push < 2; weak && guide >= 0 {
			if g := sign[k*s.n+guide] * toward; g != 0 {
				push = g
			}
		}
		switch {
		case push > 0:
			s.x[i] = v.High
		case push < 0:
			s.x[i] = v.Low
		default:
			if i != fixed {
				s.x[i] = v.Nominal
			}
		}
	}
	s.tryOnce()
}

// tryOnce is try for points that may come up again.
func (s *search) tryOnce() {
	h := uint64(14695981039346656037)
	for _, i := range s.free {
		h = (h ^ math.Float64bits(s.x[i])) * 1099511628211
		h ^= h >> 29
	}
	if !s.tried[h] {
		s.tried[h] = true
		s.try()
	}
}

// exploreAll explores every best point that has not been looked around yet and
// reports whether there was one.
func (s *search) exploreAll() bool {
	found := false
	point := make([]float64, len(s.box))
	for _, b := range s.order() {
		if s.best[b].explored || s.best[b].idle || s.best[b].value != s.best[b].value {
			continue
		}
		found = true
		copy(point, s.best[b].at)
		s.alone = !s.markExplored(point, b)
		s.best[b].explored = true
		s.explore(point, b)
	}
	return found
}

// order lists the best points, those of outputs with the most variables first:
// their exploration serves many others.
func (s *search) order() []int {
	count := make([]int, len(s.best))
	list := make([]int, len(s.best))
	for b := range s.best {
		list[b] = b
		for _, m := range s.movesOf(b) {
			if m {
				count[b]++
			}
		}
	}
	slices.SortStableFunc(list, func(a, b int) int { return count[b] - count[a] })
	return list
}

// movesOf returns which variables move the output behind a best point.
func (s *search) movesOf(b int) []bool {
	j := b / 2
	return s.moves[j*len(s.box) : (j+1)*len(s.box)]
}

// markExplored marks every output that the exploration of a point for one
// output serves too: its variables are among those that are moved, and stand
// where the point has them.
// It reports whether there was any but the one that asked.
func (s *search) markExplored(point []float64, asked int) (others bool) {
	moved := s.movesOf(asked)
	for b := range s.best {
		own, at, served := s.movesOf(b), s.best[b].at, true
		for i := range point {
			if own[i] && (!moved[i] || at[i] != point[i]) {
				served = false
				break
			}
		}
		if served {
			others = others || b != asked && !s.best[b].idle && !s.best[b].explored
			s.best[b].explored = true
		}
	}
	return others
}

// explore moves one variable at a time away from the point. Curved variables
// are looked at inside too, and refined for the output that asked. Variables
// that do not move that output stay where they are.
func (s *search) explore(point []float64, asked int) {
	copy(s.x, point)
	moved := s.movesOf(asked)
	for _, i := range s.free {
		if !moved[i] {
			continue
		}
		v := s.box[i]
		for _, end := range [2]float64{v.Low, v.High} {
			if end != point[i] {
				s.x[i] = end
				s.tryFor(asked)
			}
		}
		if v.Curved || v.Bends && s.bent[asked/2] {
			v.look(func(x float64) {
				s.x[i] = x
				s.tryFor(asked)
			})
			if inside := s.best[asked].at[i]; inside > v.Low && inside < v.High {
				copy(s.x, s.best[asked].at)
				s.refine(i, asked)
				copy(s.x, point)
			}
		}
		s.x[i] = point[i]
	}
	for _, i := range s.free {
		if s.box[i].Pivot && moved[i] {
			s.across(point, asked, i)
		}
	}
}

// across climbs for one output from the far end of a pivot: there the
// other variables may have to stand at other ends, and no single move leads over.
func (s *search) across(point []float64, asked, pivot int) {
	moved := s.movesOf(asked)
	v := s.box[pivot]
	far := v.Low
	if point[pivot]-v.Low < v.High-point[pivot] {
		far = v.High
	}
	copy(s.x, point)
	s.x[pivot] = far
	sense := float64(2*(asked%2) - 1)
	best := sense * s.tryFor(asked)
	for _, i := range s.free {
		if !moved[i] || i == pivot {
			continue
		}
		here := s.x[i]
		for _, end := range [2]float64{s.box[i].Low, s.box[i].High} {
			if end == here {
				continue
			}
			s.x[i] = end
			if v := sense * s.tryFor(asked); v > best {
				best, here = v, end
			}
		}
		s.x[i] = here
	}
}

// refine moves variable i towards the vertex of the parabola through the best
// point of one output and its neighbours on the grid, a few times; the outputs
// are updated through try.
func (s *search) refine(i, asked int) {
	v := s.box[i]
	sense := float64(2*(asked%2) - 1)
	at := func(x float64) float64 {
		s.x[i] = x
		return sense * s.tryFor(asked)
	}
	middle := s.best[asked].at[i]
	low, high := v.beside(middle)
	width := high - low
	fl, fm, fh := at(low), at(middle), at(high)
	for range parabolas {
		x := vertex([3]float64{low, middle, high}, [3]float64{fl, fm, fh})
		if !(x > low && x < high) || math.Abs(x-middle) < 1e-5*width {
			return
		}
		f := at(x)
		switch { // the better of the two becomes the middle
		case f > fm && x > middle:
			low, fl, middle, fm = middle, fm, x, f
		case f > fm:
			high, fh, middle, fm = middle, fm, x, f
		case x > middle:
			high, fh = x, f
		default:
			low, fl = x, f
		}
	}
}

// parabolas is how often a vertex is followed; each step gains about two digits.
const parabolas = 4

// vertex returns where the parabola through three points has its vertex.
func vertex(x, f [3]float64) float64 {
	a, b := (x[1]-x[0])*(f[1]-f[2]), (x[1]-x[2])*(f[1]-f[0])
	return x[1] - 0.5*((x[1]-x[0])*a-(x[1]-x[2])*b)/(a-b)
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
