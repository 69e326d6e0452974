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
			return "V_BE of the pnp at the peak current, less what the npn pulls the gate down by then"
		}
		return fmt.Sprintf("V_T at R_G = %s, straight over log R_G between the sheet's points, -2 mV/K (memory)",
			show(s.ohms, "ohm"))
	})
	m.figure("peak_voltage", "V", func() float64 { return s.vp }, func() string {
		return fmt.Sprintf("V_P = V_S + V_T = %s + %s", show(s.vp-s.vt, "V"), show(s.vt, "V"))
	})
	m.figure("valley_voltage", "V", func() float64 { return s.vv }, func() string {
		return "anode voltage at which the discharge ends"
	})
	if m.pair != nil {
		m.windowFigures(func() string { return m.pair.working("peak") },
			func() string { return m.pair.working("valley") })
	} else {
		m.windowFigures(func() string { return m.carried("I_P", &m.ip) },
			func() string { return m.carried("I_V", &m.iv) })
	}
	m.timeFigures("T = R_th C ln((V_th - V_V)/(V_th - V_P)) + (R_on + R_K + R_A) C ln(V_P/V_V)")
	m.figure("cathode_standby_voltage", "V", func() float64 { return s.standby }, func() string {
		return "cathode over the lower rail before the pulse"
	})
	m.figure("discharge_peak_current", "A", m.surge, m.surgeWorking)
	m.figure("capacitor_energy", "J", m.energy, func() string { return "C V_P^2/2" })
	m.figure("device_power", "W", m.power, m.powerWorking)
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
	return max(s.vp-s.drop-s.rise, 0) / (s.on + s.r1 + s.re)
}

func (m *putModel) surgeWorking() string {
	s := &m.s
	return fmt.Sprintf("(V_P - V_F)/(R_on + R_K + R_A) = (%s - %s)/(%s + %s + %s)", show(s.vp, "V"),
		show(s.drop+s.rise, "V"), show(s.on, "ohm"), show(s.r1, "ohm"), show(s.re, "ohm"))
}

func (m *putModel) energy() float64 { return 0.5 * m.s.c * m.s.vp * m.s.vp }

// power returns the mean power in the device: the charge of each pulse falls through its
// drop, and the rest of the energy is shared out over the resistances of the path. It is
// held against no rating: a stage that lets go charges with less than I_V, so that no
// more than I_V V_P arises.
func (m *putModel) power() float64 {
	s := &m.s
	swing := s.vp - s.vv
	return s.c * swing * (s.drop + swing/2*s.on/(s.on+s.r1+s.re)) / s.period
}

func (m *putModel) powerWorking() string {
	s := &m.s
	return fmt.Sprintf("f C dV (V_F + dV/2 R_on/(R_on + R_K + R_A)), dV = V_P - V_V = %s, V_F = %s, f = %s",
		show(s.vp-s.vv, "V"), show(s.drop, "V"), show(1/s.period, "Hz"))
}
