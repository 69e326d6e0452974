package operating

import (
	"fmt"
	"math"
	"slices"

	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
)

// pairFigures are a pnp and an npn, crossed, in place of a programmable unijunction.
//
// Model. Near the peak the pnp's collector current, all that the capacitor is given
// but for 1/gain, feeds the npn's base and the resistor R across its junction; the npn's
// collector current c pulls the gate down by c R_G. The pair snaps over where the gate
// falls as fast as the pnp's junction rises:
//
//	R_G c (c/B + V_X/R) = kT/q (c/B + kT/(q R)),  V_X = V_BE of the npn at c
//
// with B the gain of the npn; peak current (c/B + V_X/R + I_0)(1 + 1/gain of the pnp),
// where I_0 lets the gains rise to what they are; V_T = V_BE of the pnp at that current
// less c R_G, and its base current through R_G. Once on, the npn sinks I = V_S/R_G. The
// valley is where the pnp's junction falls as fast with the current as the saturation
// voltage of the npn rises (Ebers and Moll's law for it, reverse gain b):
//
//	I_V = I/B (1 + sqrt((1 + B/(1 + b))(1 + r)) + r)(1 + 1/gain of the pnp),  r = V_BE B/(R I)
//
// (all derived here; peak within a few per cent, valley within a half of the whole
// equations of Ebers and Moll.) V_BE counts as at 1 mA and follows the logarithm of the
// current. Units SI.
type pairFigures struct {
	m        *putModel
	pnp, npn int                       // V_BE
	up, down int                       // gains of the pnp and of the npn
	reverse  int                       // reverse gain of the npn
	start    int                       // I_0
	across   func(x []float64) float64 // R, nil for none
}

// Figures that nobody publishes for a crossed pair.
var (
	assumedPairStart  = quantity.Spread{Low: 50e-9, Nominal: 200e-9, High: 1e-6}
	assumedPairValley = quantity.Spread{Low: 0.6, Nominal: 0.8, High: 1}
	assumedReverse    = quantity.Spread{Low: 0.5, Nominal: 4, High: 20}
	assumedPairOn     = quantity.Spread{Low: 1, Nominal: 5, High: 30}
)

// crossedPair adds the figures of the two transistors.
func (m *putModel) crossedPair() error {
	pnp, npn := m.stage.Anchor, m.stage.Partner
	m.pair = &pairFigures{m: m, up: m.gain(pnp), pnp: m.baseEmitter(pnp), npn: m.baseEmitter(npn),
		down: m.gain(npn)}
	m.vt = anywhere(m.pair.pnp)
	m.pair.reverse = m.reverse(npn)
	m.pair.start = m.assumed("I_0", "A", assumedPairStart,
		"current at which the gains reach one together, assumed")
	m.vv = m.assumed("vv", "V", assumedPairValley, "valley voltage of a crossed pair, assumed")
	m.on = m.assumed("ron", "ohm", assumedPairOn, "on-resistance of a crossed pair, assumed")
	m.igao, m.vo = -1, -1
	var err error
	m.pair.across, err = m.setting(m.diverting(), m.stage.Nodes["diverted"])
	return err
}

// diverting lists the resistors across the base of the npn; one across the pnp's lies
// in the charging network.
func (m *putModel) diverting() []*circuit.Element {
	gate := m.w.Net(m.stage.Nodes["gate"])
	return slices.DeleteFunc(slices.Clone(m.stage.Parts[stage.GateShunt]), func(e *circuit.Element) bool {
		return m.w.Net(e.Nodes[0]) == gate || m.w.Net(e.Nodes[1]) == gate
	})
}

// reverse adds the reverse gain: half to twice the card's br, else assumed.
func (m *putModel) reverse(e *circuit.Element) int {
	name := "reverse gain of " + e.Designator
	if v, ok := cardSpread(e, "br"); ok && v.Nominal > 0 {
		return m.assumed(name, "", quantity.Spread{Low: v.Nominal / 2, Nominal: v.Nominal, High: 2 * v.Nominal},
			"half to twice the card's, assumed")
	}
	return m.assumed(name, "", assumedReverse, "assumed")
}

// kelvin is 25 deg C in kelvin, boltzmann the constant over the charge of the electron
// in V/K.
const kelvin, boltzmann = 298.15, 8.617e-5

// junction returns a base-emitter voltage at a current; kT/q is given.
func (p *pairFigures) junction(x []float64, which int, amperes, thermal float64) float64 {
	return x[which] + diodeDrift*p.m.s.heat + thermal*math.Log(amperes/1e-3)
}

// conductance returns 1/R of what lies across the base of the npn.
func (p *pairFigures) conductance(x []float64) float64 {
	if p.across == nil {
		return 0
	}
	return 1 / p.across(x)
}

// peak returns peak current and offset voltage at a point; R_G is known.
func (p *pairFigures) peak(x []float64) (amperes, offset float64) {
	s := &p.m.s
	thermal, g, ohms, gain := boltzmann*(kelvin+s.heat), p.conductance(x), max(s.ohms, 1), x[p.down]
	volts, sunk := 0.45, 0.0
	for range 4 { // V_X depends on the sunk current by its logarithm only
		half := (ohms*volts*g - thermal/gain) / 2
		sunk = (math.Sqrt(half*half+ohms/gain*thermal*thermal*g) - half) * gain / ohms
		volts = max(p.junction(x, p.npn, sunk, thermal), thermal)
	}
	amperes = (sunk/gain + volts*g + x[p.start]) * (1 + 1/x[p.up])
	offset = p.junction(x, p.pnp, amperes, thermal) - ohms*(sunk-amperes/(1+x[p.up]))
	return amperes, max(offset, 0)
}

// valley returns the valley current at a point; V_S and R_G are known.
func (p *pairFigures) valley(x []float64) float64 {
	s := &p.m.s
	thermal, gain := boltzmann*(kelvin+s.heat), x[p.down]
	sunk := max(s.gate, thermal) / max(s.ohms, 1)
	diverted := max(p.junction(x, p.npn, sunk, thermal), 0) * p.conductance(x) * gain / sunk
	spread := math.Sqrt((1 + gain/(1+x[p.reverse])) * (1 + diverted))
	return sunk / gain * (1 + spread + diverted) * (1 + 1/x[p.up])
}

// working says how a current of the pair comes about.
func (p *pairFigures) working(which string) string {
	if which == "peak" {
		return fmt.Sprintf("where the gate falls as fast as the junction of the pnp rises, R_G = %s",
			show(p.m.s.ohms, "ohm"))
	}
	return fmt.Sprintf("where the npn, which sinks V_S/R_G = %s/%s, begins to come out of saturation",
		show(p.m.s.gate, "V"), show(p.m.s.ohms, "ohm"))
}
