package circuit

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// environment holds the parameters that a scope sees: its own, worked out on
// demand so that their order does not matter, then those outside.
type environment struct {
	outer  *environment
	values map[string]*parameter
}

// parameter is one name. state tells loops.
type parameter struct {
	value syntax.Value
	env   *environment // in which the value is worked out
	state int8         // 0 not yet, 1 being worked out, 2 done
	v     float64
	err   error
}

// environment makes the parameters of one instance: overrides of the X line
// (worked out outside), then the header's defaults, then .param cards.
func (b *builder) environment(s *scope, outer *environment, overrides []syntax.Pair) *environment {
	env := &environment{outer: outer, values: map[string]*parameter{}}
	if s.parent != nil && outer == nil {
		env.outer = nil
	}
	for _, p := range s.params {
		env.values[strings.ToLower(p.pair.Key.Text)] = &parameter{value: p.pair.Value, env: env}
	}
	if s.header != nil {
		for _, p := range s.header.Defaults {
			env.values[strings.ToLower(p.Key.Text)] = &parameter{value: p.Value, env: env}
		}
	}
	for _, p := range overrides {
		env.values[strings.ToLower(p.Key.Text)] = &parameter{value: p.Value, env: outer}
	}
	return env
}

// lookup works a parameter out.
func (e *environment) lookup(name string) (float64, error) {
	for at := e; at != nil; at = at.outer {
		if p, ok := at.values[strings.ToLower(name)]; ok {
			return p.work(name)
		}
	}
	switch strings.ToLower(name) {
	case "pi":
		return math.Pi, nil
	case "temper", "temp":
		return 25, nil
	}
	return 0, fmt.Errorf("the parameter %s is not defined", source.Visible(name))
}

func (p *parameter) work(name string) (float64, error) {
	switch p.state {
	case 1:
		return 0, fmt.Errorf("the parameter %s depends on itself", source.Visible(name))
	case 2:
		return p.v, p.err
	}
	p.state = 1
	p.v, p.err = p.env.value(p.value)
	p.state = 2
	return p.v, p.err
}

// errText says that a value is a text.
var errText = errors.New("a text stands where a number belongs")

// value works out a value of a card: a number, an expression, or the bare name
// of a parameter.
func (e *environment) value(v syntax.Value) (float64, error) {
	switch {
	case v.Quoted:
		return 0, errText
	case v.Expr != nil:
		return e.eval(v.Expr)
	}
	n, err := quantity.Parse(v.Text)
	if err == nil {
		return n.Value, nil
	}
	if e != nil && isName(v.Text) {
		if p, perr := e.lookup(v.Text); perr == nil || e.has(v.Text) {
			return p, perr
		}
	}
	return 0, err
}

func (e *environment) has(name string) bool {
	for at := e; at != nil; at = at.outer {
		if _, ok := at.values[strings.ToLower(name)]; ok {
			return true
		}
	}
	return false
}

func isName(s string) bool {
	for i := range len(s) {
		c := s[i]
		if !(c == '_' || c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' || i > 0 && c >= '0' && c <= '9') {
			return false
		}
	}
	return s != ""
}

// eval works out an expression. The result is finite or there is an error.
func (e *environment) eval(x *syntax.Expr) (float64, error) {
	v, err := e.node(x, 0)
	if err == nil && (math.IsNaN(v) || math.IsInf(v, 0)) {
		err = errors.New("the result is no finite number")
	}
	return v, err
}

// evalDepth bounds chains of parameters.
const evalDepth = 1000

func (e *environment) node(x *syntax.Expr, depth int) (float64, error) {
	if depth > evalDepth {
		return 0, errors.New("the expression is too deep")
	}
	switch x.Op {
	case "num":
		return x.Number, nil
	case "name":
		return e.lookup(x.Text)
	}
	args := make([]float64, len(x.Args))
	for i, a := range x.Args {
		if x.Op == "?:" && i > 0 && (i == 1) != (args[0] != 0) {
			continue
		}
		v, err := e.node(a, depth+1)
		if err != nil {
			return 0, err
		}
		args[i] = v
	}
	if x.Op == "call" {
		return call(x.Text, args)
	}
	return operate(x.Op, args)
}

func truth(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

func operate(op string, a []float64) (float64, error) {
	switch op {
	case "neg":
		return -a[0], nil
	case "not":
		return truth(a[0] == 0), nil
	case "?:":
		if a[0] != 0 {
			return a[1], nil
		}
		return a[2], nil
	case "+":
		return a[0] + a[1], nil
	case "-":
		return a[0] - a[1], nil
	case "*":
		return a[0] * a[1], nil
	case "/":
		if a[1] == 0 {
			return 0, errors.New("division by zero")
		}
		return a[0] / a[1], nil
	case "%":
		return math.Mod(a[0], a[1]), nil
	case "^":
		return math.Pow(a[0], a[1]), nil
	case "==":
		return truth(a[0] == a[1]), nil
	case "!=":
		return truth(a[0] != a[1]), nil
	case "<":
		return truth(a[0] < a[1]), nil
	case "<=":
		return truth(a[0] <= a[1]), nil
	case ">":
		return truth(a[0] > a[1]), nil
	case ">=":
		return truth(a[0] >= a[1]), nil
	case "&&":
		return truth(a[0] != 0 && a[1] != 0), nil
	case "||":
		return truth(a[0] != 0 || a[1] != 0), nil
	}
	return 0, fmt.Errorf("the operator %s is not known", op)
}

// functions of one argument.
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
	case "floor":
		return math.Floor
	case "ceil":
		return math.Ceil
	case "int", "trunc":
		return math.Trunc
	case "nint", "round":
		return math.Round
	}
	return nil
}

func call(name string, a []float64) (float64, error) {
	if f := unary(name); f != nil && len(a) == 1 {
		return f(a[0]), nil
	}
	switch {
	case name == "sgn" && len(a) == 1:
		return truth(a[0] > 0) - truth(a[0] < 0), nil
	case name == "pow" && len(a) == 2:
		return math.Pow(a[0], a[1]), nil
	case (name == "pwr" || name == "pwrs") && len(a) == 2:
		return math.Copysign(math.Pow(math.Abs(a[0]), a[1]), a[0]), nil
	case name == "atan2" && len(a) == 2:
		return math.Atan2(a[0], a[1]), nil
	case name == "hypot" && len(a) == 2:
		return math.Hypot(a[0], a[1]), nil
	case name == "if" && len(a) == 3:
		return operate("?:", a)
	case name == "limit" && len(a) == 3:
		return min(max(a[0], min(a[1], a[2])), max(a[1], a[2])), nil
	case name == "min" && len(a) > 0:
		return fold(a, math.Min), nil
	case name == "max" && len(a) > 0:
		return fold(a, math.Max), nil
	}
	return 0, fmt.Errorf("the function %s with %d arguments is not known", source.Visible(name), len(a))
}

func fold(a []float64, f func(x, y float64) float64) float64 {
	v := a[0]
	for _, x := range a[1:] {
		v = f(v, x)
	}
	return v
}
