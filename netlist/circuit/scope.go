package circuit

import (
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// scope is what a subcircuit, or the board itself, declares: the text, not one
// of its uses. Everything that is the same for all uses is worked out here once.
type scope struct {
	parent  *scope
	name    string
	header  *syntax.Subckt
	deck    *syntax.Deck // of the header
	at, end source.Span  // the header and the .ends card
	pins    []string     // lower case
	cards   []cardRef
	params  []paramRef
	intents []intentRef
	models  map[string][]*modelDef
	subckts map[string]*scope

	nodes    *index     // every node name met
	slots    []nodeSlot // by the number of the name
	couples  bool       // it has K cards
	asksPart map[string]syntax.IntentPair
	placed   bool   // it was used
	names    *index // designators, with their first cards
	named    []*cardRef
	words    int          // of all its cards
	count    float64      // elements that one use makes, roughly; 0 until counted
	insides  *deviceGuess // what its insides look like; worked out on first use
}

// nodeSlot is what a node name of a scope stands for.
type nodeSlot struct {
	kind  slotKind
	start int32 // of its first mention
	name  string
	deck  *syntax.Deck
}

func (s *nodeSlot) span() source.Span {
	return source.Span{File: s.deck.File, Start: s.start, End: s.start + int32(len(s.name))}
}

type slotKind int8

const (
	ownNode slotKind = iota
	pinNode
	groundNode
	globalNode
)

// cardRef is an element card with the deck it stands in.
type cardRef struct {
	deck       *syntax.Deck
	e          *syntax.Element
	start, end int32
	guard      *guard
}

type paramRef struct {
	pair  syntax.Pair
	guard *guard
}

type intentRef struct {
	deck  *syntax.Deck
	at    source.Span
	i     *syntax.Intent
	guard *guard
}

// modelDef is one .model card of the netlist.
type modelDef struct {
	deck    *syntax.Deck
	m       *syntax.Model
	scope   *scope
	guard   *guard
	used    bool
	ratings *part.Ratings // made on first use, where every use has the same
}

func (b *builder) newScope(parent *scope, name string) *scope {
	s := &scope{parent: parent, name: name}
	b.scopes = append(b.scopes, s)
	return s
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

// findModel looks a model up from here outwards. Of several with one name the
// last counts.
func (s *scope) findModel(name string) *modelDef {
	name = strings.ToLower(name)
	for ; s != nil; s = s.parent {
		if defs := s.models[name]; len(defs) > 0 {
			return defs[len(defs)-1]
		}
	}
	return nil
}

// slot returns the number of a node name in a scope.
func (b *builder) slot(s *scope, w syntax.Word, deck *syntax.Deck) int32 {
	if s.nodes == nil {
		b.firstSlots(s)
	}
	i, fresh := s.nodes.add(w.Text)
	if !fresh {
		return i
	}
	kind := ownNode
	lower := strings.ToLower(w.Text)
	if isGround(lower) {
		kind = groundNode
	} else if _, ok := b.globals[lower]; ok {
		kind = globalNode
	}
	s.slots = append(s.slots, nodeSlot{kind, w.Start, w.Text, deck})
	return i
}

// firstSlots numbers the pins of a subcircuit. A pin name that stands twice in
// the header means its first place.
func (b *builder) firstSlots(s *scope) {
	s.nodes = newIndex(len(s.cards))
	s.slots = make([]nodeSlot, 0, len(s.cards)+len(s.pins))
	if s.header == nil {
		return
	}
	for _, pin := range s.header.Nodes {
		if _, fresh := s.nodes.add(pin.Text); fresh {
			s.slots = append(s.slots, nodeSlot{pinNode, pin.Start, pin.Text, s.deck})
		}
	}
}

func isGround(lower string) bool { return lower == "0" || lower == "gnd" || lower == "gnd!" }
