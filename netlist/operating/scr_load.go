package operating

import (
	"fmt"
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/part"
	"standoff/netlist/stage"
)

// loadCircuit is the anode circuit of a thyristor: what it has to block and what
// flows when it conducts, its own drop neglected (upper bound of the current).
// Sine sources stand at their crest; currents of sine sources are those of full
// conduction with a resistive load. Units SI.
type loadCircuit struct {
	bench          *bench
	stage          *stage.Stage
	mesh           *mesh
	anode, cathode circuit.NodeID
	coils          []slot
	hertz          float64 // 0 for dc

	block, reverse, resistance, inductance float64
	bothHalves                             bool

	// A single coil with something beside it: what flows at once, and how fast
	// the coil follows.
	open       *mesh // the anode circuit without the coil; nil where it is not needed
	from, to   circuit.NodeID
	atOnce     float64
	coilSeries float64 // resistance that the coil works against
}

// newLoad builds the anode circuit. An error says why it cannot be computed.
func newLoad(b *bench, s *stage.Stage) (*loadCircuit, error) {
	l := &loadCircuit{bench: b, stage: s, anode: s.Nodes["anode"], cathode: s.Nodes["cathode"]}
	gate := s.Nodes["gate"]
	var err error
	l.mesh, err = newCrestMesh(b, []circuit.NodeID{l.anode, l.cathode}, func(e *circuit.Element) bool {
		return b.w.Net(e.Nodes[0]) == gate || b.w.Net(e.Nodes[1]) == gate
	})
	if err != nil {
		return nil, err
	}
	if err := l.mesh.compile(); err != nil {
		return nil, err
	}
	for e := range l.mesh.have {
		if e.Wave.Kind == "sin" && len(e.Wave.Args) > 2 {
			l.hertz = max(l.hertz, e.Wave.Args[2])
		}
	}
	for _, e := range s.Parts[stage.Load] {
		if e.Kind == circuit.Inductor && e.HasValue {
			l.coils = append(l.coils, b.element(e))
		}
	}
	return l, l.beside()
}

// beside readies the anode circuit without its coil, where there is one only.
func (l *loadCircuit) beside() error {
	if len(l.coils) != 1 {
		return nil
	}
	var coil *circuit.Element
	for _, e := range l.stage.Parts[stage.Load] {
		if e.Kind == circuit.Inductor {
			coil = e
		}
	}
	l.from, l.to = coil.Nodes[0], coil.Nodes[1]
	gate := l.stage.Nodes["gate"]
	w := l.bench.w
	open, err := newCrestMesh(l.bench, []circuit.NodeID{l.anode, l.cathode, l.from, l.to}, func(e *circuit.Element) bool {
		return e == coil || w.Net(e.Nodes[0]) == gate || w.Net(e.Nodes[1]) == gate
	})
	if err != nil {
		return err
	}
	l.open = open
	return open.compile()
}

// start works out what flows in the thyristor at the instant of firing, past
// the coil, and the resistance that the coil works against: that between its
// ends with the thyristor conducting.
func (l *loadCircuit) start(x []float64) {
	l.atOnce, l.coilSeries = 0, l.resistance
	m := l.open
	if m == nil {
		return
	}
	m.load(x)
	m.solver.Solve()
	across := m.between(l.anode, l.cathode)
	if across > noPath {
		return
	}
	a, k, p, q := m.node(l.anode), m.node(l.cathode), m.node(l.from), m.node(l.to)
	l.atOnce = max(m.solver.Voltage(a)-m.solver.Voltage(k), 0) / max(across, noResistance)
	own := m.between(l.from, l.to)
	m.solver.Transfer(a, m.there)
	m.solver.Transfer(k, m.back)
	mutual := (m.there[p] - m.back[p]) - (m.there[q] - m.back[q])
	l.coilSeries = own - mutual*mutual/max(across, noResistance)
}

// at works the anode circuit out at one point.
func (l *loadCircuit) at(x []float64) {
	m := l.mesh
	m.polarity = 1
	m.load(x)
	m.solver.Solve()
	a, k := m.node(l.anode), m.node(l.cathode)
	l.block = m.solver.Voltage(a) - m.solver.Voltage(k)
	l.resistance = m.between(l.anode, l.cathode)
	l.inductance = 0
	for _, c := range l.coils {
		l.inductance += l.bench.value(c, x)
	}
	l.start(x)
	l.reverse, l.bothHalves = 0, false
	if l.hertz > 0 {
		m.polarity = -1
		m.load(x)
		m.solver.Solve()
		other := m.solver.Voltage(a) - m.solver.Voltage(k)
		l.bothHalves = other > 0 && l.block > 0
		l.block, l.reverse = max(l.block, other), max(-min(l.block, other), 0)
	}
}

