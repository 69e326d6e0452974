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

// breakoverModel is the relaxation oscillator around a device that breaks over:
// diac, silicon bilateral or unilateral switch, four-layer diode, neon lamp.
//
// Model. The device leads nothing until V_BO stands across it; then, if the
// charging network delivers the breakover current I_BO there, it empties the
// capacitor through its on-resistance down to a valley voltage V_V and lets go if
// the network delivers less than the holding current I_H. On dc
//
//	T = rth C ln((vth - V_V)/(vth - V_BO)) + (R_on + R_K) C ln(V_BO/V_V)
//
// Makers give the valley in one of two ways. Where a voltage V_F in conduction is
// published (silicon switches, neon lamps) the valley lies between three quarters of
// it and it; where only the step back at breakover dV is (diacs), at least that
// far below V_BO and at most two thirds of V_BO (assumed). R_on follows from the
// output step V_O into 20 ohm: R_on = 20 ohm (swing/V_O - 1). The temperature
// coefficient of V_BO (0.02 % per K, MBS4991 sheet; within 8 % over -40 .. 140 deg C,
// HT series) counts where the part's ratings carry it. A device whose voltage in
// conduction nobody gives and that breaks over below 15 V is taken for a silicon switch.
// The device passes up to I_BO before it breaks over: what hangs on its far side
// lifts the peak by that much. Voltages count in the direction of the charge. Units SI.
type breakoverModel struct {
	relaxation
	vbo, swing, vf, vo, on, ibo, ih, gate int // variables, -1 where there is none
	drift, idle                           int // temperature coefficient of V_BO, leakage before it
	s                                     breakoverState
	outletNode, upper, lowerNode          network.Node
	sign                                  float64 // +1 or -1: direction of the charge
	line                                  *lineFeed
	gains                                 gains
	paced, reached                        bool        // the times on the line are worked out, the extent is
	smooth                                *smoothFeed // rectified and smoothed, taken for dc
	blocked                               bool        // a one-sided device stands the wrong way round
}

type breakoverState struct {
	cycle
	reach   float64 // highest voltage that the network brings the capacitor to
	reverse float64 // greatest voltage the other way, of a stage on the line
	standby float64
	volts   float64 // V_BO
	first   float64 // time of the first breakover after the zero crossing of the line
	pulses  float64 // breakovers in a half cycle
}

// newBreakover builds the model of a recognised oscillator. An error says why it
// cannot be computed.
func newBreakover(w *circuit.Wiring, s *stage.Stage) (*breakoverModel, error) {
	if s.Anchor.Ratings == nil {
		return nil, fmt.Errorf("nothing is known of the part %s", partName(s.Anchor))
	}
	m := &breakoverModel{relaxation: newRelaxation(w, s), sign: 1}
	m.cycle, m.terminal, m.bentWindow = &m.s.cycle, "breakover device", true
	m.evaluate = m.at
	m.quietWorking = func() string { return "what flows past the device before it breaks over" }
	if err := m.device(); err != nil {
		return nil, err
	}
	if err := m.networks(); err != nil {
		return nil, err
	}
	m.direction()
	m.figures()
	m.limits()
	m.bendsKink()
	return m, nil
}

// device adds the figures of the device.
func (m *breakoverModel) device() error {
	var ok bool
	r := m.ratings
	if m.vbo, ok = m.rating(r, "vbo", "V"); !ok {
		return fmt.Errorf("the breakover voltage of %s is unknown", r.Name)
	}
	optional := func(symbol, unit string) int {
		if i, ok := m.rating(r, symbol, unit); ok {
			return i
		}
		return -1
	}
	m.ibo, m.ih, m.vo = optional("ibo", "A"), optional("ih", "A"), -1
	m.drift, m.idle = optional("vbo_tc", "1/K"), optional("idrm", "A")
	if least, mark, ok := r.Limit("vo"); ok {
		memory := mark >= part.Memory
		m.vo = m.add(trait{name: "vo", unit: "V", memory: memory, note: markNote("vo", r.Name, memory)},
			quantity.Exact(least))
	}
	m.valley()
	m.onResistance()
	for i := range m.box {
		m.box[i].Bends = true
	}
	return nil
}

func markNote(symbol, name string, memory bool) string {
	if !memory {
		return ""
	}
	return fmt.Sprintf("%s of %s is from memory", symbol, name)
}

