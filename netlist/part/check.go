package part

import (
	"fmt"
	"slices"

	"standoff/netlist/quantity"
)

// check looks for figures that contradict each other and leaves them out.
func (c *card) check() {
	for i := range c.settings {
		s := &c.settings[i]
		r, ok := c.ratings.Figures[s.base]
		if fault := disorder(s.symbol, r); ok && s.known && fault != "" {
			c.drop(s.base, fault)
		}
	}
	if c.ratings.Kind == UJT {
		if eta := c.ratings.Figures["eta"]; max(eta.Min, eta.Typ, eta.Max) >= 1 {
			c.drop("eta", "eta: a stand-off ratio lies below 1")
		}
	}
	if t, ok := c.ratings.Test("t_cold"); ok && t >= 25 {
		c.drop("t_cold", fmt.Sprintf("t_cold = %g deg C is not cold: the other figures hold at 25 deg C", t))
	}
	if t, ok := c.ratings.Test("t_hot"); ok && t <= 25 {
		c.drop("t_hot", fmt.Sprintf("t_hot = %g deg C is not hot: the other figures hold at 25 deg C", t))
	}
}

// disorder says what is wrong with the order of min, typ and max.
func disorder(s Symbol, r Rating) string {
	above := func(lower, upper string, low, high float64) string {
		return fmt.Sprintf("%s = %s lies above %s = %s", s.Name+lower, quantity.Format(low, s.Unit),
			s.Name+upper, quantity.Format(high, s.Unit))
	}
	switch {
	case r.HasMin && r.HasMax && r.Min > r.Max:
		return above("_min", "_max", r.Min, r.Max)
	case r.HasMin && r.HasTyp && r.Min > r.Typ:
		return above("_min", "_typ", r.Min, r.Typ)
	case r.HasTyp && r.HasMax && r.Typ > r.Max:
		return above("_typ", "_max", r.Typ, r.Max)
	}
	return ""
}

// drop leaves a figure out and says why at its place.
func (c *card) drop(base, fault string) {
	at := c.model.Name
	for _, s := range slices.Backward(c.settings) {
		if s.base == base {
			at = s.pair.Key
		}
	}
	c.problem(at, "%s", fault)
	delete(c.ratings.Figures, base)
}

// worstQuadrant gives a triac the figures that count for all quadrants, where
// the card has only those of each.
func (c *card) worstQuadrant() {
	if c.ratings.Kind != Triac {
		return
	}
	for _, base := range []string{"igt", "igt_cold", "vgt", "il"} {
		worst := c.ratings.Figures[base]
		if worst.HasMax {
			continue
		}
		for _, q := range []string{"_q1", "_q2", "_q3", "_q4"} {
			if r := c.ratings.Figures[base+q]; r.HasMax {
				worst.Max, worst.HasMax, worst.Source = max(worst.Max, r.Max), true, r.Source
				worst.MaxMark = max(worst.MaxMark, r.MaxMark)
			}
		}
		if worst.HasMax {
			worst.Mark = worst.MaxMark
			c.ratings.Figures[base] = worst
		}
	}
}

// suggestion names a known symbol that is nearly the one written.
func suggestion(kind Kind, base, side string) string {
	for _, s := range Symbols(kind) {
		if near(s.Name, base) {
			return fmt.Sprintf("; did you mean %s?", s.Name+side)
		}
		if near(s.Name, base+side) {
			return fmt.Sprintf("; did you mean %s?", s.Name)
		}
	}
	return ""
}

// near reports whether one letter changed, added, left out or swapped with its
// neighbour makes a into b.
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
	switch {
	case len(a) < len(b):
		return a[i:] == b[i+1:]
	case i == len(a):
		return false
	}
	swapped := i+1 < len(a) && a[i] == b[i+1] && a[i+1] == b[i] && a[i+2:] == b[i+2:]
	return swapped || a[i+1:] == b[i+1:]
}
