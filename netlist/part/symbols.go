package part

import "sync"

// Sense says which side of a figure is the guaranteed one.
type Sense int8

// The senses.
const (
	Either    Sense = iota // a spread: both ends count
	Greatest               // the maker guarantees "not more than"
	Least                  // the maker guarantees "not less than"
	Condition              // a test condition, not a figure of the part
)

// Symbol is one rating by its data-sheet name.
type Symbol struct {
	Name, Unit string
	Sense      Sense
	Meaning    string
}

// symbolTable lists the symbols of every trigger device. A symbol written bare
// is exact; with _min, _typ or _max behind it, one side of a spread.
var symbolTable = map[Kind][]Symbol{
	UJT: {
		{"eta", "", Either, "intrinsic stand-off ratio"},
		{"rbb", "ohm", Either, "interbase resistance, 25 deg C, emitter open"},
		{"rbb_tc", "1/K", Either, "temperature coefficient of the interbase resistance"},
		{"vd", "V", Either, "drop of the emitter diode at 25 deg C"},
		{"vv", "V", Either, "valley voltage"},
		{"ip", "A", Greatest, "peak-point emitter current"},
		{"ip_vbb", "V", Condition, "interbase voltage at which ip holds"},
		{"iv", "A", Least, "valley-point emitter current"},
		{"iv_vbb", "V", Condition, "interbase voltage at which iv holds"},
		{"iv_rb2", "ohm", Condition, "base-two resistor with which iv holds"},
		{"vob1", "V", Least, "base-one pulse amplitude"},
		{"vob1_c", "F", Condition, "capacitor with which vob1 holds"},
		{"vob1_rb1", "ohm", Condition, "base-one resistor with which vob1 holds"},
		{"vob1_v", "V", Condition, "supply with which vob1 holds"},
		{"veb1_sat", "V", Greatest, "emitter saturation voltage"},
		{"ieo", "A", Greatest, "emitter reverse current"},
		{"pd", "W", Least, "power at 25 deg C"},
		{"pd_slope", "W/K", Greatest, "derating of the power above 25 deg C"},
		{"ie_rms", "A", Least, "rms emitter current rating"},
		{"ie_pulse", "A", Least, "peak pulse emitter current rating"},
		{"cap_direct", "F", Least, "greatest capacitor discharged without a series resistor"},
		{"vb2e", "V", Least, "reverse voltage base two to emitter"},
		{"vb2b1", "V", Least, "interbase voltage rating"},
		{"vbb_min", "V", Greatest, "least interbase voltage at which the type is specified"},
		{"tj", "deg C", Least, "junction temperature rating"},
	},
	PUT: {
		{"vt_10k", "V", Either, "offset voltage, gate resistance 10 kohm"},
		{"vt_1meg", "V", Either, "offset voltage, gate resistance 1 Mohm"},
		{"ip_10k", "A", Greatest, "peak current, gate resistance 10 kohm"},
		{"ip_1meg", "A", Greatest, "peak current, gate resistance 1 Mohm"},
		{"iv_200", "A", Least, "valley current, gate resistance 200 ohm"},
		{"iv_10k", "A", Least, "valley current, gate resistance 10 kohm"},
		{"iv_1meg", "A", Least, "valley current, gate resistance 1 Mohm"},
		{"igao", "A", Greatest, "gate to anode leakage"},
		{"vf", "V", Greatest, "forward voltage"},
		{"vv", "V", Either, "valley voltage"},
		{"vo", "V", Least, "peak output voltage"},
		{"vak", "V", Least, "anode to cathode voltage rating"},
		{"vgkf", "V", Least, "gate to cathode forward voltage rating"},
		{"vgkr", "V", Least, "gate to cathode reverse voltage rating"},
		{"vgar", "V", Least, "gate to anode reverse voltage rating"},
		{"it", "A", Least, "dc anode current rating"},
		{"itrm", "A", Least, "repetitive peak anode current rating"},
		{"energy", "J", Least, "capacitor discharge energy rating"},
		{"pd", "W", Least, "power at 25 deg C"},
		{"pd_slope", "W/K", Greatest, "derating of the power above 25 deg C"},
		{"tj", "deg C", Least, "junction temperature rating"},
	},
	SCR: thyristorSymbols,
	Triac: append([]Symbol{
		{"igt_q1", "A", Greatest, "gate trigger current, quadrant I"},
		{"igt_q2", "A", Greatest, "gate trigger current, quadrant II"},
		{"igt_q3", "A", Greatest, "gate trigger current, quadrant III"},
		{"igt_q4", "A", Greatest, "gate trigger current, quadrant IV"},
	}, thyristorSymbols...),
	Diac: {
		{"vbo", "V", Either, "breakover voltage"},
		{"vbo_symmetry", "V", Greatest, "difference of the two breakover voltages"},
		{"ibo", "A", Greatest, "breakover current"},
		{"ih", "A", Either, "holding current"},
		{"vo", "V", Least, "output voltage step"},
		{"itrm", "A", Least, "repetitive peak current rating"},
		{"pd", "W", Least, "power rating"},
	},
	CurrentSource: {
		{"i", "A", Either, "current"},
		{"v_per_k", "V/K", Either, "sense voltage per kelvin across the setting resistor"},
		{"ratio", "", Either, "current over sense voltage times setting resistor"},
		{"v_min", "V", Greatest, "least voltage across it"},
		{"v_max", "V", Least, "greatest voltage across it"},
		{"i_min", "A", Greatest, "least current that can be set"},
		{"i_max", "A", Least, "greatest current that can be set"},
	},
	Optotriac: {
		{"ift", "A", Greatest, "trigger current of the light-emitting diode"},
		{"vdrm", "V", Least, "repetitive peak off-state voltage"},
		{"itsm", "A", Least, "surge current rating"},
		{"vf", "V", Greatest, "forward voltage of the light-emitting diode"},
	},
}

