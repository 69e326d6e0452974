package quantity_test

import (
	"math"
	"testing"

	"standoff/netlist/quantity"
)

// The equal spellings are those of the SPICE2 input format (Berkeley): 1000,
// 1000.0, 1000HZ, 1E3, 1.0E3, 1KHZ, 1K; 10, 10V, 10VOLTS, 10HZ.
func TestParseReadsTheSpellingsOfTheSPICE2Manual(t *testing.T) {
	for text, want := range map[string]float64{
		"1000": 1000, "1000.0": 1000, "1000HZ": 1000, "1E3": 1000, "1.0E3": 1000, "1KHZ": 1000, "1K": 1000,
		"10": 10, "10V": 10, "10VOLTS": 10, "10HZ": 10, "1M": 1e-3, "1MA": 1e-3, "1MSEC": 1e-3, "1MMHOS": 1e-3,
		"1MEG": 1e6, "1megohm": 1e6, "1MIL": 25.4e-6, "10F": 10e-15, "1UF": 1e-6, "0.1u": 0.1e-6, "0.1uF": 0.1e-6,
		"-5m": -5e-3, "+3.3": 3.3, ".5": 0.5, "5.": 5, "1T": 1e12, "1G": 1e9, "2.2n": 2.2e-9, "1e-14": 1e-14,
		"2x": 2e6, "1µ": 1e-6, "1μF": 1e-6,
	} {
		n, err := quantity.Parse(text)
		if err != nil || math.Abs(n.Value-want) > 1e-12*math.Abs(want) {
			t.Errorf("Parse(%q) = %g, %v; want %g", text, n.Value, err, want)
		}
	}
}

func TestParseReadsTheTradesNotationAndSaysSo(t *testing.T) {
	for text, want := range map[string]float64{"4k7": 4700, "2R2": 2.2, "R47": 0.47, "1M5": 1.5e6, "4n7": 4.7e-9,
		"100R0": 100, "0R1": 0.1} {
		n, err := quantity.Parse(text)
		if err != nil || !n.Trade || math.Abs(n.Value-want) > 1e-12*want {
			t.Errorf("Parse(%q) = %+v, %v; want %g in trade notation", text, n, err, want)
		}
	}
	if n, _ := quantity.Parse("47k"); n.Trade {
		t.Error("47k is not trade notation")
	}
}

func TestParseRefuses(t *testing.T) {
	for _, text := range []string{"", "k", "nan", "inf", "0,9", "1e999", "4k7;", "--3", ".", "R", "1_000", "5..6"} {
		if n, err := quantity.Parse(text); err == nil {
			t.Errorf("Parse(%q) = %g; want an error", text, n.Value)
		}
	}
}

// E24 as printed in IEC 60063 tables; the exceptions to rounding are 2.7, 3.0,
// 3.3, 3.6, 3.9, 4.3, 4.7 and 8.2.
func TestSeriesFollowTheStandard(t *testing.T) {
	exceptions := map[float64]bool{2.7: true, 3.0: true, 3.3: true, 3.6: true, 3.9: true, 4.3: true, 4.7: true, 8.2: true}
	for i, v := range quantity.Series(24) {
		rounded := math.Round(10*math.Pow(10, float64(i)/24)) / 10
		if (rounded != v) != exceptions[v] {
			t.Errorf("E24 value %d is %g, 10^(n/24) rounds to %g", i, v, rounded)
		}
	}
	printed := []float64{1.00, 1.05, 1.10, 1.15, 1.21, 1.27, 1.33, 1.40, 1.47, 1.54, 1.62, 1.69}
	for i, v := range printed {
		if got := quantity.Series(48)[i]; math.Abs(got-v) > 1e-9 {
			t.Errorf("E48 value %d is %g, printed %g", i, got, v)
		}
	}
	if got := quantity.Series(192)[185]; got != 9.20 {
		t.Errorf("E192 value 185 is %g, the standard prints 9.20", got)
	}
	for n, count := range map[int]int{3: 3, 6: 6, 12: 12, 24: 24, 48: 48, 96: 96, 192: 192} {
		if len(quantity.Series(n)) != count {
			t.Errorf("E%d has %d values", n, len(quantity.Series(n)))
		}
	}
}

func TestIsPreferred(t *testing.T) {
	for _, v := range []float64{47e3, 1e6, 0.1e-6, 4.7e-9, 910, 220e-6, 8.2, 1.5} {
		if !quantity.IsPreferred(v, 0.05) {
			t.Errorf("%g is not preferred at 5 %%", v)
		}
	}
	if quantity.IsPreferred(48e3, 0.05) || quantity.IsPreferred(49.9e3, 0.05) {
		t.Error("48k and 49.9k are not in E24")
	}
	if !quantity.IsPreferred(49.9e3, 0.01) || !quantity.IsPreferred(47e3, 0.01) {
		t.Error("49.9k (E96) and 47k (E24) are sold at 1 %")
	}
}

func TestFormatAndShort(t *testing.T) {
	for want, got := range map[string]string{
		"47 kohm": quantity.Format(47e3, "ohm"), "100 nF": quantity.Format(0.1e-6, "F"), "3.9 uA": quantity.Format(3.9e-6, "A"),
		"25 deg C": quantity.Format(25, "deg C"), "0.65": quantity.Format(0.65, ""), "1 Mohm": quantity.Format(999999.9999, "ohm"),
		"0 V": quantity.Format(0, "V"), "-12 V": quantity.Format(-12, "V"), "680k": quantity.Short(680e3), "4.7k": quantity.Short(4700),
		"1.5meg": quantity.Short(1.5e6), "100n": quantity.Short(0.1e-6), "470": quantity.Short(470),
	} {
		if got != want {
			t.Errorf("got %q, want %q", got, want)
		}
	}
}

func TestShortIsTheInverseOfParse(t *testing.T) {
	for _, n := range []int{24, 96} {
		for d := -12; d < 9; d++ {
			for _, p := range quantity.Series(n) {
				v := p * math.Pow10(d)
				back, err := quantity.Parse(quantity.Short(v))
				if err != nil || math.Abs(back.Value-v) > 1e-11*v {
					t.Fatalf("%g -> %q -> %g, %v", v, quantity.Short(v), back.Value, err)
				}
			}
		}
	}
}

func FuzzNumber(f *testing.F) {
	for _, s := range []string{"47k", "4k7", "1meg", "0,9", "1e-7", "R47", "µ", "1µF", "5..6"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		n, err := quantity.Parse(text)
		if err == nil && (math.IsNaN(n.Value) || math.IsInf(n.Value, 0)) {
			t.Fatalf("Parse(%q) = %g", text, n.Value)
		}
	})
}

func TestASuffixIsExact(t *testing.T) {
	for text, want := range map[string]float64{"5u": 5e-6, "0.1u": 0.1e-6, "4.7n": 4.7e-9, "2.2meg": 2.2e6, "0.22u": 0.22e-6, "0u": 0, "-3.3k": -3300} {
		if n, err := quantity.Parse(text); err != nil || n.Value != want {
			t.Errorf("Parse(%q) = %v, %v; want %v", text, n.Value, err, want)
		}
	}
}
