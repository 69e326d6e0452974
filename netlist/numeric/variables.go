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
	// Pivot says that the direction in which other variables push depends on this
	// one, as what a temperature coefficient does depends on the temperature.
	Pivot bool
	// Bends says that a bent output may have its extreme between the ends of this
	// variable.
	Bends bool
}

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
