package part_test

import (
	"testing"

	"standoff/netlist/part"
	"standoff/netlist/quantity"
)

const (
	read   = part.Read
	scan   = part.Scan
	memory = part.Memory
)

// limit is the guaranteed side of one figure as a document prints it.
type limit struct {
	part, symbol string
	want         float64
	mark         part.Mark
	source       string
}

func TestLimitsOfUnijunctions(t *testing.T) {
	check(t, []limit{
		{"2N2646", "ip", 5e-6, scan, "Motorola Thyristor Device Data p. 3-19"},
		{"2N2646", "ieo", 12e-6, scan, "Motorola p. 3-19"},
		{"2N2646", "iv", 4e-3, read, "a secondary source that cites a maker's sheet"},
		{"2N2646", "vob1", 3, memory, ""},
		{"2N2646", "cap_direct", 10e-6, scan, "Motorola p. 3-19"},
		{"2N2646", "ie_pulse", 2, scan, "Motorola p. 3-19"},
		{"2N2647", "ip", 2e-6, read, "multicomp 2N2647"},
		{"2N2647", "iv", 8e-3, read, "multicomp 2N2647"},
		{"2N2647", "vob1", 6, read, "multicomp 2N2647"}, {"NTE6409", "ieo", 0.2e-6, read, "NTE6409"},
		{"2N4870", "iv", 2e-3, read, "multicomp 2N4870"},
		{"2N4870", "ie_pulse", 1.5, read, "multicomp 2N4870"},
		{"2N4871", "iv", 4e-3, read, "multicomp 2N4871"}, {"2N4871", "vob1", 5, read, "multicomp 2N4871"},
		{"2N4853", "ip", 0.4e-6, scan, "Motorola p. 3-39"},
		{"2N4853", "iv", 6e-3, scan, "Motorola p. 3-39"},
		{"2N4852", "vob1", 5, memory, ""}, {"2N4851", "vob1", 3, scan, "Motorola p. 3-39"},
		{"2N4853", "vb2b1", 35, scan, "Motorola p. 3-39"},
		{"2N4948", "vob1", 6, scan, "New Jersey Semiconductor 2N4948/49"},
		{"2N4949", "ip", 1e-6, scan, "the same"},
		{"2N4949", "pd_slope", 2.4e-3, scan, "the same"},
		{"2N5431", "ip", 0.4e-6, read, "Digitron 2N5431"},
		{"2N5431", "vbb_min", 4, read, "Digitron 2N5431"}, {"2N5431", "vob1", 1, read, "Digitron 2N5431"},
		{"2N2840", "ip", 10e-6, scan, "New Jersey Semiconductor 2N2840"},
		{"2N2840", "iv", 0.2e-3, scan, "the same"},
		{"MU4894", "ip", 1e-6, memory, ""},
		{"MU4894", "ie_pulse", 1, scan, "New Jersey Semiconductor MU4891-94"},
		{"2N4894", "iv", 2e-3, memory, ""}, {"2N1671B", "ip", 6e-6, memory, ""},
		{"2N494C", "ip", 2e-6, memory, ""}, {"2N493B", "ip", 6e-6, memory, ""},
	})
}

func TestLimitsOfProgrammableUnijunctions(t *testing.T) {
	check(t, []limit{
		{"2N6027", "ip_1meg", 2e-6, read, "ON 2N6027/D"}, {"2N6027", "ip_10k", 5e-6, read, "ON 2N6027/D"},
		{"2N6027", "iv_10k", 70e-6, read, "ON 2N6027/D"},
		{"2N6027", "iv_200", 1.5e-3, read, "ON 2N6027/D"},
		{"2N6027", "energy", 250e-6, read, "ON 2N6027/D"}, {"2N6027", "vgkr", 5, read, "ON 2N6027/D"},
		{"2N6028", "ip_1meg", 0.15e-6, read, "NTE 2N6028"},
		{"2N6028", "iv_10k", 25e-6, read, "ON 2N6027/D"},
		{"2N6028", "iv_200", 1e-3, read, "ON 2N6027/D"},
		{"BRY56A", "ip_100k", 60e-9, read, "Philips BRY56A"},
		{"BRY56", "iv_10k", 2e-6, read, "Philips BRY56"}, {"BRY39", "pd", 0.275, read, "Philips BRY39"},
		{"2N6118", "ip_10k", 1e-6, memory, ""}, {"NTE6402", "vgkr", 5, read, "NTE6402"},
	})
	// At 1 Mohm the sheet has only a greatest valley current: nothing is promised.
	if v, _, ok := lookup(t, "2N6027").Limit("iv_1meg"); ok {
		t.Errorf("iv_1meg of the 2N6027 is no limit, got %g", v)
	}
}

