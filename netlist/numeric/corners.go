package numeric

import (
	"math"
	"slices"
)

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
