package syntax

import (
	"errors"
	"fmt"
	"strings"

	"github.com/alecthomas/participle/v2"
	"github.com/alecthomas/participle/v2/lexer"

	"standoff/netlist/source"
)

// Parse reads a file. top says that it is a top-level file, whose first line is
// a title unless it parses completely as a card. Parse never fails: what could
// not be read is in the deck's problems, with its place.
func Parse(file *source.File, top bool) *Deck {
	r := &reader{deck: &Deck{File: file}, scan: scanner{text: file.Text}}
	if top {
		r.title()
	}
	for !r.ended && r.scan.next() {
		if len(r.scan.tokens) >= chunk {
			r.flush()
		}
	}
	r.flush()
	r.afterEnd()
	r.attachComments()
	return r.deck
}

// chunk is how many tokens are handed over at once: enough to spread the cost of
// a lexer, few enough to stay in cache.
const chunk = 512

// reader is the state of reading one file.
type reader struct {
	deck    *Deck
	scan    scanner
	control bool   // inside .control ... .endc
	data    string // inside .data or .protect: the card that ends it
	ended   bool
	headers []header
}

// header is a subcircuit header that may have its terminal order in a comment.
type header struct{ statement, line int }

func (d *Deck) problem(at Word, message string) {
	d.Problems = append(d.Problems, source.Problem{Span: d.Span(at), Message: source.Brief(message)})
}

// flush parses the tokens scanned so far.
func (r *reader) flush() {
	tokens := r.scan.tokens
	r.scan.tokens = nil
	lex, err := lexer.Upgrade(&tokenList{tokens: tokens})
	if err != nil {
		return
	}
	for !lex.Peek().EOF() && !r.ended {
		r.statement(lex)
		for t := lex.Peek(); !t.EOF() && t.Type != tokenEnd; t = lex.Peek() {
			lex.Next()
		}
		lex.Next()
	}
	r.scan.tokens = tokens[:0]
}

// statement parses one logical line.
func (r *reader) statement(lex *lexer.PeekingLexer) {
	first := lex.Peek()
	if first.Type == tokenEnd {
		return
	}
	if (r.control || r.data != "") && r.skipping(first) {
		return
	}
	switch {
	case first.Type == tokenIntent:
		parseIntent(first, r.deck)
	case first.Type == tokenDot:
		r.dot(lex)
	case first.Type == tokenWord && isLetter(first.Value[0]):
		r.element(lex)
	case first.Type == tokenKey && isLetter(first.Value[0]):
		r.deck.problem(wordOf(first), fmt.Sprintf("%s= stands alone: a setting belongs behind a card, or on a line that starts with +",
			source.Visible(first.Value)))
	default:
		r.deck.problem(wordOf(first), fmt.Sprintf("no card starts with %q: an element starts with a letter, a dot card with a dot, a comment with *",
			source.Visible(rest(first.Value))))
	}
}

