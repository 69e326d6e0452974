package circuit_test

import (
	"math"
	"testing"

	"standoff/netlist/circuit"
)

func TestSpreads(t *testing.T) {
	c := sound(t, `
R1 a b 1k
R2 a b 1k
R3 a b 50k
R4 a b 50k
C1 a b 10u
C2 a b 10n
V1 a 0 12
V2 l 0 SIN(0 325 50)
.subckt s p
R1 p 0 1k
R2 p 0 1k
*> all R tol=2%
*> R2 tol=3%
.ends
X1 a s
*> all R tol=10%
*> R1 tol=1% tempco=100
*> R3 travel=1k..100k
*> R4 travel=1k..100k tol=20%
*> C1 kind=electrolytic
*> V1 range=9..15
*> X1.R1 power=0.25
*> board mains=207..253`)
	for name, want := range map[string][3]float64{
		"R1": {990, 1000, 1010}, "R2": {900, 1000, 1100}, "R3": {1e3, 50e3, 100e3}, "R4": {800, 50e3, 120e3},
		"C1": {8e-6, 10e-6, 12e-6}, "C2": {9e-9, 10e-9, 11e-9}, "V1": {9, 12, 15},
		"V2": {207 * math.Sqrt2, 325, 253 * math.Sqrt2}, "X1.R1": {980, 1000, 1020}, "X1.R2": {970, 1000, 1030},
	} {
		v := find(t, c, name).Value
		for i, got := range []float64{v.Low, v.Nominal, v.High} {
			if !(math.Abs(got-want[i]) <= 1e-9*want[i]) {
				t.Errorf("%s: got %+v, want %v", name, v, want)
				break
			}
		}
	}
	if r := find(t, c, "R1"); math.Abs(*r.Intent.Tempco-100e-6) > 1e-15 || r.Basis != circuit.BasisDeclared {
		t.Error("tempco is in ppm/K, and a declared tolerance is declared")
	}
	if find(t, c, "X1.R1").Intent.Power == nil {
		t.Error("a path names an element inside a subcircuit")
	}
}

func TestSpreadsOfOddSources(t *testing.T) {
	const mains = "\n*> board mains=207..253"
	for _, c := range []struct {
		text string
		want [3]float64
		by   circuit.Basis
	}{
		{"V1 a 0 SIN(0 325 50)", [3]float64{308.75, 325, 341.25}, circuit.BasisDefault},
		{"V1 a 0 SIN(0 -325 50)" +
			mains, [3]float64{-253 * math.Sqrt2, -325, -207 * math.Sqrt2}, circuit.BasisDeclared},
		{"V1 a 0 SIN(0 400 50)" +
			mains, [3]float64{207 * math.Sqrt2, 253 * math.Sqrt2, 253 * math.Sqrt2}, circuit.BasisDeclared},
		{"V1 a 0 SIN(0 12 50)" + mains, [3]float64{11.4, 12, 12.6}, circuit.BasisDefault},
		{"V1 a 0 SIN(0 325 400)" + mains, [3]float64{308.75, 325, 341.25}, circuit.BasisDefault},
		{"V1 a 0 SIN(0 325 50)" + mains + "\n*> V1 range=300..340",
			[3]float64{300, 325, 340}, circuit.BasisDeclared},
		{"V1 a 0 -12", [3]float64{-12.6, -12, -11.4}, circuit.BasisDefault},
		{"V1 a 0 0", [3]float64{0, 0, 0}, circuit.BasisExact},
		{"V1 a 0 20\n*> V1 range=9..15", [3]float64{9, 15, 15}, circuit.BasisDeclared},
		{"V1 a 0 12\n*> V1 tol=0", [3]float64{12, 12, 12}, circuit.BasisDeclared},
		{"I1 a 0 1m", [3]float64{0.95e-3, 1e-3, 1.05e-3}, circuit.BasisDefault},
		{"L1 a 0 1m", [3]float64{1e-3, 1e-3, 1e-3}, circuit.BasisExact},
		{"C1 a 0 1u\n*> all C kind=electrolytic", [3]float64{0.8e-6, 1e-6, 1.2e-6}, circuit.BasisDefault},
		{"R1 a 0 1k\n*> all R tol=1%\n*> R1 travel=0..10k", [3]float64{0, 1e3, 10e3}, circuit.BasisDeclared},
		{"R1 a 0 50k\n*> R1 travel=0..10k", [3]float64{0, 10e3, 10e3}, circuit.BasisDeclared},
	} {
		e := sound(t, c.text).Elements[0]
		for i, got := range []float64{e.Value.Low, e.Value.Nominal, e.Value.High} {
			if !(math.Abs(got-c.want[i]) <= 1e-9*math.Abs(c.want[i])) || e.Basis != c.by {
				t.Errorf("%s: got %+v (%s), want %v (%s)", c.text, e.Value, e.Basis, c.want, c.by)
				break
			}
		}
	}
}

func TestTemperatureCoefficientOnTheCard(t *testing.T) {
	c := sound(t, "R1 a b 1k tc=0.004\nR2 a b 1k TC = 0.001,0.00002\nR3 a b 1k tc=1m\n*> R3 tempco=50")
	for name, want := range map[string]float64{"R1": 0.004, "R2": 0.001, "R3": 50e-6} {
		if got := *find(t, c, name).Intent.Tempco; !(math.Abs(got-want) <= 1e-12) {
			t.Errorf("%s: %g, want %g", name, got, want)
		}
	}
}

func TestPolarCapacitors(t *testing.T) {
	c := sound(t, "C1 a b 1u\nC2 a b 1u\n*> C1 kind=tantalum")
	if find(t, c, "C1").Roles[0] != "plus" || find(t, c, "C2").Roles[0] != "1" {
		t.Error("the first node of a tantalum is its plus")
	}
}
