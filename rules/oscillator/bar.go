package oscillator

import (
	"fmt"

	"standoff/netlist/operating"
	"standoff/netlist/quantity"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var interbaseHigh = &rule.Rule{
	ID: "interbase-voltage-high", Group: group,
	Title:   "The voltage between the bases is above the rating.",
	Why:     "The bar of the transistor is rated for a voltage between the bases. Above it the part may break down or heat up beyond rescue.",
	Formula: "V_BB < V_B2B1", Source: "interbase voltage of the sheet (2N2646: 35 V)",
	Failing: deck("Hoist interlock timer", "40", "220k", "0.22u", "330", "10", "*> V1 tol=2%"),
	Mended:  deck("Hoist interlock timer", "20", "220k", "0.22u", "330", "10", "*> V1 tol=2%"),
	Check: each(rule.Case{Comparison: "interbase_voltage", Mend: []stage.Role{stage.BaseTwo, stage.Supply},
		Fails: "the transistor may break down between its bases", Value: "the interbase voltage", Limit: "it is rated for"}),
}

var interbaseLow = &rule.Rule{
	ID: "interbase-voltage-low", Group: group,
	Title: "The supply is too low for a dependable pulse.",
	Why: "Peak and valley lie close together on a low supply: the ramp is short, the pulse small, the peak current high. Below 5 V common types " +
		"do not work dependably; below 9 V they lack margin. Types specified for low voltage have their own limit.",
	Formula: "V_BB >= V_BB(min) of the sheet; else hold below 5 V, doubt below 9 V",
	Source:  "common practice, no source; V_BB(min): 2N5431 sheet (4 V), 2N2840 sheet (1.5 V)",
	Failing: deck("Toy lighthouse", "4.5", "47k", "1u", "100", "22"),
	Mended:  deck("Toy lighthouse", "12", "47k", "1u", "390", "22"),
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			k, ok := a.Comparison("interbase_voltage_low")
			const margin = 9.0
			habit := k.LimitName == "habit"
			if !ok || !k.Fails() && (!habit || k.Value >= margin) {
				return
			}
			f := rule.Finding{Grade: rule.Doubt}
			if k.Fails() {
				if k.Certain {
					f.Grade = rule.Hold
				}
				f.Message = fmt.Sprintf("the stage does not work dependably: the interbase voltage is %s, it needs %s", quantity.Format(k.Value, "V"), quantity.Format(k.Limit, "V"))
			} else {
				k.Limit = margin
				f.Message = fmt.Sprintf("short ramp and small pulse: the interbase voltage is %s; below %s margin is lacking", quantity.Format(k.Value, "V"), quantity.Format(margin, "V"))
			}
			p.Report(f.For(a, k, rule.Case{Mend: []stage.Role{stage.BaseTwo, stage.Supply}}))
		})
	},
}

var interbaseDissipation = &rule.Rule{
	ID: "interbase-dissipation", Group: group,
	Title: "The transistor gets hotter than it may.",
	Why: "The bar conducts all the time and turns V_BB^2/R_BB into heat; the emitter adds the energy of every discharge. What the case may " +
		"dissipate falls with the ambient temperature.",
	Formula: "V_BB^2/R_BB + C V_P^2 f/2 < P_D - slope (T_A - 25 deg C)",
	Source:  "power and derating of the sheet (2N2646: 300 mW, 3 mW/K)",
	Failing: deck("Boiler room sequencer", "28", "100k", "0.22u", "330", "10", "*> V1 tol=2%", "*> board ambient=40..90"),
	Mended:  deck("Boiler room sequencer", "16", "100k", "0.22u", "330", "10", "*> V1 tol=2%", "*> board ambient=40..90"),
	Check: each(rule.Case{Comparison: "interbase_power", Mend: []stage.Role{stage.BaseTwo, stage.Supply},
		Fails: "the transistor gets hotter than it may", Value: "the power in it", Limit: "allowed at this ambient"}),
}

