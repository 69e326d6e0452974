package operating

import (
	"fmt"
	"math"
)

// figures lists what a worksheet shows of the oscillator.
func (m *breakoverModel) figures() {
	s := &m.s
	m.figure("supply_voltage", "V", func() float64 { return s.upper - s.lower }, func() string {
		return fmt.Sprintf("feeding rail %s less the device's rail %s",
			show(s.upper, "V"), show(s.lower, "V"))
	})
	m.figure("capacitor_voltage_crest", "V", func() float64 { return m.extent().reach }, m.reachWorking)
	m.last().bent = m.charging.bends
	m.figure("peak_voltage", "V", func() float64 { return s.vp }, func() string {
		return fmt.Sprintf("V_BO = %s across the device", show(s.volts, "V"))
	})
	m.figure("valley_voltage", "V", func() float64 { return s.vv }, func() string {
		return "capacitor voltage at which the discharge ends"
	})
	if m.line == nil {
		m.windowFigures(func() string { return "I_BO of the sheet" }, func() string { return "I_H of the sheet" })
		m.timeFigures("T = R_th C ln((V_th - V_V)/(V_th - V_BO)) + (R_on + R_K) C ln(V_BO/V_V)")
	} else {
		m.lineFigures()
	}
	m.figure("discharge_peak_current", "A", m.surge, m.surgeWorking)
}

// lineFigures are those of a stage that the line feeds.
func (m *breakoverModel) lineFigures() {
	s := &m.s
	m.figure("timing_resistance", "ohm", func() float64 { return s.rth }, func() string {
		return "resistance of the charging network as the capacitor sees it"
	})
	m.figure("timing_capacitance", "F", func() float64 { return s.c }, func() string {
		return "all capacitors from the breakover device to the rails"
	})
	m.figure("breakover_margin", "V", func() float64 { return m.extent().reach - s.vp }, func() string {
		return "crest of the capacitor's voltage less V_BO"
	})
	m.last().gate, m.last().bent = true, m.charging.bends
	paced := func(of *float64) func() float64 {
		return func() float64 {
			m.pace()
			return *of
		}
	}
	rate := func(name, unit string, of *float64, working string) {
		m.figure(name, unit, paced(of), func() string { return working })
		m.last().bent, m.last().gated = true, true
	}
	rate("first_breakover_time", "s", &s.first,
		"from the zero crossing, empty capacitor, to the first breakover")
	if m.charging.bends {
		rate("pulse_interval", "s", &s.period,
			"from the valley, at the zero crossing, to the next breakover; it moves in steps of the line's cycle")
	}
	rate("pulses_per_half_cycle", "", &s.pulses,
		"breakovers before the line crosses zero again; the fraction says how far the last ramp gets")
}

func (m *breakoverModel) reachWorking() string {
	switch s := &m.s; {
	case m.line == nil:
		return "what the charging network would bring the capacitor to, less what leaks, if nothing broke over"
	case m.charging.bends:
		return "highest voltage in a cycle that repeats while nothing breaks over, followed through its rectifiers"
	default:
		return fmt.Sprintf("crest of the capacitor's voltage on the line, %s behind %s: crest/sqrt(1 + (w R C)^2)",
			show(s.vth-s.lower, "V"), show(s.rth, "ohm"))
	}
}

// surge returns the greatest current through the device.
func (m *breakoverModel) surge() float64 {
	s := &m.s
	return (s.vp - s.drop) / (s.on + s.r1 + s.re)
}

func (m *breakoverModel) surgeWorking() string {
	s := &m.s
	return fmt.Sprintf("(V_BO - V_V)/(R_on + R_K) = (%s - %s)/(%s + %s + %s)",
		show(s.vp, "V"), show(s.drop, "V"), show(s.on, "ohm"), show(s.r1, "ohm"), show(s.re, "ohm"))
}

