package part

import (
	"fmt"
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

// FromModel turns a .model card into ratings. origin says where the card stands
// ("netlist" or a path). SPICE's own types keep whatever settings they have; a
// type of another trade gives ratings without a kind and no problem. A trigger
// device with an unknown symbol, a figure of the wrong sign or figures that
// contradict each other gives a problem at the place, and the figure is left out.
func FromModel(deck *syntax.Deck, m *syntax.Model, resolve func(syntax.Value) (float64, bool),
	origin string) (*Ratings, []source.Problem) {
	c := newCard(deck, m, resolve, origin)
	r := c.read()
	if r.Texts["classes"] != "" {
		c.problem(c.place("classes"), "classes= belongs into a --parts file; here a card is one part")
	}
	return r, c.problems
}

// ParseFile reads a file of .model cards, as given with --parts.
func ParseFile(f *source.File) ([]*Ratings, []source.Problem) {
	deck := syntax.Parse(f, false)
	problems := deck.Problems
	var list []*Ratings
	seen := map[string]bool{}
	for _, s := range deck.Statements {
		switch {
		case s.Model != nil:
			c := newCard(deck, s.Model, Plain, f.Path)
			parts := c.family().parts()
			for _, r := range parts {
				if key := strings.ToUpper(r.Name); seen[key] {
					c.problem(s.Model.Name, "%s stands twice in this file", source.Visible(r.Name))
				} else {
					seen[key] = true
				}
			}
			list, problems = append(list, parts...), append(problems, c.problems...)
		case s.Stop == nil && s.Other == nil:
			at := source.Span{File: f, Start: s.Start, End: s.End}
			problems = append(problems, source.Problem{Span: at, Message: "a parts file holds .model cards only"})
		}
	}
	return list, source.SortProblems(problems)
}

// typeKind returns the kind of a model type. spice says that the type is one of
// SPICE's own, whose settings are its business.
func typeKind(word string) (kind Kind, spice bool) {
	switch kind = Kind(strings.ToLower(word)); kind {
	case Diode, NPN, PNP, NJF, PJF, NMOS, PMOS:
		return kind, true
	case "zener":
		return Diode, true
	case UJT, PUT, SCR, Triac, Diac, CurrentSource, Optotriac:
		return kind, false
	}
	return "", false
}

// problem notes what is wrong at a word of the card.
func (c *card) problem(at syntax.Word, format string, args ...any) {
	p := source.Problem{Span: c.deck.Span(at), Message: fmt.Sprintf(format, args...)}
	c.problems = append(c.problems, p)
}
