package circuit

import (
	"fmt"
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// Includes fetches the files that a deck includes. A nil file with a nil error
// means that the file was told about before.
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
	Depth    int // nesting of subcircuits and includes; 40
	Elements int // elements after flattening; 2,000,000
}

func (l Limits) depth() int {
	if l.Depth > 0 {
		return l.Depth
	}
	return 40
}

func (l Limits) elements() int {
	if l.Elements > 0 {
		return l.Elements
	}
	return 2_000_000
}

// Build flattens a deck into a circuit. Everything that cannot be understood is
// a problem at its place; the rest is built all the same.
func Build(deck *syntax.Deck, opts Options) (*Circuit, []source.Problem) {
	b := &builder{opts: opts, circuit: &Circuit{Title: deck.Title}, names: map[string]NodeID{},
		byName: map[string]*Element{}, parts: map[string]*part.Ratings{}, globals: map[string]bool{},
		used: map[*modelDef]bool{}, decks: map[*source.File]*syntax.Deck{}}
	for _, p := range opts.Parts {
		for _, name := range append([]string{p.Name}, p.Aliases...) {
			b.parts[strings.ToLower(name)] = p
		}
	}
	b.circuit.Nodes = append(b.circuit.Nodes, Node{Name: "0"})
	top := newScope(nil, "")
	b.collect(deck, top, 0)
	b.problems = append(b.problems, deck.Problems...)
	b.applyBoard(top)
	b.place(top, &instance{scope: top, env: b.environment(top, nil, nil)})
	b.finish(top)
	return b.circuit, source.SortProblems(b.problems)
}

// builder is the state of building one circuit.
type builder struct {
	opts     Options
	circuit  *Circuit
	problems []source.Problem
	names    map[string]NodeID   // lower-case full name -> node
	byName   map[string]*Element // lower-case designator -> element
	parts    map[string]*part.Ratings
	globals  map[string]bool
	used     map[*modelDef]bool
	models   []*modelDef                   // of the netlist, in the order of the text
	decks    map[*source.File]*syntax.Deck // included files, parsed once
	stopped  bool                          // a limit was hit and told
	told     map[string]bool
}

