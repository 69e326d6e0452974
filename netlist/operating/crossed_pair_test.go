package operating

import (
	"fmt"
	"math"
	"testing"
)

// ebersMoll are two crossed transistors with the whole law of Ebers and Moll.
type ebersMoll struct {
	saturation, gain, reverse float64 // of both
	volts, ohms, across       float64 // divider, and what lies across the base of the npn
}

const kTq = boltzmann * kelvin

func (e ebersMoll) into(volts float64) float64 { return e.saturation * math.Expm1(volts/kTq) }

// at returns anode voltage and current where the base of the npn stands at base: the gate is
// found by halving, since the current that is left for it falls with its voltage.
func (e ebersMoll) at(base float64) (anode, amperes float64) {
	solve := func(gate float64) (left, anode, amperes float64) {
		f, r := e.into(base), e.into(base-gate) // npn
		need := f/e.gain + r/e.reverse + base/e.across
		back := e.into(base - gate) // collector junction of the pnp
		forth := need + back*(1+1/e.reverse)
		anode = gate + kTq*math.Log1p(forth/e.saturation)
		own := forth/e.gain + back/e.reverse
		return (e.volts-gate)/e.ohms + own - (f - r*(1+1/e.reverse)), anode, need + own
	}
	low, high := -0.3, e.volts+1
	for range 100 {
		if left, _, _ := solve((low + high) / 2); left > 0 {
			low = (low + high) / 2
		} else {
			high = (low + high) / 2
		}
	}
	_, anode, amperes = solve(low)
	return anode, amperes
}

// ends returns the peak and the valley of the anode voltage.
func (e ebersMoll) ends() (peak, peakAmperes, valleyAmperes float64) {
	valley := math.Inf(1)
	for base := 0.25; base < 0.8; base += 0.0005 {
		v, i := e.at(base)
		switch {
		case v > peak:
			peak, peakAmperes, valley = v, i, v
		case v < valley:
			valley, valleyAmperes = v, i
		}
	}
	return peak, peakAmperes, valleyAmperes
}

// Peak voltage and the currents of a crossed pair agree with the equations of Ebers and Moll.
func TestCrossedPairAgreesWithEbersAndMoll(t *testing.T) {
	saturation := 1e-3 / math.Exp(0.65/kTq)
	for _, e := range []ebersMoll{
		{saturation, 150, 2, 7.2, 600, 1e15}, {saturation, 150, 2, 7.2, 13.2e3, 1e15}, {saturation, 150, 2, 7.2, 13.2e3, 22e3},
		{saturation, 50, 0.7, 6, 60e3, 100e3}, {saturation, 300, 10, 3, 5e3, 10e3}, {saturation, 300, 2, 7.2, 13.2e3, 2.2e3},
	} {
		across := ""
		if e.across < 1e12 {
			across = fmt.Sprintf("R5 b 0 %g\n", e.across)
		}
		text := fmt.Sprintf("t\nV1 vcc 0 %g\nR1 vcc a 1meg\nC1 a 0 1u\nQ1 b g a QP\nQ2 g b 0 QN\nR2 vcc g %g\nR3 g 0 %g\n%s"+
			".model QP PNP(bf=%g)\n.model QN NPN(bf=%g br=%g)\n", 2*e.volts, 2*e.ohms, 2*e.ohms, across, e.gain, e.gain, e.reverse) + exactAt25
		a := accountOf(t, text)
		peak, amperes, valley := e.ends()
		required := a.Nominal("peak_current_required")
		alone := required - a.model.pairStart()*(1+1/e.gain) // no equation gives I_0
		if math.Abs(alone-amperes) > 0.06*amperes {
			t.Errorf("%+v: peak current %.3g A, want %.3g", e, alone, amperes)
		}
		if got := a.Nominal("peak_voltage") - kTq*math.Log(required/alone); math.Abs(got-peak) > 0.003 {
			t.Errorf("%+v: peak %.4g V, want %.4g", e, got, peak)
		}
		if got := a.Nominal("valley_current_available"); got < valley/2 || got > 1.5*valley {
			t.Errorf("%+v: valley current %.3g A, want %.3g", e, got, valley)
		}
	}
}

// pairStart returns I_0 of the nominal board.
func (m *model) pairStart() float64 {
	for i, t := range m.traits {
		if t.name == "I_0" {
			return m.box[i].Nominal
		}
	}
	return 0
}
