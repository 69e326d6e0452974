package operating

import (
	"fmt"
	"math"
	"strings"

	"standoff/netlist/circuit"
	"standoff/netlist/network"
	"standoff/netlist/part"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
)

// putModel is the relaxation oscillator around a programmable unijunction.
//
// Model. Charging network and gate divider are one network, reduced with the
// device off: to vth behind rth as the capacitor sees it, and to V_S behind R_G as
// the gate sees it. The device fires when the anode stands V_T above the gate:
//
//	v_P = V_S + V_T(R_G)
//
// with V_S as it is while the charging current flows (a soft supply sags for
// both). V_T, I_P and I_V of the sheet hold for gate resistances of its own; in
// between V_T goes straight and the currents go straight in logarithms over
// log R_G (ON Semiconductor 2N6027 data sheet, figures 8..10 are such lines). The
// period is
//
//	T = rth C ln((vth - v_V)/(vth - v_P)) + (R_on + R_K + R_A) C ln(v_P/v_V)
//
// Neglected: the gate current before firing (below I_P), and the charging current
// during the discharge. Units SI, temperatures deg C.
type putModel struct {
	relaxation
	vt     points // offset voltage
	ip, iv points
	vv, on int     // valley voltage, on-resistance (its share of the greatest where V_O is known)
	vo     int     // V_O of the sheet, -1 where unknown
	igao   int     // gate to anode leakage, -1 where unknown
	drift  int     // of the offset voltage
	valley float64 // the valley voltage before it is bounded by the peak
	gateOf []float64
	at0    putNodes
	pair   *pairFigures // of two crossed transistors, nil for a device
	s      putState
}

type putNodes struct{ gate, cathode, upper, lower network.Node }

type putState struct {
	cycle
	heat    float64
	gate    float64 // V_S over the lower rail, nothing drawn by the capacitor
	ohms    float64 // R_G
	vt      float64
	standby float64
	idle    float64 // vth over the lower rail with nothing drawn
}

// points are a figure of the sheet at one to three gate resistances, rising.
type points struct {
	ohms []float64
	at   []int // variables
	log  bool  // the figure goes straight in logarithms
	// anywhere says that the figure counts at any gate resistance: it is assumed.
	anywhere bool
}

// offsetDrift is the drift of the offset voltage V_T in V/K, that of a silicon
// junction (from memory).
const offsetDrift = -2e-3

// What stands in where the maker publishes nothing.
var (
	// assumedOffset is V_T of the 2N6027 at 10 kohm (its sheet: 0.2 .. 0.6 V).
	assumedOffset = quantity.Spread{Low: 0.2, Nominal: 0.35, High: 0.6}
	// assumedPUTOn is the resistance of a conducting PUT.
	assumedPUTOn = quantity.Spread{Low: 1, Nominal: 5, High: 45}
)

// leakDoubles is by how many degrees I_GAO doubles (2N6027 sheet: typically 1 nA at 25,
// 3 nA at 75 deg C).
const leakDoubles = 31.5

// leastOn is the least resistance that a conducting device is taken to have.
const leastOn = 0.5

// newPUT builds the model of a recognised oscillator. An error says why it
// cannot be computed.
func newPUT(w *circuit.Wiring, s *stage.Stage) (*putModel, error) {
	if s.Anchor.Ratings == nil && s.Partner == nil {
		return nil, fmt.Errorf("nothing is known of the part %s", partName(s.Anchor))
	}
	m := &putModel{relaxation: newRelaxation(w, s)}
	m.cycle, m.terminal, m.bentWindow = &m.s.cycle, "anode", true
	m.evaluate = m.at
	m.quietWorking = func() string { return "what flows through the divider to the cathode's resistor" }
	if s.Partner == nil {
		m.device()
	} else if err := m.crossedPair(); err != nil {
		return nil, err
	}
	for i := range m.box {
		m.box[i].Bends = true
	}
	if err := m.networks(); err != nil {
		return nil, err
	}
	// More resistance in the divider raises the peak and lowers the currents: what
	// hangs on both turns round inside.
	for _, e := range s.Parts[stage.GateDivider] {
		if slot, known := m.slots[e]; known {
			m.box[slot.index].Bends = true
		}
	}
	for i, t := range m.traits { // a diode behind the outlet lifts the valley
		if m.pulse.bends && strings.HasPrefix(t.name, "drop of ") {
			m.box[i].Bends = true
		}
	}
	m.evaluate(m.nominal())
	m.figures()
	m.limits()
	m.guideByGate()
	m.bendsKink()
	m.evaluate(m.nominal())
	if m.follows = m.s.vv > 0.5*m.s.vp; m.follows {
		m.scatter = scattered
	}
	return m, nil
}

