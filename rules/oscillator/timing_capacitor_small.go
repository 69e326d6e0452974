package oscillator

import (
	"fmt"

	"standoff/netlist/operating"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var capacitorSmall = &rule.Rule{
	ID: "timing-capacitor-small", Group: group,
	Title: "The timing capacitor is so small that strays and the emitter's own charge set the rate.",
	Why: "Below about a nanofarad the capacitance of emitter and wiring and the charge stored in the " +
		"emitter are no longer small beside the capacitor, and the discharge carries too little charge " +
		"for a trigger pulse. Below 100 pF the stage may not switch at all.",
	Formula: "C < 100 pF: hold; C < 1 nF: doubt",
	Source:  "common practice, no source",
	Failing: `Tone marker
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 47p
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
.end
`,
	Mended: `Tone marker
V1 vcc 0 20
R1 vcc e 100k
C1 e 0 4.7n
XQ1 e b1 b2 2N2646
R2 vcc b2 330
R3 b1 0 22
.end
`,
	Check: func(p *rule.Pass) {
		p.Timing(func(a *operating.Account) {
			k, ok := a.Comparison("timing_capacitance")
			if !ok || k.Value >= looseCapacitor {
				return
			}
			place := []stage.Role{stage.TimingCapacitor}
			f, text := rule.Finding{Grade: rule.Hold}, "the stage may not switch"
			if !k.Fails() {
				k.Limit = looseCapacitor
				f.Grade, text = rule.Doubt, "strays and the {terminal}'s own charge set part of the rate"
			}
			f.Message = fmt.Sprintf("%s: the timing capacitor is %s, below %s", rule.Words(a, text),
				quantity.Format(k.Value, k.Unit), quantity.Format(k.Limit, k.Unit))
			p.Report(f.For(a, k, rule.Case{Place: place, Mend: place}))
		})
	},
}

// looseCapacitor is the capacitance in farad below which the rate is loose
// (common practice, no source).
const looseCapacitor = 1e-9
