package operating

import (
	"fmt"
	"math"
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/stage"
)

// windowFigures are the currents between which the stage runs, and the timing
// resistance and capacitance; the workings say where the device's currents come
// from.
func (m *relaxation) windowFigures(peakWorking, valleyWorking func() string) {
	s := m.cycle
	m.figure("charging_current_at_peak", "A", func() float64 { return s.atPeak }, m.peakWorking)
	m.last().gate = true // a stage that does not fire has no rate that could rise or fall
	m.figure("peak_current_required", "A", func() float64 { return s.ip }, peakWorking)
	m.last().guided = true
	m.figure("charging_current_at_valley", "A", func() float64 { return s.atValley }, m.valleyWorking)
	m.figure("valley_current_available", "A", func() float64 { return s.iv }, valleyWorking)
	m.last().guided = true
	m.evaluate(m.nominal())
	m.settleSource()
	if len(m.stage.Parts[stage.TimingResistor]) > 0 && s.rth < noPath && s.vth > s.lower && m.source == nil {
		m.figure("timing_resistance", "ohm", func() float64 { return s.rth }, func() string {
			return "resistance of the charging network as the capacitor sees it"
		})
		m.figure("timing_resistance_min", "ohm", func() float64 { return (s.vth - s.lower - s.vv) / s.iv }, func() string {
			return fmt.Sprintf("(V_th - V_V)/I_V = (%s - %s)/%s", show(s.vth-s.lower, "V"), show(s.vv, "V"), show(s.iv, "A"))
		})
		m.last().guided = true
		m.last().bent = m.bentWindow
		m.figure("timing_resistance_max", "ohm", func() float64 { return max(s.vth-s.lower-s.vp, 0) / s.ip }, func() string {
			return fmt.Sprintf("(V_th - V_P)/I_P = (%s - %s)/%s", show(s.vth-s.lower, "V"), show(s.vp, "V"), show(s.ip, "A"))
		})
		m.last().guided = true
		m.last().bent = true // a higher peak voltage may come with a lower peak current
	}
	if m.source != nil {
		m.figure("current_source_voltage", "V", m.left, m.sourceWorking)
		needs := func() float64 { return m.source.least(m.point) }
		m.figure("current_source_headroom", "V", func() float64 { return m.left() - needs() }, func() string {
			return fmt.Sprintf("%s across %s at the peak less the %s that it needs", show(m.left(), "V"),
				m.source.element.Designator, show(needs(), "V"))
		})
	}
	m.figure("timing_capacitance", "F", func() float64 { return s.c }, func() string {
		return "all capacitors from the " + m.terminal + " to the rails"
	})
}

func (m *relaxation) peakWorking() string {
	s := m.cycle
	working := fmt.Sprintf("(V_th - V_P)/R_th = (%s - %s)/%s = %s", show(s.vth-s.lower, "V"), show(s.vp, "V"),
		show(s.rth, "ohm"), show(s.atPeak, "A"))
	if s.rth > noPath || s.vth < s.lower {
		working = show(s.atPeak, "A") + " from the charging network at V_P = " + show(s.vp, "V")
	}
	if s.atPeak < 0 {
		for _, e := range m.stage.Clamps {
			working += "; " + e.Designator + " can hold the capacitor down, and dc on the board sets its base"
		}
	}
	return working
}

func (m *relaxation) valleyWorking() string {
	s := m.cycle
	if straight := (s.vth - s.lower - s.vv) / s.rth; m.charging.bends || math.Abs(s.atValley-straight) > 1e-6*math.Abs(straight) {
		return show(s.atValley, "A") + " from the charging network at V_V = " + show(s.vv, "V")
	}
	return fmt.Sprintf("(V_th - V_V)/R_th = (%s - %s)/%s = %s", show(s.vth-s.lower, "V"), show(s.vv, "V"),
		show(s.rth, "ohm"), show(s.atValley, "A"))
}

// left returns what is left across a current source at the peak: of a transistor no less than where it
// surely is saturated, since how deep does not matter.
func (m *relaxation) left() float64 {
	if m.source.amperes == nil {
		return max(m.room, saturated)
	}
	return m.room
}

