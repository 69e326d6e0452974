package operating

import (
	"fmt"
	"math"
)

// figures lists what a worksheet shows of the oscillator.
func (m *putModel) figures() {
	s := &m.s
	m.figure("supply_voltage", "V", func() float64 { return s.upper - s.lower }, func() string {
		return fmt.Sprintf("upper rail %s less lower rail %s", show(s.upper, "V"), show(s.lower, "V"))
	})
	m.figure("gate_voltage", "V", func() float64 { return s.gate }, func() string {
		return "V_S, the gate's open-circuit voltage over the lower rail"
	})
	m.figure("stand_off_ratio", "", m.ratio, func() string { return "V_S over the supply" })
	m.figure("gate_source_resistance", "ohm", func() float64 { return s.ohms }, func() string {
		return "R_G, the resistance of the divider as the gate sees it"
	})
	m.figure("offset_voltage", "V", func() float64 { return s.vt }, func() string {
		if m.pair != nil {
			return "V_BE of the pnp"
		}
		return fmt.Sprintf("V_T at R_G = %s, straight over log R_G between the sheet's points, -2 mV/K (memory)", show(s.ohms, "ohm"))
	})
	m.figure("peak_voltage", "V", func() float64 { return s.vp }, func() string {
		return fmt.Sprintf("V_P = V_S + V_T = %s + %s", show(s.vp-s.vt, "V"), show(s.vt, "V"))
	})
	m.figure("valley_voltage", "V", func() float64 { return s.vv }, func() string {
		return "anode voltage at which the discharge ends"
	})
	if m.pair != nil {
		m.windowFigures(func() string { return m.pair.working("peak") }, func() string { return m.pair.working("valley") })
	} else {
		m.windowFigures(func() string { return m.carried("I_P", &m.ip) }, func() string { return m.carried("I_V", &m.iv) })
	}
	m.timeFigures("T = R_th C ln((V_th - V_V)/(V_th - V_P)) + (R_on + R_K + R_A) C ln(V_P/V_V)")
	m.figure("cathode_standby_voltage", "V", func() float64 { return s.standby }, func() string {
		return "cathode over the lower rail before the pulse"
	})
	m.figure("discharge_peak_current", "A", m.surge, m.surgeWorking)
	m.figure("capacitor_energy", "J", m.energy, func() string { return "C V_P^2/2" })
	m.figure("device_power", "W", m.power, func() string { return "C (V_P^2 - V_V^2) f/2, an upper bound: part of it goes into resistors" })
	m.last().gated = true
	m.last().bent = true // a higher peak stores more energy and comes less often
}

func (m *putModel) ratio() float64 {
	if m.s.upper == m.s.lower {
		return math.NaN()
	}
	return m.s.gate / (m.s.upper - m.s.lower)
}

func (m *putModel) carried(name string, p *points) string {
	switch {
	case len(p.at) == 0:
		return name + " is not published"
	case len(p.at) == 1:
		return fmt.Sprintf("%s of the sheet at R_G = %s", name, show(p.ohms[0], "ohm"))
	}
	how := "straight in logarithms between"
	if p.beyond(m.s.ohms) {
		how = "which lies beyond"
	}
	return fmt.Sprintf("%s at R_G = %s, %s the sheet's points at %s and %s", name,
		show(m.s.ohms, "ohm"), how, show(p.ohms[0], "ohm"), show(p.ohms[len(p.ohms)-1], "ohm"))
}

// surge returns the greatest anode current, limited by resistance alone.
func (m *putModel) surge() float64 {
	s := &m.s
	return (s.vp - s.drop - s.rise) / (s.on + s.r1 + s.re)
}

func (m *putModel) surgeWorking() string {
	s := &m.s
	return fmt.Sprintf("(V_P - V_F)/(R_on + R_K + R_A) = (%s - %s)/(%s + %s + %s)", show(s.vp, "V"), show(s.drop+s.rise, "V"),
		show(s.on, "ohm"), show(s.r1, "ohm"), show(s.re, "ohm"))
}

func (m *putModel) energy() float64 { return 0.5 * m.s.c * m.s.vp * m.s.vp }