func TestLimitsOfRectifiers(t *testing.T) {
	check(t, []limit{
		{"C106D", "igt", 200e-6, read, "onsemi C106/D"},
		{"C106D", "igt_cold", 500e-6, read, "onsemi C106/D"},
		{"C106D", "vgt", 0.8, read, "onsemi C106/D"}, {"C106D", "vgt_cold", 1, read, "onsemi C106/D"},
		{"C106D", "vgd", 0.2, read, "onsemi C106/D"}, {"C106D", "igm", 0.2, read, "onsemi C106/D"},
		{"C106D", "ih_cold", 6e-3, read, "onsemi C106/D"}, {"C106D", "il", 5e-3, read, "onsemi C106/D"},
		{"T106D", "igt_cold", 500e-6, read, "Teccor catalogue"}, {"T106D", "igt", 200e-6, memory, ""},
		{"T107B", "vdrm", 200, memory, ""},
		{"2N5060", "vgd", 0.1, read, "onsemi 2N5060"},
		{"2N5060", "igt_cold", 350e-6, read, "onsemi 2N5060"},
		{"2N5064", "vgt_cold", 1.2, read, "onsemi 2N5060"}, {"2N5064", "tj", 110, read, "onsemi 2N5060"},
		{"EC103D1", "igt", 12e-6, read, "Littelfuse EC103xx"},
		{"EC103M3", "dvdt", 20e6, read, "Littelfuse EC103xx"},
		{"MCR100-6", "dvdt", 20e6, read, "onsemi, Lite-On"}, {"MCR100-6", "pgm", 0.1, read, "onsemi"},
		{"MCR100-6", "vgd", 0.1, read, "older makers"},
		{"MCR106-8", "itsm", 25, read, "onsemi MCR106"}, {"TIC106M", "vgt", 1, read, "Bourns TIC106"},
		{"TIC106M", "pgm", 1.3, read, "Bourns TIC106"},
		{"BT149G", "vgd", 0.2, read, "Philips BT149"}, {"BT169D", "dvdt", 500e6, read, "NXP BT169"},
		{"BR103", "tq", 6e-6, read, "Digitron BR103"},
		{"2N1870A", "dvdt", 100e6, read, "Digitron 2N1870A"}, {"BT168GW", "dvdt", 500e6, memory, ""},
		{"BT168GW", "igt", 200e-6, read, "Philips"},
		{"2N1595", "it_av", 1, scan, "GE sheet"}, {"2N1595", "igm", 0.1, memory, ""},
		{"2N1772", "igt", 15e-3, scan, "Motorola index"},
		{"2N4170", "igt", 30e-3, memory, ""}, {"2N4170", "vdrm", 200, scan, "Motorola index"},
		{"2N1689", "igt", 1e-3, scan, "Motorola index"},
		{"2N6397", "igt", 30e-3, read, "onsemi 2N6394/D"}, {"2N6397", "ih", 50e-3, memory, ""},
		{"2N6403", "igt_cold", 60e-3, read, "2N6400 series"},
		{"2N6403", "vdrm", 400, memory, ""}, {"2N6507", "igt_cold", 75e-3, read, "onsemi 2N6504"},
		{"2N6507", "itsm", 250, read, "onsemi 2N6504"},
		{"C122B", "igt", 25e-3, memory, ""}, {"C122B1", "itsm", 90, read, "Motorola C122"},
		{"C122B", "tj", 100, read, "Motorola C122"},
		{"BT151-500R", "igt", 15e-3, read, "NXP BT151"}, {"BT151-500L", "igt", 5e-3, read, "NXP BT151"},
		{"BT151-800R", "dvdt", 50e6, read, "NXP BT151"},
		{"TIC126D", "vgt_cold", 2.5, read, "TIC126 series"},
		{"TIC126D", "ih_cold", 0.1, read, "TIC126 series"}, {"TIC126D", "igm", 3, memory, ""},
		{"MCR12LM", "igt", 8e-3, read, "onsemi MCR12L"},
		{"2N4443", "vgrm", 10, read, "Digitron 2N4441"}, {"2N4443", "igt", 30e-3, memory, ""},
		{"2N3670", "itsm", 200, read, "equivalent type"}, {"TYN612M", "igt", 5e-3, read, "ST TYN612M"},
		{"TYN1212", "dvdt", 200e6, read, "ST TYN1212"},
		{"TYN812T", "igt", 5e-3, read, "ST DocID7475"},
		{"BT152-600R", "igt", 32e-3, read, "Philips BT152"}, {"2N688", "igt", 60e-3, read, "Vishay"},
		{"2N688", "itsm", 145, read, "JEDEC sheets"}, {"2N688", "pgm", 5, memory, ""},
		{"2N1846", "vgt", 3, scan, "GE 2N1842-50, B suffix"},
	})
}

