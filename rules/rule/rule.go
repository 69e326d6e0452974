// Package rule holds what a rule is: a value with its documentation inside
// that looks at one board through a Pass and reports findings. What goes in is
// a circuit and the accounts of its stages; what comes out is findings. The
// package reads no text, prints nothing and computes nothing but margins.
//
// A rule on a stage is a few lines:
//
//	Check: func(p *rule.Pass) {
//		p.Each(stage.UJTOscillator, func(a *operating.Account) {
//			p.Judge(a, rule.Case{Comparison: "interbase_voltage", Fails: "the transistor may break down",
//				Value: "the interbase voltage", Limit: "it is rated for", Mend: []stage.Role{stage.BaseTwo}})
//		})
//	}
package rule

import (
	"standoff/netlist/circuit"
	"standoff/netlist/operating"
	"standoff/netlist/source"
)

// Grade says how bad a finding is. The zero value is invalid.
type Grade int8

// The grades, from harmless to bad.
const (
	Remark Grade = iota + 1
	Doubt
	Hold
)

// String returns the name of the grade.
func (g Grade) String() string {
	return [...]string{"invalid", "remark", "doubt", "hold"}[g]
}

// Rule is one check with its documentation.
type Rule struct {
	ID    string // lower-case descriptive words; never changes once published
	Group string // "Timing", "Gates", "Load side", "Supplies and ratings", "Netlist"
	Title string // what goes wrong, one line
	Why   string // what happens on the board, in full
	// Formula and Source document the limit; both may be "-" for wiring rules.
	Formula, Source string
	// Failing and Mended are whole netlists; the first yields this rule, the second does not.
	Failing, Mended string
	Check           func(*Pass)
}

// Finding is one thing that a rule says about a board.
type Finding struct {
	Rule    string
	Grade   Grade
	Stage   string // designator of the stage's anchor; "" for netlist rules
	Parts   []string
	At      source.Span // the card it concerns; where a line ends the finding belongs
	Message string
	Figure  *Figure
	Corner  operating.Corner
	Working string
	// Assumed lists what the figure rests on that nobody declared, in words.
	Assumed []string
	// Mend lists what could be changed to clear the finding, in order of
	// preference; the advice engine fills Advice from it.
	Mend     []Mend
	Advice   []Advice
	NoAdvice string // why there is none
}

// Figure is the value held against its limit.
type Figure struct {
	Name         string
	Value, Limit float64
	Bound        string // "min" or "max"
	Unit         string
}

// Mend names an element whose value may be changed.
type Mend struct{ Parts []*circuit.Element }

// Advice is one proven change.
type Advice struct {
	Part  string
	Value float64
	Text  string
}

// Pass is a rule's view of one board.
type Pass struct {
	Circuit  *circuit.Circuit
	Accounts []*operating.Account
	// File is the board's own file, as against what it includes; nil where a
	// board is worked out without one.
	File   *source.File
	report func(Finding)
}

// Report adds a finding.
func (p *Pass) Report(f Finding) { p.report(f) }
