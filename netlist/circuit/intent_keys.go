package circuit

import (
	"slices"

	"standoff/netlist/quantity"
)

// intentKey is one key of an element line: the kinds of elements it fits, none
// for all, and how it is taken.
type intentKey struct {
	kinds []Kind
	set   func(s *setting) error
}

func (k intentKey) fits(kind Kind) bool { return k.kinds == nil || slices.Contains(k.kinds, kind) }

// The groups of kinds that keys fit.
var (
	passiveKinds   = []Kind{Resistor, Capacitor, Inductor}
	valuedKinds    = []Kind{Resistor, Capacitor, Inductor, VoltageSource, CurrentSource}
	sourceKinds    = []Kind{VoltageSource, CurrentSource}
	thyristorKinds = []Kind{SCR, Triac, Unknown}
	timerKinds     = []Kind{UJT, PUT, Diac, SCR, Triac, Unknown}
)

// intentKeyOf returns how a key is taken; ok is false where there is no such key.
func intentKeyOf(name string) (k intentKey, ok bool) {
	switch name {
	case "tol":
		return intentKey{valuedKinds, (*setting).tolerance}, true
	case "power":
		return intentKey{[]Kind{Resistor}, amount(func(i *Intent) **float64 { return &i.Power })}, true
	case "volts":
		kinds := []Kind{Resistor, Capacitor}
		return intentKey{kinds, amount(func(i *Intent) **float64 { return &i.Volts })}, true
	case "tempco":
		return intentKey{passiveKinds, (*setting).temperature}, true
	case "travel":
		return intentKey{[]Kind{Resistor}, (*setting).travel}, true
	case "vt":
		return intentKey{[]Kind{Inductor}, amount(func(i *Intent) **float64 { return &i.VoltSeconds })}, true
	case "leak":
		return intentKey{[]Kind{Capacitor}, amount(func(i *Intent) **float64 { return &i.Leak })}, true
	case "kind":
		return intentKey{[]Kind{Capacitor}, (*setting).dielectric}, true
	case "range":
		return intentKey{sourceKinds, (*setting).supply}, true
	}
	return deviceKeyOf(name)
}

// deviceKeyOf returns the keys of devices.
func deviceKeyOf(name string) (k intentKey, ok bool) {
	switch name {
	case "part":
		return intentKey{}, true // taken before all others
	case "pins":
		return intentKey{nil, (*setting).pins}, true
	case "frequency":
		return intentKey{timerKinds, target(func(i *Intent) **quantity.Spread { return &i.Frequency })}, true
	case "period":
		return intentKey{timerKinds, target(func(i *Intent) **quantity.Spread { return &i.Period })}, true
	case "load":
		return intentKey{thyristorKinds, (*setting).load}, true
	case "latch":
		return intentKey{timerKinds, (*setting).latch}, true
	case "amps":
		return intentKey{thyristorKinds, amount(func(i *Intent) **float64 { return &i.Amps })}, true
	case "heatsink":
		return intentKey{thyristorKinds, amount(func(i *Intent) **float64 { return &i.Heatsink })}, true
	}
	return intentKey{}, false
}
