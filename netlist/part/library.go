package part

import (
	_ "embed" // the cards of the library
	"slices"
	"strings"
	"sync"

	"standoff/netlist/source"
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

// catalogue is the library with an index of its names.
type catalogue struct {
	texts []string
	// slots is an open hash table of the places of all names. Start-up pays for
	// every page of memory that is touched, so it holds neither the names nor the
	// cards, and a map, eight times the size, would cost more than the scan.
	slots [2048]place

	lock  sync.Mutex
	cards map[place]*family   // those that were wanted, by where they start
	found map[string]*Ratings // names that were asked for and are there
}

// place is where a name or a card starts: the file in the upper bits, the offset
// in the lower. No name starts at 0.
type place uint32

const offsetBits = 24

func (p place) file() int   { return int(p >> offsetBits) }
func (p place) offset() int { return int(p & (1<<offsetBits - 1)) }

// library is made on the first look-up.
var library = sync.OnceValue(newCatalogue)

// newCatalogue scans the library for names, without parsing: most runs need one
// or two cards, or none.
func newCatalogue() *catalogue {
	l := &catalogue{cards: map[place]*family{}, found: map[string]*Ratings{},
		texts: []string{ujtCards, putCards, scrCards, triacCards, diacCards, sourceCards, optotriacCards}}
	for file := range l.texts {
		l.scan(file)
	}
	return l
}

// How the lines of the library start that hold names.
const (
	modelLine   = ".model "
	aliasLine   = `+ alias="`
	classesLine = `+ classes="`
)

// scan finds the names of one file.
func (l *catalogue) scan(file int) {
	text := l.texts[file]
	for at := 0; at < len(text); {
		line := text[at:]
		switch {
		case strings.HasPrefix(line, modelLine):
			l.name(file, at+len(modelLine))
		case strings.HasPrefix(line, aliasLine):
			l.index(file, at+len(aliasLine))
		case strings.HasPrefix(line, classesLine):
			l.index(file, at+len(classesLine))
		}
		end := strings.IndexByte(line, '\n')
		if end < 0 {
			return
		}
		at += end + 1
	}
}

// index files the names of a list: NAME, or NAME,NAME=VOLTS, up to the quote.
func (l *catalogue) index(file, at int) {
	text := l.texts[file]
	for text[at] != '"' {
		if at = l.name(file, at); text[at] == '=' { // over the voltage
			for text[at] != ' ' && text[at] != '"' {
				at++
			}
		}
		if text[at] != '"' {
			at++
		}
	}
}

// name files the name that starts at a place and returns where it ends.
func (l *catalogue) name(file, start int) int {
	text := l.texts[file]
	end := start
	for !endsName(text[end]) {
		end++
	}
	*l.slot(text[start:end]) = place(file<<offsetBits | start)
	return end
}

// endsName reports whether a byte ends a name in the library.
func endsName(c byte) bool {
	return c == ' ' || c == ',' || c == '=' || c == '"' || c == '(' || c == '\n'
}

// slot returns the slot of a name, an empty one for a new name.
func (l *catalogue) slot(name string) *place {
	hash := uint32(2166136261) // FNV-1a
	for i := range len(name) {
		hash = (hash ^ uint32(name[i])) * 16777619
	}
	for hash ^= hash >> 15; ; hash++ {
		s := &l.slots[hash%uint32(len(l.slots))]
		if *s == 0 || l.isAt(*s, name) {
			return s
		}
	}
}

// isAt reports whether a name stands at a place.
func (l *catalogue) isAt(p place, name string) bool {
	rest, ok := strings.CutPrefix(l.texts[p.file()][p.offset():], name)
	return ok && endsName(rest[0])
}

// family returns the card in which a place lies.
func (l *catalogue) family(p place) *family {
	text := l.texts[p.file()]
	start := strings.LastIndex(text[:p.offset()], modelLine)
	key := place(p.file()<<offsetBits | start)
	f, ok := l.cards[key]
	if !ok {
		f = parseCard(text[start:])
		l.cards[key] = f
	}
	return f
}

// find returns the part of exactly this name, in upper case.
func (l *catalogue) find(name string) *Ratings {
	p := *l.slot(name)
	if p == 0 {
		return nil
	}
	return l.family(p).find(name)
}

// Lookup returns the library's ratings of a part by its name, an alias or a
// decorated form of either (see undecorated), without regard to case. A family
// name (C106) gives what all its voltage classes share and no blocking voltage.
func Lookup(name string) (*Ratings, bool) {
	l := library()
	upper := strings.ToUpper(name)
	l.lock.Lock()
	defer l.lock.Unlock()
	r, known := l.found[upper]
	if known || upper == "" || len(upper) > longestName {
		return r, known
	}
	if r = l.find(upper); r == nil {
		for _, form := range undecorated(upper) {
			if r = l.find(form); r != nil {
				break
			}
		}
	}
	if r != nil {
		l.found[upper] = r
	}
	return r, r != nil
}

// longestName is the longest name, decorated, that is looked for.
const longestName = 60

// families calls do with every card of the library.
func (l *catalogue) families(do func(f *family)) {
	l.lock.Lock()
	defer l.lock.Unlock()
	for file, text := range l.texts {
		for at := 0; ; {
			next := strings.Index(text[at:], "\n"+modelLine)
			if next < 0 {
				break
			}
			at += next + len("\n"+modelLine)
			do(l.family(place(file<<offsetBits | at)))
		}
	}
}

// All returns every part of the library by name.
func All() []*Ratings {
	var list []*Ratings
	library().families(func(f *family) { list = append(list, f.parts()...) })
	slices.SortFunc(list, func(a, b *Ratings) int { return strings.Compare(a.Name, b.Name) })
	return list
}

// Problems returns what is wrong with the library's own cards; a test wants none.
func Problems() []source.Problem {
	var list []source.Problem
	library().families(func(f *family) { list = append(list, f.trouble...) })
	return list
}