func isLetter(c byte) bool { return c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' }

// skipping reports whether a line belongs to a block that is skipped.
func (r *reader) skipping(first *lexer.Token) bool {
	keyword := strings.ToLower(first.Value)
	switch {
	case r.control && keyword == ".endc":
		r.control = false
	case r.data != "" && keyword == r.data:
		r.data = ""
	case keyword == ".end":
		r.control, r.data = false, ""
		return false
	}
	return true
}

// lineEnd returns the end of the present line's text.
func lineEnd(lex *lexer.PeekingLexer, start int) int32 {
	end := start
	for i := lex.RawCursor(); ; i++ {
		t := lex.Peek()
		if t.EOF() || t.Type == tokenEnd {
			if t.Type == tokenEnd {
				end = t.Pos.Offset
			}
			return int32(end)
		}
		end = t.Pos.Offset + len(t.Value)
		lex.Next()
	}
}

func asBad(err error, target **badToken) bool { return errors.As(err, target) }

// fail notes a card that could not be read.
func (r *reader) fail(lex *lexer.PeekingLexer, first *lexer.Token, err error, form string) {
	if b := (*badToken)(nil); asBad(err, &b) {
		r.deck.problem(b.at, b.message)
		return
	}
	at := lex.Peek()
	if at.EOF() || at.Type == tokenEnd {
		r.deck.problem(wordOf(first), fmt.Sprintf("this %s card is not complete: write %s", first.Value, form))
		return
	}
	r.deck.problem(wordOf(at), fmt.Sprintf("%q has no place here: write %s", source.Visible(rest(at.Value)), form))
}

// element parses an element card.
func (r *reader) element(lex *lexer.PeekingLexer) {
	first := lex.Peek()
	card, err := elementParser().ParseFromLexer(lex, participle.AllowTrailing(true))
	if err != nil {
		r.fail(lex, first, err, "NAME node ... value")
		return
	}
	e := &Element{Name: card.Name.Word, Fields: card.Tail.fields, Pairs: card.Tail.pairs, Function: card.Tail.function}
	r.keep(Statement{Start: int32(first.Pos.Offset), End: lineEnd(lex, first.Pos.Offset), Element: e})
}

func (r *reader) keep(s Statement) { r.deck.Statements = append(r.deck.Statements, s) }

// dot parses a dot card.
func (r *reader) dot(lex *lexer.PeekingLexer) {
	first := lex.Peek()
	keyword := strings.ToLower(first.Value)
	s := Statement{Start: int32(first.Pos.Offset)}
	var err error
	switch keyword {
	case ".model", ".modelo":
		err = r.model(lex, &s)
	case ".subckt":
		err = r.subckt(lex, &s)
	case ".ends", ".eom":
		keyword = ".ends"
		card, e := endsParser().ParseFromLexer(lex, participle.AllowTrailing(true))
		if err = e; err == nil {
			s.Ends = &Ends{}
			if card.Name != nil {
				s.Ends.Name = card.Name.Word
			}
		}
	case ".param", ".params", ".parameter":
		keyword = ".param"
		card, e := paramParser().ParseFromLexer(lex, participle.AllowTrailing(true))
		if err = e; err == nil {
			s.Param = &Param{Pairs: card.Settings.pairs}
			r.onlyPairs(card.Settings.words, ".param")
		}
	case ".include", ".inc", ".lib":
		err = r.include(lex, &s, keyword)
	case ".endl", ".global", ".temp":
		err = r.words(lex, &s, keyword)
	case ".if", ".elseif", ".else", ".endif":
		err = r.condition(lex, &s, keyword)
	case ".end":
		s.Stop, r.ended = &Stop{}, true
	default:
		r.other(lex, &s, keyword)
	}
	if err != nil {
		r.fail(lex, first, err, usage[aliasOf(keyword)])
		return
	}
	if keyword == ".end" {
		s.End = s.Start + int32(len(first.Value))
		lex.Next()
		r.scan.at = int(s.End)
	} else {
		s.End = lineEnd(lex, first.Pos.Offset)
	}
	r.keep(s)
	if s.Subckt != nil {
		r.headers = append(r.headers, header{len(r.deck.Statements) - 1, 0})
	}
}

// aliasOf names the card whose usage explains a keyword.
func aliasOf(keyword string) string {
	switch keyword {
	case ".inc":
		return ".include"
	case ".modelo":
		return ".model"
	case ".endl":
		return ".lib"
	}
	return keyword
}

// onlyPairs reports bare words where only key=value may stand.
func (r *reader) onlyPairs(words []Word, keyword string) {
	for _, w := range words {
		r.deck.problem(w, fmt.Sprintf("%q has no place on a %s card: write %s", source.Visible(w.Text), keyword, usage[keyword]))
	}
}

func (r *reader) model(lex *lexer.PeekingLexer, s *Statement) error {
	card, err := modelParser().ParseFromLexer(lex, participle.AllowTrailing(true))
	if err == nil {
		s.Model = &Model{Name: card.Name.Word, Type: card.Type.Word, Pairs: card.Settings.pairs, Flags: card.Settings.words}
	}
	return err
}

func (r *reader) subckt(lex *lexer.PeekingLexer, s *Statement) error {
	card, err := subcktParser().ParseFromLexer(lex, participle.AllowTrailing(true))
	if err != nil {
		return err
	}
	s.Subckt = &Subckt{Name: card.Name.Word, Defaults: card.Settings.pairs}
	for _, w := range card.Settings.words {
		if !strings.EqualFold(w.Text, "params:") {
			s.Subckt.Nodes = append(s.Subckt.Nodes, w)
		}
	}
	return nil
}

func (r *reader) include(lex *lexer.PeekingLexer, s *Statement, keyword string) error {
	card, err := fileParser().ParseFromLexer(lex, participle.AllowTrailing(true))
	if err != nil {
		return err
	}
	if keyword == ".lib" && card.Section == nil && !strings.ContainsAny(card.Path.Text, `./\`) {
		s.Lib = &Lib{Section: card.Path.Word}
		return nil
	}
	s.Include = &Include{Path: card.Path.Word}
	if card.Section != nil && keyword == ".lib" {
		s.Include.Section = card.Section.Word
	}
	return nil
}

func (r *reader) words(lex *lexer.PeekingLexer, s *Statement, keyword string) error {
	card, err := wordsParser().ParseFromLexer(lex, participle.AllowTrailing(true))
	if err != nil {
		return err
	}
	list := make([]Word, len(card.Words))
	for i, w := range card.Words {
		list[i] = w.Word
	}
	switch keyword {
	case ".endl":
		s.Lib = &Lib{Close: true}
	case ".global":
		s.Global = &Global{Nodes: list}
	default:
		s.Temp = &Temp{}
		for _, w := range list {
			s.Temp.Values = append(s.Temp.Values, Value{Word: w})
		}
	}
	return nil
}

// condition parses .if(expression) and its companions; the expression runs to
// the end of the line.
func (r *reader) condition(lex *lexer.PeekingLexer, s *Statement, keyword string) error {
	first := lex.Next()
	s.Condition = &Condition{Keyword: keyword[1:]}
	if keyword == ".else" || keyword == ".endif" {
		return nil
	}
	start := first.Pos.Offset + len(first.Value)
	end := int(lineEnd(lex, start))
	text := Word{r.deck.File.Text[start:end], int32(start), int32(end)}
	expr, err := ParseExpression(text)
	s.Condition.Expr = expr
	return err
}

// other notes a dot card that means nothing here and finds where a block ends.
func (r *reader) other(lex *lexer.PeekingLexer, s *Statement, keyword string) {
	first := lex.Next()
	s.Other = &Other{Keyword: wordOf(first), Known: isSkipped(keyword)}
	switch keyword {
	case ".title":
		end := lineEnd(lex, first.Pos.Offset)
		r.deck.Title = strings.TrimSpace(r.deck.File.Text[first.Pos.Offset+len(first.Value) : end])
	case ".control":
		r.control = true
	case ".data":
		r.data = ".enddata"
	case ".protect", ".prot":
		r.data = "" // encrypted text is not written after these any more
	}
}
