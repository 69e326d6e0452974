// Package circuit holds the board: parts with terminals on nodes, subcircuits
// flattened, parameters worked out, declared intent attached. It answers
// questions about a neighbourhood. It knows parts and wires, but no topology
// and no physics.
package circuit

import (
	"standoff/netlist/part"
	"standoff/netlist/quantity"
	"standoff/netlist/source"
)

// NodeID numbers a node. Ground is node 0.
type NodeID int32

// Ground is the node "0" (or "gnd").
const Ground NodeID = 0

// Node is one net.
type Node struct {
	Name string // full name, with the path of subcircuits: "X1.n2"
	At   source.Span
	Pins []Pin // every terminal on it, in the order of the cards
}

// Pin is one terminal of one element.
type Pin struct {
	Element *Element
	Index   int // into Element.Nodes
}

// Kind is what an element is, after its model and its part have been looked up.
type Kind string

// The kinds of elements. Trigger devices and semiconductors use the part's kind
// ("ujt", "scr", "d", "npn" ...), in the same spelling.
const (
	Resistor      Kind = "r"
	Capacitor     Kind = "c"
	Inductor      Kind = "l"
	VoltageSource Kind = "v"
	CurrentSource Kind = "i"
	Coupling      Kind = "k"
	Switch        Kind = "s"
	Controlled    Kind = "controlled" // E F G H B: known, but not computed
	Line          Kind = "t"          // transmission line
	// Jig is a capacitor of 1T: a test rig's way to write an open circuit for
	// dc and a short one for ac. It is no part of the board.
	Jig       Kind = "jig"
	UJT            = Kind(part.UJT)
	PUT            = Kind(part.PUT)
	SCR            = Kind(part.SCR)
	Triac          = Kind(part.Triac)
	Diac           = Kind(part.Diac)
	SourceIC       = Kind(part.CurrentSource)
	Optotriac      = Kind(part.Optotriac)
	Diode          = Kind(part.Diode)
	NPN            = Kind(part.NPN)
	PNP            = Kind(part.PNP)
	NJF            = Kind(part.NJF)
	PJF            = Kind(part.PJF)
	NMOS           = Kind(part.NMOS)
	PMOS           = Kind(part.PMOS)
	Unknown   Kind = "unknown" // a part whose kind nobody gave
)

// Authority says where a terminal order was taken from, from best to worst.
type Authority string

// The authorities of a terminal order.
const (
	ByPins    Authority = "pins="         // the intent line
	ByHeader  Authority = "header"        // names in the .subckt header
	ByComment Authority = "comment"       // a comment at the .subckt header
	ByInsides Authority = "insides"       // the crossed pair inside the subcircuit
	ByLibrary Authority = "library order" // the order of the part library
	ByLetter  Authority = "letter"        // the order the element letter fixes
	ByWiring  Authority = "wiring"        // the only order that makes a working stage
)

// Waveform is what a source does over time. Kind is "dc", "sin", "pulse",
// "pwl", "exp" or "ac". Args are the numbers of the card, in its order.
type Waveform struct {
	Kind string
	DC   float64
	Args []float64
}

// Basis says where a spread came from.
type Basis string

// The bases of a spread.
const (
	BasisDeclared Basis = "declared" // on an intent line
	BasisDefault  Basis = "default"  // the habit of contract: R 5 %, C 10 % ...
	BasisExact    Basis = "exact"    // no spread applies
)

// Element is one part of the flattened board.
type Element struct {
	Index      int    // into Circuit.Elements
	Designator string // with path and in the spelling of the netlist: "X1.R3"
	Letter     byte   // upper case first letter of the card
	Kind       Kind
	Nodes      []NodeID // in the order of the card
	// Roles names the terminal at each index of Nodes for parts that have
	// roles: "emitter" "base1" "base2", "anode" "gate" "cathode", "mt2" "gate"
	// "mt1", "collector" "base" "emitter", "drain" "gate" "source", "v+" "r"
	// "v-". Two-terminal parts have "1" "2" ("plus" "minus" where polar;
	// "anode" "cathode" for a diode).
	Roles []string
	Order Authority

	// Value is the resistance, capacitance, inductance, voltage or current at
	// 25 deg C with its declared or assumed spread (for a SIN source the
	// amplitude). HasValue is false where none could be read.
	Value    quantity.Spread
	HasValue bool
	Basis    Basis
	Wave     Waveform // sources only

	// Intent is never nil. Elements of which the same is declared share it.
	Intent *Intent
	// Coupled holds the places in Circuit.Elements of the inductors that a
	// coupling card joins; Value is then the coupling factor.
	Coupled []int
	// PartName is the model or part as the card spells it.
	PartName string
	// Ratings is what is known of the part; nil where nothing is.
	Ratings *part.Ratings

	At      source.Span // the whole card
	NameAt  source.Span // its designator
	ValueAt source.Span // its value or part name; zero where it has none
	// Written is the value as the card spells it ("4k7"), for rules on notation.
	Written string
}

// Intent is what intent lines declare of one element. A pointer is nil where
// nothing was declared.
type Intent struct {
	Tol                         *quantity.Spread // relative: Low -0.05, High 0.05
	Power, Volts, Tempco, Leak  *float64         // W, V, 1/K (not ppm), A
	VoltSeconds, Amps, Heatsink *float64         // V s, A rms, K/W
	Travel, Range               *quantity.Spread // ohm; V or A
	Kind                        string           // capacitor dielectric
	Load                        string           // resistive inductive lamp motor
	LatchOK                     bool
	Frequency, Period           *quantity.Spread // target, Low..High
	// At is the place of each key declared of this very element; what an "all"
	// line says is not in it.
	At     map[string]source.Span
	shared bool // by several elements: copy before writing
}

// Board is what *> board declares.
type Board struct {
	Ambient quantity.Spread  // deg C
	Mains   *quantity.Spread // V rms
	Line    float64          // Hz; 0 where undeclared
	// Declared names the keys that were written ("ambient", "mains", "line").
	Declared map[string]source.Span
}

// Waiver is one *> waive line.
type Waiver struct {
	Rule, Designator, Reason string
	At                       source.Span
}

// Repeat is a fact about names that rules judge.
type Repeat struct {
	Designator string
	First, At  source.Span
}

// Circuit is the whole flattened board.
type Circuit struct {
	Title    string
	Nodes    []Node
	Elements []*Element
	Board    Board
	Waivers  []Waiver

	// Facts for the hygiene rules.
	Repeats      []Repeat        // designators used twice in one scope
	GroundNamed  bool            // some card uses node 0 or gnd
	Micron       bool            // some transistor has the gate of a chip: l= or w= below 0.1 mm
	UnusedModels []*part.Ratings // defined in the netlist, never used
	Resets       []Reset         // intent keys given twice
	// UnusedSubckts are the subcircuits of the board's own file that no card
	// uses: nothing inside them was looked at.
	UnusedSubckts []Named
}

// Named is a name and where it stands.
type Named struct {
	Name string
	At   source.Span
}

// Reset is an intent key that was given twice; the last one counts.
type Reset struct {
	Subject, Key string
	At           source.Span
}

// Pin returns the node of the terminal with this role and whether it exists.
func (e *Element) Pin(role string) (NodeID, bool) {
	for i, r := range e.Roles {
		if r == role && i < len(e.Nodes) {
			return e.Nodes[i], true
		}
	}
	return 0, false
}
