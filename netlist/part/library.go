package part

import (
	_ "embed" // the cards of the library
	"slices"
	"strings"
	"sync"

	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// The library: one file of cards a family of devices.
var (
	//go:embed library/ujt.cir
	ujtCards string
	//go:embed library/put.cir
	putCards string
	//go:embed library/scr.cir
	scrCards string
	//go:embed library/triac.cir
	triacCards string
	//go:embed library/diac.cir
	diacCards string
	//go:embed library/isource.cir
	sourceCards string
	//go:embed library/optotriac.cir
	optotriacCards string
)

// entry is one card of the library, not parsed before it is wanted.
type entry struct {
	once    sync.Once
	text    string
	parts   []*Ratings
	trouble []source.Problem
}

// catalogue is the library with an index of names in upper case.
type catalogue struct {
	byName  map[string]*entry
	entries []*entry
}

// library is made on the first look-up by a scan for names, without parsing:
// most runs need one or two cards, or none.
var library = sync.OnceValue(func() *catalogue {
	l := &catalogue{byName: make(map[string]*entry, 1024)}
	for _, text := range []string{ujtCards, putCards, scrCards, triacCards, diacCards, sourceCards, optotriacCards} {
		l.add(text)
	}
	return l
})

const cardStart = "\n.model "

// add indexes the cards of one file.
func (l *catalogue) add(text string) {
	at := strings.Index(text, cardStart)
	for at >= 0 {
		rest := text[at+1:]
		end := strings.Index(rest, cardStart)
		card := rest
		if end >= 0 {
			card = rest[:end]
			at += 1 + end
		} else {
			at = -1
		}
		e := &entry{text: card}
		l.entries = append(l.entries, e)
		l.index(e)
	}
}

// index files a card under its name, its aliases and its voltage classes.
func (l *catalogue) index(e *entry) {
	head := e.text[len(cardStart)-1:]
	name, rest, _ := strings.Cut(head, " ")
	l.byName[strings.ToUpper(name)] = e
	for {
		i := strings.IndexByte(rest, '"')
		if i < 0 {
			return
		}
		list, behind, _ := strings.Cut(rest[i+1:], `"`)
		switch {
		case strings.HasSuffix(rest[:i], "alias="), strings.HasSuffix(rest[:i], "classes="):
			l.indexList(e, list)
		}
		rest = behind
	}
}

// indexList files a card under the names of a list: NAME, or NAME,NAME=VOLTS.
func (l *catalogue) indexList(e *entry, list string) {
	for start := 0; start < len(list); {
		end := start
		for end < len(list) && list[end] != ' ' && list[end] != ',' && list[end] != '=' {
			end++
		}
		if end > start {
			l.byName[strings.ToUpper(list[start:end])] = e
		}
		if end < len(list) && list[end] == '=' { // over the voltage
			for end < len(list) && list[end] != ' ' {
				end++
			}
		}
		start = end + 1
	}
}

// parse reads the card, once.
func (e *entry) parse() []*Ratings {
	e.once.Do(func() {
		deck := syntax.Parse(source.New("library", e.text), false)
		e.trouble = deck.Problems
		for _, s := range deck.Statements {
			if s.Model != nil {
				c := newCard(deck, s.Model, Plain, "library")
				e.parts = append(e.parts, c.read()...)
				e.trouble = append(e.trouble, c.problems...)
			}
		}
	})
	return e.parts
}

// find returns the part of a card that bears a name.
func (e *entry) find(name string) (*Ratings, bool) {
	for _, r := range e.parse() {
		if strings.EqualFold(r.Name, name) {
			return r, true
		}
		for _, alias := range r.Aliases {
			if strings.EqualFold(alias, name) {
				return r, true
			}
		}
	}
	return nil, false
}

// Lookup returns the library's ratings of a part by its name, an alias or a
// decorated form of either (see undecorated), without regard to case. A family
// name (C106) gives what all its voltage classes share and no blocking voltage.
func Lookup(name string) (*Ratings, bool) {
	l := library()
	upper := strings.ToUpper(name)
	if e, ok := l.byName[upper]; ok {
		return e.find(upper)
	}
	for _, form := range undecorated(upper) {
		if e, ok := l.byName[form]; ok {
			return e.find(form)
		}
	}
	return nil, false
}

// All returns every part of the library by name.
func All() []*Ratings {
	var list []*Ratings
	for _, e := range library().entries {
		list = append(list, e.parse()...)
	}
	slices.SortFunc(list, func(a, b *Ratings) int { return strings.Compare(a.Name, b.Name) })
	return list
}

// Problems returns what is wrong with the library's own cards; a test wants none.
func Problems() []source.Problem {
	var list []source.Problem
	for _, e := range library().entries {
		e.parse()
		list = append(list, e.trouble...)
	}
	return list
}