// guideByGate has everything guided by the peak voltage and by R_G: where the
// valley would lie above the peak it follows it, and beyond the sheet's points a
// current stays where it is; only there, far from the nominal board, some
// variables count.
func (m *putModel) guideByGate() {
	for i := range m.outputs {
		o := &m.outputs[i]
		o.guide = o.name == "peak_voltage" || o.name == "gate_source_resistance"
		o.guided, o.kinked = !o.guide, !o.guide
	}
	for i := range m.contests {
		m.contests[i].guided, m.contests[i].kinked = true, true
	}
}

// device adds the figures of the device.
func (m *putModel) device() {
	r := m.ratings
	m.vt = m.points("vt", "V", "10k", "1meg")
	m.ip = m.points("ip", "A", "10k", "100k", "1meg")
	m.ip.log = true
	m.iv = m.points("iv", "A", "200", "10k", "100k", "1meg")
	m.iv.log = true
	if len(m.vt.at) == 0 {
		m.vt = anywhere(m.assumed("vt", "V", assumedOffset, "offset voltage not published, assumed"))
	}
	m.drift = m.add(trait{name: "vt_tc", unit: "V/K", memory: true, about: 1.5,
		note: "the drift of the offset voltage is from memory"}, quantity.Exact(offsetDrift))
	var ok bool
	if m.igao, ok = m.rating(r, "igao", "A"); !ok {
		m.igao = -1
	}
	m.leaks = ok
	forward := 1.5
	if v, _, ok := r.Limit("vf"); ok {
		forward = v
	}
	if m.vv, ok = m.rating(r, "vv", "V"); !ok {
		m.vv = m.assumed("vv", "V", quantity.Spread{Low: 0.5, Nominal: min(0.8, forward), High: forward},
			"valley voltage not published, assumed from 0.5 V to V_F")
	}
	m.onResistance()
}

// points adds a figure at those gate resistances at which the sheet guarantees
// it.
func (m *putModel) points(symbol, unit string, suffixes ...string) points {
	var p points
	for _, suffix := range suffixes {
		name := symbol + "_" + suffix
		if _, _, guaranteed := m.ratings.Limit(name); !guaranteed {
			continue
		}
		if i, ok := m.rating(m.ratings, name, unit); ok {
			p.ohms, p.at = append(p.ohms, sheetResistance(suffix)), append(p.at, i)
		}
	}
	return p
}

// anywhere makes points of one variable that counts at any gate resistance.
func anywhere(index int) points {
	return points{ohms: []float64{10e3}, at: []int{index}, anywhere: true}
}

// sheetResistance returns the gate resistance in ohm that a symbol's suffix means.
func sheetResistance(suffix string) float64 {
	switch suffix {
	case "10k":
		return 10e3
	case "100k":
		return 100e3
	case "1meg":
		return 1e6
	}
	return 200
}

