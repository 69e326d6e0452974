package part

import (
	"math"
	"slices"
	"strings"

	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// card is the state of reading one .model card.
type card struct {
	deck     *syntax.Deck
	model    *syntax.Model
	resolve  Resolve
	ratings  *Ratings
	spice    bool
	settings []setting
	marks    map[string]Mark // by symbol, or symbol with a side; the row's under ""
	problems []source.Problem
}

// setting is one key of a card, taken apart.
type setting struct {
	pair       syntax.Pair
	base, side string
	symbol     Symbol
	known      bool
}

func newCard(deck *syntax.Deck, m *syntax.Model, resolve Resolve, origin string) *card {
	kind, spice := typeKind(m.Type.Text)
	r := &Ratings{Name: m.Name.Text, Kind: kind, Origin: origin, At: deck.Span(m.Name),
		Figures: make(map[string]Rating, len(m.Pairs)), Texts: map[string]string{}}
	return &card{deck: deck, model: m, resolve: resolve, ratings: r, spice: spice, marks: map[string]Mark{}}
}

// read takes the card in.
func (c *card) read() *Ratings {
	if c.ratings.Kind == "" {
		return c.ratings
	}
	c.texts()
	for _, p := range c.model.Pairs {
		if key := strings.ToLower(p.Key.Text); !isText(key) {
			c.settings = append(c.settings, c.split(p, key))
		}
	}
	// What names a side comes first, so that a bare symbol can be read beside it.
	for i := range c.settings {
		if c.settings[i].side != "" {
			c.take(&c.settings[i])
		}
	}
	for i := range c.settings {
		if c.settings[i].side == "" {
			c.take(&c.settings[i])
		}
	}
	if !c.spice {
		for _, w := range c.model.Flags {
			c.problem(w, "%s stands alone: a rating is written as symbol=value", source.Visible(w.Text))
		}
	}
	c.check()
	c.marksAreUsed()
	c.worstQuadrant()
	return c.ratings
}

// split takes _min, _typ or _max off a key unless the whole is a symbol.
func (c *card) split(p syntax.Pair, key string) setting {
	if c.spice && key == "v_breakdown" {
		key = "bv"
	}
	s := setting{pair: p, base: key}
	if s.symbol, s.known = SymbolOf(c.ratings.Kind, key); s.known && !c.ownSpread(key) {
		return s
	}
	base, side, ok := cutSide(key)
	symbol, known := SymbolOf(c.ratings.Kind, base)
	if ok && (known || !c.spice) {
		return setting{p, base, side, symbol, known}
	}
	return s
}

// cutSide splits _min, _typ or _max off a word.
func cutSide(word string) (base, side string, ok bool) {
	i := max(len(word)-len("_min"), 0)
	switch word[i:] {
	case "_min", "_typ", "_max":
		return word[:i], word[i:], true
	}
	return word, "", false
}

// ownSpread reports whether a key is a side of the current i although a symbol is
// spelled so too: where no resistor sets the current, i_min and i_max are no
// range of settings.
func (c *card) ownSpread(key string) bool {
	if c.ratings.Kind != CurrentSource || key != "i_min" && key != "i_max" {
		return false
	}
	return !slices.ContainsFunc(c.model.Pairs, func(p syntax.Pair) bool {
		return strings.HasPrefix(strings.ToLower(p.Key.Text), "v_per_k")
	})
}

// take takes one figure.
func (c *card) take(s *setting) {
	switch {
	case s.known:
		c.figure(s)
	case c.spice: // a setting of SPICE's own: kept where it is a number
		if v, ok := c.resolve(s.pair.Value); ok && !math.IsNaN(v) && !math.IsInf(v, 0) {
			c.file(s, v)
		}
	default:
		c.problem(s.pair.Key, "%s is no rating of a %s%s", source.Visible(s.pair.Key.Text), c.ratings.Kind,
			suggestion(c.ratings.Kind, s.base, s.side))
	}
}

// figure takes a figure whose symbol is known.
func (c *card) figure(s *setting) {
	v, ok := c.number(s)
	if !ok {
		return
	}
	if math.IsNaN(v) || math.IsInf(v, 0) || v < 0 && !s.symbol.signed() || v == 0 && !s.symbol.mayVanish() {
		if !c.spice || s.base != "bv" { // SPICE itself allows any bv
			c.problem(s.pair.Value.Word, "%s = %s makes no sense for the %s", source.Visible(s.pair.Key.Text),
				quantity.Format(v, s.symbol.Unit), s.symbol.Meaning)
		}
		return
	}
	c.file(s, v)
}

// number works the value of a figure out.
func (c *card) number(s *setting) (float64, bool) {
	value, key := s.pair.Value, source.Visible(s.pair.Key.Text)
	plain := !value.Quoted && value.Expr == nil
	if text, percent := strings.CutSuffix(value.Text, "%"); percent && plain {
		if !s.symbol.relative() {
			c.problem(value.Word, "%s is a figure in %s, not in per cent", key, s.symbol.Unit)
			return 0, false
		}
		if n, err := quantity.Parse(text); err == nil {
			return n.Value / 100, true
		}
	} else if v, ok := c.resolve(value); ok {
		return v, true
	}
	if _, err := quantity.Parse(value.Text); err != nil && plain {
		c.problem(value.Word, "%s: %s", key, source.Visible(err.Error()))
	} else {
		c.problem(value.Word, "%s has no value that can be worked out", key)
	}
	return 0, false
}

// file files a value under its side.
func (c *card) file(s *setting, v float64) {
	r := c.ratings.Figures[s.base]
	side := s.side
	if side == "" {
		side = s.symbol.bareSide(r, c.marks[""] != Declared)
	}
	if twice := r.has(side); twice && !c.spice {
		c.problem(s.pair.Key, "%s: %s is given already", source.Visible(s.pair.Key.Text), s.base+side)
		return
	}
	mark := c.markFor(s.base, side)
	if side == "_min" || side == "" {
		r.Min, r.HasMin, r.MinMark = v, true, mark
	}
	if side == "_typ" || side == "" {
		r.Typ, r.HasTyp, r.TypMark = v, true, mark
	}
	if side == "_max" || side == "" {
		r.Max, r.HasMax, r.MaxMark = v, true, mark
	}
	r.Mark = r.worstMark(s.symbol.Sense)
	r.Source = c.sourceFor(r.Mark)
	c.ratings.Figures[s.base] = r
}

// bareSide says which side a symbol that stands alone means; the empty side is
// all of them. sheet says that the card is a row of a data sheet.
func (s Symbol) bareSide(r Rating, sheet bool) string {
	alone := !r.HasMin && !r.HasTyp && !r.HasMax
	switch {
	case alone && !sheet: // what a user says of his part is what it is
		return ""
	case s.Sense == Greatest:
		return "_max"
	case s.Sense == Least:
		return "_min"
	case alone:
		return ""
	}
	return "_typ" // beside its ends a bare spread is the nominal value
}

// has reports whether a side of the figure is given; the empty side is any.
func (r Rating) has(side string) bool {
	switch side {
	case "_min":
		return r.HasMin
	case "_typ":
		return r.HasTyp
	case "_max":
		return r.HasMax
	}
	return r.HasMin || r.HasTyp || r.HasMax
}

// worstMark returns the trust in the guaranteed side of a figure.
func (r Rating) worstMark(sense Sense) Mark {
	switch {
	case sense == Greatest && r.HasMax, !r.HasMin && r.HasMax:
		return r.MaxMark
	case sense == Least && r.HasMin, !r.HasMax && r.HasMin:
		return r.MinMark
	case r.HasMin:
		return max(r.MinMark, r.MaxMark)
	}
	return r.TypMark
}
