package part_test

import (
	"strings"
	"testing"

	"standoff/netlist/part"
)

func TestDecoratedNames(t *testing.T) {
	for name, want := range map[string]string{
		"2n2646": "2N2646", "X2N2646": "2N2646", "Q2N2646": "2N2646", "C106D/NS": "C106D",
		"C106D/FAI": "C106D", "2N2646_IR": "2N2646",
		"Q6.Q2N4871": "2N4871", "X1.Q6.2N4871": "2N4871", "2N2646_k": "2N2646",
		"BT151-500": "BT151-500R", "NTE6401": "2N2646",
		"mcr100-8": "MCR100-8", "MCR100_8": "MCR100-8", "DI_1N5283": "1N5283", "D1N5283": "1N5283",
		"DNDB3": "DB3", "XDB3": "DB3",
		"2N6394/75C": "2N6394", "GES2647": "2N2647", "get4871": "2N4871", "XQ2N6027/ZTX": "2N6027",
		"BT136-600E/NS": "BT136-600E",
		"BT136_600E":    "BT136-600E", "BT136-1000": "BT136", "C106D1": "C106D", "moc3021m": "MOC3021",
		"LM234": "LM134", "NE2": "NE-2",
	} {
		if r, ok := part.Lookup(name); !ok || r.Name != want {
			t.Errorf("Lookup(%q) = %v, %v; want %s", name, r, ok, want)
		}
	}
}

// Another part must not be found: a letter or a digit more is another part.
func TestOtherPartsAreNotFound(t *testing.T) {
	for _, name := range []string{
		"2N2648", "BC547", "2N264", "C10", "UJT", "", "X", "Q", "2N26460", "C106X", "BT136-600X",
		"BT151-500X", "1N4148", "2N3904", "DIAC", "TRIAC", "BTA12", "2N4870/71", "2N6071C",
		"MCR100-9", "C106_D", "GATE", "SOURCE", "UJT(", "ETA_MIN", "C106A=100", "memory", ".model",
		strings.Repeat("X", 1000) + "2N2646", strings.Repeat("2N2646", 1000), "2N2646\x00",
	} {
		if r, ok := part.Lookup(name); ok {
			t.Errorf("Lookup(%q) = %s", name, r.Name)
		}
	}
}

func TestLookupsAgreeWhenTheyRunTogether(t *testing.T) {
	done := make(chan *part.Ratings)
	for range 8 {
		go func() {
			r, _ := part.Lookup("XTIC106M/PI")
			done <- r
		}()
	}
	first := <-done
	for range 7 {
		if r := <-done; r != first || r == nil || r.Name != "TIC106M" {
			t.Errorf("got %v and %v", first, r)
		}
	}
}

func TestNetlistOrder(t *testing.T) {
	for kind, want := range map[part.Kind]string{
		part.UJT: "emitter base1 base2", part.PUT: "anode gate cathode", part.SCR: "anode gate cathode",
		part.Triac: "mt2 gate mt1", part.Optotriac: "anode cathode mt2 mt1", "": "",
	} {
		if got := strings.Join(part.NetlistOrder(kind), " "); got != want {
			t.Errorf("order of a %s: %q, want %q", kind, got, want)
		}
	}
	if len(part.NetlistOrder(part.Diac)) != 2 || len(part.NetlistOrder(part.CurrentSource)) != 3 {
		t.Error("a diac has two terminals, a current source three")
	}
}
