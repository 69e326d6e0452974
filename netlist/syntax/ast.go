package syntax

import "standoff/netlist/source"

// Word is a piece of text with the bytes it came from. Quotes and braces are
// kept in Text only where a field's comment says so.
type Word struct {
	Text       string
	Start, End int32
}

// Deck is one file, card by card, in the order of the text. It holds what
// could be read; what could not is in Problems.
type Deck struct {
	File *source.File
	// Title is the first line where that was not a card; empty otherwise.
	Title      string
	Statements []Statement
	Problems   []source.Problem
}

// Span turns a word of this deck into a span.
func (d *Deck) Span(w Word) source.Span {
	return source.Span{File: d.File, Start: w.Start, End: w.End}
}

// Statement is one logical line: exactly one of its pointers is set.
type Statement struct {
	Start, End int32

	Element   *Element   // R1 a b 1k, X1 a b sub, and every other element letter
	Model     *Model     // .model
	Subckt    *Subckt    // .subckt
	Ends      *Ends      // .ends
	Param     *Param     // .param
	Include   *Include   // .include, .inc, .lib FILE SECTION
	Lib       *Lib       // .lib SECTION ... .endl
	Global    *Global    // .global
	Temp      *Temp      // .temp
	Condition *Condition // .if .elseif .else .endif
	Stop      *Stop      // .end
	Intent    *Intent    // *> line
	Other     *Other     // a known dot card without meaning here, or an unknown one
}

// Element is a card that starts with a designator.
type Element struct {
	Name Word
	// Fields are the words behind the designator that are not key=value, in
	// order: nodes, values, model names. Which is which follows from the
	// letter and the position and is decided by the circuit, not here.
	Fields []Value
	// Pairs are the key=value settings, in order; a lone key has a zero Value.
	Pairs []Pair
	// Function is a source waveform, SIN(...), PULSE(...), PWL(...), EXP(...).
	Function *Function
}

// Pair is key=value.
type Pair struct {
	Key   Word
	Value Value
}

// Function is a named list of arguments, as in SIN(0 325 50).
type Function struct {
	Name Word
	Args []Value
}

// Value is a word in a place where a value may stand. Text is the spelling,
// without quotes or braces; Expr is set for a braced or quoted expression.
type Value struct {
	Word
	Quoted bool // it stood in double quotes: text, never a number
	Expr   *Expr
}

// Model is .model NAME TYPE (key=value ...).
type Model struct {
	Name, Type Word
	Pairs      []Pair
	Flags      []Word // bare words among the settings
}

// Subckt is .subckt NAME nodes [PARAMS:] key=value.
type Subckt struct {
	Name     Word
	Nodes    []Word
	Defaults []Pair
	// Comments are the comment texts next to the header (the lines just before
	// and after it and the one trailing on it), for terminal orders that are
	// written only there.
	Comments []Word
}

// Ends is .ends [NAME].
type Ends struct{ Name Word }

// Param is .param key=value ...; an empty one is legal.
type Param struct{ Pairs []Pair }

// Include is .include PATH or .lib PATH SECTION.
type Include struct {
	Path    Word
	Section Word // empty for .include
}

// Lib opens (.lib SECTION) or closes (.endl) a library section.
type Lib struct {
	Section Word
	Close   bool
}

// Global is .global node ...
type Global struct{ Nodes []Word }

// Temp is .temp value ...
type Temp struct{ Values []Value }

// Condition is .if(expr), .elseif(expr), .else, .endif.
type Condition struct {
	Keyword string // "if", "elseif", "else", "endif"
	Expr    *Expr
}

// Stop is .end.
type Stop struct{}

// Other is a dot card that has no meaning for this tool.
type Other struct {
	Keyword Word
	Known   bool // an analysis or output card that is skipped on purpose
}

// Intent is one *> line.
type Intent struct {
	Subject Word // "board", "all", "waive" or a designator
	Letter  Word // for "all": R, C, L, V or I
	Pairs   []IntentPair
	// Waive holds what follows "waive".
	Waive *Waive
}

// IntentPair is key=value of an intent line. Value is the raw spelling; Low
// and High hold the two ends where the value is a range LOW..HIGH, else both
// hold the value.
type IntentPair struct {
	Key              Word
	Value, Low, High Word
}

// Waive is "waive RULE DESIGNATOR : reason".
type Waive struct {
	Rule, Designator, Reason Word
}

// Expr is a node of an arithmetic expression. Op names the node:
// "num" (Number), "name" (Text), "call" (Text, Args), "neg", "not", "+", "-",
// "*", "/", "%", "^", "==", "!=", "<", "<=", ">", ">=", "&&", "||", "?:" (three Args).
type Expr struct {
	Op         string
	Number     float64
	Text       string
	Args       []*Expr
	Start, End int32
}
