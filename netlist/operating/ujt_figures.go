package operating

import (
	"fmt"
	"math"

	"standoff/netlist/quantity"
)

// show writes a value with its unit for a working.
func show(v float64, unit string) string { return quantity.Format(v, unit) }

// figures lists what a worksheet shows of the oscillator.
func (m *ujtModel) figures() {
	s := &m.s
	m.figure("supply_voltage", "V", func() float64 { return s.upper - s.lower }, func() string {
		return fmt.Sprintf("upper rail %s less lower rail %s", show(s.upper, "V"), show(s.lower, "V"))
	})
	m.figure("interbase_voltage", "V", m.interbase, func() string {
		return fmt.Sprintf("across the bar of R_BB = %s between base two and base one", show(s.rbb, "ohm"))
	})
	m.last().guide = true // below the test voltage the sheet's currents change with it, above they do not
	m.figure("peak_voltage", "V", func() float64 { return s.vp }, func() string {
		return fmt.Sprintf("V_P = V_D + V_B1 + eta V_BB = %s + %s + %.3g * %s",
			show(s.vd, "V"), show(s.b1-s.lower, "V"), s.eta, show(s.b2-s.b1, "V"))
	})
	m.figure("valley_voltage", "V", func() float64 { return s.vv }, func() string {
		return "emitter voltage at which the discharge ends"
	})
	m.windowFigures(func() string { return "I_P of the sheet" + m.carried("ip_vbb", "(%s / V_BB)^1.3") },
		func() string { return "I_V of the sheet" + m.carried("iv_vbb", "V_BB / %s") })
	m.timeFigures("T = R_th C ln((V_th - V_V)/(V_th - V_P)) + (R_on + R_B1 + R_E) C ln(V_P/V_V)")
	m.loadFigures()
}

// interbase returns the voltage across the bar with the emitter open.
func (m *ujtModel) interbase() float64 { return m.s.b2 - m.s.b1 }

// carried describes how a current was carried over to this bar voltage.
func (m *ujtModel) carried(symbol, law string) string {
	at, ok := m.ratings.Test(symbol)
	if !ok {
		return " as it stands (no test voltage given)"
	}
	if m.interbase() >= at {
		return fmt.Sprintf(" as it stands (V_BB %s is not below its %s)", show(m.interbase(), "V"), show(at, "V"))
	}
	return fmt.Sprintf(" * "+law+" with V_BB = %s", show(at, "V"), show(m.interbase(), "V"))
}

// loadFigures are what the parts have to stand.
func (m *ujtModel) loadFigures() {
	s := &m.s
	m.figure("base_one_standby_voltage", "V", func() float64 { return s.standby }, func() string {
		return fmt.Sprintf("bar current through what hangs on base one, R_BB = %s", show(s.rbb, "ohm"))
	})
	if m.v.tc >= 0 {
		m.figure("base_two_resistance_advised", "ohm", m.advisedBaseTwo, func() string {
			return "R_B2 at which the rise of the bar resistance cancels the fall of the emitter diode (zero slope of V_P)"
		})
	}
	m.figure("discharge_peak_current", "A", m.surge, func() string {
		return fmt.Sprintf("V_P/(R_on + R_B1 + R_E) = %s/(%s + %s + %s)", show(s.vp, "V"), show(s.on, "ohm"),
			show(s.r1, "ohm"), show(s.re, "ohm"))
	})
	m.figure("emitter_current_rms", "A", m.rms, func() string {
		return "I_pk sqrt(tau/(2 T)) of the exponential pulse"
	})
	m.last().gated = true
	m.last().bent = true // a higher peak makes a larger pulse, and a rarer one
	m.figure("interbase_power", "W", m.barPower, func() string {
		return fmt.Sprintf("V_BB^2/R_BB + C V_P^2 f/2 = %s^2/%s + the emitter's share", show(m.interbase(), "V"), show(s.rbb, "ohm"))
	})
	m.last().gated = true
	m.last().bent = true // a higher peak stores more energy and comes less often
	if _, _, ok := m.ratings.Limit("pd"); ok {
		m.figure("interbase_power_allowed", "W", m.powerAllowed, func() string {
			return "rated power less its derating above 25 deg C"
		})
	}
}

// surge returns the greatest emitter current, limited by resistance alone.
func (m *ujtModel) surge() float64 { return m.s.vp / (m.s.on + m.s.r1 + m.s.re) }

// rms returns the rms emitter current of an exponential pulse of time constant
// tau once a period: I_pk sqrt(tau/(2 T)).
func (m *ujtModel) rms() float64 {
	tau := (m.s.on + m.s.r1 + m.s.re) * m.s.c
	return m.surge() * math.Sqrt(tau/(2*m.s.period))
}

// barPower returns the power in the transistor: bar current plus, as an upper
// bound, all of the capacitor's energy.
func (m *ujtModel) barPower() float64 {
	v := m.interbase()
	return v*v/m.s.rbb + 0.5*m.s.c*m.s.vp*m.s.vp/m.s.period
}

// powerAllowed returns the rated power at this ambient.
func (m *ujtModel) powerAllowed() float64 {
	return m.sheet.power - m.sheet.slope*max(m.s.heat, 0)
}

// advisedBaseTwo returns the base-two resistor at which dV_P/dT = 0. With
// S = R_BB + R_B1 + R_B2, drift k of the emitter diode and coefficient alpha of
// the bar: V1 alpha R_BB (eta R_B2 - (1 - eta) R_B1) = k S^2, solved for R_B2
// (derived here; first order: R_B2 = (k/alpha) R_BB/(eta V1) + (1 - eta) R_B1/eta).
// NaN where no resistor does it.
func (m *ujtModel) advisedBaseTwo() float64 {
	s := &m.s
	alpha := m.box[m.v.tc].Nominal // of a typical part: one resistor serves all
	v1, k := s.upper-s.lower, -emitterDrift
	base := s.rbb + s.r1
	// k R^2 + (2 k base - g eta) R + k base^2 + g (1 - eta) R_B1 = 0, g = V1 alpha R_BB
	g := v1 * alpha * s.rbb
	p := base - g*s.eta/(2*k)
	q := base*base + g*(1-s.eta)*s.r1/k
	d := p*p - q
	if d < 0 || p > 0 {
		return math.NaN()
	}
	return -p - math.Sqrt(d)
}
