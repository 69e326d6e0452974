package operating

import (
	"fmt"
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/network"
	"standoff/netlist/part"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
)

// scrGate is a thyristor's gate fired by a relaxation oscillator.
//
// Model. At the end of the ramp the timing capacitor, charged to V_P, discharges
// through the on-resistance of the device into everything that hangs on base
// its outlet (base one, cathode). The gate is held against its must-trigger point: it is taken as a clamp at
// the greatest trigger voltage of the coldest ambient, and the current that the
// network then drives into it counts (load line through the corner of the
// must-trigger box; Teccor AN1008, Dynex AN4840). While the clamp holds, the
// network is linear and all currents fall with one time constant. Diodes in the
// gate lead are piecewise linear. Units SI.
type scrGate struct {
	*relaxation
	oscillate func(x []float64)
	gateStage *stage.Stage
	scr       *part.Ratings
	drive     *mesh
	source    network.Branch // voltage of the capacitor over the lower rail
	on        network.Branch // resistance of the emitter path
	gate      network.Branch // the gate as a clamp
	others    []neighbour    // other gates on the same base one
	shunt     *mesh          // what lies across the gate, nil where nothing does
	need      trigger
	g         gateState
	n         gateNodes
	turnOn    float64        // t_gt of the sheet, 0 where it gives none
	latching  func() float64 // time to the latching current, nil where it is unknown
}

// gateNodes are the solvers' nodes, looked up once: in the drive network, and
// (quiet) in the standing one.
type gateNodes struct{ gate, cathode, lower, outlet, quietGate, quietCathode network.Node }

// trigger is what the gate asks for at the coldest ambient.
type trigger struct {
	amperes, volts         float64 // from the sheet alone
	coldAmperes, coldVolts float64 // with the assumed rise where the sheet has no cold figure
	amperesMark, voltsMark part.Mark
	assumed                string // what was assumed for the cold, "" where nothing was
	ok                     bool
}

// gateState is the gate worked out at one point.
type gateState struct {
	scale          float64 // allowance for a capacitor smaller than the maker's
	open           float64 // pulse with the gate open
	short          float64 // current into a shorted gate
	sheet, cold    drive   // against the sheet's and the assumed cold trigger point
	standby, shunt float64
}

// drive is the pulse against one trigger point.
type drive struct {
	current  float64 // into gate and gate resistor while the gate is at its trigger voltage
	required float64
	width    float64 // time above required
}

// gateSlope is the slope resistance of the gate clamp in ohm, small against any
// resistance that feeds a gate.
const gateSlope = 0.01

// never is a clamp voltage that is never reached.
const never = 1e6

// newSCRGate builds the model of a gate stage whose driver can be computed.
func newSCRGate(w *circuit.Wiring, s *stage.Stage, driver *stage.Stage) (*scrGate, error) {
	if s.Anchor.Ratings == nil {
		return nil, fmt.Errorf("nothing is known of the part %s", partName(s.Anchor))
	}
	u, err := newDriver(w, driver)
	if err != nil {
		return nil, fmt.Errorf("its driver %s cannot be computed: %w", driver.Anchor.Designator, err)
	}
	u.outputs, u.contests = nil, nil
	m := &scrGate{relaxation: u, oscillate: u.evaluate, gateStage: s, scr: s.Anchor.Ratings}
	m.evaluate = m.gateAt
	m.box[m.share].Pivot = true // a high on-resistance makes a small, long pulse, and the stop at the valley decides
	if len(s.Parts[stage.GateCoupling]) > 0 {
		return nil, fmt.Errorf("a capacitor couples its gate; coupled gates are not computed yet")
	}
	if err := m.driveNetwork(); err != nil {
		return nil, err
	}
	m.need = newTrigger(m.scr, w.Circuit.Board.Ambient.Low)
	m.gateFigures()
	m.gateLimits()
	for i := range m.outputs {
		m.outputs[i].kinked = m.outputs[i].kinked || m.follows
	}
	for i := range m.contests {
		m.contests[i].kinked = m.contests[i].kinked || m.follows
	}
	return m, nil
}

