package part

import (
	"maps"
	"strings"

	"standoff/netlist/quantity"
	"standoff/netlist/source"
)

// family is what one card makes: a part, or one for each voltage class.
type family struct {
	base    *Ratings
	classes []class
}

// class is one voltage class of a family.
type class struct {
	names    []string
	blocking Rating
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
		k := class{names: strings.Split(names, ","), blocking: Rating{Min: v.Value, HasMin: true, Mark: mark, MinMark: mark,
			Source: c.sourceFor(mark)}}
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

// part returns the ratings of a class.
func (k *class) part(base *Ratings) *Ratings {
	r := *base
	r.Name, r.Aliases = k.names[0], k.names[1:]
	r.Figures = maps.Clone(base.Figures)
	r.Figures["vdrm"] = k.blocking
	if r.Kind == SCR {
		r.Figures["vrrm"] = k.blocking
	}
	return &r
}

// parts returns the card's own part and those of the classes.
func (f *family) parts() []*Ratings {
	list := []*Ratings{f.base}
	for i := range f.classes {
		list = append(list, f.classes[i].part(f.base))
	}
	return list
}
