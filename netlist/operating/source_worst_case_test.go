package operating

import (
	"math/rand/v2"
	"testing"
)

// source writes one of seven current sources between supply and capacitor.
func (d *deckMaker) source() {
	switch d.IntN(7) {
	case 0: // zener
		d.card("D1 b vcc DZ\n.model DZ D(bv=%g)", 3+5*d.Float64())
		d.resistor("b", "0", 2e3, 2e4)
		d.resistor("vcc", "ee", 1e3, 1e5)
		d.card("Q1 e b ee QP\n.model QP PNP(bf=%g)", 50+200*d.Float64())
	case 1: // divider
		d.resistor("vcc", "b", 1e3, 1e4)
		d.resistor("b", "0", 5e3, 1e5)
		d.resistor("vcc", "ee", 1e3, 1e5)
		d.card("Q1 e b ee QP\n.model QP PNP")
	case 2: // two diodes
		d.card("D1 vcc m DX\nD2 m b DX\n.model DX D")
		d.resistor("b", "0", 5e3, 1e5)
		d.resistor("vcc", "ee", 1e3, 1e5)
		d.card("Q1 e b ee QP\n.model QP PNP(bf=100)")
	case 3: // mirror
		d.resistor("vcc", "ea", 100, 2e3)
		d.resistor("vcc", "ee", 100, 2e3)
		d.card("Q1 e b ee QP\nQ2 b b ea QP\n.model QP PNP(bf=100%s)", [...]string{"", " vaf=40"}[d.IntN(2)])
		d.resistor("b", "0", 1e4, 1e6)
	case 4: // junction field-effect transistor
		d.card("J1 vcc jg s JX\n.model JX NJF(vto_min=-3 vto_max=-1 idss_min=2m idss_max=6m)")
		d.resistor("s", "jg", 100, 5e4)
		d.card("VM jg e 0")
	case 5: // regulator diode
		d.card("X5 vcc e CR\n.model CR isource(i_min=%g i_max=%g v_min=1 v_max=100)", 0.2e-3, 0.4e-3*(1+d.Float64()))
	case 6: // three-terminal source
		d.card("X5 vcc r e LM334")
		d.resistor("r", "e", 50, 5e3)
	}
	if d.IntN(4) == 0 {
		d.resistor("e", "0", 1e5, 1e7)
	}
}

// randomSource writes a random oscillator with a current source.
func randomSource(seed uint64) string {
	d := &deckMaker{Rand: rand.New(rand.NewPCG(seed, 9))}
	d.card("random board")
	d.card("V1 vcc 0 %g", 10+20*d.Float64())
	if d.IntN(2) == 0 {
		d.card("*> V1 tol=%d%%", d.IntN(15))
	}
	d.source()
	d.card("C1 e 0 %g", d.between(5e-9, 20e-6))
	low := d.IntN(60) - 30
	d.card("*> board ambient=%d..%d", low, low+d.IntN(70))
	switch d.IntN(4) {
	case 0:
		d.card("X1 e g k 2N6027")
		d.resistor("vcc", "g", 1e4, 1e5)
		d.resistor("g", "0", 1e4, 1e5)
		d.resistor("k", "0", 10, 100)
	case 1:
		d.card("X1 e k MBS4991")
		d.resistor("k", "0", 10, 100)
	default:
		d.card("X1 e b1 b2 %s", [...]string{"2N2646", "2N2647", "2N4871"}[d.IntN(3)])
		d.resistor("vcc", "b2", 50, 1000)
		d.resistor("b1", "0", 10, 100)
	}
	return d.b.String()
}

// running returns the first deck of a maker, from a seed on, whose nominal board
// fires: one that a saturated source keeps silent is held in any case, and what few
// of its boards do when they fire all the same is of no interest.
func running(t *testing.T, maker func(uint64) string) func(uint64) string {
	return func(seed uint64) string {
		for k := seed; ; k += 1 << 32 {
			text := maker(k)
			if m := modelOf(t, text); m.nominalOf("charging_current_at_peak") > 1e-7 {
				return text
			}
		}
	}
}

// The same for oscillators with current sources.
func TestNoSampledSourceBoardLiesOutsideTheBounds(t *testing.T) {
	sampleStages(t, running(t, randomSource), 1000)
}