// driveNetwork readies the network of the discharge.
func (m *scrGate) driveNetwork() error {
	n, g := m.stage.Nodes, m.gateStage.Nodes
	var err error
	m.drive, err = newMesh(m.bench, []circuit.NodeID{m.outlet, n["lower"], g["gate"], g["cathode"]},
		func(e *circuit.Element) bool { return contains(m.keepOff, e) })
	if err != nil {
		return err
	}
	net := &m.drive.net
	charged := net.Node()
	m.source = net.Voltage(charged, m.drive.node(n["lower"]))
	m.on = net.Resistor(charged, m.drive.node(m.outlet))
	m.gate = net.Diode(m.drive.node(g["gate"]), m.drive.node(g["cathode"]))
	m.neighbours()
	if err := m.drive.compile(); err != nil {
		return err
	}
	m.drive.solver.SetDiode(m.gate, gateSlope, math.Inf(1), 1)
	for _, o := range m.others {
		m.drive.solver.SetDiode(o.branch, gateSlope, math.Inf(1), 1)
	}
	if across := m.gateStage.Parts[stage.GateShunt]; len(across) > 0 {
		m.shunt, err = newMesh(m.bench, []circuit.NodeID{g["gate"], g["cathode"]}, func(e *circuit.Element) bool { return !contains(across, e) })
		if err != nil {
			return err
		}
		if err := m.shunt.compile(); err != nil {
			return err
		}
	}
	m.n = gateNodes{gate: m.drive.node(g["gate"]), cathode: m.drive.node(g["cathode"]), lower: m.drive.node(n["lower"]),
		outlet: m.drive.node(m.outlet), quietGate: m.standing.node(g["gate"]), quietCathode: m.standing.node(g["cathode"])}
	m.turnOn, _, _ = m.scr.Limit("tgt")
	return nil
}

// neighbour is another gate on the same base one: a clamp that takes its share.
type neighbour struct {
	branch network.Branch
	volts  int // variable of its voltage
}

// leastGateVoltage is the least voltage at which a gate begins to take current
// (TIC106 and C106 sheets: 0.4 V at 25 deg C).
const leastGateVoltage = 0.4

// usualGateVoltage is the greatest trigger voltage of a gate whose sheet names none,
// that of most standard types (2N6394, BT151, TIC126 sheets: 1.5 V at 25 deg C).
const usualGateVoltage = 1.5

// neighbours adds the other gates that the same pulse feeds. Their voltage may be
// anything from the least one to the greatest trigger voltage of their sheet: no
// maker limits it downwards for most types.
func (m *scrGate) neighbours() {
	for _, s := range m.stage.Drives {
		if s == m.gateStage {
			continue
		}
		gate, inside := m.drive.nodes[m.w.Net(s.Nodes["gate"])]
		cathode, alsoInside := m.drive.nodes[m.w.Net(s.Nodes["cathode"])]
		if !inside || !alsoInside {
			continue
		}
		high := usualGateVoltage
		if r := s.Anchor.Ratings; r != nil {
			if v, _, ok := r.Limit("vgt"); ok {
				high = max(v, leastGateVoltage)
			}
		}
		volts := m.assumed("gate voltage of "+s.Anchor.Designator, "V",
			quantity.Spread{Low: leastGateVoltage, Nominal: (leastGateVoltage + high) / 2, High: high}, "assumed")
		m.others = append(m.others, neighbour{m.drive.net.Diode(gate, cathode), volts})
	}
}

// gateAt works oscillator and gate out at one point.
func (m *scrGate) gateAt(x []float64) {
	m.oscillate(x)
	g := &m.g
	m.drive.load(x)
	v := m.drive.solver.Values
	v[m.on] = m.cycle.on + m.cycle.re + 1e-6
	for _, o := range m.others {
		v[o.branch] = x[o.volts]
	}
	g.scale = m.smallCapacitor()
	g.open, _, _ = m.pulseAt(m.cycle.vp, never)
	_, g.short, _ = m.pulseAt(m.cycle.vp, 0)
	shunt := 0.0
	if m.shunt != nil {
		m.shunt.load(x)
		m.shunt.solver.Solve()
		shunt = 1 / m.shunt.between(m.gateStage.Nodes["gate"], m.gateStage.Nodes["cathode"])
	}
	g.sheet = m.against(m.need.amperes, m.need.volts, shunt)
	if m.need.assumed != "" {
		g.cold = m.against(m.need.coldAmperes, m.need.coldVolts, shunt)
	}
	m.quiet()
}

// pulseAt solves the drive network with the capacitor at volts and the gate
// clamped: voltage across the gate, current into it, current out of the capacitor.
func (m *scrGate) pulseAt(volts, clamp float64) (across, into, out float64) {
	s := m.drive.solver
	volts -= m.cycle.drop
	s.Values[m.source], s.Values[m.gate] = volts, clamp
	s.Solve()
	across = s.Voltage(m.n.gate) - s.Voltage(m.n.cathode)
	into = max(across-clamp, 0) / gateSlope
	out = (volts + s.Voltage(m.n.lower) - s.Voltage(m.n.outlet)) / s.Values[m.on]
	return across, into, out
}

// smallCapacitor returns the share of the static pulse that is left with a
// capacitor smaller than the one with which V_OB1 is specified. The emitter
// then falls more slowly than the capacitor could: fall time (2 + 5 C) V_E(sat)
// us with C in uF (GE Transistor Manual, from memory), so that the current goes
// as C/(2 + 5 C).
func (m *scrGate) smallCapacitor() float64 {
	if m.pulseFarads == 0 {
		return 1
	}
	per := func(c float64) float64 { return c * 1e6 / (2 + 5*c*1e6) }
	return min(1, per(m.cycle.c)/per(m.pulseFarads))
}

