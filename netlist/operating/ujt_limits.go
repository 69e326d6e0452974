package operating

import (
	"fmt"
	"math"

	"standoff/netlist/part"
)

// limits lists the comparisons of the oscillator.
func (m *ujtModel) limits() {
	m.evaluate(m.nominal()) // tells which currents are known
	m.windowLimits("", "")
	m.derated()
	m.emitterLimits()
	m.barLimits()
	m.targetLimits()
}

// derated holds the valley current against its derating as well.
func (m *ujtModel) derated() {
	s := &m.s
	if m.v.iv >= 0 && !m.isOneShot() {
		m.compare(contest{name: "charging_current_at_valley_derated", limitName: "valley_current_available", unit: "A", bound: Max, guided: true,
			value: func() float64 { return s.atValley }, limit: func() float64 { return s.iv * m.valleyDerating() },
			because: "the derating of I_V for heat and for a large base-two resistor is from memory", working: m.valleyWorking})
	}
}

// hotValley returns the share of a valley current left so many degrees over 25 deg C:
// 0.6 at 85 deg C, straight in between (memory).
func hotValley(heat float64) float64 { return 1 - 0.4*min(max(heat, 0), 60)/60 }

// valleyDerating returns the share of the valley current left when hot. The share at
// 85 deg C is taken too for a base-two resistor of 470 ohm and more, where the sheet
// measured with less.
func (m *ujtModel) valleyDerating() float64 {
	hot := hotValley(m.s.heat)
	if m.baseTwo() >= 470 {
		return min(hot, 0.6)
	}
	return hot
}

// baseTwo returns the resistance between base two and the upper rail, from the
// bar current; 0 where the bases carry none.
func (m *ujtModel) baseTwo() float64 {
	amperes := m.interbase() / m.s.rbb
	if amperes <= 0 {
		return 0
	}
	return (m.s.upper - m.s.b2) / amperes
}

// emitterLimits hold the discharge against the emitter's ratings.
func (m *ujtModel) emitterLimits() {
	s := &m.s
	direct, directMark, hasDirect := m.ratings.Limit("cap_direct")
	if pulse, mark, ok := m.ratings.Limit("ie_pulse"); ok {
		m.compare(contest{name: "discharge_peak_current", limitName: "ie_pulse", unit: "A", bound: Max,
			value: m.surge, limitMark: mark, working: m.surgeWorking, limit: func() float64 {
				if hasDirect && s.c <= direct && s.vp <= directVolts {
					return math.Inf(1) // the maker allows the discharge without a resistor
				}
				return pulse
			}})
		if hasDirect {
			m.compare(contest{name: "timing_capacitance_direct", limitName: "cap_direct", unit: "F", bound: Max,
				limitMark: directMark, working: m.surgeWorking, limit: func() float64 { return direct },
				value: func() float64 {
					if s.r1+s.re >= s.vp/pulse {
						return 0 // enough series resistance
					}
					return s.c
				}})
		}
	}
	if limit, mark, ok := m.rated("ie_rms"); ok {
		m.compare(contest{name: "emitter_current_rms", limitName: "ie_rms", unit: "A", bound: Max, bent: true, gated: true, value: m.rms,
			limit: limit, limitMark: mark, working: func() string { return "I_pk sqrt(tau/(2 T))" }})
	}
	if limit, mark, ok := m.rated("vb2e"); ok {
		m.compare(contest{name: "emitter_reverse_voltage", limitName: "vb2e", unit: "V", bound: Max,
			value: func() float64 { return m.interbase() + s.standby }, limit: limit, limitMark: mark,
			working: func() string { return "base two against the emitter while the capacitor is empty" }})
	}
}

// directVolts is the voltage up to which the maker of the 2N2646 allows a
// capacitor to be discharged without a resistor (sheet: 30 V and 10 uF).
const directVolts = 30

func (m *ujtModel) surgeWorking() string {
	s := &m.s
	return fmt.Sprintf("V_P/(R_on + R_B1 + R_E) = %s/(%s + %s + %s)", show(s.vp, "V"), show(s.on, "ohm"),
		show(s.r1, "ohm"), show(s.re, "ohm"))
}

// barLimits hold the bar against its ratings and habits.
func (m *ujtModel) barLimits() {
	working := func() string { return fmt.Sprintf("bar of %s", show(m.s.rbb, "ohm")) }
	if limit, mark, ok := m.rated("vb2b1"); ok {
		m.compare(contest{name: "interbase_voltage", limitName: "vb2b1", unit: "V", bound: Max, value: m.interbase,
			limit: limit, limitMark: mark, working: working})
	}
	low, lowName, lowMark := 5.0, "habit", part.Declared
	if v, mark, ok := m.ratings.Limit("vbb_min"); ok {
		low, lowName, lowMark = v, "vbb_min", mark
	}
	m.compare(contest{name: "interbase_voltage_low", limitName: lowName, unit: "V", bound: Min, habit: true, value: m.interbase,
		limit: func() float64 { return low }, limitMark: lowMark, working: working})
	if _, mark, ok := m.ratings.Limit("pd"); ok {
		m.compare(contest{name: "interbase_power", limitName: "interbase_power_allowed", unit: "W", bound: Max,
			value: m.barPower, limit: m.powerAllowed, limitMark: mark, bent: true, gated: true, working: func() string {
				return fmt.Sprintf("V_BB^2/R_BB + C V_P^2 f/2 at R_BB = %s", show(m.s.rbb, "ohm"))
			}})
	}
}

// unchecked lists the rules that a missing rating keeps from being judged.
func (m *ujtModel) unchecked() []Unchecked {
	var list []Unchecked
	for _, need := range []struct{ symbol, rule, what string }{
		{"ip", "timing-current-below-peak", "peak current"},
		{"iv", "timing-current-above-valley", "valley current"},
		{"ie_pulse", "emitter-surge-current", "peak emitter current rating"},
		{"ie_rms", "emitter-rms-current", "rms emitter current rating"},
		{"vb2e", "emitter-reverse-voltage", "reverse emitter voltage rating"},
		{"vb2b1", "interbase-voltage-high", "interbase voltage rating"},
		{"pd", "interbase-dissipation", "power rating"},
	} {
		if _, _, ok := m.ratings.Limit(need.symbol); !ok {
			list = append(list, Unchecked{need.rule, missing(need.what, m.ratings)})
		}
	}
	if m.isOneShot() {
		list = append(list, Unchecked{"timing-current-above-valley", oneShotNote})
	}
	if m.v.tc < 0 {
		list = append(list, Unchecked{"base-two-resistor-off", missing("temperature coefficient of the bar", m.ratings)})
	}
	return list
}
