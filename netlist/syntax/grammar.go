package syntax

import (
	"io"
	"strings"
	"sync"

	"github.com/alecthomas/participle/v2"
	"github.com/alecthomas/participle/v2/lexer"
)

// The grammar of the language, card by card. Which grammar applies follows from
// the first token of a card: a letter opens an element, a dot a dot card, *> an
// intent line. Words stand in any order that the card allows; commas between
// fields are blanks; case plays no part. The tails of element cards and lists of
// settings are read by hand (tail.go): they are where the time goes.
//
//	element   = designator { field | key "=" value | NAME "(" { value } ")" }
//	field     = word | expression | "text"
//	value     = word | expression | "text"
//	expression= "{" arithmetic "}" | "'" arithmetic "'"
//
// Everything else is spelled out in the types below.
type (
	// elementCard is R1 a b 1k tol=1%, X1 a b c PART n=3, V1 a 0 SIN(0 325 50).
	elementCard struct {
		Name word `parser:"@@"`
		Tail tail `parser:"@@"`
	}
	// modelCard is .model NAME TYPE [(] key=value ... [)].
	modelCard struct {
		Name     word     `parser:"Dot @@"`
		Type     word     `parser:"@@"`
		Settings settings `parser:"@@"`
	}
	// subcktCard is .subckt NAME node ... [PARAMS:] key=value ...
	subcktCard struct {
		Name     word     `parser:"Dot @@"`
		Settings settings `parser:"@@"`
	}
	// endsCard is .ends [NAME].
	endsCard struct {
		Name *word `parser:"Dot @@?"`
	}
	// paramCard is .param key=value ...
	paramCard struct {
		Settings settings `parser:"Dot @@"`
	}
	// fileCard is .include PATH and .lib PATH [SECTION]; a path may stand in quotes.
	fileCard struct {
		Path    path  `parser:"Dot @@"`
		Section *word `parser:"@@?"`
	}
	// wordsCard is .global NODE ..., .temp VALUE ..., .endl [NAME].
	wordsCard struct {
		Words []word `parser:"Dot @@*"`
	}
)

// word is any single word.
type word struct{ Word }

// Parse implements participle.Parseable.
func (w *word) Parse(lex *lexer.PeekingLexer) error {
	t := lex.Peek()
	if t.Type != tokenWord && t.Type != tokenDot {
		return participle.NextMatch
	}
	lex.Next()
	w.Word = wordOf(t)
	return nil
}

// path is a file name, bare or in quotes of either kind.
type path struct{ Word }

// Parse implements participle.Parseable.
func (p *path) Parse(lex *lexer.PeekingLexer) error {
	t := lex.Peek()
	switch t.Type {
	case tokenWord, tokenDot:
		p.Word = wordOf(t)
	case tokenString, tokenExpr:
		p.Word = unquoted(t)
	default:
		return participle.NextMatch
	}
	lex.Next()
	return nil
}

func wordOf(t *lexer.Token) Word {
	return Word{t.Value, int32(t.Pos.Offset), int32(t.Pos.Offset + len(t.Value))}
}

// unquoted is a quoted or braced token without its marks.
func unquoted(t *lexer.Token) Word {
	return Word{t.Value[1 : len(t.Value)-1], int32(t.Pos.Offset + 1), int32(t.Pos.Offset + len(t.Value) - 1)}
}

// definition hands the tokens of one card to a parser; the parsers are only
// ever run on a PeekingLexer that is filled already.
type definition struct{}

func (definition) Symbols() map[string]lexer.TokenType { return symbols }

func (definition) LexString(string, string) (lexer.Lexer, error) { return &tokenList{}, nil }

func (d definition) Lex(name string, _ io.Reader) (lexer.Lexer, error) {
	return d.LexString(name, "")
}

// tokenList is a lexer over tokens that exist already.
type tokenList struct {
	tokens []lexer.Token
	at     int
}

// Next implements lexer.Lexer.
func (l *tokenList) Next() (lexer.Token, error) {
	if l.at >= len(l.tokens) {
		return lexer.EOFToken(lexer.Position{}), nil
	}
	l.at++
	return l.tokens[l.at-1], nil
}

// build makes a parser on its first use; most decks need two or three of them.
func build[T any](tokens lexer.Definition) func() *participle.Parser[T] {
	return sync.OnceValue(func() *participle.Parser[T] {
		return participle.MustBuild[T](participle.Lexer(tokens), participle.UseLookahead(2))
	})
}

var (
	elementParser = build[elementCard](definition{})
	modelParser   = build[modelCard](definition{})
	subcktParser  = build[subcktCard](definition{})
	endsParser    = build[endsCard](definition{})
	paramParser   = build[paramCard](definition{})
	fileParser    = build[fileCard](definition{})
	wordsParser   = build[wordsCard](definition{})
)

// usage says how a dot card is written, for messages.
var usage = map[string]string{
	".model":   ".model NAME TYPE (key=value ...)",
	".subckt":  ".subckt NAME node ... key=value ...",
	".ends":    ".ends [NAME]",
	".param":   ".param key=value ...",
	".include": ".include FILE",
	".lib":     ".lib FILE SECTION, or .lib SECTION ... .endl",
	".global":  ".global node ...",
	".temp":    ".temp value ...",
}

// skipped are dot cards that say what another program is to do with the board.
const skipped = " .tran .ac .dc .op .noise .disto .sens .tf .pz .four .print .plot .probe .probe64 .save .meas " +
	".measure .option .options .opt .ic .nodeset .width .step .wave .backanno .title .control .endc .post .prot .unprot " +
	".alter .data .enddata .fft .hb .pss .sp .mc .wcase .stimulus .vector .watch .distribution .csdf .lin .malias .protect .unprotect "

// isSkipped reports whether a dot card is skipped on purpose.
func isSkipped(keyword string) bool {
	return strings.Contains(skipped, " "+keyword+" ")
}
