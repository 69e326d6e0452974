package part

import (
	"fmt"
	"math"
	"strings"

	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// Resolve works out a value of a card; ok is false where it has none.
type Resolve func(v syntax.Value) (value float64, ok bool)

// Plain resolves numbers only, as in the library.
func Plain(v syntax.Value) (float64, bool) {
	if v.Quoted || v.Expr != nil {
		return 0, false
	}
	n, err := quantity.Parse(v.Text)
	return n.Value, err == nil
}

// spiceTypes are the model types whose settings are SPICE's own business.
var spiceTypes = map[string]Kind{"d": Diode, "npn": NPN, "pnp": PNP, "njf": NJF, "pjf": PJF, "nmos": NMOS, "pmos": PMOS, "zener": Diode}

// card is the state of reading one .model card.
type card struct {
	deck     *syntax.Deck
	ratings  *Ratings
	resolve  Resolve
	marks    map[string]Mark
	problems []source.Problem
}

// FromModel turns a .model card into ratings. origin says where the card stands
// ("library", "netlist" or a path). A model type of another trade gives ratings
// without a kind and no problem; a trigger device with an unknown symbol, a
// figure of the wrong sign or min above max gives a problem at its place.
func FromModel(deck *syntax.Deck, m *syntax.Model, resolve Resolve, origin string) (*Ratings, []source.Problem) {
	c := &card{deck: deck, resolve: resolve, marks: map[string]Mark{}}
	c.ratings = &Ratings{Name: m.Name.Text, Figures: map[string]Rating{}, Texts: map[string]string{}, Origin: origin,
		At: deck.Span(m.Name)}
	kind := Kind(strings.ToLower(m.Type.Text))
	spice, isSpice := spiceTypes[string(kind)]
	_, isDevice := symbolTable[kind]
	switch {
	case isSpice:
		c.ratings.Kind = spice
	case isDevice:
		c.ratings.Kind = kind
	default:
		return c.ratings, nil
	}
	c.texts(m)
	for _, p := range m.Pairs {
		if isSpice {
			c.spice(p)
		} else {
			c.figure(p)
		}
	}
	if isDevice {
		c.check(m)
	}
	return c.ratings, c.problems
}

func (c *card) problem(at syntax.Word, format string, args ...any) {
	c.problems = append(c.problems, source.Problem{Span: c.deck.Span(at), Message: fmt.Sprintf(format, args...)})
}

// isText reports whether a key holds words, not a number.
func isText(key string) bool {
	switch key {
	case "source", "mark", "memory", "scan", "alias", "quadrants", "package", "pins", "mfg", "note":
		return true
	}
	return false
}

// texts takes the keys that hold words, and the marks of trust first of all.
func (c *card) texts(m *syntax.Model) {
	row := Declared
	for _, p := range m.Pairs {
		key := strings.ToLower(p.Key.Text)
		if !isText(key) {
			continue
		}
		c.ratings.Texts[key] = p.Value.Text
		switch key {
		case "source":
			c.ratings.Source = p.Value.Text
		case "alias":
			c.ratings.Aliases = strings.Fields(p.Value.Text)
		case "mark":
			row = markOf(p.Value.Text)
		case "memory", "scan":
			for _, symbol := range strings.Fields(strings.ToLower(p.Value.Text)) {
				c.marks[symbol] = markOf(key)
			}
		}
	}
	c.marks[""] = row
}

func markOf(word string) Mark {
	switch strings.ToLower(word) {
	case "read":
		return Read
	case "scan":
		return Scan
	case "memory":
		return Memory
	}
	return Declared
}

// spice takes a number of a SPICE model; what is no number is passed over.
func (c *card) spice(p syntax.Pair) {
	key := strings.ToLower(p.Key.Text)
	if v, ok := c.resolve(p.Value); ok && !math.IsNaN(v) && !math.IsInf(v, 0) {
		base, side := split(c.ratings.Kind, key)
		c.set(base, side, v)
	}
}

// figure takes one figure of a trigger device.
func (c *card) figure(p syntax.Pair) {
	key := strings.ToLower(p.Key.Text)
	if isText(key) {
		return
	}
	base, side := split(c.ratings.Kind, key)
	symbol, ok := SymbolOf(c.ratings.Kind, base)
	if !ok {
		c.problem(p.Key, "%s is no rating of a %s%s", source.Visible(p.Key.Text), c.ratings.Kind, suggestion(c.ratings.Kind, base))
		return
	}
	v, ok := c.resolve(p.Value)
	if !ok {
		if _, err := quantity.Parse(p.Value.Text); err != nil && !p.Value.Quoted && p.Value.Expr == nil {
			c.problem(p.Value.Word, "%s: %v", p.Key.Text, err)
		} else {
			c.problem(p.Value.Word, "%s has no value that can be worked out", p.Key.Text)
		}
		return
	}
	if math.IsNaN(v) || math.IsInf(v, 0) || v < 0 && !maySink(symbol) || v == 0 && !mayVanish(symbol) {
		c.problem(p.Value.Word, "%s = %g makes no sense for the %s", p.Key.Text, v, symbol.Meaning)
		return
	}
	c.set(base, side, v)
}

// maySink reports whether a figure may be negative.
func maySink(s Symbol) bool { return s.Unit == "deg C" || s.Unit == "1/K" }

// mayVanish reports whether a figure may be zero.
func mayVanish(s Symbol) bool {
	return maySink(s) || s.Name == "vd" || s.Name == "pd_slope" || s.Name == "vv" || s.Name == "vt0" || s.Name == "rt" ||
		strings.HasPrefix(s.Name, "vt_") || s.Name == "vbo_symmetry" || s.Name == "ieo" || s.Name == "igao" || s.Name == "idrm"
}

// split takes _min, _typ or _max off a key unless the whole is a symbol.
func split(kind Kind, key string) (base, side string) {
	if _, whole := SymbolOf(kind, key); whole {
		return key, ""
	}
	for _, side := range []string{"_min", "_typ", "_max"} {
		if base, ok := strings.CutSuffix(key, side); ok {
			return base, side
		}
	}
	return key, ""
}

func (c *card) set(base, side string, v float64) {
	r := c.ratings.Figures[base]
	switch side {
	case "_min":
		r.Min, r.HasMin = v, true
	case "_typ":
		r.Typ, r.HasTyp = v, true
	case "_max":
		r.Max, r.HasMax = v, true
	default:
		r = Rating{Min: v, Typ: v, Max: v, HasMin: true, HasTyp: true, HasMax: true}
	}
	r.Source = c.ratings.Source
	r.Mark = c.marks[""]
	if mark, ok := c.marks[base]; ok {
		r.Mark = mark
	}
	c.ratings.Figures[base] = r
}

// check looks for figures that contradict each other.
func (c *card) check(m *syntax.Model) {
	for _, s := range Symbols(c.ratings.Kind) {
		r, ok := c.ratings.Figures[s.Name]
		if !ok {
			continue
		}
		if r.HasMin && r.HasMax && r.Min > r.Max || r.HasTyp && r.HasMin && r.Typ < r.Min || r.HasTyp && r.HasMax && r.Typ > r.Max {
			c.problem(m.Name, "%s of %s: min, typ and max are not in order", s.Name, source.Visible(m.Name.Text))
		}
	}
	if eta, ok := c.ratings.Figures["eta"]; ok && c.ratings.Kind == UJT && (eta.HasMax && eta.Max >= 1 || eta.HasMin && eta.Min >= 1) {
		c.problem(m.Name, "eta of %s: a stand-off ratio lies below 1", source.Visible(m.Name.Text))
	}
	for symbol := range c.marks {
		if symbol != "" && c.ratings.Origin == "library" {
			if _, ok := c.ratings.Figures[symbol]; !ok {
				c.problem(m.Name, "%s is marked but not given", symbol)
			}
		}
	}
}

// suggestion names a known symbol that is nearly the one written.
func suggestion(kind Kind, name string) string {
	for _, s := range Symbols(kind) {
		if s.Name != name && near(s.Name, name) {
			return fmt.Sprintf("; did you mean %s?", s.Name)
		}
	}
	return ""
}

// near reports whether one letter changed, added or left out makes a into b.
func near(a, b string) bool {
	if len(a) > len(b) {
		a, b = b, a
	}
	if len(b)-len(a) > 1 || len(a) < 2 {
		return false
	}
	i := 0
	for i < len(a) && a[i] == b[i] {
		i++
	}
	if len(a) == len(b) {
		return i < len(a) && a[i+1:] == b[i+1:]
	}
	return a[i:] == b[i+1:]
}
