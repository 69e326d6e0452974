package operating

import (
	"math/rand/v2"
	"testing"
)

// divider writes one of five gate dividers.
func (d *deckMaker) divider() {
	switch d.IntN(5) {
	case 0, 1:
		d.resistor("vcc", "g", 1e3, 1e6)
		d.resistor("g", "0", 1e3, 1e6)
	case 2: // a diode against the drift of the offset voltage
		d.resistor("vcc", "g", 1e3, 1e5)
		d.card("D1 g gd DX\n.model DX D")
		d.resistor("gd", "0", 1e3, 1e5)
	case 3: // adjustable stand-off
		d.resistor("vcc", "g", 1e3, 1e5)
		d.n++
		d.card("R%d g gp 10k\n*> R%d travel=10..20k", d.n, d.n)
		d.resistor("gp", "0", 1e3, 1e5)
	case 4: // fed through a resistor that the charging network shares
		d.resistor("vcc", "vs", 100, 2e3)
		d.resistor("vs", "g", 1e3, 1e6)
		d.resistor("g", "0", 1e3, 1e6)
		d.resistor("vs", "e", 1e5, 1e7)
	}
}

// randomPUT writes a random programmable oscillator, sometimes with a thyristor
// behind it.
func randomPUT(seed uint64) string {
	d := &deckMaker{Rand: rand.New(rand.NewPCG(seed, 3))}
	d.card("random board")
	d.card("V1 vcc 0 %g", 8+22*d.Float64())
	if d.IntN(2) == 0 {
		d.card("*> V1 tol=%d%%", d.IntN(15))
	}
	d.charging()
	d.card("C1 e 0 %g", d.between(5e-9, 20e-6))
	d.divider()
	if d.IntN(5) == 0 { // two transistors in its place
		d.card("Q1 x g e QP\nQ2 g x k QN\n.model QP PNP(bf=%g)\n.model QN NPN", 50+200*d.Float64())
		if d.IntN(2) == 0 {
			d.resistor("x", "k", 1e4, 1e6)
		}
	} else {
		d.card("X1 e g k %s", [...]string{"2N6027", "2N6028", "BRY56A", "D13T1"}[d.IntN(4)])
	}
	switch d.IntN(8) {
	case 0: // a lamp diode lights with the pulse
		d.card("D9 k kd DX\n.model DX D")
		d.resistor("kd", "0", 10, 100)
	case 1: // a resistor from gate to anode
		d.resistor("g", "e", 1e6, 1e7)
		fallthrough
	default:
		d.resistor("k", "0", 10, 100)
	}
	low := d.IntN(60) - 30
	d.card("*> board ambient=%d..%d", low, low+d.IntN(70))
	if d.IntN(3) == 0 {
		d.resistor("k", "sg", 10, 500)
		d.resistor("sg", "0", 200, 5000)
		d.card("X2 a sg 0 C106D")
		d.resistor("vcc", "a", 10, 1000)
	}
	return d.b.String()
}

// The same for programmable oscillators.
func TestNoSampledPUTBoardLiesOutsideTheBounds(t *testing.T) { sampleStages(t, randomPUT, 2500) }
