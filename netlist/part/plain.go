package part

import (
	"strings"

	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// parseCard reads the first card of a text of the library.
func parseCard(text string) *family {
	m, end := plainModel(text)
	deck := &syntax.Deck{File: source.New("library", text[:end])}
	c := newCard(deck, m, Plain, "library")
	f := c.family()
	f.trouble = c.problems
	return f
}

// plainModel splits a card of the library into its settings and returns where it
// ends. The cards are written plainly - one line and lines that start with +,
// key=value or key="text", in brackets - so that they can be read without the
// grammar, the making of which would cost a small board more than all else about
// its parts. A test compares it with what the grammar reads.
func plainModel(text string) (*syntax.Model, int) {
	m := &syntax.Model{Pairs: make([]syntax.Pair, 0, 64)}
	at := len(modelLine)
	m.Name, at = plainWord(text, at)
	m.Type, at = plainWord(text, at+1)
	for at < len(text) {
		switch text[at] {
		case ' ', '(', ')':
			at++
			continue
		case '\n':
			if !strings.HasPrefix(text[at:], "\n+ ") {
				return m, at
			}
			at += len("\n+ ")
			continue
		}
		var p syntax.Pair
		p.Key, at = plainWord(text, at)
		at++ // =
		if text[at] == '"' {
			end := at + 1 + strings.IndexByte(text[at+1:], '"')
			p.Value = syntax.Value{Word: plainSpan(text, at+1, end), Quoted: true}
			at = end + 1
		} else {
			p.Value.Word, at = plainWord(text, at)
		}
		m.Pairs = append(m.Pairs, p)
	}
	return m, at
}

// plainWord returns the word that starts at a place and where it ends.
func plainWord(text string, start int) (syntax.Word, int) {
	end := start
	for end < len(text) && !strings.Contains(" \n=()", text[end:end+1]) {
		end++
	}
	return plainSpan(text, start, end), end
}

func plainSpan(text string, start, end int) syntax.Word {
	return syntax.Word{Text: text[start:end], Start: int32(start), End: int32(end)}
}
