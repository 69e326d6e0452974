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

// emitterDrift is the drift of the emitter diode in V/K. Source: 2N5431 data
// sheet, emitter diode about -2.5 mV per degree.
const emitterDrift = -2.5e-3

// What stands in where the maker publishes nothing; findings that rest on it
// are doubts.
var (
	// assumedValley is the emitter voltage at which conduction ends.
	assumedValley = quantity.Spread{Low: 1, Nominal: 2, High: 3.5}
	// assumedDrop is the drop of the emitter diode at 25 deg C.
	assumedDrop = quantity.Spread{Low: 0.45, Nominal: 0.5, High: 0.7}
	// assumedBar is the interbase resistance, the span of the common types.
	assumedBar = quantity.Spread{Low: 4e3, Nominal: 7e3, High: 12e3}
	// assumedOn is the resistance emitter to base one during the discharge.
	assumedOn = quantity.Spread{Low: 10, Nominal: 80, High: 150}
)

// ujtModel is the relaxation oscillator around a unijunction transistor.
//
// Model. The charging network is reduced to a source vth behind rth as the
// capacitor sees it, with the bar (interbase resistance) in its place between
// the bases and the emitter open. The transistor fires when the emitter stands
// one diode drop above the tap of the bar:
//
//	v_P = V_D + v_B1 + eta (v_B2 - v_B1)
//
// (for a stiff supply V_D + V1 (eta R_BB + R_B1)/(R_BB + R_B1 + R_B2); Boylestad
// and Nashelsky, Electronic Devices and Circuit Theory, ex. 17.1, with R_B2 in
// the divider as in Mehta, Principles of Electronics, ex. 21.11). The period is
//
//	T = rth C ln((vth - v_V)/(vth - v_P)) + (R_on + R_B1 + R_E) C ln(v_P/v_V)
//
// (Boylestad eq. 17.13 and the discharge below it). Neglected: the charging
// current during the discharge (below 1 % of it in any stage that keeps
// running) and the emitter leakage before firing, which only helps to charge.
// Units SI, temperatures deg C.
type ujtModel struct {
	relaxation // standing: emitter open, bar in place
	bar        network.Branch
	v          ujtVariables
	s          ujtState
	at0        ujtNodes
	sheet      ujtSheet
}

// ujtNodes are the solver's nodes, looked up once.
type ujtNodes struct{ base1, base2, upper, lower network.Node }

// ujtSheet are the test conditions of the sheet, looked up once; 0 where a
// current holds as it stands.
type ujtSheet struct{ ipVBB, ivVBB, rb1, volts, farads, power, slope float64 }

// ujtVariables are the indices of the device's own variables, -1 where unknown.
type ujtVariables struct {
	eta, rbb, tc, vd, vv, ip, iv int
	vob1, on                     int // lowest guaranteed pulse; share of the highest on-resistance
}

// ujtState is the stage worked out at one point.
type ujtState struct {
	cycle
	heat         float64 // ambient over 25 deg C
	eta, rbb, vd float64
	b1, b2       float64 // bases when it fires
	standby      float64 // base one over the lower rail, emitter open
}

// newUJT builds the model of a recognised oscillator. An error says why it
// cannot be computed.
func newUJT(w *circuit.Wiring, s *stage.Stage) (*ujtModel, error) {
	r := s.Anchor.Ratings
	if r == nil {
		return nil, fmt.Errorf("nothing is known of the part %s", partName(s.Anchor))
	}
	m := &ujtModel{relaxation: newRelaxation(w, s)}
	m.cycle, m.terminal = &m.s.cycle, "emitter"
	m.evaluate = m.at
	m.quietWorking = func() string {
		return fmt.Sprintf("bar of %s from a rail of %s", show(m.s.rbb, "ohm"), show(m.s.upper-m.s.lower, "V"))
	}
	if err := m.device(); err != nil {
		return nil, err
	}
	if err := m.networks(); err != nil {
		return nil, err
	}
	m.figures()
	m.limits()
	m.bendsKink()
	return m, nil
}

func partName(e *circuit.Element) string {
	if e.PartName == "" {
		return e.Designator
	}
	return e.PartName
}