// onResistance adds the resistance of the conducting device, read from the output
// voltage V_O of the sheet (0.2 uF on 20 V into 20 ohm) as R ((V - V_V)/V_O - 1). The
// capacitor of that circuit holds no more than the supply, whatever its divider:
// the least V_O gives the greatest resistance. The typical one is read with 13 V
// on the capacitor (divider of 27 and 16 kohm; from memory), and a quarter of that is
// assumed to be the least. The variable is the share of the greatest resistance.
func (m *putModel) onResistance() {
	const typical = 13
	least, mark, ok := m.ratings.Limit("vo")
	if m.vo = -1; !ok {
		m.on = m.assumed("ron", "ohm", assumedPUTOn, "on-resistance not published, assumed")
		return
	}
	t := trait{name: "vo", unit: "V"}
	if mark >= part.Memory {
		t.memory, t.note = true, fmt.Sprintf("vo of %s is from memory", m.ratings.Name)
	}
	m.vo = m.add(t, quantity.Exact(least))
	share, valley := 0.5, m.box[m.vv].Nominal
	if v, _, ok := m.ratings.Spread("vo"); ok && v.Nominal > least && v.Nominal < typical-valley {
		share = ((typical-valley)/v.Nominal - 1) / ((sheetVolts-valley)/least - 1)
	}
	m.on = m.add(trait{name: "ron_share", doubtLow: true,
		note: "least on-resistance assumed at a quarter of the typical one"},
		quantity.Spread{Low: share / 4, Nominal: share, High: 1})
	if f := m.ratings.Figures["vo"]; f.HasMin && f.HasMax && f.Min == f.Max {
		m.box[m.on].Low, m.box[m.on].Nominal = 1, 1
	}
}

// The sheet's circuit for V_O.
const sheetVolts, sheetLoad = 20, 20

// networks readies the standing mesh, what hangs on the cathode, and the
// capacitors.
func (m *putModel) networks() error {
	n := m.stage.Nodes
	series := m.stage.Parts[stage.EmitterSeries]
	var err error
	anchors := []circuit.NodeID{n["capacitor"], n["gate"], n["cathode"], n["upper"], n["lower"]}
	m.standing, err = newMesh(m.bench, anchors, func(e *circuit.Element) bool {
		return contains(series, e) || contains(m.stage.Apart, e)
	})
	if err != nil {
		return err
	}
	if err := m.readyToCharge(n["capacitor"]); err != nil {
		return err
	}
	m.outlet, m.share, m.pulseFarads = n["cathode"], m.on, 0
	for _, role := range [...]stage.Role{stage.TimingResistor, stage.GateDivider, stage.GateShunt} {
		m.keepOff = append(m.keepOff, m.stage.Parts[role]...)
	}
	if err := m.readyToEmpty(); err != nil {
		return err
	}
	at := m.standing.node
	m.at0 = putNodes{gate: at(n["gate"]), cathode: at(n["cathode"]), upper: at(n["upper"]),
		lower: at(n["lower"])}
	m.gateOf = make([]float64, m.standing.solver.Nodes())
	return m.capacitors(n["capacitor"])
}

// value returns the figure at a gate resistance. Beyond the sheet's points the
// last line is carried on, but never to the side that suits: greatest says that a
// greater value is the worse one.
func (p *points) value(x []float64, ohms float64, greatest bool) float64 {
	k := len(p.ohms)
	if k == 0 {
		return math.NaN()
	}
	if k == 1 || !(ohms > 0) || math.IsInf(ohms, 0) {
		return x[p.at[0]]
	}
	i := 1
	for i < k-1 && ohms > p.ohms[i] {
		i++
	}
	a, b := x[p.at[i-1]], x[p.at[i]]
	share := math.Log(ohms/p.ohms[i-1]) / math.Log(p.ohms[i]/p.ohms[i-1])
	v := a + share*(b-a)
	if p.log && a > 0 && b > 0 {
		v = a * math.Pow(b/a, share)
	}
	switch near := map[bool]float64{true: a, false: b}[share < 0]; {
	case share >= 0 && share <= 1:
		return v
	case greatest:
		return max(v, near)
	default:
		return min(v, near)
	}
}

