package circuit

import (
	"errors"
	"fmt"
	"math"

	"standoff/netlist/syntax"
)

// eval works out an expression. The result is finite or there is an error.
func (e *environment) eval(x *syntax.Expr) (float64, error) { return e.finite(x, 0) }

func (e *environment) finite(x *syntax.Expr, depth int) (float64, error) {
	v, err := e.node(x, depth)
	if err == nil && (math.IsNaN(v) || math.IsInf(v, 0)) {
		err = errors.New("the result is no finite number")
	}
	return v, err
}

func (e *environment) node(x *syntax.Expr, depth int) (float64, error) {
	if limit := e.b.opts.Limits.expressionDepth(); depth > limit {
		return 0, fmt.Errorf("more than %d parameters and operators hang on one another", limit)
	}
	if e.b.arithmetic++; e.b.arithmetic > e.b.opts.Limits.arithmetic() {
		return 0, errors.New("the netlist asks for more arithmetic than a board can need")
	}
	switch x.Op {
	case "num":
		return x.Number, nil
	case "name":
		return e.lookup(x.Text, depth+1)
	case "?:", "&&", "||":
		return e.choice(x, depth)
	case "call":
		if x.Text == "if" && len(x.Args) == 3 {
			return e.choice(x, depth)
		}
	}
	args := make([]float64, len(x.Args))
	for i, a := range x.Args {
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

// choice works out only what it needs of its arguments: the other branch may
// well have no value.
func (e *environment) choice(x *syntax.Expr, depth int) (float64, error) {
	first, err := e.node(x.Args[0], depth+1)
	if err != nil {
		return 0, err
	}
	switch {
	case x.Op == "&&" && first == 0, x.Op == "||" && first != 0:
		return truth(first != 0), nil
	case x.Op == "&&" || x.Op == "||":
		v, err := e.node(x.Args[1], depth+1)
		return truth(v != 0), err
	case first != 0:
		return e.node(x.Args[1], depth+1)
	}
	return e.node(x.Args[2], depth+1)
}

func truth(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

func operate(op string, a []float64) (float64, error) {
	if len(a) == 1 {
		if op == "not" {
			return truth(a[0] == 0), nil
		}
		return -a[0], nil
	}
	switch op {
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
	}
	return compare(op, a[0], a[1])
}

func compare(op string, a, b float64) (float64, error) {
	switch op {
	case "==":
		return truth(a == b), nil
	case "!=":
		return truth(a != b), nil
	case "<":
		return truth(a < b), nil
	case "<=":
		return truth(a <= b), nil
	case ">":
		return truth(a > b), nil
	case ">=":
		return truth(a >= b), nil
	}
	return 0, fmt.Errorf("the operator %s is not known", op)
}
