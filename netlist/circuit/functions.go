package circuit

import (
	"fmt"
	"math"

	"standoff/netlist/source"
)

// unary returns a function of one argument by its name.
func unary(name string) func(float64) float64 {
	switch name {
	case "abs":
		return math.Abs
	case "sqrt":
		return math.Sqrt
	case "exp":
		return math.Exp
	case "ln", "log":
		return math.Log
	case "log10":
		return math.Log10
	case "floor":
		return math.Floor
	case "ceil":
		return math.Ceil
	case "int", "trunc":
		return math.Trunc
	case "nint", "round":
		return math.Round
	case "sgn":
		return sign
	case "u", "stp":
		return func(x float64) float64 { return truth(x > 0) }
	case "uramp":
		return func(x float64) float64 { return max(x, 0) }
	}
	return trigonometric(name)
}

func trigonometric(name string) func(float64) float64 {
	switch name {
	case "sin":
		return math.Sin
	case "cos":
		return math.Cos
	case "tan":
		return math.Tan
	case "asin", "arcsin":
		return math.Asin
	case "acos", "arccos":
		return math.Acos
	case "atan", "arctan":
		return math.Atan
	case "sinh":
		return math.Sinh
	case "cosh":
		return math.Cosh
	case "tanh":
		return math.Tanh
	case "asinh":
		return math.Asinh
	case "acosh":
		return math.Acosh
	case "atanh":
		return math.Atanh
	}
	return nil
}

func sign(x float64) float64 { return truth(x > 0) - truth(x < 0) }

// binary returns a function of two arguments by its name.
func binary(name string) func(x, y float64) float64 {
	switch name {
	case "pow":
		return math.Pow
	case "pwr":
		return func(x, y float64) float64 { return math.Pow(math.Abs(x), y) }
	case "pwrs":
		return func(x, y float64) float64 { return math.Copysign(math.Pow(math.Abs(x), y), x) }
	case "atan2":
		return math.Atan2
	case "hypot":
		return math.Hypot
	case "fmod", "mod":
		return math.Mod
	case "sign":
		return math.Copysign
	}
	return nil
}

func call(name string, a []float64) (float64, error) {
	if f := unary(name); f != nil && len(a) == 1 {
		return f(a[0]), nil
	}
	if f := binary(name); f != nil && len(a) == 2 {
		return f(a[0], a[1]), nil
	}
	switch {
	case name == "limit" && len(a) == 3:
		return min(max(a[0], min(a[1], a[2])), max(a[1], a[2])), nil
	case name == "min" && len(a) > 0:
		return fold(a, math.Min), nil
	case name == "max" && len(a) > 0:
		return fold(a, math.Max), nil
	case isScatter(name) && len(a) >= 2:
		return a[0], nil
	}
	return 0, fmt.Errorf("the function %s with %d arguments is not known", source.Visible(name), len(a))
}

// isScatter reports the functions that draw a value at random around their
// first argument. Here that is the nominal value; spreads are declared by intent.
func isScatter(name string) bool {
	switch name {
	case "gauss", "agauss", "unif", "aunif", "mc":
		return true
	}
	return false
}

func fold(a []float64, f func(x, y float64) float64) float64 {
	v := a[0]
	for _, x := range a[1:] {
		v = f(v, x)
	}
	return v
}
