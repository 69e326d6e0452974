// Package quantity holds numbers as the trade writes them: spreads, suffixes,
// preferred values and engineering notation. It imports nothing of the project.
package quantity

// Spread is a value with the least and the greatest it can be on any board.
type Spread struct{ Low, Nominal, High float64 }

// Exact returns the spread of a value that never varies.
func Exact(v float64) Spread { return Spread{v, v, v} }

// IsExact reports whether the spread is a single value.
func (s Spread) IsExact() bool { return s.Low == s.High }

// Tolerance returns v with a relative spread of -minus..+plus, as 0.05 for 5 %.
func Tolerance(v, minus, plus float64) Spread {
	s := Spread{v * (1 - minus), v, v * (1 + plus)}
	if v < 0 {
		s.Low, s.High = s.High, s.Low
	}
	return s
}