// power returns what the capacitor gives off, all of it counted for the device.
func (m *putModel) power() float64 {
	s := &m.s
	return 0.5 * s.c * (s.vp*s.vp - s.vv*s.vv) / s.period
}

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
	m.dividerLimits()
	m.ratingLimits()
	m.targetLimits()
	m.withinTheSheet()
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
		return fmt.Sprintf("V_S = %s behind R_G = %s, supply %s", show(s.gate, "V"), show(s.ohms, "ohm"), show(s.upper-s.lower, "V"))
	}
	m.compare(contest{name: "divider_peak_voltage", limitName: "charging_voltage", unit: "V", bound: Max,
		value: func() float64 { return s.gate + s.vt }, limit: func() float64 { return s.idle }, working: working})
	m.compare(contest{name: "divider_least_voltage", limitName: "valley_voltage", unit: "V", bound: Min,
		value: func() float64 { return s.vp / 0.9 }, limit: func() float64 { return m.valley }, working: working})
	low, high := math.Inf(1), 0.0
	for _, p := range []*points{&m.vt, &m.ip, &m.iv} {
		for _, r := range p.ohms {
			low, high = min(low, r), max(high, r)
		}
	}
	if m.pair != nil || high <= low {
		return
	}
	because := "outside the gate resistances of the sheet nothing is published"
	m.compare(contest{name: "gate_source_resistance_least", limitName: "sheet_least", unit: "ohm", bound: Min, because: because, surely: -1,
		value: func() float64 { return s.ohms }, limit: func() float64 { return low / 1.1 }, working: working})
	m.compare(contest{name: "gate_source_resistance_greatest", limitName: "sheet_greatest", unit: "ohm", bound: Max, because: because,
		value: func() float64 { return s.ohms }, limit: func() float64 { return high * 1.1 }, working: working})
}

// ratingLimits hold the device against its ratings.
func (m *putModel) ratingLimits() {
	s := &m.s
	add := func(name, symbol, unit string, value func() float64, working func() string) {
		if limit, mark, ok := m.rated(symbol); ok {
			m.compare(contest{name: name, limitName: symbol, unit: unit, bound: Max, value: value, limit: limit,
				limitMark: mark, working: working})
		}
	}
	gate := func() string { return fmt.Sprintf("V_S = %s, cathode at %s", show(s.gate, "V"), show(s.standby, "V")) }
	add("discharge_peak_current", "itrm", "A", m.surge, m.surgeWorking)
	add("capacitor_energy", "energy", "J", m.energy, func() string {
		return fmt.Sprintf("%s at %s", show(s.c, "F"), show(s.vp, "V"))
	})
	add("gate_forward_voltage", "vgkf", "V", func() float64 { return s.gate - s.standby }, gate)
	add("gate_anode_voltage", "vgar", "V", func() float64 { return s.gate }, gate)
	add("anode_voltage", "vak", "V", func() float64 { return s.vp - s.standby }, m.peakWorking)
	add("gate_reverse_voltage_standby", "vgkr", "V", func() float64 { return max(s.standby-s.gate, 0) }, gate)
}

// unchecked lists the rules that a missing rating keeps from being judged.
func (m *putModel) unchecked() []Unchecked {
	var list []Unchecked
	if m.pair != nil {
		if m.isOneShot() {
			list = append(list, Unchecked{"timing-current-above-valley", oneShotNote})
		}
		return append(list, Unchecked{"emitter-surge-current", "no rating of the crossed transistors is known"},
			Unchecked{"put-gate-voltage", "no rating of the crossed transistors is known"})
	}
	if len(m.ip.at) == 0 {
		list = append(list, Unchecked{"timing-current-below-peak", missing("peak current", m.ratings)})
	}
	if m.isOneShot() {
		list = append(list, Unchecked{"timing-current-above-valley", oneShotNote})
	} else if len(m.iv.at) == 0 {
		list = append(list, Unchecked{"timing-current-above-valley",
			fmt.Sprintf("no least valley current of %s is guaranteed at a gate resistance of %s", m.ratings.Name, show(m.s.ohms, "ohm"))})
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
