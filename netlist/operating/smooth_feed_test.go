package operating

import (
	"math"
	"strings"
	"testing"
)

// A reservoir of 10 uF (9 uF at least) on 50 Hz loses 1/(f R C) of the crest to 1 Mohm between two
// crests; one that loses more than half of it makes no dc.
func TestReservoirFallsByItsLoad(t *testing.T) {
	const text = "t\nV1 l 0 SIN(0 325 50)\nD1 l p DR\nC2 p 0 10u\nR1 p a 1meg\nC1 a 0 1u\nX1 a 0 NE-2\n.model DR D\n"
	m := breakoverOf(t, text)
	if m.line != nil || m.smooth == nil {
		t.Fatal("it is not taken for dc")
	}
	if lost, want := m.box[m.smooth.ripple].High, 1/(50*1e6*9e-6); math.Abs(lost-want) > 1e-3*want {
		t.Errorf("it loses %g of the crest, wanted %g", lost, want)
	}
	b := build(t, text, 0)
	small := strings.Replace(text, "C2 p 0 10u", "C2 p 0 30n", 1)
	if a := accountOf(t, small); len(a.Unchecked) != 1 || !strings.Contains(a.Unchecked[0].Because, "too small to smooth") {
		t.Errorf("%+v", a.Unchecked)
	}
	if b.m.cycle.period <= 0 || math.IsInf(b.m.cycle.period, 0) {
		t.Errorf("period %g", b.m.cycle.period)
	}
}

// A zener clips what the line feeds: the capacitor settles at its voltage.
func TestClippedFeedSettlesAtTheZener(t *testing.T) {
	m := breakoverOf(t, "t\nV1 l 0 SIN(0 325 50)\nD1 l p DR\nR9 p z 10k\nDZ1 0 z DZ\nR1 z a 10k\nC1 a 0 10n\nX1 a k MBS4992\nR2 k 0 47\n"+
		".model DR D\n.model DZ D(bv=20)\n")
	if math.Abs(m.extent().reach-20) > 0.1 {
		t.Errorf("it settles at %g V", m.extent().reach)
	}
}
