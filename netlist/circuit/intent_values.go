package circuit

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// setting is one key being applied to one element.
type setting struct {
	e    *Element
	pair syntax.IntentPair
	env  *environment
}

func (s *setting) key() string { return strings.ToLower(s.pair.Key.Text) }

// isRange reports whether the value is written LOW..HIGH.
func isRange(p syntax.IntentPair) bool { return p.Low != p.High }

// units returns spellings of a key's unit that a number parser would trip over:
// the p of ppm is no pico, the K of K/W no kilo.
func units(key string) []string {
	switch key {
	case "tempco":
		return []string{"ppm/degc", "ppm/c", "ppm/k", "ppm"}
	case "heatsink":
		return []string{"degc/w", "c/w", "k/w"}
	case "ambient":
		return []string{"deg", "degc", "c"}
	case "vt":
		return []string{"v*s", "v.s", "vs"}
	}
	return nil
}

// intentNumber works a number out. A percent sign counts for a tolerance only.
func intentNumber(env *environment, key string, w syntax.Word) (float64, error) {
	text, percent := strings.CutSuffix(w.Text, "%")
	if percent && key != "tol" {
		return 0, fmt.Errorf("%s is no figure in per cent", key)
	}
	lower := strings.ToLower(text)
	for _, unit := range units(key) {
		if strings.HasSuffix(lower, unit) && len(unit) < len(text) {
			text = text[:len(text)-len(unit)]
			break
		}
	}
	if key == "period" && strings.HasSuffix(lower, "min") {
		return 0, errors.New("a period is written in seconds")
	}
	v, err := env.value(syntax.Value{Word: syntax.Word{Text: text}})
	if percent {
		v /= 100
	}
	return v, err
}

// intentRange works both ends out.
func intentRange(env *environment, p syntax.IntentPair) (r quantity.Spread, err error) {
	key := strings.ToLower(p.Key.Text)
	if r.Low, err = intentNumber(env, key, p.Low); err != nil {
		return r, err
	}
	if r.High, err = intentNumber(env, key, p.High); err != nil {
		return r, err
	}
	if r.Low > r.High {
		return r, fmt.Errorf("the range %s runs backwards", source.Visible(p.Value.Text))
	}
	r.Nominal = r.Low/2 + r.High/2
	return r, nil
}

// wanted is a value for a key that needs both ends.
func (s *setting) wanted() (quantity.Spread, error) {
	if !isRange(s.pair) {
		return quantity.Spread{}, fmt.Errorf("%s takes a range LOW..HIGH, not the single value %s", s.key(),
			source.Visible(s.pair.Value.Text))
	}
	return intentRange(s.env, s.pair)
}

func (s *setting) tolerance() error {
	r, err := intentRange(s.env, s.pair)
	if err != nil {
		return err
	}
	if !isRange(s.pair) {
		r.Low = -r.High
	}
	r.Nominal = 0
	if r.Low <= -1 || r.Low > 0 || r.High < 0 || r.High > 1 {
		hint := ""
		if last := s.pair.High.Text; r.High > 1 && !strings.HasSuffix(last, "%") {
			hint = "; per cent are written with their sign, as 5%"
		}
		return fmt.Errorf("a tolerance of %s makes no sense%s", source.Visible(s.pair.Value.Text), hint)
	}
	s.e.own().Tol = &r
	return nil
}

// amount returns a setter for a key that takes one value above zero.
func amount(field func(*Intent) **float64) func(*setting) error {
	return func(s *setting) error {
		if isRange(s.pair) {
			return fmt.Errorf("%s takes one value, not a range", s.key())
		}
		v, err := intentNumber(s.env, s.key(), s.pair.Value)
		if err != nil {
			return err
		}
		if v <= 0 {
			return fmt.Errorf("%s has to be above zero", s.key())
		}
		*field(s.e.own()) = &v
		return nil
	}
}

