package oscillator

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var putGateVoltage = &rule.Rule{
	ID: "put-gate-voltage", Group: group,
	Title: "The programmable unijunction sees more voltage than it stands.",
	Why: "Before it fires the gate stands at the divider's voltage over cathode and empty capacitor, and the " +
		"anode climbs to the peak voltage. Beyond its ratings a junction breaks down, the stage fires early " +
		"and in the end for good. A transistor that pulls the gate down while the cathode is up with the pulse " +
		"turns the junction between them round, which stands a few volts only.",
	Formula: "V_S - V_K < V_GKF; V_S < V_GAR (capacitor empty); V_P - V_K < V_AK; V_K - V_S < V_GKR, with the " +
		"gate pulled down V_pulse < V_GKR",
	Source: "ratings of the 2N6027 data sheet: 40 V each, gate to cathode reverse 5 V",
	Failing: `Cable trough dehumidifier
V1 vcc 0 60
R1 vcc a 1meg
C1 a 0 100n
XP1 a g k 2N6027
R2 vcc g 12k
R3 g 0 33k
R4 k 0 47
.end
`,
	Mended: `Cable trough dehumidifier
V1 vcc 0 24
R1 vcc a 1meg
C1 a 0 100n
XP1 a g k 2N6027
R2 vcc g 12k
R3 g 0 33k
R4 k 0 47
.end
`,
	Check: each(
		overVolted("gate_forward_voltage", "the gate over the cathode"),
		overVolted("gate_anode_voltage", "the gate over the anode of the empty capacitor"),
		overVolted("anode_voltage", "the anode over the cathode"),
		overVolted("gate_reverse_voltage_standby", "the cathode over the gate"),
		pulledDown()),
}

// overVolted judges one of the device's voltages.
func overVolted(comparison, value string) rule.Case {
	return rule.Case{Comparison: comparison, Place: divider, Mend: divider,
		Fails: "the {device} may break down", Value: value, Limit: "the sheet allows"}
}

// pulledDown judges the pulse on the cathode against a gate that a transistor pulls down.
func pulledDown() rule.Case {
	c := overVolted("gate_reverse_voltage", "the cathode, while it carries the pulse, over a gate pulled down,")
	c.Place, c.Mend = []stage.Role{stage.BaseOne}, nil
	return c
}
