package network

import "math"

// rounding is what a voltage may be off by, in volt.
const rounding = 1e-9

// Headroom appends, for every diode in the order of the network, how far the last
// solution is from leaving the segment that the diode is on, in volt: above it and
// below it, +Inf where the segment has no end. Negative means that it has left, by more
// than a nanovolt: what a blocking diode leads may keep another one at its very end. While the
// diodes stay, every entry goes straight with the values of sources.
func (s *Solver) Headroom(to []float64) []float64 {
	for i := range s.diodes {
		d := &s.diodes[i]
		b := s.branches[d.branch]
		v, threshold := s.Voltage(b.a)-s.Voltage(b.b), s.Values[d.branch]
		switch d.segment {
		case 1:
			to = append(to, math.Inf(1), v-threshold+rounding)
		case -1:
			to = append(to, -d.breakdown-v+rounding, math.Inf(1))
		default:
			to = append(to, threshold-v+rounding, v+d.breakdown+rounding)
		}
	}
	return to
}

// Reach returns how far the potentials of the last solution can go on along rise (volt for each
// unit), times a direction of +1 or -1, until the first diode comes to the end of its segment: in
// units, +Inf where none does.
func (s *Solver) Reach(rise []float64, direction float64) float64 {
	units := math.Inf(1)
	for i := range s.diodes {
		d := &s.diodes[i]
		b := s.branches[d.branch]
		low, high := d.ends(s.Values[d.branch])
		switch slope := direction * (rise[b.a] - rise[b.b]); {
		case slope > 0 && !math.IsInf(high, 1):
			units = min(units, (high-s.across(d))/slope)
		case slope < 0 && !math.IsInf(low, -1):
			units = min(units, (low-s.across(d))/slope)
		}
	}
	return max(units, 0)
}