func (m *relaxation) sourceWorking() string {
	across := "across " + m.source.element.Designator + " at the peak; "
	if m.source.amperes == nil && m.room < saturated {
		across = show(m.room, "V") + " " + across
	}
	return across + show(m.most, "V") + " at the valley"
}

// settleSource lets a transistor that is saturated from the valley on count as a switch where its
// collector does not lie on the capacitor: what charges is the resistance between. The nominal
// board was evaluated last.
func (m *relaxation) settleSource() {
	if m.source == nil || m.source.high == m.charging.node || m.source.low == m.charging.node {
		return
	}
	if m.source.amperes == nil && max(m.most, m.room) < saturation {
		m.source, m.charging.watched = nil, nil
	}
}

// sourceLimits hold a current source against the range in which it is one.
func (m *relaxation) sourceLimits(x func() []float64) {
	m.settleSource()
	r := m.source
	if r == nil {
		return
	}
	because := ""
	if r.assumed {
		because = "the least voltage across " + r.element.Designator + " is assumed"
	}
	working, surely := m.sourceWorking, 0.0
	if r.amperes == nil {
		surely = saturated
	}
	add := func(name, limitName, unit string, bound Bound, value, limit func() float64) {
		m.compare(contest{name: name, limitName: limitName, unit: unit, bound: bound, value: value, limit: limit,
			because: because, surely: surely, limitMark: r.mark, working: working})
	}
	add("current_source_voltage", "least_voltage", "V", Min, m.left, func() float64 { return r.least(x()) })
	if !math.IsInf(r.greatest, 1) {
		because = ""
		add("current_source_voltage_greatest", "v_max", "V", Max, func() float64 { return max(m.room, m.most) }, func() float64 { return r.greatest })
	}
	if r.amperes == nil {
		return
	}
	set := func() float64 { return r.amperes(x()) }
	working = func() string { return "the current that " + r.element.Designator + " is set to" }
	if f, ok := m.slewOf(r); ok {
		because = "the slew rate of " + r.element.Designator + " is a typical figure"
		add("current_source_slew", "slew_c", "F", Min, func() float64 { return m.cycle.c }, func() float64 { return f })
		because = ""
	}
	if r.from > 0 {
		add("current_source_least", "i_min", "A", Min, set, func() float64 { return r.from })
	}
	if !math.IsInf(r.upTo, 1) {
		add("current_source_greatest", "i_max", "A", Max, set, func() float64 { return r.upTo })
	}
}

// slewOf returns the least capacitor whose ramp a source follows: of a current i the
// ramp rises by i/C, and the source follows i/slew_c (LM134/234/334: 0.01 V/us at 10 uA,
// 1 V/us at 1 mA, typical).
func (m *relaxation) slewOf(r *regulated) (farads float64, ok bool) {
	if r.element.Ratings == nil {
		return 0, false
	}
	f, ok := r.element.Ratings.Figures["slew_c"]
	if !ok || !f.HasTyp {
		return f.Max, ok && f.HasMax
	}
	return f.Typ, true
}

// windowLimits hold the charging current against what the device asks for at the
// peak and lets go below; because says why neither can be more than a doubt.
func (m *relaxation) windowLimits(peakBecause, valleyBecause string) {
	s := m.cycle
	required := func() float64 { return s.ip }
	if !math.IsNaN(s.ip) {
		m.compare(contest{name: "charging_current_at_peak", limitName: "peak_current_required", unit: "A", bound: Min, guided: true, bent: true,
			value: func() float64 { return s.atPeak }, limit: required, because: peakBecause, working: m.peakWorking})
		if m.caps.leaks() || m.leaks {
			m.compare(contest{name: "charging_current_after_leakage", limitName: "peak_current_required", unit: "A", bound: Min, guided: true, bent: true,
				value: func() float64 { return s.atPeak - s.leak }, limit: required, because: peakBecause,
				working: func() string { return m.peakWorking() + ", less a leakage of " + show(s.leak, "A") }})
		}
	}
	if !math.IsNaN(s.iv) && !m.isOneShot() {
		m.compare(contest{name: "charging_current_at_valley", limitName: "valley_current_available", unit: "A", bound: Max, guided: true,
			value: func() float64 { return s.atValley }, limit: func() float64 { return s.iv }, bent: m.bentWindow, because: valleyBecause, working: m.valleyWorking})
	}
	m.sourceLimits(func() []float64 { return m.point })
	m.compare(contest{name: "timing_capacitance", limitName: "habit", unit: "F", bound: Min, habit: true,
		value: func() float64 { return s.c }, limit: func() float64 { return 100e-12 },
		working: func() string { return "least capacitance at the " + m.terminal }})
}

