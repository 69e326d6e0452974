package part

import (
	"embed"
	"slices"
	"strings"
	"sync"

	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

//go:embed library/*.cir
var library embed.FS

// entry is one card of the library, not parsed yet.
type entry struct {
	once    sync.Once
	text    string
	names   []string // the part's name and its aliases
	ratings *Ratings
	trouble []source.Problem
}

// index finds the cards of the library by name, in lower case. It is made by a
// scan for .model and alias, without parsing: most runs need one or two cards.
var index = sync.OnceValues(func() (map[string]*entry, []*entry) {
	byName := map[string]*entry{}
	var all []*entry
	files, _ := library.ReadDir("library")
	for _, f := range files {
		text, _ := library.ReadFile("library/" + f.Name())
		for _, card := range strings.Split(string(text), "\n.model ")[1:] {
			e := &entry{text: ".model " + card}
			name, _, _ := strings.Cut(card, " ")
			e.names = []string{name}
			if _, rest, ok := strings.Cut(card, `alias="`); ok {
				list, _, _ := strings.Cut(rest, `"`)
				e.names = append(e.names, strings.Fields(list)...)
			}
			all = append(all, e)
			for _, n := range e.names {
				byName[strings.ToLower(n)] = e
			}
		}
	}
	return byName, all
})

// parse turns the card into ratings, once.
func (e *entry) parse() *Ratings {
	e.once.Do(func() {
		text, _, _ := strings.Cut(e.text, "\n*") // a comment starts what is no part of the card
		deck := syntax.Parse(source.New("library", text), false)
		e.trouble = deck.Problems
		for _, s := range deck.Statements {
			if s.Model != nil {
				ratings, problems := FromModel(deck, s.Model, Plain, "library")
				e.ratings, e.trouble = ratings, append(e.trouble, problems...)
			}
		}
	})
	return e.ratings
}

// Lookup returns the library's ratings of a part by its name, an alias or a
// decorated form of either (see undecorated).
func Lookup(name string) (*Ratings, bool) {
	byName, _ := index()
	for _, form := range undecorated(strings.ToLower(name)) {
		if e, ok := byName[form]; ok {
			return e.parse(), true
		}
	}
	return nil, false
}

// undecorated returns the forms under which a part may be found: as written,
// then without the marks that makers' model files hang on - a path of a copied
// model (Q6.Qabc), a leading x, d, q, di_ or dn, a maker (/NS, _IR) or package
// behind the name.
func undecorated(name string) []string {
	forms := []string{name}
	add := func(form string) {
		if form != "" && !slices.Contains(forms, form) {
			forms = append(forms, form)
		}
	}
	if i := strings.LastIndexByte(name, '.'); i >= 0 {
		add(name[i+1:])
	}
	for _, form := range slices.Clone(forms) {
		for _, cut := range []string{"/", "_", "-"} {
			if i := strings.LastIndex(form, cut); i > 2 {
				add(form[:i])
			}
		}
	}
	for _, form := range slices.Clone(forms) {
		for _, prefix := range []string{"di_", "dn", "x", "d", "q"} {
			if rest, ok := strings.CutPrefix(form, prefix); ok && len(rest) > 2 {
				add(rest)
			}
		}
	}
	return forms
}

// All returns every part of the library by name.
func All() []*Ratings {
	_, all := index()
	list := make([]*Ratings, len(all))
	for i, e := range all {
		list[i] = e.parse()
	}
	slices.SortFunc(list, func(a, b *Ratings) int { return strings.Compare(a.Name, b.Name) })
	return list
}

// ParseFile reads a file of .model cards, as given with --parts.
func ParseFile(f *source.File) ([]*Ratings, []source.Problem) {
	deck := syntax.Parse(f, false)
	problems := deck.Problems
	var list []*Ratings
	for _, s := range deck.Statements {
		switch {
		case s.Model != nil:
			r, trouble := FromModel(deck, s.Model, Plain, f.Path)
			list, problems = append(list, r), append(problems, trouble...)
		case s.Stop == nil && s.Other == nil:
			problems = append(problems, source.Problem{Span: source.Span{File: f, Start: s.Start, End: s.End},
				Message: "a parts file holds .model cards only"})
		}
	}
	return list, source.SortProblems(problems)
}

// Spread returns what a figure can be, 25 deg C: from least to greatest with the
// typical value inside. A figure of which only one side and the typical value
// are known runs from one to the other; where the typical value is missing the
// middle stands in. ok is false where neither side is guaranteed.
func (r *Ratings) Spread(symbol string) (s quantity.Spread, mark Mark, ok bool) {
	f, known := r.Figures[symbol]
	if !known || !f.HasMin && !f.HasMax {
		return s, Assumed, false
	}
	switch {
	case f.HasMin && f.HasMax:
		s = quantity.Spread{Low: f.Min, Nominal: (f.Min + f.Max) / 2, High: f.Max}
	case f.HasMin:
		s = quantity.Exact(f.Min)
	default:
		s = quantity.Exact(f.Max)
	}
	if f.HasTyp {
		s.Nominal, s.Low, s.High = f.Typ, min(s.Low, f.Typ), max(s.High, f.Typ)
	}
	return s, f.Mark, true
}

// Limit returns the guaranteed side of a figure, by the sense of its symbol.
// A typical value never is a limit.
func (r *Ratings) Limit(symbol string) (value float64, mark Mark, ok bool) {
	f, known := r.Figures[symbol]
	if !known {
		return 0, Assumed, false
	}
	s, _ := SymbolOf(r.Kind, symbol)
	switch {
	case s.Sense == Least && f.HasMin:
		return f.Min, f.Mark, true
	case s.Sense == Greatest && f.HasMax:
		return f.Max, f.Mark, true
	case s.Sense == Condition || s.Sense == Either:
		if f.HasMax {
			return f.Max, f.Mark, true
		}
		return f.Min, f.Mark, f.HasMin
	}
	return 0, Assumed, false
}

// Test returns a test condition.
func (r *Ratings) Test(symbol string) (float64, bool) {
	f, ok := r.Figures[symbol]
	if !ok {
		return 0, false
	}
	if f.HasMax {
		return f.Max, true
	}
	return f.Min, f.HasMin
}

// Problems returns what is wrong with the library's own cards; a test wants none.
func Problems() []source.Problem {
	_, all := index()
	var list []source.Problem
	for _, e := range all {
		e.parse()
		list = append(list, e.trouble...)
	}
	return list
}
