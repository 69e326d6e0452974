package syntax

import (
	"fmt"
	"slices"
	"strings"

	"github.com/alecthomas/participle/v2/lexer"
)

// badToken is an error with the place and the words for it.
type badToken struct {
	at      Word
	message string
}

func (e *badToken) Error() string { return e.message }

// tail is everything behind a designator.
type tail struct {
	fields   []Value
	pairs    []Pair
	function *Function
}

// Parse implements participle.Parseable. It reads up to the end of the card.
func (t *tail) Parse(lex *lexer.PeekingLexer) error {
	for {
		token := lex.Peek()
		switch token.Type {
		case tokenEnd, lexer.EOF:
			return nil
		case tokenKey:
			pair, err := readPair(lex)
			if err != nil {
				return err
			}
			t.pairs = append(t.pairs, pair)
		case tokenOpen:
			if err := t.bracket(lex); err != nil {
				return err
			}
		case tokenClose:
			return bad(token, "a closing bracket without an opening one")
		default:
			if token.Value == "=" && t.table() {
				lex.Next()
				continue
			}
			v, err := readValue(lex)
			if err != nil {
				return err
			}
			t.fields = append(t.fields, v)
		}
	}
}

// table reports a controlled source with a table, TABLE {expression} = (x,y) ...,
// whose equals sign stands behind no name.
func (t *tail) table() bool {
	return slices.ContainsFunc(t.fields, func(v Value) bool { return strings.EqualFold(v.Text, "table") })
}

// bracket reads ( ... ): the arguments of a waveform whose name stands just
// before it, or else a group whose words are fields.
func (t *tail) bracket(lex *lexer.PeekingLexer) error {
	open := lex.Next()
	var args []Value
	for {
		token := lex.Peek()
		switch token.Type {
		case tokenEnd, lexer.EOF:
			return bad(open, "this bracket is never closed")
		case tokenClose:
			lex.Next()
			t.close(args)
			return nil
		case tokenOpen:
			inner := tail{}
			if err := inner.bracket(lex); err != nil {
				return err
			}
			args = append(args, inner.fields...)
		case tokenKey:
			pair, err := readPair(lex)
			if err != nil {
				return err
			}
			t.pairs = append(t.pairs, pair)
		default:
			v, err := readValue(lex)
			if err != nil {
				return err
			}
			args = append(args, v)
		}
	}
}

// close gives the arguments to the word before the bracket where that names a
// waveform.
func (t *tail) close(args []Value) {
	if n := len(t.fields); n > 0 && t.function == nil && IsWaveform(t.fields[n-1].Text) {
		t.function = &Function{Name: t.fields[n-1].Word, Args: args}
		t.fields = t.fields[:n-1]
		return
	}
	t.fields = append(t.fields, args...)
}

// IsWaveform reports whether a word names a source waveform.
func IsWaveform(name string) bool {
	switch strings.ToLower(name) {
	case "sin", "sine", "pulse", "pwl", "exp", "sffm", "am":
		return true
	}
	return false
}

// readPair reads a key and its value.
func readPair(lex *lexer.PeekingLexer) (Pair, error) {
	key := lex.Next()
	next := lex.Peek()
	if next.Type == tokenEnd || next.Type == lexer.EOF || next.Type == tokenClose || next.Type == tokenKey {
		return Pair{}, bad(key, fmt.Sprintf("%s= has no value", key.Value))
	}
	if next.Type == tokenOpen {
		return readGroup(key, lex)
	}
	v, err := readValue(lex)
	return Pair{wordOf(key), v}, err
}

// readGroup reads key=( ... ), the text of which is kept as it stands.
func readGroup(key *lexer.Token, lex *lexer.PeekingLexer) (Pair, error) {
	open := lex.Next()
	depth := 1
	words := []string{}
	end := int32(open.Pos.Offset + 1)
	for depth > 0 {
		t := lex.Peek()
		switch t.Type {
		case tokenEnd, lexer.EOF:
			return Pair{}, bad(open, "this bracket is never closed")
		case tokenOpen:
			depth++
		case tokenClose:
			depth--
		}
		if depth > 0 {
			words = append(words, t.Value)
		}
		end = int32(t.Pos.Offset + len(t.Value))
		lex.Next()
	}
	v := Value{Word: Word{strings.Join(words, " "), int32(open.Pos.Offset), end}}
	return Pair{wordOf(key), v}, nil
}

// readValue reads a word, an expression or a quoted text.
func readValue(lex *lexer.PeekingLexer) (Value, error) {
	t := lex.Next()
	switch t.Type {
	case tokenString:
		return Value{Word: unquoted(t), Quoted: true}, nil
	case tokenExpr:
		w := unquoted(t)
		expr, err := ParseExpression(w)
		if err != nil {
			return Value{}, err
		}
		return Value{Word: w, Expr: expr}, nil
	case tokenBad:
		return Value{}, unclosed(t)
	case tokenLong:
		return Value{}, bad(t, fmt.Sprintf("more than %d words on one card; the rest of it is not read", mostWords))
	case tokenWord, tokenDot:
		return Value{Word: wordOf(t)}, nil
	}
	return Value{}, bad(t, fmt.Sprintf("%q has no place here", t.Value))
}

func unclosed(t *lexer.Token) error {
	switch t.Value[0] {
	case '{':
		return bad(t, "this brace is never closed")
	case '=':
		return bad(t, "= without a name before it")
	}
	return bad(t, "this quote is never closed")
}

func bad(t *lexer.Token, message string) *badToken { return &badToken{wordOf(t), message} }

// settings is a list of words and key=value pairs, in brackets or not.
type settings struct {
	words []Word
	pairs []Pair
}

// Parse implements participle.Parseable. It reads up to the end of the card.
func (s *settings) Parse(lex *lexer.PeekingLexer) error {
	var open []*lexer.Token
	for {
		token := lex.Peek()
		switch token.Type {
		case tokenEnd, lexer.EOF:
			if len(open) > 0 {
				return bad(open[0], "this bracket is never closed")
			}
			return nil
		case tokenOpen:
			open = append(open, lex.Next())
		case tokenClose:
			if len(open) == 0 {
				return bad(token, "a closing bracket without an opening one")
			}
			open = open[:len(open)-1]
			lex.Next()
		case tokenKey:
			pair, err := readPair(lex)
			if err != nil {
				return err
			}
			s.pairs = append(s.pairs, pair)
		default:
			v, err := readValue(lex)
			if err != nil {
				return err
			}
			s.words = append(s.words, v.Word)
		}
	}
}