var baseOneMissing = &rule.Rule{
	ID: "base-one-resistor-missing", Group: group,
	Title: "Base one has no resistor: the bar current flows into the gate.",
	Why: "Some milliamperes flow through the bar all the time. Without a resistor from base one to its rail they have no way but the gate, and a " +
		"sensitive thyristor fires as soon as the supply comes up.",
	Formula: "a dc resistance from base one to its rail other than through a gate", Source: "common practice, no source",
	Failing: "Clock chime striker\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.22u\nXQ1 e b1 b2 2N2646\nR2 vcc b2 330\nD1 b1 g DG\n.model DG d\nXS1 coil g 0 BT151-500R\nR5 g 0 330\nRL vcc coil 100\n.end\n",
	Mended:  "Clock chime striker\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.22u\nXQ1 e b1 b2 2N2646\nR2 vcc b2 330\nR3 b1 0 22\nD1 b1 g DG\n.model DG d\nXS1 coil g 0 BT151-500R\nR5 g 0 330\nRL vcc coil 100\n.end\n",
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			if a.Facts["base-one-missing"] {
				p.Report(rule.Finding{Grade: rule.Hold, NoAdvice: "add a resistor of 22 to 47 ohm from base one to its rail",
					Message: "the bar current has no way but the gate: no resistor from base one to its rail"}.Placed(a))
			}
		})
	},
}

var baseTwoMissing = &rule.Rule{
	ID: "base-two-resistor-missing", Group: group,
	Title: "Without a base-two resistor the peak voltage drifts with temperature.",
	Why: "The drop of the emitter diode falls with temperature, and with it the peak voltage and the period. A resistor in the base-two lead lets the " +
		"rise of the bar's resistance make up for it. The finding tells what its absence costs and which value would serve.",
	Formula: "V1 alpha R_BB (eta R_B2 - (1 - eta) R_B1) = k (R_BB + R_B1 + R_B2)^2, the zero of dV_P/dT",
	Source:  "derived here; first order as R_B2 = (k/alpha) R_BB/(eta V1) + (1 - eta) R_B1/eta",
	Failing: deck("Metronome for a practice room", "20", "100k", "4.7u", "", "22", "*> C1 kind=film"),
	Mended:  deck("Metronome for a practice room", "20", "100k", "4.7u", "330", "22", "*> C1 kind=film"),
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			if !a.Facts["base-two-missing"] {
				return
			}
			k, _ := a.Comparison("base_two_drift")
			f := rule.Finding{Grade: rule.Doubt, Working: k.Working}.Placed(a)
			if a.Facts["base-two-drift-breaks-target"] {
				f.Grade = rule.Hold
			}
			f.Figure = &rule.Figure{Name: k.Name, Value: k.Value, Limit: k.Limit, Bound: "max"}
			f.Message = fmt.Sprintf("the rate drifts with temperature: %.2g %% per 10 K on the nominal board, since no resistor stands at base two", 100*k.Value)
			f.NoAdvice = "a resistor has to be added; its value cannot be proven on this board"
			if advised, ok := a.Figure("base_two_resistance_advised"); ok {
				f.Message += "; " + quantity.Short(quantity.Nearest(advised.Nominal, 12)) + " would compensate a typical part"
			}
			p.Report(f)
		})
	},
}

