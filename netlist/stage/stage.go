// Package stage holds the topologies that a circuit contains: an anchor part
// and the roles of the parts around it. It decides by wiring, never by names
// or values, and computes nothing.
package stage

import "standoff/netlist/circuit"

// Kind names a topology.
type Kind string

// The kinds of stages.
const (
	UJTOscillator       Kind = "ujt-oscillator"
	PUTOscillator       Kind = "put-oscillator"
	BreakoverOscillator Kind = "breakover-oscillator"
	PhaseControl        Kind = "phase-control"
	SCRGate             Kind = "scr-gate"
	TriacGate           Kind = "triac-gate"
	ClippedSupply       Kind = "clipped-supply"
)

// IsTiming reports whether stages of the kind fill a capacitor and empty it into
// a device.
func (k Kind) IsTiming() bool {
	return k == UJTOscillator || k == PUTOscillator || k == BreakoverOscillator
}

// Role names what a part does in a stage.
type Role string

// The roles, in the order in which a worksheet lists them.
const (
	TimingResistor   Role = "timing-resistor"
	TimingCapacitor  Role = "timing-capacitor"
	CurrentSource    Role = "current-source"
	BaseOne          Role = "base-one"
	BaseTwo          Role = "base-two"
	EmitterSeries    Role = "emitter-series"
	GateDivider      Role = "gate-divider"
	Supply           Role = "supply"
	GateSeries       Role = "gate-series"
	GateShunt        Role = "gate-shunt"
	GateCoupling     Role = "gate-coupling"
	PulseTransformer Role = "pulse-transformer"
	Driver           Role = "driver"
	Load             Role = "load"
	Snubber          Role = "snubber"
	Freewheel        Role = "freewheel"
	Dropper          Role = "dropper"
	Zener            Role = "zener"
	Rectifier        Role = "rectifier"
	Reservoir        Role = "reservoir"
)

// Roles lists all roles in worksheet order.
var Roles = [...]Role{TimingResistor, TimingCapacitor, CurrentSource, BaseOne, BaseTwo, EmitterSeries,
	GateDivider, Supply, GateSeries, GateShunt, GateCoupling, PulseTransformer, Driver, Load, Snubber,
	Freewheel, Dropper, Zener, Rectifier, Reservoir}

// Stage is one recognised topology.
type Stage struct {
	Kind   Kind
	Anchor *circuit.Element
	// Parts lists the elements of each role, in the order of their cards.
	Parts map[Role][]*circuit.Element
	// Drives lists the stages that this one fires.
	Drives []*Stage
	// DrivenBy is the stage that fires this one; nil where none was recognised.
	DrivenBy *Stage
	// Nodes holds the nodes that matter, by name: "emitter", "capacitor",
	// "base1", "base2", "upper", "lower", "anode", "gate", "cathode", and of a
	// timing stage "outlet": where its pulse comes out.
	Nodes map[string]circuit.NodeID
	// Gap says why the stage could not be recognised in full; "" where it was.
	Gap string
	// Partner is the second transistor of a crossed pair that stands in for a device,
	// else nil.
	Partner *circuit.Element
	// Source is the current source that charges the timing capacitor, nil where none does: of
	// several the first, of transistors in series the one next to the capacitor.
	Source *circuit.Element
	// Clamps lists transistors that can hold the timing capacitor down and whose base
	// dc on the board sets.
	Clamps []*circuit.Element
	// Taps lists transistors that read the ramp with their base, and Apart parts that
	// bring a signal in and are left out of the networks.
	Taps, Apart []*circuit.Element
	// Pullers lists transistors and switches that can pull the control (a gate) down.
	Pullers []*circuit.Element
	// Beside lists what hangs on the stage and is not worked out, in words.
	Beside []string
	// Order is set where terminal order and wiring do not agree.
	Order *OrderNote
}