var thyristorSymbols = []Symbol{
	{"igt", "A", Greatest, "gate trigger current, 25 deg C"},
	{"igt_cold", "A", Greatest, "gate trigger current at t_cold"},
	{"vgt", "V", Greatest, "gate trigger voltage, 25 deg C"},
	{"vgt_cold", "V", Greatest, "gate trigger voltage at t_cold"},
	{"vgd", "V", Least, "gate voltage that does not trigger, at t_hot"},
	{"ih", "A", Greatest, "holding current"},
	{"il", "A", Greatest, "latching current"},
	{"vdrm", "V", Least, "repetitive peak off-state voltage"},
	{"vrrm", "V", Least, "repetitive peak reverse voltage"},
	{"it_rms", "A", Least, "rms on-state current rating"},
	{"it_av", "A", Least, "average on-state current rating"},
	{"itsm", "A", Least, "one-cycle surge current rating"},
	{"didt", "A/s", Least, "rate of rise of on-state current"},
	{"dvdt", "V/s", Least, "rate of rise of off-state voltage that does not trigger"},
	{"dvdt_rgk", "ohm", Condition, "gate resistor with which dvdt holds"},
	{"tgt", "s", Greatest, "gate-controlled turn-on time"},
	{"tq", "s", Greatest, "circuit-commutated turn-off time"},
	{"pgm", "W", Least, "peak gate power rating"},
	{"pg_av", "W", Least, "average gate power rating"},
	{"igm", "A", Least, "peak gate current rating"},
	{"vgm", "V", Least, "peak forward gate voltage rating"},
	{"vgrm", "V", Least, "peak reverse gate voltage rating"},
	{"idrm", "A", Greatest, "off-state leakage, hot"},
	{"rgk", "ohm", Condition, "gate resistor with which the sheet is stated"},
	{"t_cold", "deg C", Condition, "temperature of the cold figures"},
	{"t_hot", "deg C", Condition, "temperature of vgd"},
	{"vt0", "V", Greatest, "threshold of the on-state voltage"},
	{"rt", "ohm", Greatest, "slope resistance of the on-state voltage"},
	{"tj", "deg C", Least, "junction temperature rating"},
}

// symbolIndex holds the table by kind and name; made on first use.
var symbolIndex = sync.OnceValue(func() map[Kind]map[string]Symbol {
	index := map[Kind]map[string]Symbol{}
	for kind, list := range symbolTable {
		index[kind] = make(map[string]Symbol, len(list))
		for _, s := range list {
			index[kind][s.Name] = s
		}
	}
	return index
})

// SymbolOf returns what a symbol means for a kind of part.
func SymbolOf(kind Kind, name string) (Symbol, bool) {
	s, ok := symbolIndex()[kind][name]
	return s, ok
}

// Symbols returns the symbols of a kind of part in the order of the sheets.
func Symbols(kind Kind) []Symbol { return symbolTable[kind] }

// NetlistOrder returns the roles of a part's terminals in the order in which the
// library expects them on a card.
func NetlistOrder(kind Kind) []string {
	switch kind {
	case UJT:
		return []string{"emitter", "base1", "base2"}
	case PUT, SCR:
		return []string{"anode", "gate", "cathode"}
	case Triac:
		return []string{"mt2", "gate", "mt1"}
	case Diode:
		return []string{"anode", "cathode"}
	case Diac:
		return []string{"1", "2"}
	case NPN, PNP:
		return []string{"collector", "base", "emitter"}
	case NJF, PJF, NMOS, PMOS:
		return []string{"drain", "gate", "source"}
	case CurrentSource:
		return []string{"v+", "r", "v-"}
	case Optotriac:
		return []string{"anode", "cathode", "mt2", "mt1"}
	}
	return nil
}
