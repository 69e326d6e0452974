package part

import (
	"strings"

	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// isText reports whether a key holds words, not a number.
func isText(key string) bool {
	switch key {
	case "source", "mark", "memory", "scan", "read", "alias", "classes", "quadrants", "crossing", "package",
		"leads", "mfg", "note":
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

// place returns where a key stands first.
func (c *card) place(key string) syntax.Word {
	for _, p := range c.model.Pairs {
		if strings.EqualFold(p.Key.Text, key) {
			return p.Key
		}
	}
	return c.model.Name
}

// rowMark takes the marks of trust: the row's and those of single figures.
func (c *card) rowMark() {
	mark, ok := markOf(c.ratings.Texts["mark"])
	if !ok && !c.spice {
		word := source.Visible(c.ratings.Texts["mark"])
		c.problem(c.place("mark"), "mark= is read, scan or memory, not %s", word)
	}
	c.marks[""] = mark
	for _, key := range []string{"read", "scan", "memory"} {
		mark, _ := markOf(key)
		for symbol := range strings.FieldsSeq(strings.ToLower(c.ratings.Texts[key])) {
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

// markFor returns the trust in one side of a figure.
func (c *card) markFor(base, side string) Mark {
	if len(c.marks) > 1 {
		if mark, ok := c.marks[base+side]; ok {
			return mark
		}
		if mark, ok := c.marks[base]; ok {
			return mark
		}
	}
	return c.marks[""]
}

// sourceFor returns where a figure of such trust comes from.
func (c *card) sourceFor(mark Mark) string {
	if mixed := len(c.marks) > 1; mark == Memory && mixed {
		return "from memory, seen in no document"
	}
	return c.ratings.Source
}

// marksAreUsed complains about a mark for a figure that the card does not give.
func (c *card) marksAreUsed() {
	if c.spice || len(c.marks) == 1 {
		return
	}
	for _, key := range []string{"read", "scan", "memory"} {
		for symbol := range strings.FieldsSeq(strings.ToLower(c.ratings.Texts[key])) {
			_, ok := c.ratings.Figures[symbol]
			if base, side, cut := cutSide(symbol); !ok && cut {
				ok = c.ratings.Figures[base].has(side)
			}
			blocking := symbol == "vdrm" || symbol == "vrrm"
			if !ok && !(blocking && c.ratings.Texts["classes"] != "") {
				c.problem(c.place(key), "%s is marked but not given", source.Visible(symbol))
			}
		}
	}
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
			c.problem(c.place("quadrants"), "quadrants= lists some of 1, 2, 3 and 4 in this order, as 123 or 1234")
			delete(c.ratings.Texts, "quadrants")
			return
		}
		rest = rest[i+1:]
	}
}
