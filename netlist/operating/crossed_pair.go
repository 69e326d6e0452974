package operating

import (
	"fmt"
	"slices"

	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
)

// pairFigures are a pnp and an npn, crossed, in place of a programmable unijunction.
//
// Model. The pnp turns on V_BE above the gate. The npn follows when the pnp's
// collector current exceeds what the resistor across its base takes; until then the
// capacitor has to deliver
//
//	I_P = (I_0 + V_BE/R_BE) (1 + 1/gain_pnp)
//
// with I_0 of a few hundred nanoamperes for the gains to reach one together. Once on,
// the pair lets go when the npn can no longer sink what the divider delivers:
//
//	I_V = (V_S/(R_G gain_npn) + V_BE/R_BE) (1 + 1/gain_pnp)
//
// (both derived here from the transistors' node equations; I_0 from memory). Units SI.
type pairFigures struct {
	m        *putModel
	vbe      int                       // of the npn
	up, down int                       // gains of the pnp and of the npn
	start    int                       // I_0
	across   func(x []float64) float64 // R_BE, nil for none
}

// Figures that nobody publishes for a crossed pair.
var (
	assumedPairStart  = quantity.Spread{Low: 50e-9, Nominal: 200e-9, High: 1e-6}
	assumedPairValley = quantity.Spread{Low: 0.6, Nominal: 0.8, High: 1}
	assumedPairOn     = quantity.Spread{Low: 1, Nominal: 5, High: 30}
)

// crossedPair adds the figures of the two transistors.
func (m *putModel) crossedPair() error {
	pnp, npn := m.stage.Anchor, m.stage.Partner
	m.vt = anywhere(m.baseEmitter(pnp))
	m.pair = &pairFigures{m: m, up: m.gain(pnp), vbe: m.baseEmitter(npn), down: m.gain(npn)}
	m.pair.start = m.assumed("I_0", "A", assumedPairStart, "current at which the gains reach one together, assumed")
	m.vv = m.assumed("vv", "V", assumedPairValley, "valley voltage of a crossed pair, assumed")
	m.on = m.assumed("ron", "ohm", assumedPairOn, "on-resistance of a crossed pair, assumed")
	m.igao, m.vo = -1, -1
	m.drift = m.add(trait{name: "vbe_tc", unit: "V/K"}, quantity.Exact(diodeDrift))
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

// currents returns peak and valley current at a point; V_S and R_G are known.
func (p *pairFigures) currents(x []float64) (peak, valley float64) {
	s := &p.m.s
	diverted := 0.0
	if p.across != nil {
		diverted = (x[p.vbe] + diodeDrift*s.heat) / p.across(x)
	}
	base := 1 + 1/x[p.up]
	return (x[p.start] + diverted) * base, (s.gate/(s.ohms*x[p.down]) + diverted) * base
}

// pairWorking says how a current of the pair comes about.
func (p *pairFigures) working(which string) string {
	if which == "peak" {
		return "(I_0 + V_BE/R_BE) (1 + 1/gain of the pnp)"
	}
	return fmt.Sprintf("(V_S/(R_G gain of the npn) + V_BE/R_BE) (1 + 1/gain of the pnp), V_S = %s, R_G = %s",
		show(p.m.s.gate, "V"), show(p.m.s.ohms, "ohm"))
}
