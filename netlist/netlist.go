// Package netlist reads a board: text goes in, a Board comes out, worked out as
// far as it can be. Data flows one way through the packages below it, each named
// for what it holds:
//
//	source   the text as read, places in it
//	quantity numbers as the trade writes them
//	syntax   text -> cards, intent lines, problems
//	part     what parts can stand, with source and trust
//	circuit  cards -> parts on nodes, spreads, intent; neighbourhood queries
//	numeric  extremes over a box of variables
//	network  the one dc solver
//	stage    circuit -> recognised topologies with roles
//	operating stage -> figures low/nominal/high and comparisons with limits
//
// The rules (package rules) look at a Board and never at text.
package netlist

import (
	"slices"

	"standoff/netlist/circuit"
	"standoff/netlist/operating"
	"standoff/netlist/part"
	"standoff/netlist/source"
	"standoff/netlist/stage"
	"standoff/netlist/syntax"
)

// Options say how a board is read.
type Options struct {
	Parts       []*part.Ratings // of --parts files
	IncludeDirs []string        // folders from which files may be included, beside the board's own
	Limits      circuit.Limits
	FileLimits  source.Limits
}

// Board is one netlist, worked out.
type Board struct {
	Path     string
	File     *source.File
	Circuit  *circuit.Circuit
	Stages   []*stage.Stage
	Accounts []*operating.Account
	Problems []source.Problem
	// NothingRead is set where the file held no part, and nothing that a board
	// could be made of either: no model, subcircuit, parameter or include.
	NothingRead bool
}

// Read reads a board from a file. An error says that the file itself cannot be
// read; everything else is in the board's problems. Files are included from the
// board's own folder and those of the options.
func Read(path string, opts Options) (*Board, error) {
	file, err := source.Read(path, opts.FileLimits)
	if err != nil {
		return nil, err
	}
	return build(file, source.NewLoader(path, opts.IncludeDirs, opts.FileLimits), opts), nil
}

// ReadText reads a board from bytes, as from standard input. Includes are
// looked for in the folders of the options only.
func ReadText(path string, data []byte, opts Options) (*Board, error) {
	text, err := source.Decode(data)
	if err != nil {
		return nil, err
	}
	return build(source.New(path, text), source.NewLoader("", opts.IncludeDirs, opts.FileLimits), opts), nil
}

func build(file *source.File, includes circuit.Includes, opts Options) *Board {
	deck := syntax.Parse(file, true)
	b := &Board{Path: file.Path, File: file}
	b.Circuit, b.Problems = circuit.Build(deck,
		circuit.Options{Parts: opts.Parts, Includes: includes, Limits: opts.Limits})
	b.NothingRead = len(b.Circuit.Elements) == 0 && !slices.ContainsFunc(deck.Statements, isDefinition)
	b.Stages = stage.Recognise(b.Circuit)
	b.Accounts = operating.Compute(b.Circuit, b.Stages)
	return b
}

// isDefinition reports a card that means something although it is no part.
func isDefinition(s syntax.Statement) bool {
	return s.Model != nil || s.Subckt != nil || s.Include != nil || s.Global != nil ||
		s.Param != nil && len(s.Param.Pairs) > 0
}

// With returns the same board with other nominal values for the elements named,
// recognised and worked out anew.
func (b *Board) With(values map[string]float64) *Board {
	other := *b
	other.Circuit = b.Circuit.With(values)
	other.Stages = stage.Recognise(other.Circuit)
	other.Accounts = operating.Update(other.Circuit, other.Stages, b.Accounts)
	return &other
}