func (b *builder) problem(at source.Span, format string, args ...any) {
	b.problems = append(b.problems, source.Problem{Span: at, Message: fmt.Sprintf(format, args...)})
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

// scope is what a subcircuit (or the whole board) declares.
type scope struct {
	parent   *scope
	name     string
	header   *syntax.Subckt
	deck     *syntax.Deck // of the header
	at       source.Span
	pins     []string // lower case
	cards    []cardRef
	params   []paramRef
	models   map[string]*modelDef
	subckts  map[string]*scope
	intents  []intentRef
	selfKind *deviceGuess // what its insides look like; worked out once
}

// cardRef is an element card with the deck it stands in.
type cardRef struct {
	deck *syntax.Deck
	at   syntax.Statement
	e    *syntax.Element
}

type paramRef struct {
	deck *syntax.Deck
	pair syntax.Pair
}

type intentRef struct {
	deck *syntax.Deck
	at   source.Span
	i    *syntax.Intent
}

// modelDef is one .model card of the netlist.
type modelDef struct {
	deck    *syntax.Deck
	m       *syntax.Model
	scope   *scope
	ratings *part.Ratings // made on first use
}

func newScope(parent *scope, name string) *scope {
	return &scope{parent: parent, name: name, models: map[string]*modelDef{}, subckts: map[string]*scope{}}
}

// findSubckt looks a subcircuit up from here outwards.
func (s *scope) findSubckt(name string) *scope {
	name = strings.ToLower(name)
	for ; s != nil; s = s.parent {
		if sub, ok := s.subckts[name]; ok {
			return sub
		}
	}
	return nil
}

// findModel looks a model up from here outwards.
func (s *scope) findModel(name string) *modelDef {
	name = strings.ToLower(name)
	for ; s != nil; s = s.parent {
		if m, ok := s.models[name]; ok {
			return m
		}
	}
	return nil
}

// collector walks the statements of a deck and keeps track of blocks.
type collector struct {
	b       *builder
	deck    *syntax.Deck
	stack   []*scope
	depth   int
	outer   *collector // of the including file
	section string     // the only library section to read; "" for all
	in      string     // the section the reading is in
	branch  []branch
}

// branch is one open .if.
type branch struct {
	taken, active, dead bool
	at                  source.Span
}

// collect reads a deck into a scope.
func (b *builder) collect(deck *syntax.Deck, into *scope, depth int) {
	c := &collector{b: b, deck: deck, stack: []*scope{into}, depth: depth}
	c.run("")
}

func (c *collector) run(section string) {
	c.section = strings.ToLower(section)
	for _, s := range c.deck.Statements {
		c.statement(s)
	}
	for _, open := range c.stack[1:] {
		c.b.problem(open.at, "the subcircuit %s is never closed with .ends", source.Visible(open.name))
	}
	for _, open := range c.branch {
		c.b.problem(open.at, "this .if is never closed with .endif")
	}
}

func (c *collector) top() *scope { return c.stack[len(c.stack)-1] }

func (c *collector) span(s syntax.Statement) source.Span {
	return source.Span{File: c.deck.File, Start: s.Start, End: s.End}
}

// active reports whether statements count here.
func (c *collector) active() bool {
	if c.section != "" && c.in != c.section {
		return false
	}
	return len(c.branch) == 0 || c.branch[len(c.branch)-1].active
}

func (c *collector) statement(s syntax.Statement) {
	if s.Lib != nil {
		c.in = ""
		if !s.Lib.Close {
			c.in = strings.ToLower(s.Lib.Section.Text)
		}
		return
	}
	if s.Condition != nil {
		c.condition(s)
		return
	}
	if !c.active() || c.section == "" && c.in != "" {
		return // a library section that nobody fetched
	}
	top := c.top()
	switch {
	case s.Element != nil:
		top.cards = append(top.cards, cardRef{c.deck, s, s.Element})
	case s.Model != nil:
		def := &modelDef{deck: c.deck, m: s.Model, scope: top}
		top.models[strings.ToLower(s.Model.Name.Text)] = def
		c.b.models = append(c.b.models, def)
	case s.Subckt != nil:
		c.open(s)
	case s.Ends != nil:
		c.close(s)
	case s.Param != nil:
		for _, p := range s.Param.Pairs {
			top.params = append(top.params, paramRef{c.deck, p})
		}
	case s.Include != nil:
		c.include(s)
	case s.Global != nil:
		for _, n := range s.Global.Nodes {
			c.b.globals[strings.ToLower(n.Text)] = true
		}
	case s.Intent != nil:
		top.intents = append(top.intents, intentRef{c.deck, c.span(s), s.Intent})
	case s.Other != nil && !s.Other.Known:
		word := source.Visible(s.Other.Keyword.Text)
		c.b.once("dot "+strings.ToLower(word), c.deck.Span(s.Other.Keyword), "%s is no dot card that is known here; it is passed over", word)
	}
}

// open starts a subcircuit.
func (c *collector) open(s syntax.Statement) {
	sub := newScope(c.top(), s.Subckt.Name.Text)
	sub.header, sub.deck, sub.at = s.Subckt, c.deck, c.span(s)
	for _, n := range s.Subckt.Nodes {
		sub.pins = append(sub.pins, strings.ToLower(n.Text))
	}
	key := strings.ToLower(sub.name)
	if known, ok := c.top().subckts[key]; ok {
		c.b.problem(c.deck.Span(s.Subckt.Name), "the subcircuit %s is defined twice; line %d counts",
			source.Visible(sub.name), known.at.Position().Line)
	} else {
		c.top().subckts[key] = sub
	}
	c.stack = append(c.stack, sub)
}

// close ends a subcircuit.
func (c *collector) close(s syntax.Statement) {
	if len(c.stack) == 1 {
		c.b.problem(c.span(s), "this .ends closes nothing")
		return
	}
	name := s.Ends.Name.Text
	if name != "" && !strings.EqualFold(name, c.top().name) {
		c.b.problem(c.deck.Span(s.Ends.Name), "this .ends names %s, but %s is open", source.Visible(name), source.Visible(c.top().name))
	}
	c.stack = c.stack[:len(c.stack)-1]
}

// include reads another file in place.
func (c *collector) include(s syntax.Statement) {
	at := c.deck.Span(s.Include.Path)
	path := s.Include.Path.Text
	if c.b.opts.Includes == nil {
		c.b.once("include "+path, at, "%s is not read: nothing can be included here", source.Visible(path))
		return
	}
	if c.depth >= c.b.opts.Limits.depth() {
		c.b.once("include depth", at, "includes nest deeper than %d; this one is not read", c.b.opts.Limits.depth())
		return
	}
	file, err := c.b.opts.Includes.Load(c.deck.File, path)
	if err != nil {
		c.b.once("include "+path, at, "%v", err)
		return
	}
	for up := c; up != nil; up = up.outer {
		if up.deck.File == file || up.deck.File.Path == file.Path {
			c.b.once("include loop "+path, at, "%s includes itself; it is not read again", source.Visible(path))
			return
		}
	}
	deck, known := c.b.decks[file]
	if known && s.Include.Section.Text == "" {
		return // its cards are in already
	}
	if !known {
		deck = syntax.Parse(file, false)
		c.b.decks[file] = deck
		c.b.problems = append(c.b.problems, deck.Problems...)
	}
	inner := &collector{b: c.b, deck: deck, stack: []*scope{c.top()}, depth: c.depth + 1, outer: c}
	inner.run(s.Include.Section.Text)
}

// condition follows .if, .elseif, .else and .endif. Their expressions see the
// parameters that stand before them.
func (c *collector) condition(s syntax.Statement) {
	n := len(c.branch)
	switch s.Condition.Keyword {
	case "if":
		outer := c.active()
		yes := outer && c.holds(s)
		c.branch = append(c.branch, branch{taken: yes, active: yes, dead: !outer, at: c.span(s)})
		return
	case "endif":
		if n > 0 {
			c.branch = c.branch[:n-1]
			return
		}
	default:
		if n > 0 {
			top := &c.branch[n-1]
			yes := !top.dead && !top.taken && (s.Condition.Keyword == "else" || c.holds(s))
			top.active, top.taken = yes, top.taken || yes
			return
		}
	}
	c.b.problem(c.span(s), "this .%s belongs to no .if", s.Condition.Keyword)
}

func (c *collector) holds(s syntax.Statement) bool {
	env := c.b.environment(c.top(), nil, nil)
	v, err := env.eval(s.Condition.Expr)
	if err != nil {
		c.b.problem(c.span(s), "this condition cannot be worked out: %v", err)
		return false
	}
	return v != 0
}
