package syntax

import (
	"strings"

	"github.com/alecthomas/participle/v2/lexer"
)

// The kinds of tokens.
const (
	tokenEnd    lexer.TokenType = iota + 1 // end of a logical line
	tokenDot                               // .model and the like, at the start of a line
	tokenWord                              // a run of anything but blanks and punctuation
	tokenKey                               // a word with = behind it; the = is taken along
	tokenOpen                              // (
	tokenClose                             // )
	tokenExpr                              // {expression} or 'expression'
	tokenString                            // "text"
	tokenIntent                            // a *> line, whole
	tokenBad                               // an unclosed brace or quote
	tokenLong                              // the first word that is too many for one card
)

// symbols names the tokens for the grammars.
var symbols = map[string]lexer.TokenType{"EOF": lexer.EOF, "End": tokenEnd, "Dot": tokenDot, "Word": tokenWord,
	"Key": tokenKey, "Open": tokenOpen, "Close": tokenClose, "Expr": tokenExpr, "String": tokenString,
	"Intent": tokenIntent, "Bad": tokenBad, "Long": tokenLong}

// mostWords is how many words, brackets and expressions one card may have; the
// longest waveforms that people write stay far below.
const mostWords = 100_000

// scanner turns the text into tokens, one logical line after the other. Tokens
// carry the offsets of the text itself: no joined copy exists.
type scanner struct {
	text   string
	at     int
	line   int // physical line of at, from 0
	tokens []lexer.Token
	// cardAt is where the tokens of the present card begin.
	cardAt int
	// intents are *> lines met inside a continued card; they follow it.
	intents  []lexer.Token
	depth    int // open parentheses of the present card
	comments []comment
}

// comment is the text of one comment.
type comment struct {
	word Word
	line int
}

// skipLine moves to the start of the next physical line and returns the bytes
// of the one left, without end-of-line bytes.
func (s *scanner) skipLine() (start, end int) {
	start = s.at
	if i := strings.IndexByte(s.text[s.at:], '\n'); i >= 0 {
		end = s.at + i
		s.at = end + 1
	} else {
		end = len(s.text)
		s.at = end
	}
	s.line++
	for end > start && s.text[end-1] == '\r' {
		end--
	}
	return start, end
}

// blanks moves over blanks within the line.
func (s *scanner) blanks() {
	for s.at < len(s.text) && isBlank(s.text[s.at]) {
		s.at++
	}
}

// isBlank reports white space within a line; a comma between fields is one too.
func isBlank(c byte) bool { return c == ' ' || c == '\t' || c == '\r' || c == '\f' || c == '\v' }

func (s *scanner) emit(kind lexer.TokenType, start, end int) {
	s.tokens = append(s.tokens, lexer.Token{Type: kind, Value: s.text[start:end], Pos: lexer.Position{Offset: start}})
}

// next scans the next logical line into tokens and reports whether there was one.
func (s *scanner) next() bool {
	s.depth = 0
	for s.at < len(s.text) {
		s.blanks()
		if s.at >= len(s.text) {
			return false
		}
		switch kind := s.lineKind(); kind {
		case lineBlank:
			s.skipLine()
		case lineComment:
			s.noteComment(s.at, s.line)
		case lineIntent:
			s.intent(&s.tokens)
			return true
		default:
			s.card()
			return true
		}
	}
	return false
}

type lineKind int

const (
	lineBlank lineKind = iota
	lineComment
	lineIntent
	lineContinued
	lineCard
)

// lineKind looks at the first byte that is no blank.
func (s *scanner) lineKind() lineKind {
	if s.at >= len(s.text) || s.text[s.at] == '\n' {
		return lineBlank
	}
	rest := s.text[s.at:]
	switch {
	case strings.HasPrefix(rest, "*>"):
		return lineIntent
	case rest[0] == '*', rest[0] == ';', strings.HasPrefix(rest, "//"), rest[0] == '$':
		return lineComment
	case rest[0] == '+':
		return lineContinued
	}
	return lineCard
}

func (s *scanner) noteComment(start, line int) {
	s.at = start
	_, end := s.skipLine()
	s.comments = append(s.comments, comment{Word{strings.TrimLeft(s.text[start:end], "*;/$ \t"), int32(start), int32(end)}, line})
}

// intent takes a whole *> line as one token and ends it.
func (s *scanner) intent(into *[]lexer.Token) {
	start := s.at
	_, end := s.skipLine()
	*into = append(*into, lexer.Token{Type: tokenIntent, Value: s.text[start:end], Pos: lexer.Position{Offset: start}},
		lexer.Token{Type: tokenEnd, Pos: lexer.Position{Offset: end}})
}

// card scans one card with its continuation lines.
func (s *scanner) card() {
	if s.text[s.at] == '+' {
		s.at++ // a continuation of nothing is read as a card of its own
	}
	s.cardAt = len(s.tokens)
	first := true
	for {
		end := s.fields(first)
		first = false
		if !s.continued() {
			s.tokens = append(s.tokens, lexer.Token{Type: tokenEnd, Pos: lexer.Position{Offset: end}})
			s.tokens = append(s.tokens, s.intents...)
			s.intents = s.intents[:0]
			return
		}
	}
}

