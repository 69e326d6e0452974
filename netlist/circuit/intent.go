package circuit

import (
	"fmt"
	"slices"
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// declared is what one *> line says, key by key.
type declared struct {
	deck *syntax.Deck
	env  *environment
	keys map[string]syntax.IntentPair
}

// intentKey is one key: which elements it fits and how it is taken.
type intentKey struct {
	fits func(e *Element) bool
	set  func(s *setting) error
}

// setting is one key being applied to one element.
type setting struct {
	e    *Element
	pair syntax.IntentPair
	env  *environment
}

func kinds(list ...Kind) func(*Element) bool {
	return func(e *Element) bool { return slices.Contains(list, e.Kind) }
}

func anyKind(*Element) bool { return true }

// intentKeys returns the keys of element lines.
func intentKeyOf(name string) (intentKey, bool) {
	passive := kinds(Resistor, Capacitor, Inductor)
	valued := kinds(Resistor, Capacitor, Inductor, VoltageSource, CurrentSource)
	sources := kinds(VoltageSource, CurrentSource)
	thyristors := kinds(SCR, Triac)
	timers := kinds(UJT, PUT, Diac, SCR, Triac, Unknown)
	k, ok := map[string]intentKey{
		"tol":       {valued, (*setting).tolerance},
		"power":     {kinds(Resistor), positive(func(i *Intent) **float64 { return &i.Power })},
		"volts":     {kinds(Resistor, Capacitor), positive(func(i *Intent) **float64 { return &i.Volts })},
		"tempco":    {passive, (*setting).temperature},
		"travel":    {kinds(Resistor), (*setting).travel},
		"vt":        {kinds(Inductor), positive(func(i *Intent) **float64 { return &i.VoltSeconds })},
		"leak":      {kinds(Capacitor), positive(func(i *Intent) **float64 { return &i.Leak })},
		"kind":      {kinds(Capacitor), (*setting).dielectric},
		"range":     {sources, spreadKey(func(i *Intent) **quantity.Spread { return &i.Range })},
		"part":      {anyKind, nil},
		"pins":      {anyKind, (*setting).pins},
		"frequency": {timers, spreadKey(func(i *Intent) **quantity.Spread { return &i.Frequency })},
		"period":    {timers, spreadKey(func(i *Intent) **quantity.Spread { return &i.Period })},
		"load":      {thyristors, (*setting).load},
		"latch":     {anyKind, (*setting).latch},
		"amps":      {thyristors, positive(func(i *Intent) **float64 { return &i.Amps })},
		"heatsink":  {thyristors, positive(func(i *Intent) **float64 { return &i.Heatsink })},
	}[name]
	return k, ok
}

// number works a value out; a percent sign divides by a hundred.
func (s *setting) number(w syntax.Word) (float64, error) { return intentNumber(s.env, w) }

func intentNumber(env *environment, w syntax.Word) (float64, error) {
	text, percent := strings.CutSuffix(w.Text, "%")
	v, err := env.value(syntax.Value{Word: syntax.Word{Text: text, Start: w.Start, End: w.End}})
	if percent {
		v /= 100
	}
	return v, err
}

// rangeOf works both ends out.
func (s *setting) rangeOf() (quantity.Spread, error) { return intentRange(s.env, s.pair) }

func intentRange(env *environment, p syntax.IntentPair) (quantity.Spread, error) {
	low, err := intentNumber(env, p.Low)
	if err != nil {
		return quantity.Spread{}, err
	}
	high, err := intentNumber(env, p.High)
	if err != nil {
		return quantity.Spread{}, err
	}
	if low > high {
		return quantity.Spread{}, fmt.Errorf("the range %s runs backwards", p.Value.Text)
	}
	return quantity.Spread{Low: low, Nominal: (low + high) / 2, High: high}, nil
}

func (s *setting) tolerance() error {
	r, err := s.rangeOf()
	if err != nil {
		return err
	}
	if s.pair.Low == s.pair.High {
		r.Low = -r.High
	}
	if r.Low <= -1 || r.High < 0 || r.Low > 0 || r.High > 10 {
		return fmt.Errorf("a tolerance of %s makes no sense", s.pair.Value.Text)
	}
	s.e.Intent.Tol = &r
	return nil
}

// positive returns a setter for a key that takes one value above zero.
func positive(field func(*Intent) **float64) func(*setting) error {
	return func(s *setting) error {
		v, err := s.number(s.pair.Value)
		if err != nil {
			return err
		}
		if v <= 0 {
			return fmt.Errorf("%s has to be above zero", s.pair.Key.Text)
		}
		*field(&s.e.Intent) = &v
		return nil
	}
}

// spreadKey returns a setter for a key that takes a range.
func spreadKey(field func(*Intent) **quantity.Spread) func(*setting) error {
	return func(s *setting) error {
		r, err := s.rangeOf()
		if err != nil {
			return err
		}
		if key := strings.ToLower(s.pair.Key.Text); key != "range" && r.Low <= 0 {
			return fmt.Errorf("%s has to be above zero", key)
		}
		*field(&s.e.Intent) = &r
		return nil
	}
}

func (s *setting) temperature() error {
	v, err := s.number(s.pair.Value)
	if err != nil {
		return err
	}
	v *= 1e-6
	if v < -0.05 || v > 0.05 {
		return fmt.Errorf("a coefficient of %s ppm/K makes no sense", s.pair.Value.Text)
	}
	s.e.Intent.Tempco = &v
	return nil
}

func (s *setting) travel() error {
	r, err := s.rangeOf()
	if err == nil && r.Low < 0 {
		err = fmt.Errorf("a travel starts at zero or above")
	}
	if err == nil && r.High <= 0 {
		err = fmt.Errorf("a travel ends above zero")
	}
	if err == nil {
		s.e.Intent.Travel = &r
	}
	return err
}

func (s *setting) dielectric() error {
	return s.word(&s.e.Intent.Kind, "film", "c0g", "x7r", "y5v", "electrolytic", "tantalum", "x2", "y2")
}

func (s *setting) load() error {
	return s.word(&s.e.Intent.Load, "resistive", "inductive", "lamp", "motor")
}

func (s *setting) latch() error {
	var word string
	err := s.word(&word, "ok")
	s.e.Intent.LatchOK = word == "ok"
	return err
}

// word takes one of a few words.
func (s *setting) word(into *string, allowed ...string) error {
	w := strings.ToLower(s.pair.Value.Text)
	if !slices.Contains(allowed, w) {
		return fmt.Errorf("%s is one of %s", strings.ToLower(s.pair.Key.Text), strings.Join(allowed, ", "))
	}
	*into = w
	return nil
}

// pins takes the terminal roles in the order of the nodes.
func (s *setting) pins() error {
	words := strings.Split(s.pair.Value.Text, ",")
	if len(words) != len(s.e.Nodes) {
		return fmt.Errorf("pins= names %d terminals, but %s has %d nodes", len(words), source.Visible(s.e.Designator), len(s.e.Nodes))
	}
	want := part.NetlistOrder(part.Kind(s.e.Kind))
	names := roleNames(part.Kind(s.e.Kind))
	if names == nil {
		names = map[string]string{}
	}
	for _, w := range want {
		names[w] = w
	}
	roles := make([]string, len(words))
	for i, w := range words {
		r, ok := roleOf(names, w)
		if !ok || slices.Contains(roles[:i], r) {
			return fmt.Errorf("pins= of a %s names %s once each, in the order of the nodes", s.e.Kind, strings.Join(want, ", "))
		}
		roles[i] = r
	}
	s.e.Roles, s.e.Order = roles, ByPins
	return nil
}

// declareAll reads the "all" lines of an instance.
func (b *builder) declareAll(in *instance) {
	for _, ref := range in.scope.intents {
		if !strings.EqualFold(ref.i.Subject.Text, "all") || ref.i.Letter.Text == "" {
			continue
		}
		letter := ref.i.Letter.Text[0] &^ 0x20
		if len(ref.i.Letter.Text) != 1 || !strings.ContainsRune("RCLVI", rune(letter)) {
			b.problem(ref.deck.Span(ref.i.Letter), "all takes one of the letters R, C, L, V, I")
			continue
		}
		if in.all == nil {
			in.all = map[byte]*declared{}
		}
		d := in.all[letter]
		if d == nil {
			d = &declared{deck: ref.deck, env: in.env, keys: map[string]syntax.IntentPair{}}
			in.all[letter] = d
		}
		for _, pair := range ref.i.Pairs {
			key := strings.ToLower(pair.Key.Text)
			if _, twice := d.keys[key]; twice {
				b.circuit.Resets = append(b.circuit.Resets, Reset{"all " + string(letter), key, ref.deck.Span(pair.Key)})
			}
			probe := &Element{Kind: Kind(strings.ToLower(string(letter)))}
			if b.set(probe, pair, in.env, ref.deck) {
				d.keys[key] = pair
			}
		}
	}
}

// inherit applies the "all" lines from the board inwards, so that the nearer
// one wins.
func (b *builder) inherit(e *Element, in *instance) {
	if in == nil {
		return
	}
	b.inherit(e, in.outer)
	if d := in.all[e.Letter]; d != nil {
		for _, pair := range d.keys {
			b.set(e, pair, d.env, nil)
		}
	}
}

// set applies one key to an element and reports whether it was taken. Problems
// are told where deck is given.
func (b *builder) set(e *Element, pair syntax.IntentPair, env *environment, deck *syntax.Deck) bool {
	tell := func(at syntax.Word, format string, args ...any) bool {
		if deck != nil {
			b.problem(deck.Span(at), format, args...)
		}
		return false
	}
	key := strings.ToLower(pair.Key.Text)
	k, ok := intentKeyOf(key)
	switch {
	case !ok:
		return tell(pair.Key, "%s is no key of an intent line", source.Visible(pair.Key.Text))
	case !k.fits(e):
		return tell(pair.Key, "%s does not fit %s, which is %s", key, nameOf(e), describe(e.Kind))
	case k.set == nil:
		return true
	}
	if err := k.set(&setting{e, pair, env}); err != nil {
		return tell(pair.Value, "%s: %v", key, err)
	}
	if deck != nil && e.Designator != "" {
		if e.Intent.At == nil {
			e.Intent.At = map[string]source.Span{}
		}
		e.Intent.At[key] = deck.Span(pair.Key)
	}
	return true
}

func nameOf(e *Element) string {
	if e.Designator == "" {
		return "all " + strings.ToUpper(string(e.Kind))
	}
	return source.Visible(e.Designator)
}

// describe names a kind in words.
func describe(k Kind) string {
	if word, ok := map[Kind]string{Resistor: "a resistor", Capacitor: "a capacitor", Inductor: "an inductor", VoltageSource: "a voltage source",
		CurrentSource: "a current source", Diode: "a diode", SCR: "a thyristor", Triac: "a triac", UJT: "a unijunction transistor",
		PUT: "a programmable unijunction transistor", Unknown: "an unknown part"}[k]; ok {
		return word
	}
	return "a part of kind " + string(k)
}

// direct applies the lines of an instance that name one element.
func (b *builder) direct(in *instance) {
	for _, ref := range in.scope.intents {
		subject := strings.ToLower(ref.i.Subject.Text)
		switch {
		case ref.i.Waive != nil:
			b.waive(in, ref)
		case subject == "all":
		case subject == "board":
			if in.outer != nil {
				b.once(fmt.Sprint("board ", ref.at.Start), ref.at, "board lines belong to the top level")
			}
		default:
			b.one(in, ref)
		}
	}
}

// one applies the line of one element.
func (b *builder) one(in *instance, ref intentRef) {
	e, ok := b.byName[strings.ToLower(in.prefix+ref.i.Subject.Text)]
	if !ok {
		b.once(fmt.Sprint("subject ", ref.at.Start), ref.deck.Span(ref.i.Subject), "no element is called %s",
			source.Visible(in.prefix+ref.i.Subject.Text))
		return
	}
	for _, pair := range ref.i.Pairs {
		key := strings.ToLower(pair.Key.Text)
		if _, twice := e.Intent.At[key]; twice {
			b.circuit.Resets = append(b.circuit.Resets, Reset{e.Designator, key, ref.deck.Span(pair.Key)})
		}
		if key == "part" {
			b.takePart(in, e, pair, ref.deck)
			continue
		}
		b.set(e, pair, in.env, ref.deck)
	}
}

// takePart gives an element the ratings of another part name.
func (b *builder) takePart(in *instance, e *Element, pair syntax.IntentPair, deck *syntax.Deck) {
	p := &placing{b: b, in: in}
	r := p.ratings(pair.Value.Text)
	if r == nil {
		b.problem(deck.Span(pair.Value), "nothing is known of the part %s", source.Visible(pair.Value.Text))
		return
	}
	e.Ratings, e.PartName = r, pair.Value.Text
	if e.Intent.At == nil {
		e.Intent.At = map[string]source.Span{}
	}
	e.Intent.At["part"] = deck.Span(pair.Key)
	if k := Kind(r.Kind); k != "" && k != e.Kind {
		e.Kind = k
		if order := part.NetlistOrder(r.Kind); len(order) == len(e.Nodes) && e.Order != ByPins {
			e.Roles, e.Order = order, ByLibrary
		}
	}
}

func (b *builder) waive(in *instance, ref intentRef) {
	w := ref.i.Waive
	b.circuit.Waivers = append(b.circuit.Waivers, Waiver{Rule: strings.ToLower(w.Rule.Text), Designator: in.prefix + w.Designator.Text,
		Reason: strings.TrimSpace(w.Reason.Text), At: ref.at})
}

// applyBoard reads the board lines of the top level.
func (b *builder) applyBoard(top *scope) {
	board := &b.circuit.Board
	board.Ambient = quantity.Spread{Low: 0, Nominal: 25, High: 50}
	board.Declared = map[string]source.Span{}
	env := b.environment(top, nil, nil)
	for _, ref := range top.intents {
		if !strings.EqualFold(ref.i.Subject.Text, "board") {
			continue
		}
		for _, pair := range ref.i.Pairs {
			key := strings.ToLower(pair.Key.Text)
			if _, twice := board.Declared[key]; twice {
				b.circuit.Resets = append(b.circuit.Resets, Reset{"board", key, ref.deck.Span(pair.Key)})
			}
			if err := b.boardKey(key, pair, env); err != nil {
				b.problem(ref.deck.Span(pair.Value), "%s: %v", source.Visible(key), err)
				continue
			}
			board.Declared[key] = ref.deck.Span(pair.Key)
		}
	}
}

func (b *builder) boardKey(key string, pair syntax.IntentPair, env *environment) error {
	board := &b.circuit.Board
	r, err := intentRange(env, pair)
	switch {
	case key != "ambient" && key != "mains" && key != "line":
		return fmt.Errorf("a board line takes ambient, mains and line")
	case err != nil:
		return err
	case key == "ambient":
		if r.Low < -100 || r.High > 250 {
			return fmt.Errorf("an ambient of %s deg C makes no sense", pair.Value.Text)
		}
		board.Ambient = r
	case key == "mains":
		if r.Low <= 0 || r.High > 1000 {
			return fmt.Errorf("a mains of %s V makes no sense", pair.Value.Text)
		}
		board.Mains = &r
	default:
		if r.Low != r.High || r.Low != 50 && r.Low != 60 {
			return fmt.Errorf("line is 50 or 60")
		}
		board.Line = r.Low
	}
	return nil
}
