package operating

import (
	"fmt"
	"math"

	"standoff/netlist/part"
)

// gateFigures lists what a worksheet shows of a gate stage.
func (m *scrGate) gateFigures() {
	g := &m.g
	if m.need.ok {
		m.figure("gate_trigger_current_required", "A", func() float64 { return g.sheet.required }, m.requiredWorking)
		m.figure("gate_trigger_voltage_required", "V", func() float64 { return m.need.volts }, func() string {
			return "greatest trigger voltage at the coldest ambient"
		})
		m.figure("gate_pulse_current", "A", func() float64 { return g.sheet.current }, m.pulseWorking)
		m.last().guide, m.last().gate = true, true // a pulse has a width only where its current is enough
		m.figure("gate_pulse_width", "s", func() float64 { return g.sheet.width }, func() string {
			return "time for which the falling pulse stays above the required current"
		})
		m.last().guided, m.last().gated = true, true
		m.last().bent = true // more resistance: a smaller pulse, but a longer one
		m.figure("gate_pulse_width_required", "s", m.widthWithLatching, m.widthWorking)
	}
	if v, _, ok := m.scr.Limit("vgd"); ok {
		m.figure("gate_nontrigger_voltage", "V", func() float64 { return v }, func() string {
			return "V_GD of the sheet, hot"
		})
	}
	m.figure("gate_standby_voltage", "V", func() float64 { return g.standby }, func() string {
		return "gate over cathode from the bar current, emitter open"
	})
	m.figure("gate_pulse_voltage", "V", func() float64 { return g.open * g.scale }, func() string {
		return fmt.Sprintf("pulse at the open gate: V_P = %s through R_on = %s into the gate network",
			show(m.cycle.vp, "V"), show(m.cycle.on, "ohm"))
	})
	m.figure("gate_peak_current", "A", func() float64 { return g.short }, func() string {
		return "current into the gate taken as a short"
	})
	m.figure("gate_peak_power", "W", m.gatePower, func() string {
		return "E^2/(4 R) of the drive, an upper bound for any gate"
	})
	m.figure("gate_reverse_voltage", "V", m.reverse, func() string { return "cathode over gate before the pulse" })
	m.figure("gate_shunt_resistance", "ohm", func() float64 { return g.shunt }, func() string {
		return "dc resistance from gate to cathode through everything connected"
	})
}

func (m *scrGate) requiredWorking() string {
	return fmt.Sprintf("I_GT = %s at the coldest ambient + V_GT/R_GK = %s", show(m.need.amperes, "A"),
		show(m.g.sheet.required-m.need.amperes, "A"))
}

func (m *scrGate) pulseWorking() string {
	return fmt.Sprintf("capacitor at V_P = %s through R_on = %s, gate held at V_GT = %s", show(m.cycle.vp, "V"),
		show(m.cycle.on, "ohm"), show(m.need.volts, "V"))
}

func (m *scrGate) widthWorking() string {
	return "longest of the load's latching time, t_gt of the sheet and 20 us * required current / pulse current"
}

// widthWithLatching is widthRequired, or the time until the load carries the
// latching current where that is longer and known. Each has its own rule.
func (m *scrGate) widthWithLatching() float64 {
	width := m.widthRequired(m.g.sheet)
	if m.latching != nil {
		if latching := m.latching(); latching > width {
			return latching
		}
	}
	return width
}

// widthRequired returns how long the drive has to last: the sheet's turn-on
// time, and the 20 us for which dc trigger currents are specified, shortened in
// proportion to the overdrive (constant charge; trigger data of TIC106, TYN1212).
func (m *scrGate) widthRequired(d drive) float64 {
	width := 20e-6 * d.required / d.current
	return max(width, m.turnOn)
}

func (m *scrGate) gatePower() float64 { return max(m.g.open, 0) * m.g.short / 4 }

func (m *scrGate) reverse() float64 { return max(-m.g.standby, 0) }

// gateLimits lists the comparisons of the gate.
func (m *scrGate) gateLimits() {
	if m.need.ok {
		m.triggerLimits(&m.g.sheet, func() float64 { return m.need.volts }, "")
		if m.need.assumed != "" {
			m.triggerLimits(&m.g.cold, func() float64 { return m.need.coldVolts }, m.need.assumed)
		}
	}
	m.quietLimits()
	m.overdriveLimits()
}

// smallNote says why a pulse from a small capacitor is only a doubt.
func (m *scrGate) smallNote(because string) string {
	least := make([]float64, len(m.box))
	for i, v := range m.box {
		least[i] = v.Low
	}
	if m.caps.farads(least) < m.pulseFarads {
		return join(because, "the guaranteed pulse holds for "+show(m.pulseFarads, "F")+" and more; below that it is estimated")
	}
	return because
}