func TestLimitsOfTriacsAndDrivers(t *testing.T) {
	check(t, []limit{
		{"2N6073A", "igt_q1", 5e-3, read, "onsemi 2N6071A/B"},
		{"2N6073A", "igt_q4", 10e-3, read, "onsemi 2N6071A/B"},
		{"2N6073A", "igt_cold_q4", 30e-3, read, "onsemi 2N6071A/B"},
		{"2N6073B", "igt_cold_q2", 15e-3, read, "onsemi 2N6071A/B"},
		{"BT136-600", "igt_q4", 70e-3, read, "Philips BT136"},
		{"BT136-600F", "igt_q2", 25e-3, read, "Philips BT136"},
		{"BT136-600G", "il_q2", 45e-3, read, "Philips BT136"},
		{"BT136-600E", "igt", 25e-3, read, "Philips BT136E"},
		{"BT137-600E", "igt_q3", 10e-3, read, "Philips BT137"},
		{"BT137-600", "igt_q1", 35e-3, memory, ""}, {"BT137-600", "didt_q4", 10e6, read, "Philips"},
		{"BT138-800E", "il_q4", 40e-3, read, "Philips BT138E"},
		{"BT139-600E", "ih", 45e-3, read, "Philips BT139E"},
		{"MAC97A8", "igt_q4", 7e-3, read, "onsemi MAC97"},
		{"MAC97A8", "vgt", 2.5, read, "onsemi MAC97"}, {"MAC97A8", "vgd", 0.1, read, "onsemi MAC97"},
		{"MAC210A8", "igt_q4", 75e-3, read, "onsemi MAC210A"},
		{"BTA12-600CW", "dvdt", 500e6, read, "ST"}, {"BTB12-800BW", "igt", 50e-3, read, "ST"},
		{"BTA12-600B", "igt_q4", 100e-3, read, "ST"},
		{"BTB12-600TW3G", "didt_com", 1750, read, "Littelfuse"},
		{"BTA06-600CW", "il_q2", 80e-3, read, "ST"},
		{"BTA16-600CW3G", "vgt_q1", 1.7, read, "Littelfuse"},
		{"BTA16-800SW3G", "il_q2", 30e-3, read, "Littelfuse"},
		{"BTB04-600", "ih", 25e-3, read, "Tiger"},
		{"Z0107MA", "igt_q4", 7e-3, read, "Philips Z01"},
		{"Z0109NN", "il_q2", 25e-3, read, "Philips Z01"}, {"Z0103MA", "pg_av", 0.1, memory, ""},
		{"Z0410", "dvdt", 200e6, read, "ST Z04"}, {"TIC206M", "igt_q4", 10e-3, read, "Bourns TIC206"},
		{"TIC226M", "dvdt_com", 5e6, read, "TIC226"},
		{"2N6348", "igt_q2", 75e-3, read, "onsemi 2N6344"},
		{"2N6344", "igt_cold_q3", 100e-3, read, "onsemi 2N6344"},
		{"2N6348", "vgt_cold", 3, read, "onsemi"},
		{"2N6344A", "itsm", 113, read, "Littelfuse 2N6344A"}, {"2N6344A", "igt", 50e-3, memory, ""},
		{"Q4004L4", "igt_q1", 25e-3, memory, ""},
		{"MOC3021M", "ift", 15e-3, read, "onsemi MOC3023M/D"},
		{"MOC3023", "vdrm", 400, read, "onsemi MOC3023M/D"}, {"MOC3023", "if", 50e-3, read, "TI, GE"},
		{"MOC3052M", "ift", 10e-3, read, "onsemi MOC3051M"},
		{"MOC3041M", "dvdt", 1000e6, read, "onsemi MOC3043M/D"}, {"MOC3061", "vdrm", 600, memory, ""},
	})
	// What is not guaranteed is no limit: quadrant IV of the TIC226, II of the 2N6344.
	for name, symbol := range map[string]string{"TIC226D": "igt_q4", "2N6344": "igt_q2", "MAC212-6": "igt_q4",
		"BTA12-600CW": "igt_q4", "Q4004L4": "igt_q4"} {
		if v, _, ok := lookup(t, name).Limit(symbol); ok {
			t.Errorf("%s of %s is not guaranteed, got %g", symbol, name, v)
		}
	}
}