// valley adds where the discharge ends: the voltage in conduction, or the swing as
// a share of the breakover voltage.
func (m *breakoverModel) valley() {
	m.vf, m.swing = -1, -1
	if v, _, ok := m.ratings.Spread("vf"); ok {
		m.vf = m.assumed("vv", "V", quantity.Spread{Low: 0.75 * v.Low, Nominal: v.Nominal, High: v.High},
			"valley voltage not published, assumed from 0.75 V_F to V_F")
		return
	}
	vbo := m.box[m.vbo].Nominal
	if vbo < siliconSwitch {
		m.vf = m.assumed("vv", "V", quantity.Spread{Low: 0.75, Nominal: 1.4, High: 1.7},
			"valley voltage not published, assumed as of silicon switches")
		return
	}
	least, note := 0.15, "step back at breakover not published, assumed"
	if v, _, ok := m.ratings.Limit("dv"); ok {
		least, note = min(v/vbo, 0.6), "greatest step back at breakover assumed"
	} else if m.vo >= 0 {
		least, note = min(m.box[m.vo].Low/vbo, 0.6), "greatest step back at breakover assumed"
	}
	m.swing = m.add(trait{name: "swing", doubtHigh: true, note: note},
		quantity.Spread{Low: least, Nominal: (least + 0.65) / 2, High: 0.65})
}

// siliconSwitch is the breakover voltage in volt below which a device is taken for
// one whose voltage in conduction is that of a few junctions: 1.4 .. 1.7 V (MBS4991
// sheet). Diacs begin at 16 V (1N5758).
const siliconSwitch = 15

// lampVolts is the conduction voltage from which a device is taken for a glow
// discharge, whose resistance is that of the gas.
const lampVolts = 40

// onResistance adds what is known of the conducting device.
func (m *breakoverModel) onResistance() {
	switch {
	case m.vo >= 0:
		m.on = m.add(trait{name: "ron_share", doubtLow: true, note: "least on-resistance assumed at a quarter"},
			quantity.Spread{Low: 0.25, Nominal: 0.6, High: 1})
	case m.vf >= 0 && m.box[m.vf].High > lampVolts:
		m.on = m.assumed("ron", "ohm", quantity.Spread{Low: 50, Nominal: 1e3, High: 5e3}, "on-resistance of the glow not published, assumed")
	default:
		m.on = m.assumed("ron", "ohm", quantity.Spread{Low: 1, Nominal: 10, High: 50}, "on-resistance not published, assumed")
	}
}

// networks readies the standing mesh, what hangs on the far side, and the
// capacitors.
func (m *breakoverModel) networks() error {
	n := m.stage.Nodes
	series := m.stage.Parts[stage.EmitterSeries]
	var err error
	anchors := []circuit.NodeID{n["capacitor"], n["outlet"], n["upper"], n["lower"]}
	m.standing, err = newCrestMesh(m.bench, anchors, func(e *circuit.Element) bool {
		return contains(series, e) || contains(m.stage.Apart, e)
	})
	if err != nil {
		return err
	}
	if m.line, err = newLineFeed(m.standing); err != nil {
		return err
	}
	if err := m.readyToCharge(n["capacitor"]); err != nil {
		return err
	}
	if err := m.onTheLine(); err != nil {
		return err
	}
	m.outlet, m.share, m.keepOff = n["outlet"], m.on, m.stage.Parts[stage.TimingResistor]
	if err := m.readyToEmpty(); err != nil {
		return err
	}
	at := m.standing.node
	m.gateAlone()
	m.outletNode, m.upper, m.lowerNode = at(n["outlet"]), at(n["upper"]), at(n["lower"])
	return m.capacitors(n["capacitor"])
}

// gateAlone adds the voltage of a gate that the far side hangs on with nothing beside
// it: the breakover current already flows through it, and the capacitor has to climb
// so much higher (Mehta, Principles of Electronics, ex. 21.5: V_BO + V_GT).
func (m *breakoverModel) gateAlone() {
	s := m.stage
	m.gate = -1
	if len(s.Parts[stage.BaseOne]) > 0 || m.w.IsFixed(s.Nodes["outlet"]) || len(s.Drives) == 0 {
		return
	}
	g, high := s.Drives[0], usualGateVoltage
	if r := g.Anchor.Ratings; r != nil {
		if v, _, ok := r.Limit("vgt"); ok {
			high = max(v, leastGateVoltage)
		}
	}
	m.gate = m.assumed("gate voltage of "+g.Anchor.Designator, "V",
		quantity.Spread{Low: leastGateVoltage, Nominal: (leastGateVoltage + high) / 2, High: high}, "assumed")
}