// beyond reports whether a gate resistance lies outside the sheet's points, a
// tenth allowed; of a single point, whether it is another one.
func (p *points) beyond(ohms float64) bool {
	k := len(p.ohms)
	return k > 0 && !p.anywhere && (ohms < p.ohms[0]/1.1 || ohms > p.ohms[k-1]*1.1)
}

// at works the oscillator out at one point of the box.
func (m *putModel) at(x []float64) {
	s, n, mesh := &m.s, &m.at0, m.standing
	m.point = x
	s.heat = x[m.ambient] - 25
	mesh.load(x)
	m.charging.draw(0)
	s.lower, s.upper = mesh.solver.Voltage(n.lower), mesh.solver.Voltage(n.upper)
	s.idle = mesh.solver.Voltage(m.charging.node) - s.lower
	s.gate = mesh.solver.Voltage(n.gate) - s.lower
	s.standby = mesh.solver.Voltage(n.cathode) - s.lower
	mesh.solver.Transfer(n.gate, m.gateOf)
	s.ohms = m.gateOf[n.gate]
	if m.pair != nil {
		s.ip, s.vt = m.pair.peak(x)
	} else {
		s.ip = m.ip.value(x, s.ohms, true)
		s.vt = max(m.vt.value(x, s.ohms, true)+x[m.drift]*s.heat, 0)
	}
	peak := m.charging.meet(func() (float64, float64) {
		s.vth, s.rth = m.charging.thevenin()
		pull := m.charging.transfer[n.gate] / s.rth
		peak := (m.charging.idle(n.gate) + s.vt - pull*s.vth) / (1 - pull)
		return peak, (s.vth - peak) / s.rth
	})
	s.vp = peak - s.lower
	m.outside(x)
	m.valley = x[m.vv] + s.rise
	s.vv = min(m.valley, 0.9*s.vp) // a valley above the peak is no valley
	s.atPeak = (s.vth - peak) / s.rth
	s.atValley = m.whileOn(s.lower+s.vv, m.sourceAtBothEnds(s.lower+s.vv))
	s.fires = s.atPeak > 0 && s.vp > 0
	if s.iv = m.iv.value(x, s.ohms, false); m.pair != nil {
		s.iv = m.pair.valley(x)
	}
	s.c = m.caps.farads(x)
	m.path(x)
	s.leak = m.caps.leakage(x, s.vp)
	if m.igao >= 0 {
		s.leak += x[m.igao] * math.Exp2(s.heat/leakDoubles)
	}
	m.fill()
}

// whileOn returns the current that holds the device on at the valley, given the one
// with the device off there: a conducting device pulls its gate down, and with it
// what hangs between gate and anode and a soft rail. The gate is taken at the anode's
// voltage, the most that it can have.
func (m *putModel) whileOn(volts, off float64) float64 {
	gate, node, across := m.at0.gate, m.charging.node, m.charging.transfer
	m.standing.solver.Transfer(gate, m.gateOf)
	own := m.gateOf[gate]
	above := m.charging.idle(gate) - volts // of the open gate, nothing drawn
	if own <= 0 || above <= across[gate]*off {
		return off
	}
	ohms := across[node] - m.gateOf[node]*across[gate]/own
	if ohms <= 0 {
		return off
	}
	return (m.charging.idle(node) - volts - m.gateOf[node]*above/own) / ohms
}

// path works out the discharge: the drop of the conducting device, taken as the
// valley voltage, and the resistances.
func (m *putModel) path(x []float64) {
	s := &m.s
	s.on, s.drop = x[m.on], max(s.vv-s.rise, 0)
	if m.vo >= 0 {
		s.on = max(s.on*sheetLoad*((sheetVolts-x[m.vv])/x[m.vo]-1), leastOn)
	}
	s.discharge = (s.on + s.r1 + s.re) * s.c * math.Log(s.vp/s.vv)
}
