package oscillator

import (
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

var breakoverNotReached = &rule.Rule{
	ID: "breakover-not-reached", Group: group,
	Title: "The capacitor never gets to the breakover voltage of the device.",
	Why: "A diac, silicon switch or neon lamp leads nothing until its breakover voltage stands across it. " +
		"Where the charging network cannot bring the capacitor there with the highest device, the lowest " +
		"supply, the heaviest tap and the greatest leakage, the stage is silent. On the line, resistor and " +
		"capacitor divide the crest as well; behind rectifiers the highest voltage of a settled cycle counts.",
	Formula: "dc: V_th - I_leak R_th > V_BO(max); line: crest/sqrt(1 + (2 pi f R C)^2) > V_BO(max)",
	Source: "first-order network on a sine: any textbook of circuit analysis; V_BO: data sheets " +
		"(DB3: 28 .. 36 V)",
	Failing: `Beacon strobe trigger
V1 vcc 0 36
R1 vcc a 47k
C1 a 0 100n
XD1 a k DB3
R2 k 0 47
.end
`,
	Mended: `Beacon strobe trigger
V1 vcc 0 60
R1 vcc a 47k
C1 a 0 100n
XD1 a k DB3
R2 k 0 47
.end
`,
	Check: each(rule.Case{
		Comparison: "capacitor_voltage_crest", Place: timing,
		Mend:  []stage.Role{stage.TimingResistor, stage.TimingCapacitor},
		Fails: "the stage may never fire",
		Value: "the highest voltage that the capacitor gets to", Limit: "the device breaks over at",
	}),
}
