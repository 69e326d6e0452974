package part_test

import (
	"math"
	"slices"
	"strings"
	"testing"

	"standoff/netlist/part"
	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// parse reads a parts file that must be sound.
func parse(t *testing.T, text string) []*part.Ratings {
	t.Helper()
	list, problems := part.ParseFile(source.New("p.cir", text))
	for _, p := range problems {
		t.Fatalf("%s: %s", text, p.Message)
	}
	return list
}

func same(a, b quantity.Spread) bool {
	return near(a.Low, b.Low) && near(a.Nominal, b.Nominal) && near(a.High, b.High)
}

func TestABareFigureIsExact(t *testing.T) {
	r := parse(t, ".model A ujt(eta=0.6 rbb=7k ip=5u iv=4m vob1=3 vbb_min=5)\n")[0]
	figures := map[string]float64{"eta": 0.6, "rbb": 7000, "ip": 5e-6, "iv": 4e-3, "vob1": 3, "vbb_min": 5}
	for symbol, want := range figures {
		if s, mark, ok := r.Spread(symbol); !ok || !same(s, quantity.Exact(want)) || mark != part.Declared {
			t.Errorf("%s: %v, mark %d, %v", symbol, s, mark, ok)
		}
		if v, _, ok := r.Limit(symbol); !ok || !near(v, want) {
			t.Errorf("limit of %s: %g, %v", symbol, v, ok)
		}
	}
}

// On a row of a data sheet, and beside another side, a bare limit is its
// guaranteed side only.
func TestABareLimitOfASheetIsItsGuaranteedSide(t *testing.T) {
	sheet := parse(t, ".model A ujt(eta=0.6 ip=5u iv=4m pd=0.3 ip_vbb=25 mark=read source=\"a sheet\")\n")[0]
	beside := parse(t, ".model B ujt(ip=5u ip_typ=1u iv_typ=6m iv=4m eta=0.65 eta_min=0.56 eta_max=0.75)\n")[0]
	for _, r := range []*part.Ratings{sheet, beside} {
		if ip := r.Figures["ip"]; ip.HasMin || !ip.HasMax || !near(ip.Max, 5e-6) {
			t.Errorf("%s: ip %+v", r.Name, ip)
		}
		if iv := r.Figures["iv"]; iv.HasMax || !iv.HasMin || !near(iv.Min, 4e-3) {
			t.Errorf("%s: iv %+v", r.Name, iv)
		}
	}
	if s, _, ok := sheet.Spread("eta"); !ok || !s.IsExact() {
		t.Errorf("a bare spread of a sheet is exact, got %v", s)
	}
	if at, ok := sheet.Test("ip_vbb"); !ok || at != 25 {
		t.Errorf("ip_vbb = %g, %v", at, ok)
	}
	if s, _, _ := beside.Spread("eta"); s != (quantity.Spread{Low: 0.56, Nominal: 0.65, High: 0.75}) {
		t.Errorf("beside its ends a bare spread is the nominal value, got %v", s)
	}
	if s, _, _ := beside.Spread("ip"); !same(s, quantity.Spread{Low: 1e-6, Nominal: 1e-6, High: 5e-6}) {
		t.Errorf("ip runs from typical to greatest, got %v", s)
	}
}

func TestTypicalValuesAreNeverLimits(t *testing.T) {
	r := parse(t, ".model A ujt(eta=0.6 ip_typ=1u iv_typ=4m rbb_typ=7k ip_vbb=25)\n")[0]
	for _, symbol := range []string{"ip", "iv", "rbb"} {
		if v, _, ok := r.Limit(symbol); ok {
			t.Errorf("%s_typ became the limit %g", symbol, v)
		}
		if s, _, ok := r.Spread(symbol); ok {
			t.Errorf("%s_typ became the spread %v", symbol, s)
		}
	}
}

// A spread that lacks a side is promised by nobody on that side.
func TestHalfASpreadIsAssumed(t *testing.T) {
	r := parse(t, ".model A ujt(eta_max=0.75 vv_typ=1 vv_max=2 iv_min=4m mark=read source=x)\n")[0]
	for symbol, want := range map[string]part.Mark{"eta": part.Assumed, "vv": part.Assumed, "iv": part.Read} {
		if _, mark, ok := r.Spread(symbol); !ok || mark != want {
			t.Errorf("%s: mark %d, want %d", symbol, mark, want)
		}
	}
	if s, _, _ := r.Spread("vv"); s != (quantity.Spread{Low: 1, Nominal: 1, High: 2}) {
		t.Errorf("vv = %v", s)
	}
}

func TestMarksOfASide(t *testing.T) {
	r := parse(t, `.model A scr(igt_min=20u igt_typ=50u igt_max=200u vgd=0.2 vgt=0.8 ih=5m
+ mark=read memory="igt_min vgd" scan=ih
+ source="sheet one" source="sheet two")
`)[0]
	for _, c := range []struct {
		symbol string
		mark   part.Mark
		source string
	}{{"igt", part.Read, "sheet one; sheet two"}, {"vgd", part.Memory, "from memory, seen in no document"},
		{"vgt", part.Read, "sheet one; sheet two"}, {"ih", part.Scan, "sheet one; sheet two"},
		{"il", part.Assumed, "sheet one; sheet two"}} {
		if _, mark, _ := r.Limit(c.symbol); mark != c.mark || r.SourceOf(c.symbol) != c.source {
			t.Errorf("%s: mark %d, %q; want %d, %q", c.symbol, mark, r.SourceOf(c.symbol), c.mark, c.source)
		}
	}
	if f := r.Figures["igt"]; f.MinMark != part.Memory || f.TypMark != part.Read || f.MaxMark != part.Read {
		t.Errorf("marks of igt: %+v", f)
	}
}

func TestTheWorstQuadrantStandsForAll(t *testing.T) {
	r := parse(t, ".model A triac(igt_q1=5m igt_q3=5m igt_q4=10m vgt_q1=2 vgt=1.5 il_q2=30m\n"+
		"+ quadrants=134 mark=read memory=igt_q1)\n")[0]
	for symbol, want := range map[string]float64{"igt": 10e-3, "vgt": 1.5, "il": 30e-3} {
		if v, _, ok := r.Limit(symbol); !ok || v != want {
			t.Errorf("%s = %g, want %g", symbol, v, want)
		}
	}
	if _, mark, _ := r.Limit("igt"); mark != part.Memory {
		t.Error("one quadrant from memory makes the whole so")
	}
	if r.Texts["quadrants"] != "134" {
		t.Error("quadrants are lost")
	}
}

func TestCurrentOfACurrentSource(t *testing.T) {
	fixed := parse(t, ".model A isource(i=1m i_min=0.9m i_max=1.1m v_min=1)\n")[0]
	want := quantity.Spread{Low: 0.9e-3, Nominal: 1e-3, High: 1.1e-3}
	if s, _, ok := fixed.Spread("i"); !ok || !same(s, want) {
		t.Errorf("i = %v", s)
	}
	set := parse(t, ".model B isource(v_per_k=214u ratio=1.06 i_min=1u i_max=10m)\n")[0]
	if v, _, ok := set.Limit("i_max"); !ok || v != 10e-3 {
		t.Errorf("i_max = %g", v)
	}
	if _, _, ok := set.Spread("i"); ok {
		t.Error("the range of settings is no current")
	}
}

func TestPerCent(t *testing.T) {
	list := parse(t, ".model A ujt(rbb_tc_min=0.1% rbb_tc_max=0.9%)\n"+
		".model Z d(bv=12 vz_tol=5% iz_min=1m pz=0.4 is=1e-14)\n")
	if s, _, _ := list[0].Spread("rbb_tc"); s.Low != 0.001 || math.Abs(s.High-0.009) > 1e-12 {
		t.Errorf("rbb_tc = %v", s)
	}
	if v, _, ok := list[1].Limit("vz_tol"); !ok || v != 0.05 {
		t.Errorf("vz_tol = %g", v)
	}
	if s, _, ok := list[1].Spread("bv"); !ok || s != quantity.Exact(12) {
		t.Errorf("bv = %v", s)
	}
}

func TestClassesOfAPartsFile(t *testing.T) {
	list := parse(t, `.model FAM scr(igt=10m classes="FAM-4,FAM4=400" classes="FAM-6=600"
+ alias=OLD mark=memory memory=vdrm)
`)
	var names []string
	for _, r := range list {
		names = append(append(names, r.Name), r.Aliases...)
	}
	if got := strings.Join(names, " "); got != "FAM OLD FAM-4 FAM4 FAM-6" {
		t.Fatalf("got %s", got)
	}
	if v, mark, _ := list[2].Limit("vdrm"); v != 600 || mark != part.Memory {
		t.Errorf("FAM-6 blocks %g V (mark %d)", v, mark)
	}
	if _, _, ok := list[0].Limit("vdrm"); ok {
		t.Error("the family has a blocking voltage")
	}
}

func TestBadCards(t *testing.T) {
	for _, c := range [][2]string{
		{".model A ujt(etta=0.6)", "etta is no rating of a ujt; did you mean eta?"},
		{".model A ujt(eat_min=0.6)", "eat_min is no rating of a ujt; did you mean eta_min?"},
		{".model A scr(vgrk=5)", "vgrk is no rating of a scr; did you mean vgrm?"},
		{".model A scr(frobnicate=5)", "frobnicate is no rating of a scr"},
		{".model A ujt(eta_min=0.8 eta_max=0.6)", "eta_min = 0.8 lies above eta_max = 0.6"},
		{".model A ujt(ip_typ=8u ip_max=5u)", "ip_typ = 8 uA lies above ip_max = 5 uA"},
		{".model A ujt(eta=1.2)", "eta: a stand-off ratio lies below 1"},
		{".model A ujt(eta=-0.6)", "eta = -0.6 makes no sense for the intrinsic stand-off ratio"},
		{".model A scr(igt=0)", "igt = 0 A makes no sense for the gate trigger current, 25 deg C"},
		{".model A scr(igt=abc)", `igt: "abc" is not a number`},
		{".model A scr(igt=0,5)", `igt: "0,5" has a decimal comma; write a point`},
		{".model A scr(igt=nan)", `igt: "nan" is not a number`},
		{".model A scr(igt=1e999)", `igt: "1e999" is out of range`},
		{".model A scr(igt={x})", "igt has no value that can be worked out"},
		{".model A scr(igt=\"5m\")", "igt has no value that can be worked out"},
		{".model A scr(igt=5%)", "igt is a figure in A, not in per cent"},
		{".model A scr(igt=5m igt=6m)", "igt: igt_max is given already"},
		{".model A scr(igt_max=5m igt=6m)", "igt: igt_max is given already"},
		{".model A scr(t_cold=40)", "t_cold = 40 deg C is not cold: the other figures hold at 25 deg C"},
		{".model A scr(t_hot=20)", "t_hot = 20 deg C is not hot: the other figures hold at 25 deg C"},
		{".model A scr(vgt=0.8 mark=rumour)", "mark= is read, scan or memory, not rumour"},
		{".model A scr(vgt=0.8 mark=read memory=vgd)", "vgd is marked but not given"},
		{".model A scr(vgt=0.8 mark=read scan=vgt_typ)", "vgt_typ is marked but not given"},
		{".model A scr(vgt=0.8 loose)", "loose stands alone: a rating is written as symbol=value"},
		{".model A triac(igt=5m quadrants=135)",
			"quadrants= lists some of 1, 2, 3 and 4 in this order, as 123 or 1234"},
		{".model A scr(vgt=0.8 classes=\"A1=x\")", "classes= lists NAME=VOLTS, not A1=x"},
		{".model A scr(vgt=1)\n.model a scr(vgt=2)", "a stands twice in this file"},
		{".model A d(bv=12 vz_tol=-0.05)",
			"vz_tol = -0.05 makes no sense for the relative tolerance of the breakdown voltage"},
		{"R1 a b 1k", "a parts file holds .model cards only"},
		{".model A ujt(\x1b[2J=1)", ""},
		{".model A scr(vgt=0.8 mark=read mem\u202eory=x)", "mem\\u{202e}ory is no rating of a scr"},
	} {
		text, want := c[0], c[1]
		_, problems := part.ParseFile(source.New("p.cir", text+"\n"))
		if len(problems) != 1 || want != "" && problems[0].Message != want {
			t.Errorf("%s: got %v, want %q", text, problems, want)
		}
	}
}

// A figure that is refused is left out, so that nothing is computed with it.
func TestRefusedFiguresAreLeftOut(t *testing.T) {
	text := ".model A ujt(eta=1.2 rbb=-5k ip_min=9u ip_max=5u iv=4m)\n"
	list, problems := part.ParseFile(source.New("p.cir", text))
	if len(problems) != 3 || len(list) != 1 || len(list[0].Figures) != 1 {
		t.Errorf("%v, %v", list, problems)
	}
}

// SPICE's own cards keep whatever they hold, and models of other trades are no
// problem.
func TestSpiceCardsAreNoProblem(t *testing.T) {
	list := parse(t, `.model N npn(bf=50 bf=60 tref=27 vaf=-1 lib="x" level)
.model Z zener(v_breakdown=9)
.model D D IS=1f BV=-5 N=0
.model S vswitch(von=1 voff=0)
.model M VDMOS NCHAN rd=1m
`)
	if list[0].Kind != part.NPN || list[3].Kind != "" || list[4].Kind != "" {
		t.Errorf("kinds: %s %s %s", list[0].Kind, list[3].Kind, list[4].Kind)
	}
	if s, _, ok := list[1].Spread("bv"); !ok || list[1].Kind != part.Diode || s != quantity.Exact(9) {
		t.Errorf("a zener by another name: %v %s", s, list[1].Kind)
	}
}

// A card in a netlist is one part; its values may be expressions.
func TestFromModel(t *testing.T) {
	text := "title\n.model A ujt(eta={x} rbb=7k)\n.model B scr(igt=1m classes=\"B1=100\")\n"
	deck := syntax.Parse(source.New("b.cir", text), true)
	resolve := func(v syntax.Value) (float64, bool) {
		if v.Expr != nil {
			return 0.62, true
		}
		return part.Plain(v)
	}
	r, problems := part.FromModel(deck, deck.Statements[0].Model, resolve, "netlist")
	if s, _, _ := r.Spread("eta"); len(problems) > 0 || s != quantity.Exact(0.62) {
		t.Errorf("%+v %v", r, problems)
	}
	if r.Origin != "netlist" || r.At.Text() != "A" {
		t.Errorf("from %s, at %q", r.Origin, r.At.Text())
	}
	_, problems = part.FromModel(deck, deck.Statements[1].Model, resolve, "netlist")
	if len(problems) != 1 || problems[0].Span.Text() != "classes" {
		t.Errorf("%v", problems)
	}
}

// Problems stand at the word that is wrong.
func TestPlacesOfProblems(t *testing.T) {
	text := ".model A ujt(eta_min=0.8 rbb=-7k\n+ eta_max=0.6 etta=5)\n"
	_, problems := part.ParseFile(source.New("p.cir", text))
	var places []string
	for _, p := range problems {
		places = append(places, p.Span.Text())
	}
	if len(places) != 3 || places[0] != "eta_min" || places[1] != "-7k" || places[2] != "etta" {
		t.Errorf("places: %q", places)
	}
}

// Every symbol has a unit that is a unit, a meaning, and a name of its own.
func TestSymbols(t *testing.T) {
	units := []string{"", "V", "A", "ohm", "F", "W", "W/K", "1/K", "V/K", "J", "s", "A/s", "V/s", "deg C"}
	for _, kind := range []part.Kind{part.UJT, part.PUT, part.SCR, part.Triac, part.Diac, part.CurrentSource,
		part.Optotriac, part.Diode} {
		seen := map[string]bool{}
		for _, s := range part.Symbols(kind) {
			if seen[s.Name] || s.Meaning == "" || !slices.Contains(units, s.Unit) {
				t.Errorf("%s of a %s: unit %q", s.Name, kind, s.Unit)
			}
			seen[s.Name] = true
		}
	}
}