// triggerLimits hold the pulse against one trigger point.
func (m *scrGate) triggerLimits(d *drive, volts func() float64, because string) {
	mark := max(m.need.amperesMark, m.need.voltsMark)
	note := m.smallNote(because)
	m.compare(contest{name: "gate_pulse_voltage", limitName: "gate_trigger_voltage_required", unit: "V", bound: Min,
		value: func() float64 { return m.g.open * m.g.scale }, limit: volts, limitMark: mark, because: note,
		working: m.pulseWorking})
	m.compare(contest{name: "gate_pulse_current", limitName: "gate_trigger_current_required", unit: "A", bound: Min,
		value: func() float64 { return d.current }, limit: func() float64 { return d.required }, limitMark: mark,
		because: note, working: m.pulseWorking})
	m.compare(contest{name: "gate_pulse_width", limitName: "gate_pulse_width_required", unit: "s", bound: Min, bent: true, guided: true, gated: true,
		value: func() float64 { return d.width }, limit: func() float64 {
			if d.current < d.required {
				return 0 // too weak to speak of a width
			}
			return m.widthRequired(*d)
		}, limitMark: mark, because: note, working: m.widthWorking})
	if m.shunt != nil {
		m.compare(contest{name: "gate_shunt_current", limitName: "drive_left_for_gate_resistor", unit: "A", bound: Max,
			value: func() float64 { return d.required - m.amperes(d) }, limit: func() float64 { return d.current - m.amperes(d) }, limitMark: mark, because: note, working: m.pulseWorking})
	}
}

// amperes returns the trigger current that belongs to a drive.
func (m *scrGate) amperes(d *drive) float64 {
	if d == &m.g.cold {
		return m.need.coldAmperes
	}
	return m.need.amperes
}

// quietLimits hold the gate before the pulse.
func (m *scrGate) quietLimits() {
	if v, mark, ok := m.scr.Limit("vgd"); ok {
		m.compare(contest{name: "gate_standby_voltage", limitName: "gate_nontrigger_voltage", unit: "V", bound: Max,
			value: func() float64 { return m.g.standby }, limit: func() float64 { return v }, limitMark: mark,
			working: m.quietWorking})
	}
	if v, mark, ok := m.scr.Limit("rgk"); ok {
		// The nominal board counts: the sheet's 1 kohm is a resistor of the usual tolerance too.
		m.evaluate(m.nominal())
		shunt := m.g.shunt
		m.compare(contest{name: "gate_shunt_resistance", limitName: "rgk", unit: "ohm", bound: Max,
			value: func() float64 { return shunt }, limit: func() float64 { return v }, limitMark: mark,
			working: func() string { return "everything connected from gate to cathode" }})
	}
	if v, mark, ok := m.scr.Limit("vgrm"); ok {
		m.compare(contest{name: "gate_reverse_voltage", limitName: "vgrm", unit: "V", bound: Max,
			value: m.reverse, limit: func() float64 { return v }, limitMark: mark,
			working: func() string { return "cathode over gate before the pulse" }})
	}
}

// overdriveLimits hold the pulse against what the gate stands. The verdict is
// certain only where resistors on the board set the current: where the drive
// hangs on the on-resistance of the driver it is a doubt.
func (m *scrGate) overdriveLimits() {
	because := ""
	if m.boardResistance() < m.nominalOn() {
		because = "the current hangs on the driver's own on-resistance"
	}
	add := func(name, limit, unit string, value func() float64) {
		v, mark, ok := m.scr.Limit(limit)
		if !ok {
			return
		}
		m.compare(contest{name: name, limitName: limit, unit: unit, bound: Max, value: value,
			limit: func() float64 { return v }, limitMark: mark, because: because, working: func() string {
				return fmt.Sprintf("open-gate pulse of %s, shorted-gate current of %s", show(m.g.open, "V"), show(m.g.short, "A"))
			}})
	}
	add("gate_peak_current", "igm", "A", func() float64 { return m.g.short })
	add("gate_peak_power", "pgm", "W", m.gatePower)
}

// nominalOn returns the emitter's on-resistance of the nominal board.
func (m *scrGate) nominalOn() float64 {
	m.evaluate(m.nominal())
	return m.cycle.on
}

// boardResistance returns what resistors stand between base one and gate.
func (m *scrGate) boardResistance() float64 {
	m.evaluate(m.nominal())
	if m.g.short <= 0 {
		return math.Inf(1)
	}
	return max((m.cycle.vp-m.cycle.drop)/m.g.short-m.cycle.on, 0)
}

// unchecked lists the rules that a missing rating keeps from being judged.
func (m *scrGate) unchecked() []Unchecked {
	var list []Unchecked
	for _, need := range []struct{ symbol, rule, what string }{
		{"vgd", "gate-standby-voltage", "non-trigger voltage"},
		{"rgk", "gate-resistor-missing", "gate resistor it was specified with"},
		{"vgrm", "gate-reverse-voltage", "reverse gate voltage rating"},
		{"igm", "gate-overdrive", "peak gate current rating"},
	} {
		if _, _, ok := m.scr.Limit(need.symbol); !ok {
			list = append(list, Unchecked{need.rule, missing(need.what, m.scr)})
		}
	}
	if !m.need.ok {
		list = append(list, Unchecked{"gate-pulse-weak", missing("trigger current or voltage", m.scr)},
			Unchecked{"gate-pulse-short", missing("trigger current or voltage", m.scr)})
	}
	return list
}

func missing(what string, r *part.Ratings) string {
	return fmt.Sprintf("the %s of %s is unknown", what, r.Name)
}