// timeFigures are period, frequency, the shape of the ramp and the time to the
// first pulse. law is the formula of the period in the symbols of the trade.
func (m *relaxation) timeFigures(law string) {
	s := m.cycle
	rate := func(name, unit string, of func() float64, working func() string) {
		m.figure(name, unit, of, working)
		m.last().gated = true
	}
	m.evaluate(m.nominal())
	if _, discharge, ok := strings.Cut(law, " + "); ok && s.rth > noPath {
		law = "T = C (V_P - V_V)/I + " + discharge
	}
	rate("period", "s", func() float64 { return s.period }, func() string {
		return law + " = " + show(s.charge, "s") + " + " + show(s.discharge, "s")
	})
	rate("frequency", "Hz", m.frequency, func() string { return "1/T" })
	rate("first_pulse", "s", m.firstPulse, func() string {
		return "time from an empty capacitor to the first pulse"
	})
	rate("ramp_nonlinearity", "", func() float64 { return s.ramp }, func() string {
		return "largest departure of the ramp from the straight line between its ends, over the swing"
	})
}

// firstPulse returns the time from an empty capacitor to the first pulse.
func (m *relaxation) firstPulse() float64 {
	if !m.cycle.fires {
		return math.Inf(1)
	}
	empty := *m.cycle
	empty.vv = 0
	if m.falls {
		empty.vp, empty.atPeak = -empty.vp, -empty.atPeak
	}
	seconds, _ := m.charging.time(&empty)
	return seconds
}

// isOneShot reports whether the stage need not run on after its first pulse: it
// is declared latch=ok itself, or every thyristor that it fires is.
func (m *relaxation) isOneShot() bool {
	if m.stage.Anchor.Intent.LatchOK {
		return true
	}
	for _, g := range m.stage.Drives {
		if !g.Anchor.Intent.LatchOK {
			return false
		}
	}
	return len(m.stage.Drives) > 0
}

// targetLimits hold the period or frequency against what was declared. What a
// one-shot stage is asked for is the time to its first pulse.
func (m *relaxation) targetLimits() {
	t := m.stage.Anchor.Intent
	period := func() float64 { return m.cycle.period }
	if m.isOneShot() {
		period = m.firstPulse
	}
	frequency := func() float64 { return 1 / period() }
	working := func() string { return "T = " + show(period(), "s") + ", f = " + show(frequency(), "Hz") }
	add := func(name, unit string, bound Bound, value func() float64, limit float64) {
		m.compare(contest{name: name, limitName: "target", unit: unit, bound: bound, value: value, gated: true,
			limit: func() float64 { return limit }, working: working})
	}
	if t.Frequency != nil {
		add("frequency_lowest", "Hz", Min, frequency, t.Frequency.Low)
		add("frequency_highest", "Hz", Max, frequency, t.Frequency.High)
	}
	if t.Period != nil {
		add("period_shortest", "s", Min, period, t.Period.Low)
		add("period_longest", "s", Max, period, t.Period.High)
	}
}

// oneShotNote is said in place of a verdict on whether the stage runs on.
const oneShotNote = "declared latch=ok: it may stay on after its first pulse"

// rated returns a limit of the sheet as a contest part.
func (m *relaxation) rated(symbol string) (limit func() float64, mark part.Mark, ok bool) {
	v, mark, ok := m.ratings.Limit(symbol)
	return func() float64 { return v }, mark, ok
}
