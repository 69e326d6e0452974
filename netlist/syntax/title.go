package syntax

import (
	"strings"

	"standoff/netlist/quantity"
)

// title takes the first line of a top-level file as its title unless it is
// blank, a comment, an intent line, a known dot card or a complete element card.
func (r *reader) title() {
	s := &r.scan
	s.blanks()
	switch s.lineKind() {
	case lineComment:
		line := firstLine(s.text)
		r.deck.Title = strings.TrimSpace(strings.TrimLeft(line, "*;$/ \t"))
		return
	case lineBlank, lineIntent:
		s.at = 0
		return
	}
	probe := &reader{deck: &Deck{File: r.deck.File}, scan: scanner{text: s.text}}
	if probe.scan.next() {
		probe.flush()
	}
	if len(probe.deck.Problems) == 0 && len(probe.deck.Statements) > 0 && isCard(probe.deck.Statements[0]) {
		s.at = 0
		return
	}
	start, end := s.skipLine()
	r.deck.Title = strings.TrimSpace(s.text[start:end])
}

func firstLine(text string) string {
	line, _, _ := strings.Cut(text, "\n")
	return strings.TrimSpace(line)
}

// isCard reports whether a statement is a complete card and no heading that
// happens to start like one: a designator has a digit in it or is one letter
// long, and the fields suit the letter.
func isCard(s Statement) bool {
	e := s.Element
	if e == nil {
		return s.Other == nil || s.Other.Known
	}
	name := e.Name.Text
	if len(name) > 1 && !strings.ContainsAny(name, "0123456789") {
		return false
	}
	switch name[0] | 0x20 {
	case 'r', 'c', 'l':
		return len(e.Fields) >= 3 && isNumber(e.Fields[2]) || len(e.Fields) >= 2 && len(e.Pairs) > 0
	case 'v', 'i':
		return len(e.Fields) >= 2 && (e.Function != nil || len(e.Fields) >= 3 && hasNumber(e.Fields[2:]))
	case 'd', 'k', 'f', 'h', 'w', 'x':
		return len(e.Fields) == 3 || len(e.Fields) == 4
	case 'q', 'j', 'm', 's', 't', 'e', 'g':
		return len(e.Fields) >= 4 && len(e.Fields) <= 6
	}
	return false
}

func isNumber(v Value) bool {
	if v.Expr != nil {
		return true
	}
	_, err := quantity.Parse(v.Text)
	return err == nil
}

func hasNumber(list []Value) bool {
	for _, v := range list {
		if isNumber(v) {
			return true
		}
	}
	return false
}

// afterEnd tells that cards stand behind .end, where nothing is read any more.
func (r *reader) afterEnd() {
	if !r.ended {
		return
	}
	s := &scanner{text: r.scan.text, at: r.scan.at}
	for s.next() {
		for _, t := range s.tokens {
			if t.Type == tokenWord || t.Type == tokenDot || t.Type == tokenIntent {
				r.deck.problem(wordOf(&t), "this stands behind .end and is not read")
				return
			}
		}
		s.tokens = s.tokens[:0]
	}
}

// attachComments hands every subcircuit header the comments next to it: on the
// header itself, and on up to three lines before and after.
func (r *reader) attachComments() {
	if len(r.headers) == 0 || len(r.scan.comments) == 0 {
		return
	}
	file := r.deck.File
	next := 0
	for _, h := range r.headers {
		s := r.deck.Statements[h.statement]
		first, last := file.Position(s.Start).Line-1, file.Position(s.End).Line-1
		for next < len(r.scan.comments) && r.scan.comments[next].line < first-3 {
			next++
		}
		for i := next; i < len(r.scan.comments) && r.scan.comments[i].line <= last+3; i++ {
			s.Subckt.Comments = append(s.Subckt.Comments, r.scan.comments[i].word)
		}
	}
}
