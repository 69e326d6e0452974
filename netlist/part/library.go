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
	text    string
	once    sync.Once
	family  *family
	trouble []source.Problem

	lock sync.Mutex
	made []*Ratings // the card's own part, then its classes; made when wanted
}

// catalogue is the library with an index of names in upper case.
type catalogue struct {
	byName  map[string]*entry
	entries []entry
}

// The library has about this many cards and names; more is no harm.
const cardCount, nameCount = 320, 1024

// library is made on the first look-up by a scan for names, without parsing:
// most runs need one or two cards, or none.
var library = sync.OnceValue(func() *catalogue {
	l := &catalogue{byName: make(map[string]*entry, nameCount), entries: make([]entry, 0, cardCount)}
	for _, text := range []string{ujtCards, putCards, scrCards, triacCards, diacCards, sourceCards, optotriacCards} {
		l.add(text)
	}
	for i := range l.entries {
		l.index(&l.entries[i])
	}
	return l
})

const cardStart = "\n.model "

// add finds the cards of one file.
func (l *catalogue) add(text string) {
	for at := strings.Index(text, cardStart); at >= 0; {
		text = text[at+1:]
		at = strings.Index(text, cardStart)
		card := text
		if at >= 0 {
			card = text[:at]
		}
		l.entries = append(l.entries, entry{text: card})
	}
}

// index files a card under its name, its aliases and its voltage classes.
func (l *catalogue) index(e *entry) {
	rest := e.text[len(cardStart)-1:]
	l.byName[strings.ToUpper(rest[:strings.IndexByte(rest, ' ')])] = e
	for {
		i := strings.IndexByte(rest, '"')
		if i < 0 {
			return
		}
		key, behind := rest[:i], rest[i+1:]
		end := max(strings.IndexByte(behind, '"'), 0)
		if strings.HasSuffix(key, " alias=") || strings.HasSuffix(key, " classes=") {
			l.indexList(e, behind[:end])
		}
		rest = behind[end+1:]
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
		for end < len(list) && list[end] != ' ' && list[end] != ',' { // over the voltage
			end++
		}
		start = end + 1
	}
}

// parse reads the card, once.
func (e *entry) parse() *family {
	e.once.Do(func() {
		deck := syntax.Parse(source.New("library", e.text), false)
		e.trouble = deck.Problems
		c := newCard(deck, deck.Statements[0].Model, Plain, "library")
		e.family = c.family()
		e.made = make([]*Ratings, 1+len(e.family.classes))
		e.trouble = append(e.trouble, c.problems...)
	})
	return e.family
}

// part returns the card's own part (0) or that of a class (1 ...).
func (e *entry) part(i int) *Ratings {
	f := e.parse()
	e.lock.Lock()
	defer e.lock.Unlock()
	if e.made[i] == nil {
		if i == 0 {
			e.made[i] = f.base
		} else {
			e.made[i] = f.classes[i-1].part(f.base)
		}
	}
	return e.made[i]
}

// find returns the part of a card that bears a name.
func (e *entry) find(name string) (*Ratings, bool) {
	f := e.parse()
	is := func(n string) bool { return strings.EqualFold(n, name) }
	if is(f.base.Name) || slices.ContainsFunc(f.base.Aliases, is) {
		return e.part(0), true
	}
	for i := range f.classes {
		if slices.ContainsFunc(f.classes[i].names, is) {
			return e.part(i + 1), true
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
	l := library()
	for i := range l.entries {
		for k := range 1 + len(l.entries[i].parse().classes) {
			list = append(list, l.entries[i].part(k))
		}
	}
	slices.SortFunc(list, func(a, b *Ratings) int { return strings.Compare(a.Name, b.Name) })
	return list
}

// Problems returns what is wrong with the library's own cards; a test wants none.
func Problems() []source.Problem {
	var list []source.Problem
	l := library()
	for i := range l.entries {
		l.entries[i].parse()
		list = append(list, l.entries[i].trouble...)
	}
	return list
}
