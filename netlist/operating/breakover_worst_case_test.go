package operating

import (
	"math/rand/v2"
	"testing"
)

// fromTheLine writes the feed of a board on the line: straight, behind a rectifier or a bridge, or
// smoothed.
func (d *deckMaker) fromTheLine() {
	d.b.WriteString(".model DR D\n")
	ends, which := "vcc 0", d.IntN(30)
	if which == 1 {
		ends = "vcc n"
	}
	d.card("V1 %s SIN(0 %g %d)", ends, d.between(30, 400), 50+10*d.IntN(2))
	from := "p"
	switch which {
	case 0:
		d.card("D1 vcc p DR")
	case 1:
		d.card("D1 vcc p DR\nD2 n p DR\nD3 0 vcc DR\nD4 0 n DR")
	case 2, 3, 4, 5, 6, 7, 8, 9:
		d.card("D1 vcc p DR\nC9 p 0 %g", d.between(4.7e-6, 100e-6))
	default:
		from = "vcc"
	}
	d.resistor(from, "e", 1e4, 1e6)
	if d.IntN(2) == 0 {
		d.resistor("e", "0", 1e5, 1e7)
	}
}

// randomBreakover writes a random breakover oscillator on dc or on the line,
// sometimes with a thyristor behind it.
func randomBreakover(seed uint64) string {
	d := &deckMaker{Rand: rand.New(rand.NewPCG(seed, 5))}
	d.card("random board")
	line := d.IntN(8) == 0
	if line {
		d.fromTheLine()
	} else {
		sign := [...]string{"", "-"}[d.IntN(2)*d.IntN(2)]
		d.card("V1 vcc 0 %s%g", sign, 12+100*d.Float64())
		if d.IntN(2) == 0 {
			d.card("*> V1 tol=%d%%", d.IntN(15))
		}
		d.charging()
		line = sign == "-" // no thyristor behind a negative pulse
	}
	d.card("C1 e 0 %g", d.between(5e-9, 20e-6))
	d.card("X1 e k %s", [...]string{"DB3", "MBS4991", "HT-32", "2N4992", "NE-2"}[d.IntN(5)])
	d.resistor("k", "0", 10, 100)
	low := d.IntN(60) - 30
	d.card("*> board ambient=%d..%d", low, low+d.IntN(70))
	if !line && d.IntN(3) == 0 {
		d.resistor("k", "sg", 10, 500)
		d.resistor("sg", "0", 200, 5000)
		d.card("X2 a sg 0 C106D")
		d.resistor("vcc", "a", 10, 1000)
	}
	return d.b.String()
}

// The same for breakover oscillators.
func TestNoSampledBreakoverBoardLiesOutsideTheBounds(t *testing.T) {
	sampleStages(t, randomBreakover, 2500)
}
