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

// environment holds the parameters that an instance sees: its own, worked out
// on demand so that their order does not matter, then those of the use around it.
type environment struct {
	outer  *environment
	values map[string]*parameter
	worked []*parameter // those that were worked out
	failed bool         // one of them could not be
	b      *builder
}

// parameter is one name.
type parameter struct {
	value syntax.Value
	env   *environment // in which the value is worked out
	state workState
	v     float64
	err   error
}

// workState tells loops.
type workState int8

const (
	notWorked workState = iota
	beingWorked
	isWorked
)

// environment makes the parameters of an instance: overrides of the X line
// (worked out outside), then the header's defaults, then .param cards.
func (b *builder) environment(in *instance, outer *environment, overrides []syntax.Pair) *environment {
	s := in.scope
	var defaults []syntax.Pair
	if s.header != nil {
		defaults = s.header.Defaults
	}
	count := len(s.params) + len(defaults) + len(overrides)
	if count == 0 && outer != nil {
		return outer
	}
	env := &environment{outer: outer, values: make(map[string]*parameter, count), b: b}
	guarded := false
	for _, p := range s.params {
		guarded = guarded || p.guard != nil
		if p.guard == nil {
			env.put(p.pair, env)
		}
	}
	for _, p := range defaults {
		env.put(p, env)
	}
	for _, p := range overrides {
		env.put(p, outer)
	}
	if guarded {
		b.guardedParams(in, env, overrides)
	}
	return env
}

// guardedParams adds those that stand in a branch which this instance takes.
func (b *builder) guardedParams(in *instance, env *environment, overrides []syntax.Pair) {
	in.env = env
	for _, p := range in.scope.params {
		if p.guard != nil && b.holds(in, p.guard) {
			env.set(p.pair)
		}
	}
	for _, p := range overrides {
		env.put(p, env.outer)
	}
}

// put gives a name a value that is worked out in another environment.
func (e *environment) put(p syntax.Pair, in *environment) {
	e.values[strings.ToLower(p.Key.Text)] = &parameter{value: p.Value, env: in}
}

// set gives a name a value after others were worked out. They are worked out
// anew where they may have hung on it.
func (e *environment) set(p syntax.Pair) {
	_, known := e.values[strings.ToLower(p.Key.Text)]
	e.put(p, e)
	if !known && !e.failed {
		return
	}
	e.failed = false
	for _, w := range e.worked {
		w.state = notWorked
	}
	e.worked = e.worked[:0]
}

// early returns the parameters of the board by which its .if cards are decided.
func (c *collector) early() *environment {
	b := c.b
	if b.early == nil {
		b.early = &environment{values: map[string]*parameter{}, b: b}
		for _, p := range c.stack[0].scope.params {
			b.early.put(p.pair, b.early)
		}
	}
	if !c.scanned {
		c.scanned = true
		c.lookAhead()
	}
	return b.early
}

// lookAhead adds the parameters of this deck that stand in no subcircuit, no
// section and no .if, wherever in the text they are.
func (c *collector) lookAhead() {
	depth := 0
	for i := range c.deck.Statements {
		switch s := &c.deck.Statements[i]; {
		case s.Subckt != nil, s.Lib != nil && !s.Lib.Close, s.Condition != nil && s.Condition.Keyword == "if":
			depth++
		case s.Ends != nil, s.Lib != nil, s.Condition != nil && s.Condition.Keyword == "endif":
			depth--
		case s.Param != nil && depth <= 0:
			for _, p := range s.Param.Pairs {
				c.b.early.put(p, c.b.early)
			}
		}
	}
}

// lookup works a parameter out.
func (e *environment) lookup(name string, depth int) (float64, error) {
	lower := strings.ToLower(name)
	for at := e; at != nil; at = at.outer {
		if p, ok := at.values[lower]; ok {
			return at.work(p, name, depth)
		}
	}
	switch lower {
	case "pi":
		return math.Pi, nil
	case "temper", "temp":
		return 25, nil
	}
	return 0, fmt.Errorf("the parameter %s is not defined", source.Visible(name))
}

func (e *environment) has(name string) bool {
	lower := strings.ToLower(name)
	for at := e; at != nil; at = at.outer {
		if _, ok := at.values[lower]; ok {
			return true
		}
	}
	return false
}

func (e *environment) work(p *parameter, name string, depth int) (float64, error) {
	switch p.state {
	case beingWorked:
		return 0, fmt.Errorf("the parameter %s depends on itself", source.Visible(name))
	case isWorked:
		return p.v, p.err
	}
	p.state = beingWorked
	p.v, p.err = p.env.valueAt(p.value, depth+1)
	p.state = isWorked
	e.failed = e.failed || p.err != nil
	e.worked = append(e.worked, p)
	return p.v, p.err
}

// errText says that a value is a text.
var errText = errors.New("a text stands where a number belongs")

// value works out a value of a card: a number, an expression, or the bare name
// of a parameter.
func (e *environment) value(v syntax.Value) (float64, error) { return e.valueAt(v, 0) }

func (e *environment) valueAt(v syntax.Value, depth int) (float64, error) {
	switch {
	case v.Quoted:
		return 0, errText
	case v.Expr != nil:
		return e.finite(v.Expr, depth)
	}
	if e != nil && isName(v.Text) && e.has(v.Text) {
		return e.lookup(v.Text, depth)
	}
	n, err := quantity.Parse(v.Text)
	return n.Value, err
}

// isName reports whether a word can name a parameter.
func isName(s string) bool {
	for i := range len(s) {
		c := s[i]
		if !(c == '_' || c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' || i > 0 && c >= '0' && c <= '9') {
			return false
		}
	}
	return s != ""
}
