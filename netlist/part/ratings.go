package part

import "standoff/netlist/source"

// Mark says how much a figure can be trusted.
type Mark int8

// The marks, from best to worst.
const (
	Declared Mark = iota // written by the user in the netlist or a --parts file
	Read                 // read in the text of the named document
	Scan                 // read in a damaged scan; may still hold
	Memory               // from memory: leads to a doubt at most
	Assumed              // nobody gives it; a stated habit stands in: a doubt at most
)

// Rating is one figure of a part.
type Rating struct {
	Min, Typ, Max          float64
	HasMin, HasTyp, HasMax bool
	// Mark is the trust in the guaranteed side of the figure, the worse one
	// where both sides are.
	Mark Mark
	// MinMark, TypMark and MaxMark are the trust in each value.
	MinMark, TypMark, MaxMark Mark
	Source                    string
}

// Kind is what a part is.
type Kind string

// The kinds; the spelling is that of the .model type.
const (
	UJT           Kind = "ujt"
	PUT           Kind = "put"
	SCR           Kind = "scr"
	Triac         Kind = "triac"
	Diac          Kind = "diac"
	CurrentSource Kind = "isource"
	Optotriac     Kind = "optotriac"
	Diode         Kind = "d"
	NPN           Kind = "npn"
	PNP           Kind = "pnp"
	NJF           Kind = "njf"
	PJF           Kind = "pjf"
	NMOS          Kind = "nmos"
	PMOS          Kind = "pmos"
)

// Ratings is everything known of one part.
type Ratings struct {
	Name    string // canonical spelling
	Aliases []string
	Kind    Kind
	Figures map[string]Rating // by base symbol in lower case: "eta", "rbb", "ip", "ip_vbb", "igt", "igt_cold" ...
	Texts   map[string]string // text ratings such as quadrants=1234
	Source  string            // the document of the whole row
	Origin  string            // "library", "netlist", or the path of the --parts file
	At      source.Span       // the card, where there is one
}
