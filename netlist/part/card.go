package part

import (
	"math"
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
	marks    map[string]Mark        // by symbol, or symbol with a side; the row's under ""
	places   map[string]syntax.Word // every key of the card where it stands
	problems []source.Problem
}

func newCard(deck *syntax.Deck, m *syntax.Model, resolve Resolve, origin string) *card {
	kind, spice := typeKind(m.Type.Text)
	r := &Ratings{Name: m.Name.Text, Kind: kind, Figures: map[string]Rating{}, Texts: map[string]string{},
		Origin: origin, At: deck.Span(m.Name)}
	return &card{deck: deck, model: m, resolve: resolve, ratings: r, spice: spice,
		marks: map[string]Mark{}, places: map[string]syntax.Word{}}
}

// read takes the card in and returns the parts it makes.
func (c *card) read() []*Ratings {
	if c.ratings.Kind == "" {
		return []*Ratings{c.ratings}
	}
	c.texts()
	// What names a side comes first, so that a bare symbol can be read beside it.
	for _, p := range c.model.Pairs {
		if base, side := c.split(p); side != "" {
			c.take(p, base, side)
		}
	}
	for _, p := range c.model.Pairs {
		if base, side := c.split(p); side == "" {
			c.take(p, base, side)
		}
	}
	if !c.spice {
		for _, w := range c.model.Flags {
			c.problem(w, "%s stands alone: a rating is written as symbol=value", source.Visible(w.Text))
		}
	}
	c.check()
	c.trust()
	c.worstQuadrant()
	return c.classes()
}

// split takes _min, _typ or _max off a key unless the whole is a symbol.
func (c *card) split(p syntax.Pair) (base, side string) {
	key := strings.ToLower(p.Key.Text)
	if c.spice && key == "v_breakdown" {
		return "bv", ""
	}
	if _, whole := SymbolOf(c.ratings.Kind, key); whole {
		return key, ""
	}
	for _, side := range []string{"_min", "_typ", "_max"} {
		base, ok := strings.CutSuffix(key, side)
		if _, known := SymbolOf(c.ratings.Kind, base); ok && (known || !c.spice) {
			return base, side
		}
	}
	return key, ""
}

// take takes one figure.
func (c *card) take(p syntax.Pair, base, side string) {
	if isText(base) {
		return
	}
	s, known := SymbolOf(c.ratings.Kind, base)
	switch {
	case known:
		c.figure(p, s, side)
	case c.spice: // a setting of SPICE's own: kept where it is a number
		if v, ok := c.resolve(p.Value); ok && !math.IsNaN(v) && !math.IsInf(v, 0) {
			c.ratings.Figures[base] = exact(v)
		}
	default:
		c.problem(p.Key, "%s is no rating of a %s%s", source.Visible(p.Key.Text), c.ratings.Kind, suggestion(c.ratings.Kind, base, side))
	}
}

func exact(v float64) Rating {
	return Rating{Min: v, Typ: v, Max: v, HasMin: true, HasTyp: true, HasMax: true}
}

// figure takes a figure whose symbol is known.
func (c *card) figure(p syntax.Pair, s Symbol, side string) {
	if _, twice := c.places[s.Name+side]; twice && !c.spice {
		c.problem(p.Key, "%s is given twice", source.Visible(p.Key.Text))
		return
	}
	c.places[s.Name+side] = p.Key
	v, ok := c.number(p, s)
	if !ok {
		return
	}
	if math.IsNaN(v) || math.IsInf(v, 0) || v < 0 && !s.signed() || v == 0 && !s.mayVanish() {
		if !c.spice || s.Name != "bv" { // SPICE itself allows any bv
			c.problem(p.Value.Word, "%s = %s makes no sense for the %s", source.Visible(p.Key.Text), quantity.Format(v, s.Unit), s.Meaning)
		}
		return
	}
	c.set(p, s, side, v)
}

// number works the value of a figure out.
func (c *card) number(p syntax.Pair, s Symbol) (float64, bool) {
	text, percent := strings.CutSuffix(p.Value.Text, "%")
	percent = percent && !p.Value.Quoted && p.Value.Expr == nil
	if percent && !s.relative() {
		c.problem(p.Value.Word, "%s is a figure in %s, not in per cent", source.Visible(p.Key.Text), s.Unit)
		return 0, false
	}
	if percent {
		n, err := quantity.Parse(text)
		if err == nil {
			return n.Value / 100, true
		}
	} else if v, ok := c.resolve(p.Value); ok {
		return v, true
	}
	if _, err := quantity.Parse(p.Value.Text); err != nil && !p.Value.Quoted && p.Value.Expr == nil {
		c.problem(p.Value.Word, "%s: %s", source.Visible(p.Key.Text), source.Visible(err.Error()))
	} else {
		c.problem(p.Value.Word, "%s has no value that can be worked out", source.Visible(p.Key.Text))
	}
	return 0, false
}

// set files a value under its side; a bare one is exact where it stands alone,
// and beside others goes by the sense of its symbol.
func (c *card) set(p syntax.Pair, s Symbol, side string, v float64) {
	r := c.ratings.Figures[s.Name]
	if side == "" {
		switch {
		case !r.HasMin && !r.HasTyp && !r.HasMax: // alone, a bare figure is exact
		case s.Sense == Greatest:
			side = "_max"
		case s.Sense == Least:
			side = "_min"
		case r.HasMin || r.HasTyp || r.HasMax:
			c.problem(p.Key, "%s without _min, _typ or _max is exact; it does not go with a spread", source.Visible(p.Key.Text))
			return
		}
		if side == "_max" && r.HasMax || side == "_min" && r.HasMin {
			c.problem(p.Key, "%s says the same as %s%s, which is given too", source.Visible(p.Key.Text), s.Name, side)
			return
		}
	}
	switch side {
	case "_min":
		r.Min, r.HasMin = v, true
	case "_typ":
		r.Typ, r.HasTyp = v, true
	case "_max":
		r.Max, r.HasMax = v, true
	default:
		r = exact(v)
	}
	c.ratings.Figures[s.Name] = r
}
