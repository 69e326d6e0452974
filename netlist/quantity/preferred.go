package quantity

import (
	"cmp"
	"math"
	"slices"
)

// e24 is the E24 series of IEC 60063. It is no rounded geometric series: eight
// of its values differ from 10^(n/24).
var e24 = [...]int{10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91}

// Series returns the values of one decade, 1 <= v < 10, of a series of IEC
// 60063: n is 3, 6, 12, 24, 48, 96 or 192. E48 and up are 10^(k/n) rounded to
// three digits, but for 9.20 in E192.
func Series(n int) []float64 {
	values := make([]float64, 0, n)
	if n <= 24 {
		for i := 0; i < 24; i += 24 / n {
			values = append(values, float64(e24[i])/10)
		}
		return values
	}
	for i := range n {
		hundredths := math.Round(100 * math.Pow(10, float64(i)/float64(n)))
		if n == 192 && i == 185 {
			hundredths = 920
		}
		values = append(values, hundredths/100)
	}
	return values
}

// seriesFor returns the series made for a relative tolerance.
func seriesFor(tolerance float64) int {
	switch {
	case tolerance >= 0.2:
		return 6
	case tolerance >= 0.1:
		return 12
	case tolerance >= 0.05:
		return 24
	case tolerance >= 0.02:
		return 48
	case tolerance >= 0.01:
		return 96
	}
	return 192
}

// IsPreferred reports whether v is a preferred value for a relative tolerance:
// in the series made for it, or in E24 at any tolerance (common practice, no
// source: E24 is sold at 1 %).
func IsPreferred(v, tolerance float64) bool {
	if v <= 0 || math.IsInf(v, 0) || math.IsNaN(v) {
		return false
	}
	return inSeries(v, 24) || inSeries(v, seriesFor(tolerance))
}

func inSeries(v float64, n int) bool {
	mantissa := v / math.Pow(10, math.Floor(math.Log10(v)+1e-9))
	for _, p := range Series(n) {
		if math.Abs(mantissa-p) < 1e-6*p || math.Abs(mantissa-10*p) < 1e-5*p {
			return true
		}
	}
	return false
}

// Nearest returns the preferred value of series n that is nearest to v in ratio.
func Nearest(v float64, n int) float64 { return Candidates(v, n, 1)[0] }

// Candidates returns the preferred values of series n within so many decades
// of v on either side, nearest in ratio first, v itself left out.
func Candidates(v float64, n, decades int) []float64 {
	var list []float64
	base := int(math.Floor(math.Log10(v)))
	for d := base - decades - 1; d <= base+decades+1; d++ {
		for _, p := range Series(n) {
			c := scaled(p, d)
			if away := math.Abs(math.Log10(c / v)); away <= float64(decades) && away > 1e-9 {
				list = append(list, c)
			}
		}
	}
	slices.SortFunc(list, func(a, b float64) int {
		return cmp.Or(cmp.Compare(math.Abs(math.Log(a/v)), math.Abs(math.Log(b/v))), cmp.Compare(a, b))
	})
	return list
}

// scaled returns p times 10^d, exactly as it would be read from text.
func scaled(p float64, d int) float64 {
	hundred := math.Round(p * 100)
	if e := d - 2; e >= 0 {
		return hundred * math.Pow10(e)
	}
	return hundred / math.Pow10(2-d)
}
