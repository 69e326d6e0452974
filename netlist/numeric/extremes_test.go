package numeric_test

import (
	"math"
	"testing"

	"standoff/netlist/numeric"
)

func TestMonotoneOutputsHaveTheirExtremesAtCorners(t *testing.T) {
	box := []numeric.Variable{{Low: 1, Nominal: 2, High: 3}, {Low: -2, Nominal: 0, High: 1}, {Low: 4, Nominal: 5, High: 7}}
	e := numeric.Extremes(box, 2, func(x, y []float64) {
		y[0] = x[0]*x[2] - x[1]
		y[1] = x[1] / x[2]
	}, numeric.Hints{})
	if e[0].Low != 3 || e[0].High != 23 || e[0].Nominal != 10 {
		t.Errorf("got %+v", e[0])
	}
	if e[1].Low != -0.5 || e[1].High != 0.25 || e[1].Moves[0] {
		t.Errorf("got %+v", e[1])
	}
}

// The push of the second variable turns round with the sign of the first, as
// that of a temperature coefficient does.
func TestPivotsLeadOverTheSaddle(t *testing.T) {
	box := []numeric.Variable{{Low: -1, Nominal: 0, High: 1.1, Pivot: true, Curved: true}, {Low: 1, Nominal: 2, High: 5}}
	e := numeric.Extremes(box, 1, func(x, y []float64) { y[0] = x[0] * x[1] }, numeric.Hints{})[0]
	if e.Low != -5 || math.Abs(e.High-5.5) > 1e-12 {
		t.Errorf("got %g .. %g, want -5 .. 5.5", e.Low, e.High)
	}
}

func TestCurvedVariablesAreSearchedInside(t *testing.T) {
	box := []numeric.Variable{{Low: 0, Nominal: 1, High: 10, Curved: true}}
	e := numeric.Extremes(box, 1, func(x, y []float64) { y[0] = (x[0] - 3.3) * (x[0] - 3.3) }, numeric.Hints{})[0]
	if math.Abs(e.Low) > 1e-6 || math.Abs(e.High-6.7*6.7) > 1e-9 {
		t.Errorf("got %g .. %g", e.Low, e.High)
	}
}

func TestUndefinedPointsArePassedOver(t *testing.T) {
	box := []numeric.Variable{{Low: -1, Nominal: 1, High: 2}}
	e := numeric.Extremes(box, 1, func(x, y []float64) { y[0] = math.Sqrt(x[0]) }, numeric.Hints{})[0]
	if e.Low != 1 || e.High != math.Sqrt2 {
		t.Errorf("got %+v", e)
	}
}
