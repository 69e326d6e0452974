// Package syntax turns the text of a netlist into cards. What goes in is a
// source.File; what comes out is a Deck: every card with the bytes it came
// from, and a problem for every card that could not be read, all at once. It
// knows lines and fields and no electronics: which field is a node and which a
// value follows from the letter and the position and is decided by the circuit.
//
// The language is defined in grammar.go. A scanner (scan.go) joins continuation
// lines, drops comments and types the tokens; grammars are applied card by card
// so that one bad card costs nothing but itself.
package syntax
