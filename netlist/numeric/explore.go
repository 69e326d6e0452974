package numeric

import (
	"math"
	"slices"
)

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
