package operating

import (
	"fmt"
	"math"

	"standoff/netlist/circuit"
)

// limits lists the comparisons. The nominal board was evaluated last.
func (m *putModel) limits() {
	if m.pair != nil {
		m.windowLimits("", "")
		m.dividerLimits()
		m.targetLimits()
		return
	}
	if !m.promises(&m.iv) {
		m.iv = points{} // nothing is promised there
		m.evaluate(m.nominal())
	}
	m.windowLimits("", "")
	m.derated()
	m.dividerLimits()
	m.ratingLimits()
	m.targetLimits()
	m.withinTheSheet()
}

// derated holds the valley current against its derating for heat as well.
func (m *putModel) derated() {
	if len(m.iv.at) == 0 || m.isOneShot() {
		return
	}
	s := &m.s
	m.compare(contest{name: "charging_current_at_valley_derated", limitName: "valley_current_available",
		unit: "A", bound: Max, bent: true, value: func() float64 { return s.atValley },
		limit:   func() float64 { return s.iv * hotValley(s.heat) },
		because: "the derating of I_V for heat is from memory", working: m.valleyWorking})
}

// withinTheSheet makes doubts of verdicts that rest on a figure beyond the sheet's
// gate resistances, on the board where they fall.
func (m *putModel) withinTheSheet() {
	for i := range m.contests {
		c := &m.contests[i]
		switch c.name {
		case "charging_current_at_peak", "charging_current_after_leakage":
			c.there = m.beyond(&m.ip, "peak current")
		case "charging_current_at_valley", "charging_current_at_valley_derated":
			c.there = m.beyond(&m.iv, "valley current")
		case "frequency_lowest", "frequency_highest", "period_shortest", "period_longest":
			c.there = m.beyond(&m.vt, "offset voltage")
		}
	}
}

// beyond says why a verdict on a figure is no more than a doubt at the last evaluated
// point, "" where nothing does.
func (m *putModel) beyond(p *points, what string) func() string {
	return func() string {
		if !p.beyond(m.s.ohms) {
			return ""
		}
		return fmt.Sprintf("the sheet gives no %s at a gate resistance of %s", what, show(m.s.ohms, "ohm"))
	}
}

// reach is how far, as a factor, beyond the last gate resistance at which a least
// valley current is guaranteed it is still estimated.
const reach = 3

// promises reports whether anything can be said of the valley current: above the
// last point with a guaranteed least value it falls further, and nobody says how far.
func (m *putModel) promises(p *points) bool {
	k := len(p.ohms)
	return k > 1 && m.s.ohms <= p.ohms[k-1]*reach || k == 1 && m.s.ohms <= p.ohms[0]*1.1
}

// dividerLimits hold the gate divider against what makes a stage of it.
func (m *putModel) dividerLimits() {
	s := &m.s
	working := func() string {
		return fmt.Sprintf("V_S = %s behind R_G = %s, supply %s", show(s.gate, "V"), show(s.ohms, "ohm"),
			show(s.upper-s.lower, "V"))
	}
	m.compare(contest{name: "divider_gate_voltage", limitName: "nothing", unit: "V", bound: Min,
		value: func() float64 { return s.gate }, limit: func() float64 { return noLift }, working: working})
	m.compare(contest{name: "divider_peak_voltage", limitName: "charging_voltage", unit: "V", bound: Max,
		value: func() float64 { return s.gate + s.vt }, limit: func() float64 { return s.idle }, working: working})
	m.compare(contest{name: "divider_least_voltage", limitName: "valley_voltage", unit: "V", bound: Min,
		value: func() float64 { return s.vp / 0.9 }, limit: func() float64 { return m.valley }, working: working})
	low, high := math.Inf(1), 0.0
	for _, p := range []*points{&m.vt, &m.ip, &m.iv} {
		if p.anywhere {
			continue
		}
		for _, r := range p.ohms {
			low, high = min(low, r), max(high, r)
		}
	}
	if m.pair != nil || high <= low {
		return
	}
	because := "outside the gate resistances of the sheet nothing is published"
	ohms := func() float64 { return s.ohms }
	m.compare(contest{name: "gate_source_resistance_least", limitName: "sheet_least", unit: "ohm", bound: Min,
		because: because, surely: -1, value: ohms, limit: func() float64 { return low / 1.1 }, working: working})
	m.compare(contest{name: "gate_source_resistance_greatest", limitName: "sheet_greatest", unit: "ohm",
		bound: Max, because: because, value: ohms, limit: func() float64 { return high * 1.1 }, working: working})
}

// noLift is a gate voltage in volt that is none: nothing lifts the gate.
const noLift = 1e-3

