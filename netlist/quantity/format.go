package quantity

import (
	"math"
	"strconv"
	"strings"
)

// prefix is one engineering prefix.
type prefix struct {
	exponent int
	text     string // in a measure: "4.7 kohm"
	short    string // in a netlist value: "4.7k"
}

var prefixes = [...]prefix{{12, "T", "t"}, {9, "G", "g"}, {6, "M", "meg"}, {3, "k", "k"}, {0, "", ""},
	{-3, "m", "m"}, {-6, "u", "u"}, {-9, "n", "n"}, {-12, "p", "p"}, {-15, "f", "f"}}

// engineering splits v into a mantissa and a prefix, for values of 1 fold of
// the prefix up to below 1000.
func engineering(v float64, digits int) (string, prefix) {
	one := prefix{}
	if v == 0 || math.IsNaN(v) || math.IsInf(v, 0) {
		return strconv.FormatFloat(v, 'g', digits, 64), one
	}
	rounded, _ := strconv.ParseFloat(strconv.FormatFloat(v, 'e', digits-1, 64), 64)
	for _, p := range prefixes {
		if m := rounded / math.Pow10(p.exponent); math.Abs(m) >= 0.9999999999 {
			return trim(m, digits), p
		}
	}
	return strconv.FormatFloat(v, 'g', digits, 64), one
}

// trim writes m with so many significant digits and no trailing zeros.
func trim(m float64, digits int) string {
	whole := 1
	for a := math.Abs(m); a >= 10 && whole < digits; a /= 10 {
		whole++
	}
	s := strconv.FormatFloat(m, 'f', max(digits-whole, 0), 64)
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	return s
}

// Format writes a value with its unit in plain ASCII: "47 kohm", "100 nF",
// "3.9 uA", "25 deg C". An empty unit gives the bare number. Four significant
// digits.
func Format(v float64, unit string) string {
	switch {
	case math.IsInf(v, 1):
		return "without end"
	case math.IsInf(v, -1) || math.IsNaN(v):
		return "undefined"
	}
	switch unit {
	case "":
		return strconv.FormatFloat(v, 'g', 4, 64)
	case "deg C", "K", "1/K", "deg", "K/W":
		return strconv.FormatFloat(v, 'g', 4, 64) + " " + unit
	}
	text, p := engineering(v, 4)
	return text + " " + p.text + unit
}

// Short writes a value as a netlist spells it: "680k", "4.7k", "100n",
// "1.5meg". It is the inverse of Parse to twelve digits.
func Short(v float64) string {
	text, p := engineering(v, 12)
	return text + p.short
}