// device adds the transistor's own variables.
func (m *ujtModel) device() error {
	var ok bool
	r := m.ratings
	m.sheet = ujtSheet{ipVBB: m.condition("ip_vbb", 0), ivVBB: m.condition("iv_vbb", 0), rb1: m.condition("vob1_rb1", 20),
		volts: m.condition("vob1_v", 20), farads: m.condition("vob1_c", 0.2e-6)}
	m.sheet.power, _, _ = r.Limit("pd")
	m.sheet.slope, _, _ = r.Limit("pd_slope")
	if m.v.eta, ok = m.rating(r, "eta", ""); !ok {
		return fmt.Errorf("the stand-off ratio of %s is unknown", r.Name)
	}
	if m.v.rbb, ok = m.rating(r, "rbb", "ohm"); !ok {
		m.v.rbb = m.assumed("rbb", "ohm", assumedBar, "interbase resistance not published, assumed")
	}
	if m.v.tc, ok = m.rating(r, "rbb_tc", "1/K"); !ok {
		m.v.tc = -1
	}
	if m.v.vd, ok = m.rating(r, "vd", "V"); !ok {
		m.v.vd = m.assumed("vd", "V", assumedDrop, "emitter diode drop not published, assumed")
	}
	if m.v.vv, ok = m.rating(r, "vv", "V"); !ok {
		m.v.vv = m.assumed("vv", "V", assumedValley, "valley voltage not published, assumed")
	}
	if m.v.ip, ok = m.rating(r, "ip", "A"); !ok {
		m.v.ip = -1
	}
	if m.v.iv, ok = m.rating(r, "iv", "A"); !ok {
		m.v.iv = -1
	}
	m.onResistance()
	for i := range m.box { // the transistor's own variables
		m.box[i].Bends = true
	}
	return nil
}

// onResistance adds what is known of the emitter's resistance when it conducts.
//
// The guaranteed base-one pulse V_OB1 in the maker's circuit (capacitor, load
// and supply as stated with the figure; 0.2 uF, 20 ohm, 20 V by custom) is read
// as a resistance: R_on = R_load (V_P/V_OB1 - 1). The least pulse gives the
// greatest resistance, guaranteed; the typical one the nominal resistance; a
// quarter of that is assumed to be the least, since no maker limits the pulse
// upwards. The variable is the share of the greatest resistance.
func (m *ujtModel) onResistance() {
	m.v.vob1, m.v.on = -1, -1
	least, mark, ok := m.ratings.Limit("vob1")
	if !ok {
		m.v.on = m.assumed("ron", "ohm", assumedOn, "on-resistance not published, assumed")
		return
	}
	t := trait{name: "vob1", unit: "V"}
	if mark >= part.Memory {
		t.memory, t.note = true, fmt.Sprintf("vob1 of %s is from memory", m.ratings.Name)
	}
	m.v.vob1 = m.add(t, quantity.Exact(least))
	share := 0.6
	if s, _, ok := m.ratings.Spread("vob1"); ok && s.Nominal > least {
		eta, _, _ := m.ratings.Spread("eta")
		full := m.testPeak(eta.Nominal)
		share = (full/s.Nominal - 1) / (full/least - 1)
	}
	m.v.on = m.add(trait{name: "ron_share", doubtLow: true,
		note: "least on-resistance assumed at a quarter of the typical one"},
		quantity.Spread{Low: 0.25 * share, Nominal: share, High: 1})
	if m.isExact("vob1") {
		m.box[m.v.on].Low, m.box[m.v.on].Nominal = 1, 1
	}
}

// isExact reports whether a rating was given as one exact value.
func (m *ujtModel) isExact(symbol string) bool {
	f, ok := m.ratings.Figures[symbol]
	return ok && f.HasMin && f.HasMax && f.Min == f.Max
}

// testPeak returns the peak voltage in the maker's V_OB1 circuit.
func (m *ujtModel) testPeak(eta float64) float64 {
	return eta*m.sheet.volts + assumedDrop.Nominal
}

// condition returns a test condition or its customary value.
func (m *ujtModel) condition(symbol string, custom float64) float64 {
	if v, ok := m.ratings.Test(symbol); ok {
		return v
	}
	return custom
}

// networks readies the two meshes and the capacitor network.
func (m *ujtModel) networks() error {
	n := m.stage.Nodes
	anchors := []circuit.NodeID{n["capacitor"], n["base1"], n["base2"], n["upper"], n["lower"]}
	series := m.stage.Parts[stage.EmitterSeries]
	var err error
	m.standing, err = newMesh(m.bench, anchors, func(e *circuit.Element) bool {
		return contains(series, e) || contains(m.stage.Apart, e)
	})
	if err != nil {
		return err
	}
	m.bar = m.standing.resistor(m.standing.node(n["base2"]), m.standing.node(n["base1"]))
	if err = m.readyToCharge(n["capacitor"]); err != nil {
		return err
	}
	m.pulseFarads, m.share, m.outlet, m.keepOff = m.sheet.farads, m.v.on, n["base1"], m.awayFromBaseOne()
	if err := m.readyToEmpty(); err != nil {
		return err
	}
	m.at0 = ujtNodes{base1: m.standing.node(n["base1"]), base2: m.standing.node(n["base2"]),
		upper: m.standing.node(n["upper"]), lower: m.standing.node(n["lower"])}
	return m.capacitors(n["capacitor"])
}