// limits lists the comparisons. The nominal board was evaluated last.
func (m *breakoverModel) limits() {
	s := &m.s
	m.reverseLimit()
	if m.blocked {
		volts := m.box[m.vbo].Nominal // whatever it is: the verdict does not rest on it
		m.compare(contest{name: "capacitor_voltage_crest", limitName: "vbo", unit: "V", bound: Min,
			value: func() float64 { return -s.reach }, limit: func() float64 { return volts },
			working: func() string {
				return "the device conducts in one direction only and stands the wrong way round"
			}})
		return
	}
	m.compare(contest{name: "capacitor_voltage_crest", limitName: "vbo", unit: "V", bound: Min,
		bent: m.charging.bends, working: m.reachWorking,
		value: func() float64 { return m.extent().reach - (s.vp - s.volts) }, limit: func() float64 { return s.volts }})
	if m.line != nil {
		s.iv = math.NaN() // every zero crossing lets go
	}
	m.windowLimits("", m.holdingNote())
	for i := range m.contests {
		if c := &m.contests[i]; m.line != nil && c.limitName == "peak_current_required" {
			c.working = func() string {
				return show(s.atPeak, "A") +
					" from the line with the capacitor at V_BO, at the crest or when the capacitor gets there"
			}
		}
	}
	if limit, mark, ok := m.rated("itrm"); ok {
		m.compare(contest{name: "discharge_peak_current", limitName: "itrm", unit: "A", bound: Max,
			value: m.surge, bent: true, limit: limit, limitMark: mark, working: m.surgeWorking})
	}
	if m.line == nil {
		m.targetLimits()
	}
	m.guideByPeak()
}

// reverseLimit holds what stands the wrong way across a one-sided device against its rating.
func (m *breakoverModel) reverseLimit() {
	limit, mark, ok := m.rated("vr")
	if !ok || m.line == nil && !m.blocked {
		return
	}
	s := &m.s
	m.compare(contest{name: "device_reverse_voltage", limitName: "vr", unit: "V", bound: Max,
		limit: limit, limitMark: mark, bent: m.charging.bends, value: func() float64 {
			if m.line == nil {
				return max(-s.reach, 0)
			}
			return m.extent().reverse
		}, working: func() string {
			return "highest voltage of the capacitor against the direction in which the device leads"
		}})
}

// holdingNote says that the sheet promises no least holding current, "" where it does.
func (m *breakoverModel) holdingNote() string {
	if f := m.ratings.Figures["ih"]; f.HasMin || m.ih < 0 {
		return ""
	}
	return fmt.Sprintf("only a typical or greatest holding current of %s is published", m.ratings.Name)
}

// guideByPeak has everything guided by the charging current at the peak, beyond
// which nothing happens.
func (m *breakoverModel) guideByPeak() {
	for i := range m.outputs {
		m.outputs[i].kinked = m.line != nil
	}
	for i := range m.contests {
		m.contests[i].kinked = true
	}
}

// unchecked lists the rules that a missing rating keeps from being judged.
func (m *breakoverModel) unchecked() []Unchecked {
	if m.blocked {
		return []Unchecked{{Because: "it never fires: no more of it is judged"}}
	}
	var list []Unchecked
	if m.ibo < 0 {
		list = append(list, Unchecked{"timing-current-below-peak", missing("breakover current", m.ratings)})
	}
	switch {
	case m.line != nil:
		list = append(list, Unchecked{"timing-current-above-valley", "every zero crossing of the line lets go; " +
			"whether the device stays on until then is not judged, and pulses are counted as if it did not"})
	case m.isOneShot():
		list = append(list, Unchecked{"timing-current-above-valley", oneShotNote})
	case m.ih < 0:
		list = append(list, Unchecked{"timing-current-above-valley", missing("holding current", m.ratings)})
	case m.holdingNote() != "":
		list = append(list, Unchecked{"timing-current-above-valley",
			m.holdingNote() + ": below it the device may stay on all the same"})
	}
	if m.drift < 0 && m.line == nil {
		list = append(list, Unchecked{"frequency-drift",
			missing("temperature coefficient of the breakover voltage", m.ratings) +
				": only what the board's parts drift is judged"})
	}
	if _, _, ok := m.ratings.Limit("itrm"); !ok {
		list = append(list, Unchecked{"emitter-surge-current",
			missing("repetitive peak current rating", m.ratings)})
	}
	if t := m.stage.Anchor.Intent; m.line != nil && (t.Frequency != nil || t.Period != nil) {
		list = append(list, Unchecked{"frequency-off-target", "the line sets the rate of the stage"})
	}
	return list
}
