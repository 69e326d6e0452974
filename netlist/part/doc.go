// Package part holds what parts can stand: the figures of their data sheets by
// part number, each with the document it comes from and how far it can be
// trusted. What goes in is .model cards - of the embedded library, of a --parts
// file or of a netlist - and what comes out is Ratings. It knows no circuit.
package part
