package oscillator

import (
	"math"

	"fmt"

	"standoff/netlist/operating"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var baseTwoMissing = &rule.Rule{
	ID: "base-two-resistor-missing", Group: group,
	Title: "Without a base-two resistor the peak voltage drifts with temperature.",
	Why: "The drop of the emitter diode falls with temperature, and with it the peak voltage and the " +
		"period. A resistor in the base-two lead lets the rise of the bar's resistance make up for it. " +
		"The finding tells what its absence costs and which value would serve.",
	Formula: "V1 alpha R_BB (eta R_B2 - (1 - eta) R_B1) = k (R_BB + R_B1 + R_B2)^2, the zero of dV_P/dT",
	Source:  "derived here; first order as R_B2 = (k/alpha) R_BB/(eta V1) + (1 - eta) R_B1/eta",
	Failing: `Metronome for a practice room
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 4.7u
XQ1 e b1 vcc 2N2646
R3 b1 0 22
*> C1 kind=film
.end
`,
	Mended: `Metronome for a practice room
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 4.7u
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
*> C1 kind=film
.end
`,
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			if !a.Facts["base-two-missing"] {
				return
			}
			k, known := a.Comparison("base_two_drift")
			f := rule.Finding{Grade: rule.Doubt, Working: k.Working}.Placed(a)
			if a.Facts["base-two-drift-breaks-target"] {
				f.Grade = rule.Hold
			}
			f.Message = "the rate drifts with temperature, since no resistor stands at base two; by how much cannot be told of this part or this ambient range"
			if known {
				f.Figure = &rule.Figure{Name: k.Name, Value: k.Value, Limit: k.Limit, Bound: string(k.Bound), Unit: k.Unit}
				f.Message = fmt.Sprintf("the rate drifts with temperature, %.2g %% per 10 K on the nominal board, "+
					"since no resistor stands at base two%s", 100*k.Value, serving(a))
			}
			f.NoAdvice = "a resistor has to be added; its value cannot be proven on this board"
			p.Report(f)
		})
	},
}

// serving names the preferred resistor that would compensate a typical part, ""
// where none does.
func serving(a *operating.Account) string {
	advised := a.Nominal("base_two_resistance_advised")
	if math.IsNaN(advised) {
		return ""
	}
	return "; " + quantity.Short(quantity.Nearest(advised, 12)) + " would compensate a typical part"
}