// ratingLimits hold the device against its ratings.
func (m *putModel) ratingLimits() {
	s := &m.s
	add := func(name, symbol, unit string, value func() float64, working func() string) {
		if limit, mark, ok := m.rated(symbol); ok {
			m.compare(contest{name: name, limitName: symbol, unit: unit, bound: Max, value: value, limit: limit,
				limitMark: mark, working: working})
		}
	}
	gate := func() string {
		return fmt.Sprintf("V_S = %s, cathode at %s", show(s.gate, "V"), show(s.standby, "V"))
	}
	add("discharge_peak_current", "itrm", "A", m.surge, m.surgeWorking)
	add("capacitor_energy", "energy", "J", m.energy, func() string {
		return fmt.Sprintf("%s at %s", show(s.c, "F"), show(s.vp, "V"))
	})
	add("gate_forward_voltage", "vgkf", "V", func() float64 { return s.gate - s.standby }, gate)
	add("gate_anode_voltage", "vgar", "V", func() float64 { return s.gate }, gate)
	add("anode_voltage", "vak", "V", func() float64 { return s.vp - s.standby }, m.peakWorking)
	add("gate_reverse_voltage_standby", "vgkr", "V", func() float64 { return max(s.standby-s.gate, 0) }, gate)
	if len(m.stage.Pullers) > 0 {
		add("gate_reverse_voltage", "vgkr", "V", m.cathodePulse, m.surgeWorking)
		m.contests[len(m.contests)-1].because = "at what moment " + m.stage.Pullers[0].Designator +
			" pulls the gate down is not worked out"
	}
}

// cathodePulse returns how high the cathode rises over the lower rail.
func (m *putModel) cathodePulse() float64 { return m.surge()*m.s.r1 + m.s.rise }

// unchecked lists the rules that a missing rating keeps from being judged.
func (m *putModel) unchecked() []Unchecked {
	var list []Unchecked
	if m.pair != nil {
		if m.isOneShot() {
			list = append(list, Unchecked{"timing-current-above-valley", oneShotNote})
		}
		return append(list, Unchecked{"emitter-surge-current", "no rating of the crossed transistors is known"},
			Unchecked{"put-gate-voltage", m.reverseNote()})
	}
	if note := m.recoveryNote(); note != "" {
		list = append(list, Unchecked{"", note})
	}
	if len(m.ip.at) == 0 {
		list = append(list, Unchecked{"timing-current-below-peak", missing("peak current", m.ratings)})
	}
	if m.isOneShot() {
		list = append(list, Unchecked{"timing-current-above-valley", oneShotNote})
	} else if len(m.iv.at) == 0 {
		list = append(list, Unchecked{"timing-current-above-valley",
			fmt.Sprintf("no least valley current of %s is guaranteed at a gate resistance of %s", m.ratings.Name,
				show(m.s.ohms, "ohm"))})
	}
	for _, need := range []struct{ symbol, rule, what string }{
		{"itrm", "emitter-surge-current", "repetitive peak current rating"},
		{"energy", "timing-capacitor-large", "capacitor energy rating"},
		{"vgkf", "put-gate-voltage", "gate to cathode voltage rating"},
		{"vgar", "put-gate-voltage", "gate to anode voltage rating"},
		{"vak", "put-gate-voltage", "anode to cathode voltage rating"},
	} {
		if _, _, ok := m.ratings.Limit(need.symbol); !ok {
			list = append(list, Unchecked{need.rule, missing(need.what, m.ratings)})
		}
	}
	return list
}

// reverseNote says what the junction of a pair's pnp has to stand; the limit of 5 V is
// common practice, no source.
func (m *putModel) reverseNote() string {
	m.evaluate(m.nominal())
	return fmt.Sprintf("no rating of the crossed transistors is known; while the capacitor is empty %s stand "+
		"in reverse across base and emitter of %s, of which common small transistors take about 5 V", show(m.s.gate, "V"),
		m.stage.Anchor.Designator)
}

// recovers is the share of a period within which the gate has to be back.
const recovers = 0.02

// recoveryNote names capacitors on the gate that are slow to come back after each pulse,
// "" where none is.
func (m *putModel) recoveryNote() string {
	m.evaluate(m.nominal())
	farads, names := 0.0, ""
	gate := m.w.Net(m.stage.Nodes["gate"])
	for _, p := range m.w.On(gate) {
		if e := p.Element; e.Kind == circuit.Capacitor && m.w.Net(e.Nodes[0]) != m.w.Net(e.Nodes[1]) {
			farads, names = farads+e.Value.Nominal, joinWords(names, e.Designator)
		}
	}
	if farads*m.s.ohms <= recovers*m.s.period {
		return ""
	}
	return fmt.Sprintf("%s at the gate comes back with a time constant of %s after each pulse, the period is %s; "+
		"what that does to the rate is not worked out", names, show(farads*m.s.ohms, "s"), show(m.s.period, "s"))
}

func joinWords(a, b string) string {
	if a == "" {
		return b
	}
	return a + ", " + b
}