// against works out the pulse against a trigger point. Current and time follow
// from two solutions on the same straight line.
func (m *scrGate) against(amperes, volts, shunt float64) drive {
	g := &m.g
	d := drive{required: amperes + volts*shunt}
	_, into, out := m.pulseAt(m.cycle.vp, volts)
	if into <= 0 {
		d.current = max(g.open, 0) * shunt * g.scale
		return d
	}
	d.current = (into + volts*shunt) * g.scale
	if len(m.others) > 0 {
		if d.current >= d.required {
			d.width = m.shared(amperes/g.scale, volts)
		}
		return d
	}
	second := m.cycle.vp * 0.98
	_, into2, out2 := m.pulseAt(second, volts)
	slopeInto, slopeOut := (into-into2)/(m.cycle.vp-second), (out-out2)/(m.cycle.vp-second)
	if slopeInto <= 0 || slopeOut <= 0 || d.current < d.required {
		return d
	}
	last := max(m.cycle.vp-(into-amperes/g.scale)/slopeInto, m.cycle.vv)
	end := out - slopeOut*(m.cycle.vp-last)
	if end <= 0 {
		return d
	}
	d.width = max(m.cycle.c/slopeOut*math.Log(out/end), 0)
	return d
}

// sharedSteps is into how many steps the fall of the capacitor is cut where
// several gates share a pulse.
const sharedSteps = 24

// shared returns how long the current into the gate stays above amperes where
// other gates take their share until they let go: the fall of the capacitor is
// cut into steps, and in each the network is taken as straight.
func (m *scrGate) shared(amperes, volts float64) float64 {
	step := (m.cycle.vp - m.cycle.vv) / sharedSteps
	_, into, out := m.pulseAt(m.cycle.vp, volts)
	width := 0.0
	for k := 1; k <= sharedSteps; k++ {
		_, next, nextOut := m.pulseAt(m.cycle.vp-float64(k)*step, volts)
		share := 1.0
		if next < amperes {
			share = (into - amperes) / (into - next)
			nextOut = out + share*(nextOut-out)
		}
		if nextOut <= 0 {
			return width
		}
		if fall := out - nextOut; fall > 1e-9*out {
			width += m.cycle.c * share * step * math.Log(out/nextOut) / fall
		} else {
			width += m.cycle.c * share * step / out
		}
		if next < amperes {
			return width
		}
		into, out = next, nextOut
	}
	return width
}

// quiet works out the gate before the pulse: voltage and dc resistance to the
// cathode with the emitter open.
func (m *scrGate) quiet() {
	gate, cathode := m.n.quietGate, m.n.quietCathode
	solver := m.standing.solver
	m.g.standby = solver.Voltage(gate) - solver.Voltage(cathode)
	m.g.shunt = m.standing.between(m.gateStage.Nodes["gate"], m.gateStage.Nodes["cathode"])
}

// newTrigger takes the trigger point of the coldest ambient from the sheet.
// Between 25 deg C and the sheet's cold temperature current and voltage are
// drawn straight, which lies above the makers' curves (they bend downwards).
// Where the sheet has no cold figure the sheet's 25 deg C value counts, and
// besides it the rise that other makers guarantee at -40 deg C: current times
// 2.5, voltage times 1.67 (largest ratios seen: C106, 2N6504; 2N6400, TIC126).
func newTrigger(r *part.Ratings, coldest float64) trigger {
	var t trigger
	var haveVolts bool
	t.amperes, t.amperesMark, t.ok = r.Limit("igt")
	t.volts, t.voltsMark, haveVolts = r.Limit("vgt")
	t.ok = t.ok && haveVolts
	cold, ok := r.Test("t_cold")
	if !ok {
		cold = -40
	}
	share := min(max((25-coldest)/(25-cold), 0), 1)
	t.coldAmperes, t.coldVolts = t.amperes*(1+1.5*share), t.volts*(1+0.67*share)
	if v, mark, ok := r.Limit("igt_cold"); ok {
		t.amperes += share * (v - t.amperes)
		t.coldAmperes, t.amperesMark = t.amperes, max(mark, t.amperesMark)
	} else if share > 0 {
		t.assumed = "the sheet has no cold trigger current; 2.5 times at -40 deg C assumed"
	}
	if v, mark, ok := r.Limit("vgt_cold"); ok {
		t.volts += share * (v - t.volts)
		t.coldVolts, t.voltsMark = t.volts, max(mark, t.voltsMark)
	} else if share > 0 {
		t.assumed = join(t.assumed, "the sheet has no cold trigger voltage; 1.67 times at -40 deg C assumed")
	}
	return t
}
