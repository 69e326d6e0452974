package part

// Sense says which side of a figure is the guaranteed one.
type Sense int8

// The senses.
const (
	Either    Sense = iota // a spread: both ends count; written bare it is exact
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

// Symbols returns the symbols of a kind of part in the order of the sheets. The
// kinds whose cards belong to SPICE have none, but for the diode: its symbols
// are those that make a zener or a light-emitting diode of it.
func Symbols(kind Kind) []Symbol {
	switch kind {
	case UJT:
		return ujtSymbols
	case PUT:
		return putSymbols
	case SCR:
		return scrSymbols
	case Triac:
		return triacSymbols
	case Diac:
		return diacSymbols
	case CurrentSource:
		return sourceSymbols
	case Optotriac:
		return optotriacSymbols
	case Diode:
		return zenerSymbols
	}
	return nil
}

// SymbolOf returns what a symbol means for a kind of part.
func SymbolOf(kind Kind, name string) (Symbol, bool) {
	for _, s := range Symbols(kind) {
		if s.Name == name {
			return s, true
		}
	}
	return Symbol{}, false
}

// signed reports whether a figure may be negative.
func (s Symbol) signed() bool { return s.Unit == "deg C" || s.Unit == "1/K" }

// mayVanish reports whether a figure may be zero: drops, leakages and slopes of
// an idealised part.
func (s Symbol) mayVanish() bool {
	switch s.Name {
	case "vd", "vv", "vt_10k", "vt_1meg", "vt0", "rt", "pd_slope", "vbo_symmetry", "ieo", "igao", "idrm", "zz",
		"vz_tol", "set_error_small", "set_error_large":
		return true
	}
	return s.signed()
}

// relative reports whether a figure may be written in per cent.
func (s Symbol) relative() bool { return s.Unit == "" || s.Unit == "1/K" }

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
