package wiring

import (
	"fmt"
	"math"
	"strings"

	"standoff/netlist/circuit"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

func valueSuffixSuspect() *rule.Rule {
	return &rule.Rule{
		ID: "value-suffix-suspect", Group: group,
		Title: "A value is absurd for its part: the suffix is not what was meant.",
		Why: "M means milli and MEG means mega, F behind a number means femto: 1M is a milliohm, 10F is ten " +
			"femtofarad. " +
			"Values in the trade's notation (4k7) are read as meant and told as a remark, since other readers take " +
			"them otherwise.",
		Formula: "resistor above 0 and below 5 milliohm, or below 0.5 ohm where it sets a stage or lies " +
			"across more than " +
			"1 kW of supply; capacitor below 0.05 pF (left alone beside transistors measured in " +
			"micrometres), or from 0.5 F up without volts=; inductor below 1 pH or " +
			"from 1 kH up (a test rig's 1T is left alone)",
		Source:  "suffixes: SPICE2 input format; limits: " + practice,
		Failing: strings.Replace(board("Tram point heater"), "R1 vcc e 100k", "R1 vcc e 1M", 1),
		Mended:  board("Tram point heater"),
		Check: func(p *rule.Pass) {
			report, s := once(p), &sense{pass: p}
			for _, e := range p.Circuit.Elements {
				if !e.HasValue || e.Written == "" {
					continue
				}
				f := about(e, rule.Hold, s.absurd(e))
				if f.Message == "" && inTradeNotation(e.Written) {
					f.Grade = rule.Remark
					f.Message = "write " + quantity.Short(e.Value.Nominal) + " so that every reader does"
				}
				if f.Message != "" {
					f.At = e.ValueAt
					f.Message = fmt.Sprintf("%s was read as %s: %s", rule.Name(e.Written),
						quantity.Format(e.Value.Nominal, unit(e.Kind)), f.Message)
					report(f)
				}
			}
		},
	}
}

// inTradeNotation reports whether a value has a letter in place of its point: 4k7.
func inTradeNotation(written string) bool {
	for i := 1; i < len(written); i++ { // most have no digit behind a letter: no need to read them
		if written[i] >= '0' && written[i] <= '9' && written[i-1] >= 'A' {
			n, err := quantity.Parse(written)
			return err == nil && n.Trade
		}
	}
	return false
}

func unit(k circuit.Kind) string {
	switch k {
	case circuit.Resistor:
		return "ohm"
	case circuit.Capacitor:
		return "F"
	case circuit.Inductor:
		return "H"
	case circuit.CurrentSource:
		return "A"
	}
	return "V"
}

// sense tells absurd values from sound ones. What it needs of the board is
// gathered when it is first asked for: few boards have such values.
type sense struct {
	pass    *rule.Pass
	setting map[string]bool // designators of resistors that set a stage
	wiring  *circuit.Wiring
}

// absurd says what is wrong with a value, "" where nothing is.
func (s *sense) absurd(e *circuit.Element) string {
	v := e.Value.Nominal
	switch {
	case e.Kind == circuit.Resistor && v > 0 && (v < 5e-3 || v < 0.5 && (s.sets(e) || s.burns(e))):
		return "no resistor here is that small; M is milli, write MEG for mega"
	case e.Kind == circuit.Capacitor && v < 0.05e-12 && !s.pass.Circuit.Micron:
		return "no capacitor is that small; F behind a number is femto"
	case e.Kind == circuit.Capacitor && v >= 0.5 && e.Intent.Volts == nil:
		return "no timing or filter capacitor is that large; a suffix is missing (volts= says that it is meant)"
	case e.Kind == circuit.Inductor && v < 1e-12:
		return "no coil is that small; F behind a number is femto"
	case e.Kind == circuit.Inductor && v >= 1e3 && v < 1e9:
		return "no coil is that large; a suffix is missing"
	}
	return ""
}

// sets reports whether a resistor has a role in which tens of milliohm make no
// sense.
func (s *sense) sets(e *circuit.Element) bool {
	if s.setting == nil {
		s.setting = map[string]bool{}
		for _, a := range s.pass.Accounts {
			for _, role := range [...]stage.Role{stage.TimingResistor, stage.BaseOne, stage.BaseTwo, stage.GateDivider,
				stage.GateSeries, stage.GateShunt, stage.Dropper} {
				for _, part := range a.Stage.Parts[role] {
					s.setting[part.Designator] = true
				}
			}
		}
	}
	return s.setting[e.Designator]
}

// burns reports whether a resistor lies straight across a supply and would take
// more than a kilowatt from it.
func (s *sense) burns(e *circuit.Element) bool {
	if s.wiring == nil {
		s.wiring = circuit.NewWiring(s.pass.Circuit)
	}
	a, ok := s.wiring.Potential(e.Nodes[0])
	b, also := s.wiring.Potential(e.Nodes[1])
	return ok && also && s.wiring.Reference(e.Nodes[0]) == s.wiring.Reference(e.Nodes[1]) &&
		math.Pow(a-b, 2)/e.Value.Nominal > 1000
}