// continued looks past blank lines and comments for a + and moves behind it.
func (s *scanner) continued() bool {
	at, line, notes, kept := s.at, s.line, len(s.comments), len(s.intents)
	for s.at < len(s.text) {
		s.blanks()
		switch s.lineKind() {
		case lineBlank:
			s.skipLine()
		case lineComment:
			s.noteComment(s.at, s.line)
		case lineIntent:
			s.intent(&s.intents)
		case lineContinued:
			s.at++
			return true
		default:
			s.at, s.line, s.comments, s.intents = at, line, s.comments[:notes], s.intents[:kept]
			return false
		}
	}
	s.at, s.line, s.comments, s.intents = at, line, s.comments[:notes], s.intents[:kept]
	return false
}

// fields scans the tokens of one physical line and returns where its text ends.
func (s *scanner) fields(first bool) int {
	end := s.at
	for {
		for s.at < len(s.text) && (isBlank(s.text[s.at]) || s.text[s.at] == ',') {
			s.at++
		}
		if s.at >= len(s.text) || s.text[s.at] == '\n' {
			s.skipLine()
			return end
		}
		if c := s.text[s.at]; c == ';' || c == '$' {
			s.noteComment(s.at, s.line)
			return end
		}
		if len(s.tokens)-s.cardAt >= mostWords {
			s.tooMany()
			return end
		}
		s.token(first)
		first = false
		end = s.at
	}
}

// tooMany passes over the rest of a line whose card has words enough.
func (s *scanner) tooMany() {
	if s.tokens[len(s.tokens)-1].Type != tokenLong {
		s.emit(tokenLong, s.at, s.at+1)
	}
	s.skipLine()
}

// token scans one token that starts here.
func (s *scanner) token(first bool) {
	start := s.at
	switch s.text[s.at] {
	case '(', '[':
		s.at++
		s.depth++
		s.emit(tokenOpen, start, s.at)
	case ')', ']':
		s.at++
		s.depth = max(s.depth-1, 0)
		s.emit(tokenClose, start, s.at)
	case '{':
		s.bracketed('{', '}', tokenExpr)
	case '\'':
		s.bracketed(0, '\'', tokenExpr)
	case '"':
		s.bracketed(0, '"', tokenString)
	case '=':
		s.at++
		s.emit(tokenBad, start, s.at)
	default:
		s.word(first)
	}
}

// bracketed scans up to the closing byte of the same line; braces nest.
func (s *scanner) bracketed(open, shut byte, kind lexer.TokenType) {
	start := s.at
	depth := 0
	for i := s.at + 1; i < len(s.text) && s.text[i] != '\n'; i++ {
		switch c := s.text[i]; {
		case open != 0 && c == open:
			depth++
		case c == shut && depth > 0:
			depth--
		case c == shut:
			s.at = i + 1
			s.emit(kind, start, s.at)
			return
		}
	}
	for s.at < len(s.text) && s.text[s.at] != '\n' {
		s.at++
	}
	for s.at > start+1 && isBlank(s.text[s.at-1]) {
		s.at--
	}
	s.emit(tokenBad, start, s.at)
}

// word scans a word and, where = follows, the =.
func (s *scanner) word(first bool) {
	start := s.at
	for s.at < len(s.text) && !s.endsWord() {
		s.at++
	}
	end := s.at
	kind := lexer.TokenType(tokenWord)
	if first && s.text[start] == '.' && !(end-start > 1 && s.text[start+1] >= '0' && s.text[start+1] <= '9') {
		kind = tokenDot
	} else if s.takeEquals() {
		kind = tokenKey
	}
	s.emit(kind, start, end)
}

// endsWord reports whether the byte here ends a word. A comma between digits
// belongs to the word outside parentheses, and behind a key everywhere: it is a
// decimal comma, which deserves a message.
func (s *scanner) endsWord() bool {
	switch c := s.text[s.at]; c {
	case ' ', '\t', '\r', '\n', '\f', '\v', '(', ')', '=', ';', '{', '"', '[', ']':
		return true
	case '\'':
		return true
	case ',':
		if s.at == 0 || s.at+1 >= len(s.text) || !digit(s.text[s.at-1]) || !digit(s.text[s.at+1]) {
			return true
		}
		behindKey := len(s.tokens) > 0 && s.tokens[len(s.tokens)-1].Type == tokenKey
		return s.depth > 0 && !behindKey
	}
	return false
}

func digit(c byte) bool { return c >= '0' && c <= '9' }

// takeEquals moves over blanks and one =, if they are next.
func (s *scanner) takeEquals() bool {
	i := s.at
	for i < len(s.text) && isBlank(s.text[i]) {
		i++
	}
	if i >= len(s.text) || s.text[i] != '=' || i+1 < len(s.text) && s.text[i+1] == '=' {
		return false
	}
	s.at = i + 1
	return true
}