func TestLimitsOfBreakoverDevicesAndSources(t *testing.T) {
	check(t, []limit{
		{"DB3", "ibo", 200e-6, read, "Daya DB-3"}, {"DB3", "vbo_symmetry", 3.8, read, "Daya DB-3"},
		{"DB3", "vo", 3, read, "Daya DB-3"},
		{"DC34", "ibo", 50e-6, read, "Semtech"}, {"HT-32", "ibo", 25e-6, read, "Teccor 2004"},
		{"HT-60", "itrm", 1.5, read, "Teccor 2004"},
		{"MBS4991", "ibo", 500e-6, read, "Motorola MBS4991/D"},
		{"MBS4992", "vbo_symmetry", 0.2, read, "Motorola MBS4991/D"},
		{"MBS4993", "ibo", 250e-6, read, "Motorola MBS4991/D"}, {"2N4988", "ibo", 150e-6, memory, ""},
		{"1N5761", "ibo", 100e-6, memory, ""},
		{"LM334", "v_max", 30, read, "ST LM334"}, {"LM134", "v_max", 40, read, "TI SNVS746E"},
		{"LM334", "set_error_small", 0.12, read, "TI SNVS746E"},
		{"1N5283", "zt", 25e6, read, "Motorola 1N5283-5314"},
		{"1N5288", "v_min", 1.05, read, "Motorola 1N5283-5314"},
		{"1N5300", "v_min", 1.5, memory, ""}, {"1N5290", "v_max", 100, read, "Motorola 1N5283-5314"},
	})
}

func check(t *testing.T, list []limit) {
	t.Helper()
	for _, c := range list {
		got, mark, ok := lookup(t, c.part).Limit(c.symbol)
		if !ok || !near(got, c.want) || mark != c.mark {
			t.Errorf("%s of %s = %g (mark %d), want %g (mark %d, %s)", c.symbol, c.part, got, mark, c.want, c.mark,
				c.source)
		}
	}
}

// Spreads as printed: least, typical (or middle), greatest.
func TestSpreadsOfTheSheets(t *testing.T) {
	for _, c := range []struct {
		part, symbol       string
		low, nominal, high float64
		mark               part.Mark
	}{
		{"2N2646", "eta", 0.56, 0.655, 0.75, scan}, {"2N2646", "rbb", 4700, 7000, 9100, scan},
		{"2N2646", "rbb_tc", 0.001, 0.005, 0.009, scan},
		{"2N2647", "eta", 0.68, 0.75, 0.82, read}, {"2N4870", "eta", 0.56, 0.66, 0.76, read},
		{"2N4871", "rbb", 4000, 6000, 9100, read},
		{"2N4948", "rbb", 4000, 7000, 12000, scan}, {"2N5431", "eta", 0.72, 0.76, 0.80, read},
		{"2N5431", "rbb_tc", 0.004, 0.006, 0.008, read},
		{"2N2840", "eta", 0.62, 0.66, 0.70, scan}, {"2N2160", "eta", 0.47, 0.635, 0.80, memory},
		{"2N6027", "vt_1meg", 0.2, 0.7, 1.6, read}, {"2N6028", "vt_1meg", 0.2, 0.5, 0.6, read},
		{"2N6028", "vt_10k", 0.2, 0.35, 0.6, read},
		{"DB3", "vbo", 28, 32, 36, read}, {"DB4", "vbo", 35, 40, 45, read},
		{"HT-32", "vbo", 27, 32, 37, read}, {"HT-5762", "vbo", 32, 36, 40, read},
		{"MBS4991", "vbo", 6, 8, 10, read}, {"1N5283", "i", 0.198e-3, 0.22e-3, 0.242e-3, read},
		{"1N5284", "i", 0.216e-3, 0.24e-3, 0.264e-3, read},
		{"1N5314", "i", 4.23e-3, 4.7e-3, 5.17e-3, read}, {"1N5297", "i", 0.9e-3, 1e-3, 1.1e-3, memory},
	} {
		s, mark, ok := lookup(t, c.part).Spread(c.symbol)
		want := quantity.Spread{Low: c.low, Nominal: c.nominal, High: c.high}
		if !ok || !same(s, want) || mark != c.mark {
			t.Errorf("%s of %s = %v (mark %d), want %v (mark %d)", c.symbol, c.part, s, mark, want, c.mark)
		}
	}
}

// Where the makers contradict each other the text of the row says so.
func TestLeads(t *testing.T) {
	for name, want := range map[string]string{
		"2N5064": "unknown: NXP/Philips 1 = A, 2 = G, 3 = K; onsemi 1 = K, 2 = G, 3 = A (memory)",
		"BT149D": "1 = K, 2 = G, 3 = A", "BT169D": "1 = A, 2 = G, 3 = K",
		"2N2646": "1 = E, 2 = B1, 3 = B2, case B2", "2N6027": "1 = A, 2 = G, 3 = K",
		"BRY56": "1 = G, 2 = A, 3 = K", "BT151-500R": "1 = K, 2 = A, 3 = G, tab A (memory)"} {
		if got := lookup(t, name).Texts["leads"]; got != want {
			t.Errorf("leads of %s: %q, want %q", name, got, want)
		}
	}
}
