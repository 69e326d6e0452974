package part_test

import (
	"math"
	"testing"

	"standoff/netlist/part"
	"standoff/netlist/source"
)

// Whatever stands in a parts file, the figures that come out are finite and in
// order, and a look-up by any name ends.
func FuzzParseFile(f *testing.F) {
	for _, text := range []string{
		".model A ujt(eta=0.6 ip=5u)\n", ".model A ujt(eta_min=0.8 eta_max=0.6 rbb_tc=0.9%)\n",
		".model A triac(igt_q1=5m igt_q4=10m quadrants=1234 mark=read memory=\"igt_q4\")\n",
		".model A scr(classes=\"A1,B=100 C=2k\" vgt=\n+ 0.8)\n", ".model Z d(bv=12 vz_tol=5%)\n",
		".model A isource(i=1m i_min=0.9m i_max=1.1m)\n", ".model Q6.Q\xff_/ scr(igt=1e308k)\n", "A",
	} {
		f.Add(text)
	}
	f.Fuzz(func(t *testing.T, text string) {
		list, _ := part.ParseFile(source.New("p.cir", text))
		for _, r := range list {
			part.Lookup(r.Name)
			for symbol, figure := range r.Figures {
				sound(t, symbol, figure)
				if s, _, ok := r.Spread(symbol); ok && !(s.Low <= s.Nominal && s.Nominal <= s.High) {
					t.Errorf("%s runs %v", symbol, s)
				}
			}
		}
	})
}

func sound(t *testing.T, symbol string, f part.Rating) {
	t.Helper()
	for _, v := range []float64{f.Min, f.Typ, f.Max} {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			t.Errorf("%s holds %g", symbol, v)
		}
	}
	if f.HasMin && f.HasMax && f.Min > f.Max {
		t.Errorf("%s runs from %g to %g", symbol, f.Min, f.Max)
	}
}
