package syntax

import (
	"fmt"
	"strings"

	"github.com/alecthomas/participle/v2"
	"github.com/alecthomas/participle/v2/lexer"

	"standoff/netlist/source"
)

// The grammar of intent lines. They are single lines; a value is everything up
// to the next blank, and a range is written LOW..HIGH inside it.
//
//	intent = "*>" ( "waive" RULE DESIGNATOR [ ":" reason ] | "all" LETTER pair ... | SUBJECT pair ... )
//	pair   = key "=" value
type (
	waiveLine struct {
		Word       word    `parser:"Waive"`
		Rule       word    `parser:"@@"`
		Designator word    `parser:"@@"`
		Reason     *reason `parser:"@@?"`
	}
	allLine struct {
		Word   word        `parser:"All"`
		Letter word        `parser:"@@"`
		Pairs  intentPairs `parser:"@@"`
	}
	oneLine struct {
		Subject word        `parser:"@@"`
		Pairs   intentPairs `parser:"@@"`
	}
)

// The tokens of intent lines beside those of cards.
const (
	tokenWaive lexer.TokenType = iota + 100
	tokenAll
	tokenReason
)

var intentSymbols = map[string]lexer.TokenType{"EOF": lexer.EOF, "Word": tokenWord, "Key": tokenKey,
	"Waive": tokenWaive, "All": tokenAll, "Reason": tokenReason}

type intentDefinition struct{ definition }

func (intentDefinition) Symbols() map[string]lexer.TokenType { return intentSymbols }

var (
	waiveParser = build[waiveLine](intentDefinition{})
	allParser   = build[allLine](intentDefinition{})
	oneParser   = build[oneLine](intentDefinition{})
)

// reason is the text behind the colon of a waiver.
type reason struct{ Word }

// Parse implements participle.Parseable.
func (r *reason) Parse(lex *lexer.PeekingLexer) error {
	t := lex.Peek()
	if t.Type != tokenReason {
		return participle.NextMatch
	}
	lex.Next()
	r.Word = wordOf(t)
	return nil
}

// intentPairs is one key=value and more.
type intentPairs struct{ list []IntentPair }

// Parse implements participle.Parseable.
func (p *intentPairs) Parse(lex *lexer.PeekingLexer) error {
	if lex.Peek().Type != tokenKey {
		return participle.NextMatch
	}
	for lex.Peek().Type == tokenKey {
		key := lex.Next()
		value := lex.Peek()
		if value.Type != tokenWord {
			return bad(key, fmt.Sprintf("%s= has no value", key.Value))
		}
		lex.Next()
		pair := IntentPair{Key: wordOf(key), Value: wordOf(value)}
		var err error
		if pair.Low, pair.High, err = splitRange(pair.Value); err != nil {
			return err
		}
		p.list = append(p.list, pair)
	}
	return nil
}

// splitRange splits LOW..HIGH; a single value is both ends.
func splitRange(w Word) (low, high Word, err error) {
	i := strings.Index(w.Text, "..")
	if i < 0 {
		return w, w, nil
	}
	low = Word{w.Text[:i], w.Start, w.Start + int32(i)}
	high = Word{w.Text[i+2:], w.Start + int32(i) + 2, w.End}
	if strings.Contains(w.Text, "...") || low.Text == "" || high.Text == "" || strings.Contains(high.Text, "..") {
		return low, high, &badToken{w, fmt.Sprintf("%q is no range; write LOW..HIGH, as 9..15", w.Text)}
	}
	return low, high, nil
}

// scanIntent splits an intent line into tokens.
func scanIntent(text string, base int) []lexer.Token {
	var tokens []lexer.Token
	emit := func(kind lexer.TokenType, start, end int) {
		tokens = append(tokens, lexer.Token{Type: kind, Value: text[start:end], Pos: lexer.Position{Offset: base + start}})
	}
	waiver := false
	for at := len("*>"); at < len(text); {
		if isBlank(text[at]) {
			at++
			continue
		}
		start := at
		if waiver && text[at] == ':' {
			for at++; at < len(text) && isBlank(text[at]); {
				at++
			}
			if end := len(strings.TrimRight(text, " \t\r")); end > at {
				emit(tokenReason, at, end)
			}
			return tokens
		}
		if text[at] == ';' {
			return tokens
		}
		for at < len(text) && !isBlank(text[at]) && text[at] != '=' && text[at] != ';' && !(waiver && text[at] == ':') {
			at++
		}
		kind, end := lexer.TokenType(tokenWord), at
		if next := skipBlanks(text, at); next < len(text) && text[next] == '=' {
			kind, at = tokenKey, next+1
		}
		if end == start { // a stray =
			at = start + 1
			emit(tokenBad, start, at)
			continue
		}
		switch word := strings.ToLower(text[start:end]); {
		case len(tokens) == 0 && word == "waive" && kind == tokenWord:
			kind, waiver = tokenWaive, true
		case len(tokens) == 0 && word == "all" && kind == tokenWord:
			kind = tokenAll
		}
		emit(kind, start, end)
	}
	return tokens
}

func skipBlanks(text string, at int) int {
	for at < len(text) && isBlank(text[at]) {
		at++
	}
	return at
}

// parseIntent reads one *> line.
func parseIntent(token *lexer.Token, d *Deck) {
	whole := wordOf(token)
	lex, err := lexer.Upgrade(&tokenList{tokens: scanIntent(token.Value, token.Pos.Offset)})
	if err != nil {
		return
	}
	i, err := readIntent(lex, whole)
	if err != nil {
		d.problem(intentPlace(whole, lex, err), intentMessage(lex, err))
		return
	}
	d.Statements = append(d.Statements, Statement{Start: whole.Start, End: whole.End, Intent: i})
}

// readIntent applies the grammar that the first token asks for.
func readIntent(lex *lexer.PeekingLexer, whole Word) (*Intent, error) {
	i := &Intent{}
	switch lex.Peek().Type {
	case tokenWaive:
		line, err := waiveParser().ParseFromLexer(lex)
		if err != nil {
			return nil, err
		}
		i.Subject = Word{"waive", whole.Start, whole.End}
		i.Waive = &Waive{Rule: line.Rule.Word, Designator: line.Designator.Word}
		if line.Reason != nil {
			i.Waive.Reason = line.Reason.Word
		}
	case tokenAll:
		line, err := allParser().ParseFromLexer(lex)
		if err != nil {
			return nil, err
		}
		i.Subject, i.Letter = Word{"all", whole.Start, whole.End}, line.Letter.Word
		i.Pairs = line.Pairs.list
	default:
		line, err := oneParser().ParseFromLexer(lex)
		if err != nil {
			return nil, err
		}
		i.Subject, i.Pairs = line.Subject.Word, line.Pairs.list
	}
	return i, nil
}

// intentPlace is where an intent line could not be read on.
func intentPlace(whole Word, lex *lexer.PeekingLexer, err error) Word {
	if b := (*badToken)(nil); asBad(err, &b) {
		return b.at
	}
	if t := lex.Peek(); !t.EOF() {
		return wordOf(t)
	}
	return whole
}

func intentMessage(lex *lexer.PeekingLexer, err error) string {
	if b := (*badToken)(nil); asBad(err, &b) {
		return b.message
	}
	const form = "an intent line reads *> SUBJECT key=value ..., or *> waive RULE DESIGNATOR : reason"
	if t := lex.Peek(); !t.EOF() {
		return fmt.Sprintf("%q has no place here: %s", source.Visible(t.Value), form)
	}
	return "this intent line is not complete: " + form
}
