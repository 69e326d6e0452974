package part

// The symbols of the devices that time: unijunctions, breakover devices, current
// sources. The tables are constant data; nothing is built when a program starts.

var ujtSymbols = []Symbol{
	{"eta", "", Either, "intrinsic stand-off ratio"},
	{"rbb", "ohm", Either, "interbase resistance, 25 deg C, emitter open"},
	{"rbb_tc", "1/K", Either, "temperature coefficient of the interbase resistance"},
	{"vd", "V", Either, "drop of the emitter diode at 25 deg C"},
	{"vv", "V", Either, "valley voltage"},
	{"ip", "A", Greatest, "peak-point emitter current"},
	{"ip_vbb", "V", Condition, "interbase voltage at which ip holds"},
	{"iv", "A", Least, "valley-point emitter current"},
	{"iv_vbb", "V", Condition, "interbase voltage at which iv holds"},
	{"iv_rb2", "ohm", Condition, "base-two resistor with which iv holds"},
	{"vob1", "V", Least, "base-one pulse amplitude"},
	{"vob1_c", "F", Condition, "capacitor with which vob1 holds"},
	{"vob1_rb1", "ohm", Condition, "base-one resistor with which vob1 holds"},
	{"vob1_v", "V", Condition, "supply with which vob1 holds"},
	{"veb1_sat", "V", Greatest, "emitter saturation voltage"},
	{"ieo", "A", Greatest, "emitter reverse current"},
	{"pd", "W", Least, "power at 25 deg C"},
	{"pd_slope", "W/K", Greatest, "derating of the power above 25 deg C"},
	{"ie_rms", "A", Least, "rms emitter current rating"},
	{"ie_pulse", "A", Least, "peak pulse emitter current rating"},
	{"cap_direct", "F", Least, "greatest capacitor discharged without a series resistor"},
	{"vb2e", "V", Least, "reverse voltage base two to emitter"},
	{"vb2b1", "V", Least, "interbase voltage rating"},
	{"vbb_min", "V", Greatest, "least interbase voltage at which the type is specified"},
	{"tj", "deg C", Least, "junction temperature rating"},
}

var putSymbols = []Symbol{
	{"vt_10k", "V", Either, "offset voltage, gate resistance 10 kohm"},
	{"vt_1meg", "V", Either, "offset voltage, gate resistance 1 Mohm"},
	{"ip_10k", "A", Greatest, "peak current, gate resistance 10 kohm"},
	{"ip_100k", "A", Greatest, "peak current, gate resistance 100 kohm"},
	{"ip_1meg", "A", Greatest, "peak current, gate resistance 1 Mohm"},
	{"iv_200", "A", Least, "valley current, gate resistance 200 ohm"},
	{"iv_10k", "A", Least, "valley current, gate resistance 10 kohm"},
	{"iv_100k", "A", Least, "valley current, gate resistance 100 kohm"},
	{"iv_1meg", "A", Least, "valley current, gate resistance 1 Mohm"},
	{"igao", "A", Greatest, "gate to anode leakage"},
	{"vf", "V", Greatest, "forward voltage"},
	{"vv", "V", Either, "valley voltage"},
	{"vo", "V", Least, "peak output voltage"},
	{"vak", "V", Least, "anode to cathode voltage rating"},
	{"vgkf", "V", Least, "gate to cathode forward voltage rating"},
	{"vgkr", "V", Least, "gate to cathode reverse voltage rating"},
	{"vgar", "V", Least, "gate to anode reverse voltage rating"},
	{"it", "A", Least, "dc anode current rating"},
	{"itrm", "A", Least, "repetitive peak anode current rating"},
	{"energy", "J", Least, "capacitor discharge energy rating"},
	{"pd", "W", Least, "power at 25 deg C"},
	{"pd_slope", "W/K", Greatest, "derating of the power above 25 deg C"},
	{"tj", "deg C", Least, "junction temperature rating"},
}

var diacSymbols = []Symbol{
	{"vbo", "V", Either, "breakover voltage"},
	{"vbo_symmetry", "V", Greatest, "difference of the two breakover voltages"},
	{"vbo_tc", "1/K", Either, "temperature coefficient of the breakover voltage"},
	{"ibo", "A", Greatest, "breakover current"},
	{"idrm", "A", Greatest, "leakage below the breakover voltage"},
	{"dv", "V", Least, "step back of the voltage at breakover"},
	{"vf", "V", Greatest, "voltage when it conducts"},
	{"ih", "A", Either, "holding current"},
	{"vo", "V", Least, "output voltage step into 20 ohm"},
	{"vr", "V", Least, "reverse voltage rating of a one-sided device"},
	{"itrm", "A", Least, "repetitive peak current rating"},
	{"it", "A", Least, "dc current rating"},
	{"pd", "W", Least, "power rating"},
	{"tj", "deg C", Least, "junction temperature rating"},
}

var sourceSymbols = []Symbol{
	{"i", "A", Either, "current"},
	{"v_per_k", "V/K", Either, "sense voltage per kelvin across the setting resistor"},
	{"ratio", "", Either, "whole current over the current of the setting resistor"},
	{"set_error_small", "", Greatest, "relative error of the set current below i_small"},
	{"i_small", "A", Condition, "current below which set_error_small holds"},
	{"set_error_large", "", Greatest, "relative error of the set current above i_large"},
	{"i_large", "A", Condition, "current above which set_error_large holds"},
	{"zt", "ohm", Least, "dynamic impedance at 25 V"},
	{"zk", "ohm", Least, "knee impedance at 6 V"},
	{"slew_c", "F", Greatest, "its current over this is the fastest change of voltage that it follows"},
	{"v_min", "V", Greatest, "least voltage across it"},
	{"v_max", "V", Least, "greatest voltage across it"},
	{"v_rev", "V", Least, "reverse voltage rating"},
	{"i_min", "A", Greatest, "least current that can be set"},
	{"i_max", "A", Least, "greatest current that can be set"},
	{"pd", "W", Least, "power rating"},
	{"tj", "deg C", Least, "junction temperature rating"},
}

// zenerSymbols are what makes a zener, or a light-emitting diode, of a diode card; the rest is
// SPICE's own.
var zenerSymbols = []Symbol{
	{"bv", "V", Either, "breakdown voltage"},
	{"vz_tol", "", Greatest, "relative tolerance of the breakdown voltage"},
	{"vf", "V", Either, "forward voltage at 25 deg C"},
	{"iz_min", "A", Greatest, "least current at which it regulates"},
	{"iz_test", "A", Condition, "current at which bv holds"},
	{"zz", "ohm", Greatest, "dynamic impedance at iz_test"},
	{"pz", "W", Least, "power rating"},
}
