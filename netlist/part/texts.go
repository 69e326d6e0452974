package part

import (
	"strings"

	"standoff/netlist/source"
)

// isText reports whether a key holds words, not a number.
func isText(key string) bool {
	switch key {
	case "source", "mark", "memory", "scan", "read", "alias", "classes", "quadrants", "crossing", "package", "leads", "mfg", "note":
		return true
	}
	return false
}

// texts takes the keys that hold words. One that is repeated adds up.
func (c *card) texts() {
	for _, p := range c.model.Pairs {
		key := strings.ToLower(p.Key.Text)
		if !isText(key) {
			continue
		}
		c.places[key] = p.Key
		text := p.Value.Text
		switch before := c.ratings.Texts[key]; {
		case before == "":
		case key == "source" || key == "note":
			text = before + "; " + text
		default:
			text = before + " " + text
		}
		c.ratings.Texts[key] = text
	}
	c.ratings.Source = c.ratings.Texts["source"]
	c.ratings.Aliases = strings.Fields(c.ratings.Texts["alias"])
	c.rowMark()
	c.quadrants()
}

// rowMark takes the marks of trust: the row's and those of single figures.
func (c *card) rowMark() {
	mark, ok := markOf(c.ratings.Texts["mark"])
	if !ok && !c.spice {
		c.problem(c.places["mark"], "mark= is read, scan or memory, not %s", source.Visible(c.ratings.Texts["mark"]))
	}
	c.marks[""] = mark
	for _, key := range []string{"read", "scan", "memory"} {
		mark, _ := markOf(key)
		for _, symbol := range strings.Fields(strings.ToLower(c.ratings.Texts[key])) {
			c.marks[symbol] = mark
		}
	}
}

func markOf(word string) (Mark, bool) {
	switch strings.ToLower(word) {
	case "", "declared":
		return Declared, true
	case "read":
		return Read, true
	case "scan":
		return Scan, true
	case "memory":
		return Memory, true
	}
	return Declared, false
}

// quadrants looks at the list of quadrants in which a triac is guaranteed to fire.
func (c *card) quadrants() {
	text, given := c.ratings.Texts["quadrants"]
	if !given || c.spice {
		return
	}
	rest := "1234"
	for _, q := range text {
		i := strings.IndexRune(rest, q)
		if i < 0 {
			c.problem(c.places["quadrants"], "quadrants= lists some of 1, 2, 3 and 4 in this order, as 123 or 1234")
			delete(c.ratings.Texts, "quadrants")
			return
		}
		rest = rest[i+1:]
	}
}

// fromMemory is the source of a figure that was seen in no document.
const fromMemory = "from memory, seen in no document"

// trust gives every figure its marks and its source.
func (c *card) trust() {
	for base, r := range c.ratings.Figures {
		r.MinMark, r.TypMark, r.MaxMark = c.markFor(base, "_min"), c.markFor(base, "_typ"), c.markFor(base, "_max")
		s, _ := SymbolOf(c.ratings.Kind, base)
		switch {
		case s.Sense == Greatest && r.HasMax, !r.HasMin && r.HasMax:
			r.Mark = r.MaxMark
		case s.Sense == Least && r.HasMin, !r.HasMax && r.HasMin:
			r.Mark = r.MinMark
		case r.HasMin && r.HasMax:
			r.Mark = max(r.MinMark, r.MaxMark)
		default:
			r.Mark = r.TypMark
		}
		r.Source = c.ratings.Source
		if r.Mark == Memory && c.marks[""] != Memory {
			r.Source = fromMemory
		}
		c.ratings.Figures[base] = r
	}
	c.marksAreUsed()
}

func (c *card) markFor(base, side string) Mark {
	if mark, ok := c.marks[base+side]; ok {
		return mark
	}
	if mark, ok := c.marks[base]; ok {
		return mark
	}
	return c.marks[""]
}

// marksAreUsed complains about a mark for a figure that the card does not give.
func (c *card) marksAreUsed() {
	for _, key := range []string{"read", "scan", "memory"} {
		for _, symbol := range strings.Fields(strings.ToLower(c.ratings.Texts[key])) {
			r, ok := c.ratings.Figures[symbol]
			if !ok {
				base, side, _ := cutSide(symbol)
				r = c.ratings.Figures[base]
				ok = side == "_min" && r.HasMin || side == "_typ" && r.HasTyp || side == "_max" && r.HasMax
			}
			blocking := (symbol == "vdrm" || symbol == "vrrm") && c.ratings.Texts["classes"] != ""
			if !ok && !blocking && !c.spice {
				c.problem(c.places[key], "%s is marked but not given", source.Visible(symbol))
			}
		}
	}
}

// cutSide splits _min, _typ or _max off a word.
func cutSide(word string) (base, side string, ok bool) {
	i := len(word) - len("_min")
	if i < 0 {
		return word, "", false
	}
	switch word[i:] {
	case "_min", "_typ", "_max":
		return word[:i], word[i:], true
	}
	return word, "", false
}
