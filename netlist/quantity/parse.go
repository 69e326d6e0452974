package quantity

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Number is a number as a netlist spells it.
type Number struct {
	Value float64
	// Suffix is the scale that was read, in lower case: "k", "meg", "m", "u" ...
	Suffix string
	// Unit is what stood behind the scale and was ignored: "ohm", "F", "Hz".
	Unit string
	// Trade is set where the value was written in the trade's notation with the
	// scale in place of the decimal point (4k7, 2R2, 1M5) and read as meant.
	Trade bool
}

// scale is one SI suffix.
type scale struct {
	name  string
	value float64
}

// scales lists the suffixes, longest first where one starts another. Source:
// SPICE2 input format (Berkeley); x for mega is seen in the wild.
var scales = [...]scale{{"meg", 1e6}, {"mil", 25.4e-6}, {"t", 1e12}, {"g", 1e9}, {"k", 1e3}, {"m", 1e-3},
	{"u", 1e-6}, {"µ", 1e-6}, {"μ", 1e-6}, {"n", 1e-9}, {"p", 1e-12}, {"f", 1e-15}, {"x", 1e6}}

// Parse reads a number with an optional SI suffix and unit, without regard to
// case: 47k, 0.1uF, 1.5MEG, 1e-7, 20mSec, 1V. M is milli, MEG is mega. The
// trade's 4k7, 2R2 and 1M5 (there M is mega) are read as meant and flagged. An
// error says what is wrong with the text.
func Parse(text string) (Number, error) {
	digits := scanNumber(text)
	if digits == 0 {
		if n, ok := leadingLetter(text); ok {
			return n, nil
		}
		return Number{}, fmt.Errorf("%q is not a number", text)
	}
	value, err := strconv.ParseFloat(text[:digits], 64)
	if err != nil && (math.IsInf(value, 0) || value == 0) {
		return Number{}, fmt.Errorf("%q is out of range", text)
	}
	rest := text[digits:]
	if rest == "" {
		return Number{Value: value}, nil
	}
	if rest[0] == ',' {
		return Number{}, fmt.Errorf("%q has a decimal comma; write a point", text)
	}
	if n, ok := trade(text[:digits], rest); ok {
		return n, nil
	}
	n, err := suffixed(text, value, rest)
	if err == nil && n.Suffix != "" && n.Suffix != "mil" && !strings.ContainsAny(text[:digits], "eE") {
		// Read once more with the scale as an exponent: 5u is 5e-6 to the last bit.
		exponent := strconv.Itoa(int(math.Round(math.Log10(n.Value / value))))
		if exact, err := strconv.ParseFloat(text[:digits]+"e"+exponent, 64); err == nil && value != 0 {
			n.Value = exact
		}
	}
	return n, err
}

// suffixed reads scale and unit behind the digits.
func suffixed(text string, value float64, rest string) (Number, error) {
	lower := strings.ToLower(rest)
	n := Number{Value: value, Unit: rest}
	for _, s := range scales {
		if strings.HasPrefix(lower, s.name) {
			n.Value, n.Suffix, n.Unit = value*s.value, s.name, rest[len(s.name):]
			break
		}
	}
	for _, r := range n.Unit {
		if !isUnitRune(r) {
			return Number{}, fmt.Errorf("%q: %q does not belong to a number", text, string(r))
		}
	}
	if math.IsInf(n.Value, 0) {
		return Number{}, fmt.Errorf("%q is out of range", text)
	}
	return n, nil
}

func isUnitRune(r rune) bool {
	return r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r == '%' || r == '°' || r == 'Ω' || r == '\u2126' || r == 'µ' || r == 'μ'
}

// scanNumber returns the length of the decimal number at the start of text.
func scanNumber(text string) int {
	i := 0
	if i < len(text) && (text[i] == '+' || text[i] == '-') {
		i++
	}
	start := i
	for i < len(text) && isDigit(text[i]) {
		i++
	}
	count := i - start
	if i < len(text) && text[i] == '.' && !strings.HasPrefix(text[i:], "..") {
		i++
		for i < len(text) && isDigit(text[i]) {
			i++
			count++
		}
	}
	if count == 0 {
		return 0
	}
	if i < len(text) && (text[i] == 'e' || text[i] == 'E') {
		j := i + 1
		if j < len(text) && (text[j] == '+' || text[j] == '-') {
			j++
		}
		if j < len(text) && isDigit(text[j]) {
			for j < len(text) && isDigit(text[j]) {
				j++
			}
			i = j
		}
	}
	return i
}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

// tradeScale returns the scale of a letter that stands for a decimal point
// (IEC 60062 notation).
func tradeScale(c byte) (float64, string, bool) {
	switch c {
	case 'R', 'r', 'E':
		return 1, "", true
	case 'K', 'k':
		return 1e3, "k", true
	case 'M':
		return 1e6, "meg", true
	case 'm':
		return 1e-3, "m", true
	case 'u', 'U':
		return 1e-6, "u", true
	case 'n', 'N':
		return 1e-9, "n", true
	case 'p', 'P':
		return 1e-12, "p", true
	case 'V', 'v':
		return 1, "", true
	}
	return 0, "", false
}

// trade reads whole digits, one letter in place of the point, and digits.
func trade(whole, rest string) (Number, bool) {
	if len(rest) < 2 || strings.ContainsAny(whole, ".eE") {
		return Number{}, false
	}
	factor, suffix, ok := tradeScale(rest[0])
	digits := 1
	for digits < len(rest) && isDigit(rest[digits]) {
		digits++
	}
	if !ok || digits == 1 {
		return Number{}, false
	}
	for _, r := range rest[digits:] {
		if !isUnitRune(r) {
			return Number{}, false
		}
	}
	v, err := strconv.ParseFloat(whole+"."+rest[1:digits], 64)
	return Number{Value: v * factor, Suffix: suffix, Unit: rest[digits:], Trade: true}, err == nil
}

// leadingLetter reads R47 and the like: the letter stands for the point.
func leadingLetter(text string) (Number, bool) {
	if len(text) < 2 || (text[0] != 'R' && text[0] != 'r') {
		return Number{}, false
	}
	for i := 1; i < len(text); i++ {
		if !isDigit(text[i]) {
			return Number{}, false
		}
	}
	v, err := strconv.ParseFloat("0."+text[1:], 64)
	return Number{Value: v, Trade: true}, err == nil
}
