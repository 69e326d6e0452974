package circuit

import (
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// collector walks the statements of one deck, sorts them into scopes and keeps
// track of what is open.
type collector struct {
	b      *builder
	deck   *syntax.Deck
	stack  []openScope
	blocks []block
	base   *guard // of the card that includes this file

	depth   int
	outer   *collector // of the including file
	section string     // the only library section to read, lower case; "" for what stands in none
	in      string     // the section the reading is in
	found   bool       // the section was met
	scanned bool       // the parameters of this deck were looked up ahead
}

// openScope is a scope with the number of blocks that were open around it.
type openScope struct {
	scope  *scope
	blocks int
}

// collect reads a top-level deck.
func (b *builder) collect(deck *syntax.Deck, into *scope) {
	into.cards = make([]cardRef, 0, len(deck.Statements))
	c := &collector{b: b, deck: deck, stack: []openScope{{into, 0}}}
	c.run()
}

func (c *collector) run() {
	sections := c.sections()
	for i := range c.deck.Statements {
		s := &c.deck.Statements[i]
		switch {
		case s.Lib != nil:
			c.fetchable(*s, sections[i])
		case c.section != c.in:
			// a library section that nobody fetched, or not the one that was
		case s.Condition != nil:
			c.condition(*s)
		case c.active():
			c.statement(s)
		}
	}
	for _, open := range c.stack[1:] {
		c.b.problem(open.scope.at, "the subcircuit %s is never closed with .ends", source.Visible(open.scope.name))
	}
	for _, open := range c.blocks {
		c.b.problem(open.at, "this .if is never closed with .endif")
	}
}

func (c *collector) top() *scope { return c.stack[len(c.stack)-1].scope }

// outside is the number of blocks that were open before the present scope.
func (c *collector) outside() int { return c.stack[len(c.stack)-1].blocks }

func (c *collector) span(s syntax.Statement) source.Span {
	return source.Span{File: c.deck.File, Start: s.Start, End: s.End}
}

// sections lists the statements that open a library section which is closed
// further down. A .lib NAME without its .endl names a file.
func (c *collector) sections() map[int]bool {
	var closed map[int]bool
	open := -1
	for i := range c.deck.Statements {
		switch lib := c.deck.Statements[i].Lib; {
		case lib == nil:
		case !lib.Close:
			open = i
		case open >= 0:
			if closed == nil {
				closed = map[int]bool{}
			}
			closed[open] = true
			open = -1
		}
	}
	return closed
}

// fetchable opens or closes a section, or fetches a file of that name.
func (c *collector) fetchable(s syntax.Statement, closed bool) {
	switch {
	case s.Lib.Close:
		c.in = ""
	case closed:
		c.in = strings.ToLower(s.Lib.Section.Text)
		c.found = c.found || c.in == c.section
	case c.section == c.in && c.active():
		c.include(syntax.Include{Path: s.Lib.Section})
	}
}

// statement sorts one statement that counts here.
func (c *collector) statement(s *syntax.Statement) {
	switch {
	case s.Element != nil:
		c.element(s)
	case s.Model != nil:
		c.model(s.Model)
	case s.Subckt != nil:
		c.open(*s)
	case s.Ends != nil:
		c.close(*s)
	case s.Param != nil:
		c.params(s.Param.Pairs)
	case s.Include != nil:
		c.include(*s.Include)
	case s.Global != nil:
		c.global(s.Global.Nodes)
	case s.Intent != nil:
		c.intent(s)
	case s.Other != nil && !s.Other.Known:
		word := s.Other.Keyword
		c.b.once("dot "+strings.ToLower(word.Text), c.deck.Span(word),
			"%s is no dot card that is known here; it is passed over", source.Visible(word.Text))
	}
}

func (c *collector) element(s *syntax.Statement) {
	top := c.top()
	top.cards = append(top.cards, cardRef{c.deck, s.Element, s.Start, s.End, c.guard()})
	top.couples = top.couples || s.Element.Name.Text[0]|0x20 == 'k'
}

func (c *collector) params(pairs []syntax.Pair) {
	top := c.top()
	foreseen := c.scanned && len(c.blocks) == 0 && c.in == ""
	for _, p := range pairs {
		top.params = append(top.params, paramRef{p, c.guard()})
		if top.parent == nil && c.b.early != nil && !foreseen {
			c.b.early.set(p)
		}
	}
}

func (c *collector) global(nodes []syntax.Word) {
	if c.b.globals == nil {
		c.b.globals = map[string]NodeID{}
	}
	for _, n := range nodes {
		c.b.globals[strings.ToLower(n.Text)] = noNode
	}
}

func (c *collector) intent(s *syntax.Statement) {
	top := c.top()
	top.intents = append(top.intents, intentRef{c.deck, c.span(*s), s.Intent, c.guard()})
	for _, pair := range s.Intent.Pairs {
		if strings.EqualFold(pair.Key.Text, "part") {
			if top.asksPart == nil {
				top.asksPart = map[string]syntax.IntentPair{}
			}
			top.asksPart[strings.ToLower(s.Intent.Subject.Text)] = pair
			c.b.declaresParts = true
		}
	}
}

// model files a .model card. Of two in one scope the last counts; where they are
// ratings that differ, that is told.
func (c *collector) model(m *syntax.Model) {
	top := c.top()
	if top.models == nil {
		top.models = map[string][]*modelDef{}
	}
	def := &modelDef{deck: c.deck, m: m, scope: top, guard: c.guard()}
	key := strings.ToLower(m.Name.Text)
	if n := len(top.models[key]); n > 0 {
		known := top.models[key][n-1]
		rated := isTrigger(part.Kind(strings.ToLower(m.Type.Text)))
		if rated && def.guard == nil && known.guard == nil && !sameModel(known, def) {
			c.b.problem(c.deck.Span(m.Name), "the model %s is defined twice, and differently; this one counts",
				source.Visible(m.Name.Text))
		}
	}
	top.models[key] = append(top.models[key], def)
	c.b.models = append(c.b.models, def)
}

// sameModel compares two cards word by word.
func sameModel(a, b *modelDef) bool {
	if len(a.m.Pairs) != len(b.m.Pairs) || !strings.EqualFold(a.m.Type.Text, b.m.Type.Text) {
		return false
	}
	for i, p := range a.m.Pairs {
		q := b.m.Pairs[i]
		if !strings.EqualFold(p.Key.Text, q.Key.Text) || p.Value.Text != q.Value.Text {
			return false
		}
	}
	return true
}

// open starts a subcircuit.
func (c *collector) open(s syntax.Statement) {
	top := c.top()
	sub := c.b.newScope(top, s.Subckt.Name.Text)
	sub.header, sub.deck, sub.at = s.Subckt, c.deck, c.span(s)
	for _, n := range s.Subckt.Nodes {
		sub.pins = append(sub.pins, strings.ToLower(n.Text))
	}
	c.stack = append(c.stack, openScope{sub, len(c.blocks)})
}

// close ends a subcircuit and files it with the scope around it. Of two with one
// name the first counts; where they differ, that is told.
func (c *collector) close(s syntax.Statement) {
	if len(c.stack) == 1 {
		c.b.problem(c.span(s), "this .ends closes nothing")
		return
	}
	sub := c.top()
	sub.end = c.span(s)
	if name := s.Ends.Name.Text; name != "" && !strings.EqualFold(name, sub.name) {
		c.b.problem(c.deck.Span(s.Ends.Name), "this .ends names %s, but %s is open", source.Visible(name),
			source.Visible(sub.name))
	}
	conditional := len(c.blocks) > c.outside()
	c.stack = c.stack[:len(c.stack)-1]
	c.file(sub, conditional || c.guard() != nil)
}

func (c *collector) file(sub *scope, conditional bool) {
	top, key := c.top(), strings.ToLower(sub.name)
	known, twice := top.subckts[key]
	switch {
	case !twice:
		if top.subckts == nil {
			top.subckts = map[string]*scope{}
		}
		top.subckts[key] = sub
	case !conditional && known.text() != sub.text():
		c.b.problem(sub.at, "the subcircuit %s is defined twice, and differently; the one on line %d of %s counts",
			source.Visible(sub.name), known.at.Position().Line, source.Visible(known.at.File.Path))
	}
}

// text returns the subcircuit as it is written.
func (s *scope) text() string {
	if s.at.File != s.end.File {
		return ""
	}
	return source.Span{File: s.at.File, Start: s.at.Start, End: s.end.End}.Text()
}