// target returns a setter for a key that takes a range above zero.
func target(field func(*Intent) **quantity.Spread) func(*setting) error {
	return func(s *setting) error {
		r, err := s.wanted()
		if err == nil && r.Low <= 0 {
			err = fmt.Errorf("%s has to be above zero", s.key())
		}
		if err == nil {
			*field(s.e.own()) = &r
		}
		return err
	}
}

// supply is the range of a source; a single value says that it is exact.
func (s *setting) supply() error {
	r, err := intentRange(s.env, s.pair)
	if err == nil {
		s.e.own().Range = &r
	}
	return err
}

func (s *setting) temperature() error {
	if isRange(s.pair) {
		return errors.New("tempco takes one value, not a range")
	}
	v, err := intentNumber(s.env, "tempco", s.pair.Value)
	if err != nil {
		return err
	}
	v *= 1e-6
	if v < -0.05 || v > 0.05 {
		return fmt.Errorf("a coefficient of %s ppm/K makes no sense", source.Visible(s.pair.Value.Text))
	}
	s.e.own().Tempco = &v
	return nil
}

func (s *setting) travel() error {
	r, err := s.wanted()
	switch {
	case err != nil:
		return err
	case r.Low < 0:
		return errors.New("a travel starts at zero or above")
	case r.High <= 0:
		return errors.New("a travel ends above zero")
	}
	s.e.own().Travel = &r
	return nil
}

func (s *setting) dielectric() error {
	word, err := s.word("film", "c0g", "x7r", "y5v", "electrolytic", "tantalum", "x2", "y2")
	if err == nil {
		s.e.own().Kind = word
	}
	return err
}

func (s *setting) load() error {
	word, err := s.word("resistive", "inductive", "lamp", "motor")
	if err == nil {
		s.e.own().Load = word
	}
	return err
}

func (s *setting) latch() error {
	_, err := s.word("ok")
	if err == nil {
		s.e.own().LatchOK = true
	}
	return err
}

// word takes one of a few words.
func (s *setting) word(allowed ...string) (string, error) {
	w := strings.ToLower(s.pair.Value.Text)
	if !slices.Contains(allowed, w) {
		return "", fmt.Errorf("%s is one of %s", s.key(), strings.Join(allowed, ", "))
	}
	return w, nil
}

// pins takes the terminal roles in the order of the nodes.
func (s *setting) pins() error {
	words := strings.Split(s.pair.Value.Text, ",")
	if len(words) != len(s.e.Nodes) {
		return fmt.Errorf("pins= names %d terminals, but %s has %d nodes", len(words),
			source.Visible(s.e.Designator), len(s.e.Nodes))
	}
	if s.e.Kind == Unknown {
		return s.pinsOfUnknown(words)
	}
	kind := part.Kind(s.e.Kind)
	roles, want := rolesOf(roleNames(kind), words), libraryOrder(kind, len(words))
	if !complete(roles, want) {
		if len(want) != len(words) || kind == part.Diac {
			return fmt.Errorf("the terminals of %s, which is %s, have no order to declare",
				source.Visible(s.e.Designator), describe(s.e.Kind))
		}
		return fmt.Errorf("pins= of %s names %s once each, in the order of the nodes", describe(s.e.Kind),
			strings.Join(want, ", "))
	}
	s.e.Roles, s.e.Order = roles, ByPins
	return nil
}

// pinsOfUnknown takes the terminals of a part whose kind nobody gave, as some
// kind or other has them.
func (s *setting) pinsOfUnknown(words []string) error {
	for _, kind := range []part.Kind{part.UJT, part.SCR, part.Triac, part.CurrentSource, part.Optotriac,
		part.NPN, part.NMOS, part.Diode} {
		roles := rolesOf(roleNames(kind), words)
		if complete(roles, libraryOrder(kind, len(words))) {
			s.e.Roles, s.e.Order = roles, ByPins
			return nil
		}
	}
	return fmt.Errorf("%s are no terminals of one part", source.Visible(s.pair.Value.Text))
}
