// Package trigger holds the rules on gates: will the thyristor fire when it
// should, stay quiet when it should not, and survive its own gate pulse. A rule
// compares figures of the account; it computes nothing.
package trigger

import (
	"strings"

	"standoff/netlist/operating"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

// Rules returns the rules of this group in the order of the reference.
func Rules() []*rule.Rule {
	return []*rule.Rule{pulseWeak, pulseShort, standby, resistorMissing, resistorLow, overdrive, reverse, returnMissing,
		polarity, latchingSlow}
}

const group = "Gates"

// each judges the cases for every gate stage.
func each(cases ...rule.Case) func(*rule.Pass) {
	return func(p *rule.Pass) {
		p.Each(stage.SCRGate, func(a *operating.Account) {
			for _, c := range cases {
				p.Judge(a, c)
			}
		})
	}
}

// fact reports a yes/no finding of the physics as a hold.
func fact(name, message, noAdvice string, place ...stage.Role) func(*rule.Pass) {
	return func(p *rule.Pass) {
		p.Each(stage.SCRGate, func(a *operating.Account) {
			if a.Facts[name] {
				p.Report(rule.Finding{Grade: rule.Hold, Message: message, NoAdvice: noAdvice}.Placed(a, place...))
			}
		})
	}
}

// deck writes a small board of the reference: an oscillator on 20 V whose base
// one drives a thyristor.
func deck(title, ct, rb1, series, scr, shunt, load string, more ...string) string {
	text := title + "\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 " + ct + "\nXQ1 e b1 b2 2N2647\nR2 vcc b2 220\nR3 b1 0 " + rb1 + "\n"
	gate := "b1"
	if series != "" {
		gate = "g"
		text += series + "\n"
	}
	text += "XS1 a " + gate + " 0 " + scr + "\n"
	if shunt != "" {
		text += "R5 " + gate + " 0 " + shunt + "\n"
	}
	text += "RL vcc a " + load + "\n"
	for _, m := range more {
		text += m + "\n"
	}
	return text + ".end\n"
}

var lead = []stage.Role{stage.GateSeries, stage.GateShunt}

var pulseWeak = &rule.Rule{
	ID: "gate-pulse-weak", Group: group,
	Title: "The trigger pulse may not fire the thyristor.",
	Why: "At the end of the ramp the capacitor discharges through the unijunction into base one. What reaches the gate has to pass the thyristor's " +
		"greatest trigger voltage and current at the coldest ambient, and feed the gate resistor besides. Where it does not, some thyristors sold under that number never fire.",
	Formula: "i_G at v_G = V_GT: load line of V_P behind R_on through the gate network > I_GT(cold) + V_GT(cold)/R_GK",
	Source:  "must-trigger box: Teccor AN1008, Dynex AN4840; R_on from the guaranteed base-one pulse of the sheet",
	Failing: deck("Bird scarer", "0.22u", "22", "R4 b1 g 470", "BT151-500R", "", "100", "*> board ambient=0..40"),
	Mended:  deck("Bird scarer", "0.22u", "33", "R4 b1 g 68", "BT151-500L", "", "100", "*> board ambient=0..40"),
	Check: each(
		rule.Case{Comparison: "gate_pulse_current", Place: lead, Mend: []stage.Role{stage.GateSeries},
			Fails: "the thyristor may not fire", Value: "the pulse current at the gate", Limit: "gate and gate resistor need"},
		rule.Case{Comparison: "gate_pulse_voltage", Place: lead, Mend: []stage.Role{stage.GateSeries}, FailsOnly: true,
			Fails: "the thyristor may not fire", Value: "the pulse at the open gate", Limit: "the gate needs"}),
}

var pulseShort = &rule.Rule{
	ID: "gate-pulse-short", Group: group,
	Title: "The trigger pulse is over before the thyristor has turned on.",
	Why: "Trigger currents of the sheets hold for pulses of 20 us and more. A shorter pulse needs more current in proportion; a pulse that " +
		"falls below the required current too early, or before the turn-on time, leaves the thyristor off.",
	Formula: "time above the required current > max(t_gt, 20 us I_required/I_pulse)",
	Source:  "20 us: trigger data of TIC106, TYN1212; constant charge: conservative reading of the inverse law of pulse width",
	Failing: deck("Photo flash trigger", "10n", "22", "R4 b1 g 100", "BT151-500L", "", "100", "*> board ambient=15..35"),
	Mended:  deck("Photo flash trigger", "1u", "47", "R4 b1 g 47", "BT151-500L", "", "100", "*> board ambient=15..35"),
	Check: each(rule.Case{Comparison: "gate_pulse_width", Place: lead, Fails: "the pulse is over before the thyristor is on",
		Mend: []stage.Role{stage.GateSeries}, Value: "the usable pulse width", Limit: "turning on takes"}),
}

var standby = &rule.Rule{
	ID: "gate-standby-voltage", Group: group,
	Title: "The standing voltage at base one may fire a hot thyristor.",
	Why: "The bar current flows through the base-one resistor all the time. The voltage that it leaves on the gate has to stay below what a hot " +
		"thyristor is guaranteed not to trigger on, or it fires as soon as the supply comes up.",
	Formula: "V1 R_B1/(R_B1 + R_BB + R_B2), through the gate network < V_GD",
	Source:  "Boylestad and Nashelsky, eq. 17.9; V_GD of the sheet, hot",
	Failing: deck("Fog horn relay", "0.22u", "100", "R4 b1 g 47", "C106D", "10k", "100"),
	Mended:  deck("Fog horn relay", "0.22u", "15", "R4 b1 g 220", "C106D", "1k", "100"),
	Check: each(rule.Case{Comparison: "gate_standby_voltage", Place: lead, Mend: []stage.Role{stage.GateShunt, stage.GateSeries},
		Fails: "a hot thyristor may fire by itself", Value: "the standing voltage on the gate", Limit: "it is sure not to fire below"}),
}

var resistorMissing = &rule.Rule{
	ID: "gate-resistor-missing", Group: group,
	Title: "The gate has no resistor as low as the one its sheet is stated with.",
	Why: "Sensitive-gate thyristors block, and resist steep voltages, only with a resistor from gate to cathode. With more resistance their own " +
		"leakage may fire them when hot.",
	Formula: "dc resistance gate to cathode through everything connected <= R_GK of the sheet",
	Source:  "blocking conditions of the sheets (C106, TIC106, MCR100, BT149: 1 kohm)",
	Failing: "Reed organ tremulant\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.22u\nXQ1 e b1 b2 2N2647\nR2 vcc b2 220\nR3 b1 0 22\nD1 b1 g DG\n.model DG d\nXS1 a g 0 C106D\nR5 g 0 10k\nRL vcc a 100\n.end\n",
	Mended:  "Reed organ tremulant\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.22u\nXQ1 e b1 b2 2N2647\nR2 vcc b2 220\nR3 b1 0 22\nD1 b1 g DG\n.model DG d\nXS1 a g 0 C106D\nR5 g 0 820\nRL vcc a 100\n.end\n",
	Check: func(p *rule.Pass) {
		p.Each(stage.SCRGate, func(a *operating.Account) {
			if !a.Facts["gate-return-missing"] {
				p.Judge(a, rule.Case{Comparison: "gate_shunt_resistance", Place: []stage.Role{stage.GateShunt}, Mend: []stage.Role{stage.GateShunt},
					FailsOnly: true, Fails: "leakage and steep voltages may fire the thyristor", Value: "the resistance from gate to cathode", Limit: "its sheet is stated with"})
			}
		})
	},
}

var resistorLow = &rule.Rule{
	ID: "gate-resistor-low", Group: group,
	Title:   "The gate resistor takes the pulse away from the gate.",
	Why:     "The resistor across the gate draws V_GT/R_GK before the gate gets anything. Here the drive would fire the thyristor without it and does not with it.",
	Formula: "V_GT(cold)/R_GK < drive current - I_GT(cold)",
	Source:  "footnote of the C106, 2N5060, MCR100 and MCR106 sheets: the resistor's current is not part of I_GT",
	Failing: deck("Lathe brake", "0.22u", "47", "R4 b1 g 100", "BT151-500L", "10", "100", "*> board ambient=15..35"),
	Mended:  deck("Lathe brake", "0.22u", "47", "R4 b1 g 68", "BT151-500L", "470", "100", "*> board ambient=15..35"),
	Check: func(p *rule.Pass) {
		p.Each(stage.SCRGate, func(a *operating.Account) {
			if k, ok := a.Comparison("gate_shunt_current"); ok && k.Limit <= 0 {
				return // too weak without any resistor: gate-pulse-weak tells
			}
			p.Judge(a, rule.Case{Comparison: "gate_shunt_current", Place: []stage.Role{stage.GateShunt}, Mend: []stage.Role{stage.GateShunt},
				FailsOnly: true, Fails: "the gate resistor takes the pulse away", Value: "the current of the gate resistor", Limit: "the drive can spare"})
		})
	},
}

var overdrive = &rule.Rule{
	ID: "gate-overdrive", Group: group,
	Title: "The trigger pulse is more than the gate stands.",
	Why: "Small thyristors have small gates: 0.2 A for a C106, 0.1 W for many TO-92 types. A capacitor emptied through a few ohm exceeds that. " +
		"It is a hold where resistors on the board set the current, a doubt where it hangs on the unijunction's own on-resistance.",
	Formula: "shorted-gate current < I_GM; E^2/(4 R) of the drive < P_GM",
	Source:  "upper bounds for any gate characteristic (straight load line); ratings of the sheet",
	Failing: deck("Pinball bumper", "0.22u", "33", "R4 b1 g 10", "C106D", "1k", "100"),
	Mended:  deck("Pinball bumper", "0.22u", "15", "R4 b1 g 220", "C106D", "1k", "100"),
	Check: each(
		rule.Case{Comparison: "gate_peak_current", Place: lead, Mend: []stage.Role{stage.GateSeries}, FailsOnly: true,
			Fails: "the pulse may damage the gate", Value: "the peak gate current", Limit: "the gate is rated for"},
		rule.Case{Comparison: "gate_peak_power", Place: lead, Mend: []stage.Role{stage.GateSeries}, FailsOnly: true,
			Fails: "the pulse may damage the gate", Value: "the peak gate power", Limit: "the gate is rated for"}),
}

var reverse = &rule.Rule{
	ID: "gate-reverse-voltage", Group: group,
	Title:   "The gate is driven further negative than it stands.",
	Why:     "A gate junction breaks down in reverse at 5 to 10 V. A negative bias beyond the rating damages it slowly.",
	Formula: "V_KG < V_GRM", Source: "reverse gate voltage of the sheet",
	Failing: deck("Winch guard", "0.22u", "22", "R4 b1 g 100", "C106D", "", "100", "VB n 0 -12", "R6 n g 47"),
	Mended:  deck("Winch guard", "0.22u", "15", "R4 b1 g 220", "C106D", "1k", "100"),
	Check: each(rule.Case{Comparison: "gate_reverse_voltage", Place: []stage.Role{stage.GateShunt},
		Fails: "the gate breaks down in reverse", Value: "the reverse gate voltage", Limit: "the gate is rated for"}),
}

var returnMissing = &rule.Rule{
	ID: "gate-return-missing", Group: group,
	Title:   "The gate has no dc path to its cathode.",
	Why:     "Without a path for leakage from gate to cathode the gate floats up by itself and the thyristor fires when hot, or when its voltage rises steeply.",
	Formula: "a dc path from gate to cathode other than through the thyristor", Source: "common practice, no source",
	Failing: "Egg turner\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.22u\nXQ1 e b1 b2 2N2647\nR2 vcc b2 220\nR3 b1 0 22\nD1 b1 g DG\n.model DG d\nXS1 a g 0 C106D\nRL vcc a 100\n.end\n",
	Mended:  "Egg turner\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.22u\nXQ1 e b1 b2 2N2647\nR2 vcc b2 220\nR3 b1 0 22\nD1 b1 g DG\n.model DG d\nXS1 a g 0 C106D\nR5 g 0 820\nRL vcc a 100\n.end\n",
	Check: fact("gate-return-missing", "leakage has no way from the gate: there is no dc path from gate to cathode",
		"add a resistor from gate to cathode; 1 kohm is what most sheets are stated with"),
}

var polarity = &rule.Rule{
	ID: "gate-polarity", Group: group,
	Title:   "The pulse reaches the gate with the wrong sign.",
	Why:     "A thyristor fires on a gate that goes positive against its cathode. Here the pulse leaves the gate at or below its cathode.",
	Formula: "pulse at the open gate > 0", Source: "definition of the device",
	Failing: "Gate buzzer\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.22u\nXQ1 e b1 b2 2N2647\nR2 vcc b2 220\nR3 b1 0 22\nD1 g b1 DG\n.model DG d\nXS1 a g 0 C106D\nR5 g 0 820\nRL vcc a 100\n.end\n",
	Mended:  "Gate buzzer\nV1 vcc 0 20\nR1 vcc e 100k\nC1 e 0 0.22u\nXQ1 e b1 b2 2N2647\nR2 vcc b2 220\nR3 b1 0 22\nD1 b1 g DG\n.model DG d\nXS1 a g 0 C106D\nR5 g 0 820\nRL vcc a 100\n.end\n",
	Check:   fact("gate-polarity", "the pulse does not drive the gate positive against its cathode", "turn the part in the gate lead round", stage.GateSeries),
}

var latchingSlow = &rule.Rule{
	ID: "latching-too-slow", Group: group,
	Title: "The load current has not reached the latching current when the pulse ends.",
	Why: "A thyristor stays on only if its load carries the latching current before the gate pulse is over. An inductive load takes time for it; " +
		"a load that never carries it leaves the thyristor off after every pulse.",
	Formula: "-(L/R) ln(1 - I_L R/V) < pulse width; V/R > I_L", Source: "Rashid, Power Electronics, ex. 10.11, with the latching current in place of the holding current",
	Failing: strings.Replace(deck("Solenoid plunger", "0.22u", "15", "R4 b1 g 220", "C106D", "1k", "100", "L1 x a 2", "*> XS1 load=inductive"),
		"RL vcc a", "RL vcc x", 1),
	Mended: deck("Solenoid plunger", "0.22u", "15", "R4 b1 g 220", "C106D", "1k", "100"),
	Check: each(rule.Case{Comparison: "latching_time", Place: []stage.Role{stage.Load}, Mend: nil,
		Fails: "the thyristor does not stay on after the pulse", Value: "the time to the latching current", Limit: "the pulse lasts"}),
}
