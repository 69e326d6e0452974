package syntax

import (
	"fmt"
	"strings"

	"standoff/netlist/quantity"
)

// maxDepth is how deep brackets in an expression may nest.
const maxDepth = 200

// ParseExpression reads an arithmetic expression:
//
//	c ? a : b    || &&    == != < <= > >=    + -    * / %    ^ **    - + !
//
// from loosest to tightest, with names, numbers with suffixes, and calls
// f(a, b). An error carries its place.
func ParseExpression(text Word) (*Expr, error) {
	p := &expressionParser{text: text.Text, base: text.Start}
	e := p.ternary()
	p.space()
	if p.err == nil && p.at < len(p.text) {
		p.fail(p.at, fmt.Sprintf("%q has no place in an expression", rest(p.text[p.at:])))
	}
	if p.err != nil {
		return nil, p.err
	}
	return e, nil
}

// rest shortens what could not be read for a message.
func rest(s string) string {
	if len(s) > 12 {
		return strings.ToValidUTF8(s[:12], "") + "..."
	}
	return s
}

// expressionParser climbs precedences. After the first error it reads no more.
type expressionParser struct {
	text  string
	at    int
	base  int32
	depth int
	err   error
}

func (p *expressionParser) fail(at int, message string) *Expr {
	if p.err == nil {
		end := min(at+1, len(p.text))
		p.err = &badToken{Word{p.text[min(at, end):end], p.base + int32(min(at, end)), p.base + int32(end)}, message}
	}
	p.at = len(p.text)
	return &Expr{Op: "num"}
}

func (p *expressionParser) space() {
	for p.at < len(p.text) && (isBlank(p.text[p.at]) || p.text[p.at] == '\n') {
		p.at++
	}
}

// take moves over an operator if it is next.
func (p *expressionParser) take(op string) bool {
	p.space()
	if !strings.HasPrefix(p.text[p.at:], op) {
		return false
	}
	p.at += len(op)
	return true
}

func (p *expressionParser) node(op string, start int, args ...*Expr) *Expr {
	return &Expr{Op: op, Args: args, Start: p.base + int32(start), End: p.base + int32(p.at)}
}

func (p *expressionParser) ternary() *Expr {
	p.depth++
	defer func() { p.depth-- }()
	if p.depth > maxDepth {
		return p.fail(p.at, "brackets nest too deep")
	}
	p.space()
	start := p.at
	e := p.binary(0)
	if !p.take("?") {
		return e
	}
	yes := p.ternary()
	if !p.take(":") {
		return p.fail(p.at, "a ? without its :")
	}
	no := p.ternary()
	return p.node("?:", start, e, yes, no)
}

// levels lists the binary operators from loosest to tightest; longer ones first
// where one starts another.
var levels = [...][]string{{"||"}, {"&&"}, {"==", "!=", "<=", ">=", "<", ">"}, {"+", "-"}, {"*", "/", "%"}}

func (p *expressionParser) binary(level int) *Expr {
	if level == len(levels) {
		return p.unary()
	}
	p.space()
	start := p.at
	e := p.binary(level + 1)
	for p.err == nil {
		op := p.operator(level)
		if op == "" {
			break
		}
		e = p.node(op, start, e, p.binary(level+1))
	}
	return e
}

func (p *expressionParser) operator(level int) string {
	p.space()
	for _, op := range levels[level] {
		if op == "*" && strings.HasPrefix(p.text[p.at:], "**") {
			continue
		}
		if p.take(op) {
			return op
		}
	}
	return ""
}

func (p *expressionParser) unary() *Expr {
	p.depth++
	defer func() { p.depth-- }()
	if p.depth > maxDepth {
		return p.fail(p.at, "signs nest too deep")
	}
	p.space()
	start := p.at
	switch {
	case p.take("-"):
		return p.node("neg", start, p.unary())
	case p.take("+"):
		return p.unary()
	case p.take("!"):
		return p.node("not", start, p.unary())
	}
	e := p.primary()
	if p.take("^") || p.take("**") {
		return p.node("^", start, e, p.unary())
	}
	return e
}

func (p *expressionParser) primary() *Expr {
	p.space()
	start := p.at
	switch {
	case p.at >= len(p.text):
		return p.fail(p.at, "a value is missing here")
	case p.take("("), p.take("{"):
		shut := string(")}"[strings.IndexByte("({", p.text[p.at-1])])
		e := p.ternary()
		if !p.take(shut) {
			return p.fail(start, "this bracket is never closed")
		}
		return e
	case digit(p.text[p.at]) || p.text[p.at] == '.':
		return p.number()
	}
	for p.at < len(p.text) && isNameByte(p.text[p.at]) {
		p.at++
	}
	if p.at == start {
		return p.fail(start, fmt.Sprintf("%q where a value belongs", rest(p.text[start:])))
	}
	name := p.text[start:p.at]
	if p.take("(") {
		return p.call(name, start)
	}
	e := p.node("name", start)
	e.Text = name
	return e
}

func isNameByte(c byte) bool {
	return c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' || digit(c) || c == '_' || c == '.' || c == '#' || c == '@' || c == ':' && false || c >= 0x80
}

// number reads digits with suffix and unit.
func (p *expressionParser) number() *Expr {
	start := p.at
	for p.at < len(p.text) && (isNameByte(p.text[p.at]) || p.exponentSign()) {
		p.at++
	}
	n, err := quantity.Parse(p.text[start:p.at])
	if err != nil {
		return p.fail(start, err.Error())
	}
	e := p.node("num", start)
	e.Number = n.Value
	return e
}

// exponentSign reports whether the byte here is the sign in 1e-3.
func (p *expressionParser) exponentSign() bool {
	c := p.text[p.at]
	if c != '+' && c != '-' || p.at < 2 {
		return false
	}
	e := p.text[p.at-1]
	if e != 'e' && e != 'E' || !(digit(p.text[p.at-2]) || p.text[p.at-2] == '.') {
		return false
	}
	return p.at+1 < len(p.text) && digit(p.text[p.at+1])
}

func (p *expressionParser) call(name string, start int) *Expr {
	var args []*Expr
	for !p.take(")") {
		if len(args) > 0 && !p.take(",") {
			return p.fail(start, "this bracket is never closed")
		}
		if len(args) > 100 || p.at >= len(p.text) {
			return p.fail(start, "this bracket is never closed")
		}
		args = append(args, p.ternary())
		if p.err != nil {
			return args[0]
		}
	}
	e := p.node("call", start, args...)
	e.Text = strings.ToLower(name)
	return e
}