// awayFromBaseOne lists what the pulse does not flow through although a rail
// leads there.
func (m *ujtModel) awayFromBaseOne() []*circuit.Element {
	return append(append([]*circuit.Element{}, m.stage.Parts[stage.TimingResistor]...), m.stage.Parts[stage.BaseTwo]...)
}

func contains(list []*circuit.Element, e *circuit.Element) bool {
	for _, x := range list {
		if x == e {
			return true
		}
	}
	return false
}

// at works the oscillator out at one point of the box.
func (m *ujtModel) at(x []float64) {
	s := &m.s
	m.point = x
	s.heat = x[m.ambient] - 25
	s.eta = x[m.v.eta]
	s.rbb = x[m.v.rbb]
	if m.v.tc >= 0 {
		s.rbb *= 1 + x[m.v.tc]*s.heat
	}
	s.vd = x[m.v.vd] + emitterDrift*s.heat
	m.solveStanding(x)
	s.c = m.caps.farads(x)
	m.currents(x)
	m.path(x)
	m.times()
	s.leak = m.caps.leakage(x, s.vp)
}

// solveStanding reduces the charging network and finds the peak voltage. With
// an emitter current j out of the network into the capacitor every potential is
// linear in j as long as the diodes stay on their segments, so that the firing
// condition is one linear equation, also where the supply is soft and the
// charging current moves the bases. Where diodes or transistors charge, that is
// repeated from the current found until it stays.
func (m *ujtModel) solveStanding(x []float64) {
	s, n := &m.s, &m.at0
	mesh := m.standing
	mesh.load(x)
	mesh.solver.Values[m.bar] = s.rbb
	m.charging.draw(0)
	s.lower, s.upper = mesh.solver.Voltage(n.lower), mesh.solver.Voltage(n.upper)
	s.standby = mesh.solver.Voltage(n.base1) - s.lower
	peak := m.charging.meet(func() (float64, float64) {
		t := m.charging.transfer
		b1, b2 := m.charging.idle(n.base1), m.charging.idle(n.base2)
		s.vth, s.rth = m.charging.thevenin()
		pull := ((1-s.eta)*t[n.base1] + s.eta*t[n.base2]) / s.rth
		peak := (s.vd + (1-s.eta)*b1 + s.eta*b2 - pull*s.vth) / (1 - pull)
		j := (s.vth - peak) / s.rth
		s.b1, s.b2 = b1-t[n.base1]*j, b2-t[n.base2]*j
		return peak, j
	})
	s.vp = peak - s.lower
	// A valley above nine tenths of the peak is no valley: the assumed figure
	// then is too high for this supply.
	s.vv = min(x[m.v.vv], 0.9*s.vp)
	s.atPeak = (s.vth - peak) / s.rth
	s.atValley = m.sourceAtBothEnds(s.lower + s.vv)
	s.fires = s.atPeak > 0
}

// currents carries the sheet's peak and valley currents over to this bar
// voltage, on the safe side: I_P (V_ref/V_BB)^1.3 below the sheet's voltage
// (2N5431 is specified at 25 V and at 4 V: exponent 1.26), I_V V_BB/V_ref below
// the sheet's voltage; unchanged above. Without a test condition a current is
// taken as it stands.
func (m *ujtModel) currents(x []float64) {
	s := &m.s
	vbb := s.b2 - s.b1
	s.ip, s.iv = math.NaN(), math.NaN()
	if m.v.ip >= 0 {
		s.ip = x[m.v.ip]
		if at := m.sheet.ipVBB; vbb < at && vbb > 0 {
			s.ip *= math.Exp(1.3 * math.Log(at/vbb))
		}
	}
	if m.v.iv >= 0 {
		s.iv = x[m.v.iv]
		if at := m.sheet.ivVBB; vbb < at {
			s.iv *= max(vbb, 0) / at
		}
	}
}

// path works out the resistance of the discharge.
func (m *ujtModel) path(x []float64) {
	s := &m.s
	s.on = x[m.v.on]
	if m.v.vob1 >= 0 {
		s.on *= m.sheet.rb1 * max(m.testPeak(s.eta)/x[m.v.vob1]-1, 0)
	}
	m.outside(x)
}

// noPath is a resistance in ohm above which no dc path is said to exist.
const noPath = 1e9

// times works out the period. A stage that never fires has an infinite one.
func (m *ujtModel) times() {
	s := &m.s
	s.discharge = (s.on + s.r1 + s.re) * s.c * math.Log(s.vp/s.vv)
	m.fill()
}
