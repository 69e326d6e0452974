package circuit

import (
	"strings"

	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// fetch is one file, or one section of it, read into one scope.
type fetch struct {
	file    *source.File
	section string
	scope   *scope
}

// include reads another file in place.
func (c *collector) include(i syntax.Include) {
	b, at, path := c.b, c.deck.Span(i.Path), i.Path.Text
	section := strings.ToLower(i.Section.Text)
	file := c.load(i)
	if file == nil {
		return
	}
	for up := c; up != nil; up = up.outer {
		if (up.deck.File == file || up.deck.File.Path == file.Path) && up.section == section {
			b.once("include loop "+path, at, "%s includes itself; it is not read again", source.Visible(path))
			return
		}
	}
	key := fetch{file, section, c.top()}
	if b.fetched[key] {
		return // its cards are in already
	}
	if b.fetched == nil {
		b.fetched, b.decks = map[fetch]bool{}, map[*source.File]*syntax.Deck{}
	}
	b.fetched[key] = true
	inner := &collector{b: b, deck: b.parsed(file), stack: []openScope{{c.top(), 0}}, base: c.guard(),
		depth: c.depth + 1, outer: c, section: section}
	inner.run()
	if section != "" && !inner.found {
		b.problem(c.deck.Span(i.Section), "%s has no section %s", source.Visible(path),
			source.Visible(i.Section.Text))
	}
}

// load fetches the file; nil where it is not to be read.
func (c *collector) load(i syntax.Include) *source.File {
	b, at, path := c.b, c.deck.Span(i.Path), i.Path.Text
	limits := b.opts.Limits
	switch {
	case b.opts.Includes == nil:
		b.once("include "+path, at, "%s is not read: nothing can be included here", source.Visible(path))
		return nil
	case c.depth >= limits.depth():
		b.once("include depth", at, "includes nest deeper than %d; this one is not read", limits.depth())
		return nil
	case b.includes >= limits.includes():
		b.once("include count", at, "more than %d files are included; the rest is not read", limits.includes())
		return nil
	}
	b.includes++
	file, err := b.opts.Includes.Load(c.deck.File, path)
	if err != nil {
		b.once("include "+strings.ToLower(path), at, "%v", err)
		return nil
	}
	return file
}

// parsed returns the deck of an included file.
func (b *builder) parsed(file *source.File) *syntax.Deck {
	deck, known := b.decks[file]
	if !known {
		deck = syntax.Parse(file, false)
		b.decks[file] = deck
		b.problems = append(b.problems, deck.Problems...)
	}
	return deck
}