var baseTwoOff = &rule.Rule{
	ID: "base-two-resistor-off", Group: group,
	Title: "The base-two resistor is far from the value that compensates.",
	Why: "A base-two resistor that is much too small leaves the drift of the emitter diode, one that is much too large turns it around. It is judged by " +
		"the drift that it causes on the nominal board, never by its value.",
	Formula: "drift of the nominal board by the transistor alone < 1 % per 10 K", Source: "limit: common practice, no source; law: see base-two-resistor-missing",
	Failing: deck("Seismograph time marks", "24", "100k", "4.7u", "10k", "22", "*> C1 kind=film"),
	Mended:  deck("Seismograph time marks", "24", "100k", "4.7u", "270", "22", "*> C1 kind=film"),
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			if !a.Facts["base-two-missing"] {
				p.Judge(a, rule.Case{Comparison: "base_two_drift", Place: []stage.Role{stage.BaseTwo}, Mend: []stage.Role{stage.BaseTwo},
					FailsOnly: true, Percent: true, Fails: "the rate drifts with temperature", Value: "the drift per 10 K of the nominal board", Limit: "a compensated stage stays below"})
			}
		})
	},
}

var frequencyOffTarget = &rule.Rule{
	ID: "frequency-off-target", Group: group,
	Title:   "Some boards miss the declared frequency or period.",
	Why:     "With every part spread, tolerance, supply, temperature and all of a potentiometer's travel counted, the rate leaves the declared target on some boards.",
	Formula: "T = R_th C ln((V_th - V_V)/(V_th - V_P)) + (R_on + R_B1 + R_E) C ln(V_P/V_V) within the target",
	Source:  "Boylestad and Nashelsky, eq. 17.13 and below",
	Failing: deck("Aquarium dosing timer", "20", "100k", "1u", "330", "22", "*> XQ1 period=90m..110m"),
	Mended:  deck("Aquarium dosing timer", "20", "100k", "1u", "330", "22", "*> XQ1 period=40m..170m"),
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			c := rule.Case{Place: timing, FailsOnly: true, Fails: "some boards miss the target",
				Mend: []stage.Role{stage.TimingResistor, stage.TimingCapacitor}, Limit: "the target asks for"}
			for _, t := range [][2]string{{"frequency_lowest", "the lowest frequency"}, {"frequency_highest", "the highest frequency"},
				{"period_shortest", "the shortest period"}, {"period_longest", "the longest period"}} {
				if k, ok := a.Comparison(t[0]); ok && k.Fails() {
					c.Comparison, c.Value = t[0], t[1]
					p.Judge(a, c)
				}
			}
		})
	},
}

var frequencyDrift = &rule.Rule{
	ID: "frequency-drift", Group: group,
	Title: "The rate drifts with temperature.",
	Why: "Over the declared ambient range, with everything else unchanged, the rate of a board moves: by the emitter diode, the bar, and the " +
		"temperature coefficients of the parts. Where that alone leaves the target, no trimming helps.",
	Formula: "(greatest - least frequency)/frequency of the nominal board over the ambient range; hold where it leaves the target, doubt above 1 % per 10 K",
	Source:  "limit: common practice, no source",
	Failing: deck("Tide gauge sampler", "20", "100k", "4.7u", "330", "22", "*> C1 kind=film tempco=3000"),
	Mended:  deck("Tide gauge sampler", "20", "100k", "4.7u", "330", "22", "*> C1 kind=film tempco=200"),
	Check: func(p *rule.Pass) {
		p.Each(stage.UJTOscillator, func(a *operating.Account) {
			place := []stage.Role{stage.TimingCapacitor}
			for _, name := range []string{"frequency_drift_lowest", "frequency_drift_highest"} {
				if k, ok := a.Comparison(name); ok && k.Fails() {
					p.Judge(a, rule.Case{Comparison: name, Place: place, FailsOnly: true, Fails: "temperature alone moves the rate out of the target",
						Value: "the frequency of the nominal board", Limit: "the target asks for"})
					return
				}
			}
			p.Judge(a, rule.Case{Comparison: "frequency_drift_per_10k", Place: place, Mend: []stage.Role{stage.BaseTwo}, FailsOnly: true, Most: rule.Doubt, Percent: true,
				Fails: "the rate drifts with temperature", Value: "the drift per 10 K of the nominal board", Limit: "a steady stage stays below"})
		})
	},
}
