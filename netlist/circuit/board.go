package circuit

import (
	"errors"
	"fmt"
	"strings"

	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// describe names a kind in words.
func describe(k Kind) string {
	switch k {
	case Resistor:
		return "a resistor"
	case Capacitor:
		return "a capacitor"
	case Inductor:
		return "an inductor"
	case VoltageSource:
		return "a voltage source"
	case CurrentSource:
		return "a current source"
	case Coupling:
		return "a coupling"
	case Switch:
		return "a switch"
	case Controlled:
		return "a controlled source"
	case Line:
		return "a transmission line"
	case Jig:
		return "a test jig's capacitor"
	}
	return describeDevice(k)
}

func describeDevice(k Kind) string {
	switch k {
	case UJT:
		return "a unijunction transistor"
	case PUT:
		return "a programmable unijunction transistor"
	case SCR:
		return "a thyristor"
	case Triac:
		return "a triac"
	case Diac:
		return "a breakover device"
	case SourceIC:
		return "a current source device"
	case Optotriac:
		return "an optical triac driver"
	case Diode:
		return "a diode"
	case NPN, PNP:
		return "a bipolar transistor"
	case NJF, PJF, NMOS, PMOS:
		return "a field-effect transistor"
	}
	return "an unknown part"
}

// applyBoard reads the board lines of the top level.
func (b *builder) applyBoard(top *scope, env *environment) {
	board := &b.circuit.Board
	board.Ambient = quantity.Spread{Low: 0, Nominal: 25, High: 50}
	board.Declared = map[string]source.Span{}
	for _, ref := range top.intents {
		if !strings.EqualFold(ref.i.Subject.Text, "board") {
			continue
		}
		for _, pair := range ref.i.Pairs {
			key := strings.ToLower(pair.Key.Text)
			if _, twice := board.Declared[key]; twice {
				b.circuit.Resets = append(b.circuit.Resets, Reset{"board", key, ref.deck.Span(pair.Key)})
			}
			if err := board.set(key, pair, env); err != nil {
				b.problem(ref.deck.Span(pair.Value), "%s: %v", source.Visible(key), err)
				continue
			}
			board.Declared[key] = ref.deck.Span(pair.Key)
		}
	}
}

// set takes one key of a board line.
func (board *Board) set(key string, pair syntax.IntentPair, env *environment) error {
	if key != "ambient" && key != "mains" && key != "line" {
		return errors.New("a board line takes ambient, mains and line")
	}
	r, err := intentRange(env, pair)
	switch {
	case err != nil:
		return err
	case key == "ambient":
		if r.Low < -100 || r.High > 250 {
			return fmt.Errorf("an ambient of %s deg C makes no sense", source.Visible(pair.Value.Text))
		}
		board.Ambient = r
	case key == "mains":
		if r.Low <= 0 || r.High > 1000 {
			return fmt.Errorf("a mains of %s V makes no sense", source.Visible(pair.Value.Text))
		}
		board.Mains = &r
	default:
		if r.Low != r.High || r.Low != 50 && r.Low != 60 {
			return errors.New("line is 50 or 60")
		}
		board.Line = r.Low
	}
	return nil
}