// direction finds which way the capacitor charges on the nominal board.
func (m *breakoverModel) direction() {
	first, _ := m.stage.Anchor.Pin("1")
	faces := m.w.Net(first) == m.w.Net(m.stage.Nodes["terminal"])
	if m.line != nil {
		m.lineDirection(faces)
		m.evaluate(m.nominal())
		return
	}
	m.evaluate(m.nominal())
	if m.s.reach < 0 {
		m.sign, m.falls = -1, true
	}
	_, _, oneSided := m.ratings.Limit("vr")
	m.blocked = oneSided && faces != (m.sign > 0)
	m.evaluate(m.nominal())
}

// at works the oscillator out at one point of the box.
func (m *breakoverModel) at(x []float64) {
	s, mesh := &m.s, m.standing
	m.point = x
	mesh.polarity = 1
	mesh.load(x)
	if m.smooth != nil {
		m.smooth.load(mesh, x)
	}
	m.charging.draw(0)
	s.lower, s.upper = mesh.solver.Voltage(m.lowerNode), mesh.solver.Voltage(m.upper)
	s.standby = mesh.solver.Voltage(m.outletNode) - s.lower
	s.volts = x[m.vbo]
	if m.drift >= 0 {
		s.volts *= 1 + x[m.drift]*(x[m.ambient]-25)
	}
	m.outside(x)
	s.vp = s.volts + m.sign*s.standby
	if m.ibo >= 0 {
		s.vp += x[m.ibo] * (s.r1 + s.re)
	}
	if m.gate >= 0 {
		s.vp += x[m.gate]
	}
	if m.vf >= 0 {
		s.vv = min(x[m.vf], 0.9*s.vp)
	} else {
		s.vv = s.vp - x[m.swing]*s.volts
	}
	s.ip, s.iv = math.NaN(), math.NaN()
	if m.ibo >= 0 {
		s.ip = x[m.ibo]
	}
	if m.ih >= 0 {
		s.iv = x[m.ih]
	}
	s.c = m.caps.farads(x)
	s.drop, s.on = s.vv, x[m.on]
	if m.vo >= 0 {
		s.on *= 20 * max((s.vp-s.vv)/x[m.vo]-1, 0.05)
	}
	s.discharge = (s.on + s.r1 + s.re) * s.c * math.Log(s.vp/s.vv)
	s.leak = m.caps.leakage(x, s.vp)
	if m.line != nil {
		m.alternating(x)
	} else {
		m.direct(x)
	}
}

// leakRise is by how many degrees the leakage of the device doubles (MBS4991 sheet: 1 uA at
// 25, 10 uA at 85 deg C).
const leakRise = 18

// someLeak is a current in ampere that any board leaks: with nothing drawn at all, a
// rectifier neither leads nor blocks.
const someLeak = 1e-9

// leaking returns what the capacitors and the device lead away at the peak. Within
// the breakover current the device's share is counted already.
func (m *breakoverModel) leaking(x []float64) float64 {
	if m.idle < 0 {
		return m.s.leak
	}
	return m.s.leak + x[m.idle]*math.Exp2((x[m.ambient]-25)/leakRise)
}

// direct works out the charge from a dc supply.
func (m *breakoverModel) direct(x []float64) {
	s := &m.s
	peak, valley := s.lower+m.sign*s.vp, s.lower+m.sign*s.vv
	leak := m.leaking(x)
	if m.charging.bends {
		leak = max(leak, someLeak)
	}
	m.charging.draw(m.sign * leak)
	s.reach = m.sign * (m.standing.solver.Voltage(m.charging.node) - s.lower)
	p := m.charging.tangent(peak)
	s.vth, s.rth = p.vth, p.rth
	s.atPeak = m.sign * p.current(peak)
	s.atValley = m.sign * m.sourceAtBothEnds(valley)
	s.fires = s.atPeak > 0 && !m.blocked
	signed := s.cycle
	signed.vp, signed.vv, signed.atPeak = m.sign*s.vp, m.sign*s.vv, m.sign*s.atPeak
	if !s.fires {
		s.charge, s.period, s.ramp = math.Inf(1), math.Inf(1), 1
		return
	}
	s.charge, s.ramp = m.charging.time(&signed)
	s.ramp = straight(s.ramp)
	s.period = s.charge + s.discharge
}
