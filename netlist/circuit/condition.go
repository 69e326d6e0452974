package circuit

import (
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// guard is a branch of an .if: what stands in it counts only where the branch is
// taken. Inside a subcircuit that can differ from use to use.
type guard struct {
	outer  *guard
	group  *ifGroup
	branch int
}

// ifGroup is one .if with all its branches; the condition of .else is nil.
type ifGroup struct {
	conditions []*syntax.Expr
	places     []source.Span
}

// holds reports whether what stands behind a guard counts in this instance.
func (b *builder) holds(in *instance, g *guard) bool {
	for ; g != nil; g = g.outer {
		if b.chosen(in, g.group) != g.branch {
			return false
		}
	}
	return true
}

// chosen returns the branch that an instance takes, -1 for none.
func (b *builder) chosen(in *instance, group *ifGroup) int {
	if taken, known := in.chosen[group]; known {
		return taken
	}
	taken := -1
	for i, expr := range group.conditions {
		if expr == nil {
			taken = i
			break
		}
		v, err := in.env.eval(expr)
		if err != nil {
			b.inside(in, group.places[i], "this condition cannot be worked out: %v", err)
		} else if v != 0 {
			taken = i
			break
		}
	}
	if in.chosen == nil {
		in.chosen = map[*ifGroup]int{}
	}
	in.chosen[group] = taken
	return taken
}

// block is one .if that is open while the text is walked.
type block struct {
	group *ifGroup
	guard *guard
	outer *guard
	at    source.Span
	// On the board itself a branch is chosen at once.
	taken, active, dead bool
}

// condition follows .if, .elseif, .else and .endif.
func (c *collector) condition(s syntax.Statement) {
	keyword := s.Condition.Keyword
	n := len(c.blocks)
	if keyword != "if" && n == 0 {
		c.b.problem(c.span(s), "this .%s belongs to no .if", keyword)
		return
	}
	switch keyword {
	case "if":
		if limit := c.b.opts.Limits.depth(); n >= limit {
			c.b.once("if depth", c.span(s), "conditions nest deeper than %d; what is deeper is not read", limit)
			c.blocks = append(c.blocks, block{group: &ifGroup{}, at: c.span(s), dead: true})
			return
		}
		c.blocks = append(c.blocks, block{group: &ifGroup{}, outer: c.guard(), at: c.span(s), dead: !c.active()})
		c.branch(&c.blocks[n], s)
	case "endif":
		c.blocks = c.blocks[:n-1]
	default:
		c.branch(&c.blocks[n-1], s)
	}
}

// branch starts a branch of an open .if.
func (c *collector) branch(open *block, s syntax.Statement) {
	g := open.group
	g.conditions = append(g.conditions, s.Condition.Expr)
	g.places = append(g.places, c.span(s))
	open.guard = &guard{open.outer, g, len(g.conditions) - 1}
	if c.top().parent != nil {
		open.active = !open.dead
		return // chosen by every instance for itself
	}
	open.active = !open.dead && !open.taken && (s.Condition.Expr == nil || c.true(s))
	open.taken = open.taken || open.active
}

// true works a condition of the board itself out. It sees every parameter that
// no condition hides, and those that were chosen before it.
func (c *collector) true(s syntax.Statement) bool {
	v, err := c.early().eval(s.Condition.Expr)
	if err != nil {
		c.b.problem(c.span(s), "this condition cannot be worked out: %v", err)
	}
	return err == nil && v != 0
}

// guard returns the condition under which cards count here; nil where they
// always do.
func (c *collector) guard() *guard {
	if c.top().parent == nil {
		return nil
	}
	if n := len(c.blocks); n > c.outside() {
		return c.blocks[n-1].guard
	}
	return c.base
}

// active reports whether statements count here at all.
func (c *collector) active() bool {
	return len(c.blocks) == 0 || c.blocks[len(c.blocks)-1].active
}
