package circuit

import (
	"fmt"
	"slices"
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// nothingDeclared is the intent of every element of which nothing is declared.
var nothingDeclared = &Intent{shared: true}

// own returns the element's intent for writing: a copy of its own where several
// elements share it.
func (e *Element) own() *Intent {
	if e.Intent == nil || e.Intent.shared {
		i := Intent{}
		if e.Intent != nil {
			i = *e.Intent
		}
		i.shared = false
		e.Intent = &i
	}
	return e.Intent
}

// declared returns what "all" lines say of a letter in an instance.
func (in *instance) declared(letter byte) *Intent {
	if i := in.all[letter]; i != nil {
		return i
	}
	return nothingDeclared
}

// declareAll works the "all" lines of an instance out. They stand on those of
// the instances around it, so that the nearer one wins.
func (b *builder) declareAll(in *instance) {
	if in.outer != nil {
		in.all = in.outer.all
	}
	if len(in.scope.intents) == 0 {
		return
	}
	seen, own := map[string]bool{}, false
	for _, ref := range in.scope.intents {
		if ref.i.Letter.Text == "" || !strings.EqualFold(ref.i.Subject.Text, "all") || !b.holds(in, ref.guard) {
			continue
		}
		letter := ref.i.Letter.Text[0] &^ 0x20
		if len(ref.i.Letter.Text) != 1 || strings.IndexByte("RCLVI", letter) < 0 {
			b.inside(in, ref.deck.Span(ref.i.Letter), "all takes one of the letters R, C, L, V, I")
			continue
		}
		if !own {
			own, in.all = true, copied(in.all)
		}
		b.declareLetter(in, ref, letter, seen)
	}
}

func copied(all map[byte]*Intent) map[byte]*Intent {
	c := make(map[byte]*Intent, len(all)+1)
	for letter, i := range all {
		c[letter] = i
	}
	return c
}

// declareLetter applies one "all" line.
func (b *builder) declareLetter(in *instance, ref intentRef, letter byte, seen map[string]bool) {
	probe := &Element{Kind: Kind(strings.ToLower(string(letter))), Intent: in.declared(letter)}
	for _, pair := range ref.i.Pairs {
		key := strings.ToLower(pair.Key.Text)
		if mark := string(letter) + key; seen[mark] {
			b.reset(in, "all "+string(letter), key, ref.deck.Span(pair.Key))
		} else {
			seen[mark] = true
		}
		b.set(probe, pair, in, ref.deck)
	}
	all := probe.own()
	all.At, all.shared = nil, true
	in.all[letter] = all
}

// reset notes a key that is given twice.
func (b *builder) reset(in *instance, subject, key string, at source.Span) {
	mark := fmt.Sprint("reset ", at.File.Path, at.Start)
	if in.outer != nil && b.told[mark] {
		return
	}
	if b.told == nil {
		b.told = map[string]bool{}
	}
	b.told[mark] = true
	b.circuit.Resets = append(b.circuit.Resets, Reset{subject, key, at})
}

// set applies one key to an element. What is wrong is told at its place.
func (b *builder) set(e *Element, pair syntax.IntentPair, in *instance, deck *syntax.Deck) {
	key := strings.ToLower(pair.Key.Text)
	k, ok := intentKeyOf(key)
	switch {
	case !ok:
		b.inside(in, deck.Span(pair.Key), "%s is no key of an intent line", source.Visible(pair.Key.Text))
		return
	case !k.fits(e.Kind), k.set == nil, key == "pins" && e.Designator == "":
		b.inside(in, deck.Span(pair.Key), "%s does not fit %s, which is %s", key, nameOf(e), describe(e.Kind))
		return
	}
	if err := k.set(&setting{e, pair, in.env}); err != nil {
		b.inside(in, deck.Span(pair.Value), "%s: %v", key, err)
		return
	}
	e.note(key, deck.Span(pair.Key))
}

// note keeps the place of a key.
func (e *Element) note(key string, at source.Span) {
	i := e.own()
	if i.At == nil {
		i.At = map[string]source.Span{}
	}
	i.At[key] = at
}

func nameOf(e *Element) string {
	if e.Designator == "" {
		return "all " + strings.ToUpper(string(e.Kind))
	}
	return source.Visible(e.Designator)
}

// direct applies the lines of an instance that name one element, and keeps its
// waivers.
func (b *builder) direct(in *instance) {
	if len(in.scope.intents) == 0 || b.stopped {
		return
	}
	subjects, seen := b.subjects(in), map[given]bool{}
	for _, ref := range in.scope.intents {
		if !b.holds(in, ref.guard) {
			continue
		}
		switch subject := strings.ToLower(ref.i.Subject.Text); {
		case ref.i.Waive != nil:
			w := ref.i.Waive
			b.circuit.Waivers = append(b.circuit.Waivers, Waiver{Rule: strings.ToLower(w.Rule.Text),
				Designator: in.prefix + w.Designator.Text, Reason: strings.TrimSpace(w.Reason.Text), At: ref.at})
		case subject == "all":
		case subject == "board":
			if in.outer != nil {
				b.inside(in, ref.at, "board lines belong to the top level")
			}
		default:
			b.declare(in, ref, subjects[subject], seen)
		}
	}
}

// subjects finds the elements that the lines of an instance name. It goes
// through its elements once, however many lines there are.
func (b *builder) subjects(in *instance) map[string][]*Element {
	found := map[string][]*Element{}
	wanted := newIndex(len(in.scope.intents))
	for _, ref := range in.scope.intents {
		if ref.i.Waive == nil && ref.i.Letter.Text == "" {
			if full := in.prefix + ref.i.Subject.Text; !strings.EqualFold(full, "board") {
				wanted.add(full)
			}
		}
	}
	if len(wanted.names) == 0 {
		return found
	}
	for _, e := range b.circuit.Elements[in.start:] {
		if _, ok := wanted.find(e.Designator); ok {
			name := strings.ToLower(e.Designator[len(in.prefix):])
			found[name] = append(found[name], e)
		}
	}
	return found
}

// given is a key of an element that the lines of one instance declared already.
// A line on the board for one instance may well differ from what its subcircuit
// says of all of them.
type given struct {
	element int
	key     string
}

// mostNamesakes bounds how many parts of one designator a line is applied to.
const mostNamesakes = 20

// declare applies one line to the elements it names: one, or all that share the
// name by mistake.
func (b *builder) declare(in *instance, ref intentRef, elements []*Element, seen map[given]bool) {
	if len(elements) == 0 {
		b.noSubject(in, ref)
		return
	}
	for _, e := range elements[:min(len(elements), mostNamesakes)] {
		for _, pair := range ref.i.Pairs {
			mark := given{e.Index, strings.ToLower(pair.Key.Text)}
			if seen[mark] {
				b.reset(in, e.Designator, mark.key, ref.deck.Span(pair.Key))
			}
			seen[mark] = true
			if mark.key == "part" {
				b.takePart(in, e, pair, ref.deck)
			}
		}
		for _, pair := range ref.i.Pairs {
			if !strings.EqualFold(pair.Key.Text, "part") {
				b.set(e, pair, in, ref.deck)
			}
		}
	}
}

// noSubject says what is wrong with a line whose subject is not there.
func (b *builder) noSubject(in *instance, ref intentRef) {
	at, shown := ref.deck.Span(ref.i.Subject), source.Visible(in.prefix+ref.i.Subject.Text)
	i, ok := in.scope.names.find(ref.i.Subject.Text)
	if !ok {
		b.inside(in, at, "no element is called %s", shown)
		return
	}
	// A card that is no element: it was told about, or is a subcircuit.
	if f := in.scope.named[i].e.Fields; len(f) > 0 && in.scope.findSubckt(f[len(f)-1].Text) != nil {
		b.inside(in, at, "%s is a subcircuit; a line names a part inside it, as %s.R1", shown, shown)
	}
}

// takePart gives an element the ratings of another part name.
func (b *builder) takePart(in *instance, e *Element, pair syntax.IntentPair, deck *syntax.Deck) {
	p := &placing{b: b, in: in}
	r := p.ratings(pair.Value.Text)
	if r == nil || r.Kind == "" {
		b.inside(in, deck.Span(pair.Value), "part: nothing is known of the part %s",
			source.Visible(pair.Value.Text))
		return
	}
	if kind := Kind(r.Kind); kind != e.Kind {
		if slices.Contains(valuedKinds, e.Kind) || e.Kind == Coupling || e.Kind == Line {
			b.inside(in, deck.Span(pair.Value), "part: %s is %s, but %s is %s", source.Visible(pair.Value.Text),
				describe(kind), source.Visible(e.Designator), describe(e.Kind))
			return
		}
		e.Kind = kind
		if order := libraryOrder(r.Kind, len(e.Nodes)); len(order) == len(e.Nodes) && e.Order != ByPins {
			e.Roles, e.Order = order, orderAuthority(e, r.Kind)
		}
	}
	e.Ratings, e.PartName = r, pair.Value.Text
	e.note("part", deck.Span(pair.Key))
}

// orderAuthority says by what the standard order of a kind stands.
func orderAuthority(e *Element, kind part.Kind) Authority {
	if isTrigger(kind) || e.Letter == 'X' {
		return ByLibrary
	}
	return ByLetter
}
