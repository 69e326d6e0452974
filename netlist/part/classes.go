package part

import (
	"maps"
	"slices"
	"strings"

	"standoff/netlist/quantity"
	"standoff/netlist/source"
)

// family is what one card makes: a part, or one for each voltage class.
type family struct {
	base    *Ratings
	classes []class
	trouble []source.Problem // of a card of the library; a test wants none
}

// class is one voltage class of a family.
type class struct {
	names    []string
	blocking Rating
	made     *Ratings
}

// family reads the card with its voltage classes.
func (c *card) family() *family {
	f := &family{base: c.read()}
	for text := range strings.FieldsSeq(f.base.Texts["classes"]) {
		names, volts, _ := strings.Cut(text, "=")
		v, err := quantity.Parse(volts)
		if err != nil || v.Value <= 0 || names == "" {
			c.problem(c.place("classes"), "classes= lists NAME=VOLTS, not %s", source.Visible(text))
			continue
		}
		mark := c.markFor("vdrm", "_min")
		k := class{names: strings.Split(names, ","),
			blocking: Rating{Min: v.Value, HasMin: true, Mark: mark, MinMark: mark, Source: c.sourceFor(mark)}}
		if strings.EqualFold(k.names[0], f.base.Name) {
			// The card's own name is a class: there is no name for the family.
			own := k.part(f.base)
			own.Aliases = append(own.Aliases, f.base.Aliases...)
			f.base = own
			continue
		}
		f.classes = append(f.classes, k)
	}
	return f
}

// part returns the ratings of a class, made on first use.
func (k *class) part(base *Ratings) *Ratings {
	if k.made == nil {
		r := *base
		r.Name, r.Aliases = k.names[0], k.names[1:]
		r.Figures = maps.Clone(base.Figures)
		r.Figures["vdrm"] = k.blocking
		if r.Kind == SCR {
			r.Figures["vrrm"] = k.blocking
		}
		k.made = &r
	}
	return k.made
}

// parts returns the card's own part and those of the classes.
func (f *family) parts() []*Ratings {
	list := []*Ratings{f.base}
	for i := range f.classes {
		list = append(list, f.classes[i].part(f.base))
	}
	return list
}

// find returns the part that bears a name.
func (f *family) find(name string) *Ratings {
	is := func(n string) bool { return strings.EqualFold(n, name) }
	if is(f.base.Name) || slices.ContainsFunc(f.base.Aliases, is) {
		return f.base
	}
	for i := range f.classes {
		if slices.ContainsFunc(f.classes[i].names, is) {
			return f.classes[i].part(f.base)
		}
	}
	return nil
}
