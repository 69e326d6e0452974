package oscillator

import (
	"fmt"

	"standoff/netlist/operating"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var currentBelowPeak = &rule.Rule{
	ID: "timing-current-below-peak", Group: group,
	Title: "The stage may never fire: too little current reaches the emitter at the peak.",
	Why: "Near the peak voltage the emitter begins to conduct, and the timing resistor has to supply the peak-point current I_P " +
		"before the transistor can snap over. Where it supplies less, the capacitor stops a little short of the peak and stays there: " +
		"the stage is silent. It happens first with a part of high stand-off ratio, in the cold, on a low supply.",
	Formula: "(V_th - V_P)/R_th > I_P, with I_P carried over to the stage's own interbase voltage as (V_ref/V_BB)^1.3",
	Source:  "Boylestad and Nashelsky, Electronic Devices and Circuit Theory, eq. 17.6; I_P against V_BB: 2N5431 data sheet (0.4 uA at 25 V, 4 uA at 4 V)",
	Failing: deck("Well pump cycle timer", "12", "4.7meg", "1u", "470", "22"),
	Mended:  deck("Well pump cycle timer", "12", "100k", "1u", "470", "22"),
	Check: each(rule.Case{Comparison: "charging_current_at_peak", Place: timing, Mend: []stage.Role{stage.TimingResistor},
		Fails: "the stage may never fire", Value: "the charging current at the peak", Limit: "the transistor needs"}),
}

var currentAboveValley = &rule.Rule{
	ID: "timing-current-above-valley", Group: group,
	Title: "The stage may fire once and stay on: the charging current holds the emitter in conduction.",
	Why: "After the discharge the emitter stops conducting only where its current falls below the valley current I_V. Where the charging " +
		"network supplies more, the transistor stays on, the emitter sits at the valley voltage and the stage is dead until the supply is taken away. " +
		"It happens first with a part of low valley current, on a high supply, at the low end of a potentiometer.",
	Formula: "(V_th - V_V)/R_th < I_V, with I_V carried over as V_BB/V_ref; the derating for heat and for a large base-two resistor is from memory",
	Source:  "Boylestad and Nashelsky, eq. 17.7; valley current guaranteed at 20 V and 100 ohm by the sheets",
	Failing: deck("Mist timer", "20", "2.2k", "1u", "330", "22"),
	Mended:  deck("Mist timer", "20", "10k", "1u", "330", "22"),
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			c := rule.Case{Comparison: "charging_current_at_valley", Place: timing, Mend: []stage.Role{stage.TimingResistor},
				Fails: "the stage may fire once and stay on", Value: "the charging current at the valley",
				Limit: "the transistor lets go below"}
			if k, ok := a.Comparison(c.Comparison); ok && !k.Fails() && !k.Tight() {
				c.Comparison, c.FailsOnly = "charging_current_at_valley_derated", true
			}
			p.Judge(a, c)
		})
	},
}

var capacitorSmall = &rule.Rule{
	ID: "timing-capacitor-small", Group: group,
	Title: "The timing capacitor is so small that strays and the emitter's own charge set the rate.",
	Why: "Below about a nanofarad the capacitance of emitter and wiring and the charge stored in the emitter are no longer small beside the " +
		"capacitor, and the discharge carries too little charge for a trigger pulse. Below 100 pF the stage may not switch at all.",
	Formula: "C < 100 pF: hold; C < 1 nF: doubt",
	Source:  "common practice, no source",
	Failing: deck("Tone marker", "20", "100k", "47p", "330", "22"),
	Mended:  deck("Tone marker", "20", "100k", "4.7n", "330", "22"),
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			k, ok := a.Comparison("timing_capacitance")
			const doubtful = 1e-9
			if !ok || k.Value >= doubtful {
				return
			}
			f := rule.Finding{Grade: rule.Doubt, Message: fmt.Sprintf("strays and the emitter's own charge matter beside a timing capacitor of %s; below %s the rate is loose",
				quantity.Format(k.Value, "F"), quantity.Format(doubtful, "F"))}
			if k.Fails() {
				f.Grade = rule.Hold
				f.Message = fmt.Sprintf("the stage may not switch: a timing capacitor of %s, below %s", quantity.Format(k.Value, "F"), quantity.Format(k.Limit, "F"))
			} else {
				k.Limit = doubtful
			}
			p.Report(f.For(a, k, rule.Case{Place: []stage.Role{stage.TimingCapacitor}, Mend: []stage.Role{stage.TimingCapacitor}}))
		})
	},
}

var capacitorLarge = &rule.Rule{
	ID: "timing-capacitor-large", Group: group,
	Title: "The timing capacitor is larger than the emitter may discharge without a resistor.",
	Why: "The makers allow a capacitor to be discharged straight into the emitter only up to a size. A larger one needs enough resistance in the " +
		"emitter or base-one lead to keep the pulse below the rated peak emitter current, or the junction is damaged a little at every pulse.",
	Formula: "C > C_direct while R_B1 + R_E < V_P/I_E(pulse)",
	Source:  "2N2646 data sheet: 2 A by discharge of at most 10 uF and 30 V",
	Failing: deck("Slow flasher for a signpost", "20", "47k", "47u", "330", "4.7", "*> C1 kind=film"),
	Mended:  deck("Slow flasher for a signpost", "20", "47k", "4.7u", "330", "4.7", "*> C1 kind=film"),
	Check: each(rule.Case{Comparison: "timing_capacitance_direct", Place: []stage.Role{stage.TimingCapacitor},
		Mend: []stage.Role{stage.EmitterSeries, stage.TimingCapacitor}, FailsOnly: true,
		Fails: "every discharge strains the emitter: there is not enough resistance in its path", Value: "the timing capacitor",
		Limit: "the maker allows without a resistor up to"}),
}

var capacitorLeak = &rule.Rule{
	ID: "timing-capacitor-leak", Group: group,
	Title: "The capacitor's own leakage takes the current that should fire the stage.",
	Why: "A leaking capacitor draws its leakage from the timing resistor. At the peak only the rest is left for the emitter; where that is less " +
		"than the peak current, the ramp stops short and the stage is silent, at first on hot days, since leakage doubles every 10 K.",
	Formula: "(V_th - V_P)/R_th - I_leak > I_P; I_leak declared, or 0.01 C V or 3 uA for an electrolytic, doubling every 10 K",
	Source:  "leakage: catalogue figure of the makers; doubling: common practice, no source",
	Failing: deck("Orchard frost alarm timer", "20", "220k", "10u", "330", "22", "*> C1 kind=electrolytic leak=20u"),
	Mended:  deck("Orchard frost alarm timer", "20", "220k", "10u", "330", "22", "*> C1 kind=film leak=10n"),
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			if k, ok := a.Comparison("charging_current_at_peak"); ok && (k.Fails() || k.Tight()) {
				return // too little current without any leakage
			}
			p.Judge(a, rule.Case{Comparison: "charging_current_after_leakage", Place: []stage.Role{stage.TimingCapacitor},
				Mend: []stage.Role{stage.TimingResistor}, Fails: "the capacitor's leakage may keep the stage from firing",
				Value: "the charging current at the peak less the leakage", Limit: "the transistor needs"})
		})
	},
}
