package circuit

import (
	"fmt"
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// Includes fetches the files that a deck includes. The same file gives the same
// *source.File. A nil file with a nil error means that there is nothing to read
// and nothing to say.
type Includes interface {
	Load(from *source.File, path string) (*source.File, error)
}

// Options are what a circuit is built with.
type Options struct {
	Parts    []*part.Ratings // of --parts files; they win over the library
	Includes Includes        // nil: nothing may be included
	Limits   Limits
}

// Limits bound what a netlist may ask for. A zero limit stands for the default.
type Limits struct {
	Depth           int // nesting of subcircuits and of includes; 40
	Elements        int // elements after flattening; 2,000,000
	Includes        int // files included, counted each time; 1,000
	ExpressionDepth int // parameters and operators that hang on one another; 2,000
}

func (l Limits) depth() int           { return limitOr(l.Depth, 40) }
func (l Limits) elements() int        { return limitOr(l.Elements, 2_000_000) }
func (l Limits) includes() int        { return limitOr(l.Includes, 1_000) }
func (l Limits) expressionDepth() int { return limitOr(l.ExpressionDepth, 2_000) }

// work bounds what the uses of subcircuits may cost besides elements: the words
// of their cards, whether they make an element or not, and the length of names.
func (l Limits) work() int { return 16 * l.elements() }

// arithmetic bounds the steps of all expressions together.
func (l Limits) arithmetic() int { return 50 * l.elements() }

func limitOr(limit, standard int) int {
	if limit > 0 {
		return limit
	}
	return standard
}

// Build flattens a deck into a circuit. Everything that cannot be understood is
// a problem at its place; the rest is built all the same. Time and memory grow
// in proportion to the number of elements.
func Build(deck *syntax.Deck, opts Options) (*Circuit, []source.Problem) {
	b := &builder{opts: opts, circuit: &Circuit{Title: deck.Title}, file: deck.File}
	b.problems = append(b.problems, deck.Problems...)
	top := b.newScope(nil, "")
	b.collect(deck, top)
	b.circuit.Nodes = make([]Node, 1, len(top.cards)+1)
	b.circuit.Nodes[Ground].Name = "0"
	b.circuit.Elements = make([]*Element, 0, len(top.cards))
	b.reachInside(top)
	b.board = &instance{scope: top}
	b.board.env = b.environment(b.board, nil, nil)
	b.applyBoard(top, b.board.env)
	b.place(b.board)
	b.finish()
	return b.circuit, source.SortProblems(b.problems)
}

// builder is the state of building one circuit.
type builder struct {
	opts     Options
	circuit  *Circuit
	file     *source.File // of the board itself
	problems []source.Problem
	told     map[string]bool      // troubles that are told once
	toldAt   map[source.Span]bool // places inside subcircuits at which something was told

	board   *instance
	scopes  []*scope
	models  []*modelDef // of the netlist, in the order of the text
	parts   partIndex   // of --parts files
	looked  partIndex   // every name that was looked for, as it was written; nil where it is not there
	globals map[string]NodeID
	reach   map[string]NodeID             // inner nodes that the board names by their path
	decks   map[*source.File]*syntax.Deck // included files, parsed once
	fetched map[fetch]bool
	early   *environment // parameters of the board, while the text is still walked

	includes         int  // files that were included
	work, arithmetic int  // spent on subcircuits, and on expressions
	declaresParts    bool // some part= line exists
	stopped          bool // a limit was hit and told
	elements         []Element
	ids              []NodeID
}

func (b *builder) problem(at source.Span, format string, args ...any) {
	b.problems = append(b.problems, source.Problem{Span: at, Message: source.Brief(fmt.Sprintf(format, args...))})
}

// once reports a trouble of a kind the first time only.
func (b *builder) once(key string, at source.Span, format string, args ...any) {
	if b.told == nil {
		b.told = map[string]bool{}
	}
	if !b.told[key] {
		b.told[key] = true
		b.problem(at, format, args...)
	}
}

// inside reports a trouble in an instance. What is wrong with a card of a
// subcircuit is told for its first use only.
func (b *builder) inside(in *instance, at source.Span, format string, args ...any) {
	if in.outer != nil {
		if b.toldAt == nil {
			b.toldAt = map[source.Span]bool{}
		}
		if b.toldAt[at] {
			return
		}
		b.toldAt[at] = true
	}
	b.problem(at, format, args...)
}

// partIndex finds the ratings of --parts files by name and alias.
type partIndex map[string]*part.Ratings

// lookup finds a part as a --parts file has it, or the one it has in place of
// the library's part of this name: a decorated name counts as the plain one.
func (b *builder) lookup(name string) *part.Ratings {
	if r, known := b.looked[name]; known {
		return r
	}
	r := b.lookUp(name)
	if b.looked == nil {
		b.looked = map[string]*part.Ratings{}
	}
	b.looked[name] = r
	return r
}

func (b *builder) lookUp(name string) *part.Ratings {
	if b.parts == nil {
		b.parts = partIndex{}
		for _, p := range b.opts.Parts {
			b.parts[strings.ToLower(p.Name)] = p
			for _, alias := range p.Aliases {
				b.parts[strings.ToLower(alias)] = p
			}
		}
	}
	if r := b.parts[strings.ToLower(name)]; r != nil {
		return r
	}
	r, ok := part.Lookup(name)
	if !ok {
		return nil
	}
	for _, alias := range append([]string{r.Name}, r.Aliases...) {
		if own := b.parts[strings.ToLower(alias)]; own != nil && len(b.parts) > 0 {
			return own
		}
	}
	return r
}