// figures adds what a worksheet shows of the anode circuit.
func (l *loadCircuit) figures(m *model, r *part.Ratings) {
	m.figure("blocking_voltage", "V", func() float64 { return max(l.block, l.reverse) }, func() string {
		return "greatest voltage between anode and cathode while the thyristor is off"
	})
	if v, _, ok := r.Limit("vdrm"); ok {
		m.figure("blocking_voltage_rating", "V", func() float64 { return v }, func() string { return "V_DRM of the sheet" })
	}
	m.figure("load_current_rms", "A", l.amperes, l.amperesWorking)
	if v, _, ok := r.Limit("it_rms"); ok {
		m.figure("load_current_rating", "A", func() float64 { return v }, func() string { return "I_T(RMS) of the sheet" })
	}
	if l.hertz > 0 {
		m.figure("dvdt", "V/s", func() float64 { return 2 * math.Pi * l.hertz * l.block }, func() string {
			return "2 pi f times the crest"
		})
	}
	if len(l.coils) > 0 {
		m.figure("didt", "A/s", func() float64 { return l.block / l.inductance }, func() string {
			return "V/L at the instant of firing"
		})
	}
	if latch, _, ok := r.Limit("il"); ok && l.hertz == 0 && !l.discharges() {
		m.figure("latching_time", "s", func() float64 { return l.latching(latch) }, func() string {
			return "time until the load carries the latching current of " + show(latch, "A")
		})
	}
}

// discharges reports whether the thyristor empties a capacitor: one at the anode,
// or behind a coil there, whose other end leads back to the cathode without a
// rail between. A snubber is none. Its current then is not that of the load.
func (l *loadCircuit) discharges() bool {
	w := l.bench.w
	anode, cathode := w.Net(l.anode), w.Net(l.cathode)
	stop := func(n circuit.NodeID) bool { return w.IsFixed(n) || n == cathode }
	isCoil := func(e *circuit.Element) bool { return e.Kind == circuit.Inductor }
	side := w.Walk([]circuit.NodeID{anode}, isCoil, stop)
	for _, n := range side.Nets {
		if stop(n) {
			continue
		}
		for _, p := range w.On(n) {
			if p.Element.Kind != circuit.Capacitor || contains(l.stage.Parts[stage.Snubber], p.Element) {
				continue
			}
			far := w.Other(p.Element, n)
			back := w.Walk([]circuit.NodeID{far}, isMeshElement, func(n circuit.NodeID) bool {
				return stop(n) || side.HasNet(w, n)
			})
			if far == cathode || !w.IsFixed(far) && back.HasNet(w, cathode) {
				return true
			}
		}
	}
	return false
}

// amperes returns the rms load current: declared with amps=, or of the anode
// circuit at full conduction.
func (l *loadCircuit) amperes() float64 {
	if a := l.stage.Anchor.Intent.Amps; a != nil {
		return *a
	}
	if l.resistance > noPath || l.resistance < noResistance {
		return math.NaN() // nothing on the board limits it
	}
	crest := max(l.block, 0) / l.resistance
	switch {
	case l.hertz == 0:
		return crest
	case l.bothHalves:
		return crest / math.Sqrt2
	}
	return crest / 2
}

func (l *loadCircuit) amperesWorking() string {
	if l.stage.Anchor.Intent.Amps != nil {
		return "declared with amps="
	}
	return fmt.Sprintf("%s through %s at full conduction, drop of the thyristor neglected",
		show(l.block, "V"), show(l.resistance, "ohm"))
}

// noResistance is a resistance in ohm that limits no current.
const noResistance = 1e-6

// latching returns the time until the load current passes the latching current
// on a dc supply. What lies beside the coil carries i0 at once; the rest follows
// with L/R to the final current: (L/R) ln((i_end - i0)/(i_end - I_L)), which is
// -(L/R) ln(1 - I_L R/V) for a coil alone. Infinite where it never does.
func (l *loadCircuit) latching(amperes float64) float64 {
	if l.resistance > noPath {
		return math.NaN()
	}
	share := amperes * l.resistance / l.block
	if !(share < 1) || l.block <= 0 {
		return math.Inf(1)
	}
	if l.inductance == 0 || l.atOnce >= amperes {
		return 0
	}
	if l.resistance < noResistance {
		return amperes * l.inductance / l.block
	}
	end := l.block / l.resistance
	return l.inductance / l.coilSeries * math.Log((end-l.atOnce)/(end-amperes))
}
