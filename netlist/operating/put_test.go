package operating

import (
	"math"
	"strings"
	"testing"
)

// exactAt25 takes every spread of board parts away.
const exactAt25 = "*> all R tol=0\n*> all C tol=0\n*> all V tol=0\n*> board ambient=25..25\n"

// exactPUT is a device without spread.
const exactPUT = ".model PX put(vt_10k=0.35 vt_1meg=0.7 ip_10k=5u ip_1meg=2u iv_200=1.5m iv_10k=70u vv=0.8 vf=0.8 vo=11)\n"

// nominalOf returns a figure on the nominal board.
func nominalOf(t *testing.T, text, name string) float64 {
	t.Helper()
	v := accountOf(t, text).Nominal(name)
	if math.IsNaN(v) {
		t.Fatalf("no %s\n%s", name, text)
	}
	return v
}

// A conducting device pulls its gate down: a resistor from there to the anode, which
// helps to charge, then holds nothing on.
func TestAConductingDevicePullsItsGateDown(t *testing.T) {
	const board = "t\nV1 vcc 0 12\nR1 vcc a 330k\nR9 g a 1meg\nC1 a 0 1u\nX1 a g k PX\nR2 vcc g 20k\nR3 g 0 20k\nR4 k 0 47\n"
	got := nominalOf(t, board+exactPUT+exactAt25, "charging_current_at_valley")
	if want := (12 - 0.8) / 330e3; math.Abs(got-want) > 1e-9*want {
		t.Errorf("%g through R1 alone expected, got %g", want, got)
	}
	// A soft rail shared with the divider sags: 1 kohm feeds R1 and 2 kohm to a gate held at 0.8 V.
	const soft = "t\nV1 raw 0 12\nR8 raw vcc 1k\nR1 vcc a 330k\nC1 a 0 1u\nX1 a g k PX\nR2 vcc g 2k\nR3 g 0 20k\nR4 k 0 47\n"
	rail := (12.0/1e3 + 0.8/2e3 + 0.8/330e3) / (1/1e3 + 1/2e3 + 1/330e3)
	got = nominalOf(t, soft+exactPUT+exactAt25, "charging_current_at_valley")
	if want := (rail - 0.8) / 330e3; math.Abs(got-want) > 1e-9*want {
		t.Errorf("%g on the sagging rail expected, got %g", want, got)
	}
}

// A lamp diode in the cathode lead carries the pulse: its resistor limits it and its
// threshold lifts the valley.
func TestADiodeInTheCathodeLead(t *testing.T) {
	const board = "t\nV1 vcc 0 12\nR1 vcc a 330k\nC1 a 0 1u\nX1 a g k PX\nR2 vcc g 20k\nR3 g 0 20k\nR4 k d 47\nD1 d 0 DL\n.model DL D\n"
	text := board + exactPUT + exactAt25
	on := 20 * ((20-0.8)/11 - 1)
	peak := 6 + 0.35
	if got, want := nominalOf(t, text, "valley_voltage"), 0.8+diodeThreshold.Nominal; math.Abs(got-want) > 1e-9 {
		t.Errorf("valley %g, want %g", got, want)
	}
	got := nominalOf(t, text, "discharge_peak_current")
	if want := (peak - 0.8 - diodeThreshold.Nominal) / (on + 47 + diodeSlope); math.Abs(got-want) > 1e-6*want {
		t.Errorf("surge %g, want %g", got, want)
	}
}

// With 20 V on the capacitor the least pulse into the sheet's 20 ohm is the sheet's least V_O.
func TestPUTPulseInTheSheetsLoad(t *testing.T) {
	const board = "t\nV1 vcc 0 30\nR1 vcc a 510k\nC1 a 0 0.2u\nX1 a g k 2N6027\nR2 vcc g 10.2k\nR3 g 0 19.8k\nR4 k 0 20\n"
	f, _ := accountOf(t, board+exactAt25).Figure("discharge_peak_current")
	if got := 20 * f.Low; math.Abs(got-6) > 1e-3*6 {
		t.Errorf("%g V, the sheet says 6 V", got)
	}
}

// Beyond the sheet's gate resistances nothing is more than a doubt, also where only
// some of the boards lie there; a gate on a stiff supply has none at all.
func TestBeyondTheSheetIsADoubt(t *testing.T) {
	for _, c := range []struct{ name, text, comparison, because string }{
		{"stiff gate", "V2 g 0 6\n", "gate_source_resistance_least", "outside the gate resistances"},
		{"stiff gate, peak", "V2 g 0 6\n", "charging_current_at_peak", "no peak current at a gate resistance"},
		{"adjustable divider", "R2 vcc g 24k\nR3 g 0 24k\n*> R3 travel=2k..24k\n", "charging_current_at_valley", "no valley current at a gate resistance"},
	} {
		resistor := map[bool]string{true: "R1 vcc a 3.3meg\n", false: "R1 vcc a 47k\n"}[strings.Contains(c.name, "stiff")]
		k, ok := accountOf(t, "t\nV1 vcc 0 12\n"+resistor+"C1 a 0 1u\nX1 a g k PX\n"+c.text+"R4 k 0 47\n"+exactPUT+exactAt25).Comparison(c.comparison)
		if !ok || !k.Fails() || k.Certain || !strings.Contains(k.Because, c.because) {
			t.Errorf("%s: %+v", c.name, k)
		}
	}
}

// A target that only the drift of the offset voltage breaks is a doubt, since that is
// from memory; one that the capacitor's own drift breaks is not.
func TestDriftFromMemoryIsADoubt(t *testing.T) {
	const board = "t\nV1 vcc 0 12\nR1 vcc a 330k\nC1 a 0 1u\nX1 a g k PX\nR2 vcc g 20k\nR3 g 0 20k\nR4 k 0 47\n" + exactPUT + exactAt25 +
		"*> board ambient=-20..80\n"
	for _, c := range []struct {
		intent  string
		certain bool
	}{{"*> X1 period=0.22..0.23\n", false}, {"*> X1 period=0.22..0.23\n*> C1 tempco=-3000\n", true}} {
		k, ok := accountOf(t, board+c.intent).Comparison("frequency_drift_lowest")
		if !ok || !k.Fails() || k.Certain != c.certain {
			t.Errorf("%s: %+v", c.intent, k)
		}
	}
}
