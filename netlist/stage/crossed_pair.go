package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// crossedPair recognises two transistors that stand in for a programmable
// unijunction (or, with the divider counted in, for a unijunction): the base of a pnp
// on the collector of an npn, and the other way round. The emitter of the pnp is the
// anode, its base the gate, the emitter of the npn the cathode. The pnp is the
// anchor, the npn its partner.
func (r *recogniser) crossedPair(anchor *circuit.Element, nets []circuit.NodeID) *Stage {
	emitter, base, collector := nets[0], nets[1], nets[2]
	partner := r.partner(base, collector)
	if partner == nil {
		return &Stage{Kind: PUTOscillator, Anchor: anchor, Gap: "no npn crosses it"}
	}
	cathode, _ := partner.Pin("emitter")
	u := r.putReading(anchor, emitter, base, r.w.Net(cathode))
	u.stage.Partner = partner
	u.stage.Nodes["inner"] = collector
	u.read()
	if s := u.stage; s.Gap == "" {
		u.diverting(collector)
	}
	return u.stage
}

// diverting takes in the resistors from the inner net to the cathode or the lower
// rail, which divert what would turn the npn on, and names what else hangs there.
func (u *rampReading) diverting(inner circuit.NodeID) {
	s := u.stage
	for _, end := range [2]circuit.NodeID{u.outlet, u.lower} {
		list := resistorsBetween(u.w, inner, end, nil)
		wire := func(e *circuit.Element) bool { return e.Value.Low <= 0 }
		if len(list) > 0 && !slices.ContainsFunc(list, wire) {
			s.Nodes["diverted"] = end
			s.add(GateShunt, list...)
			break
		}
	}
	for _, p := range u.w.On(inner) {
		if e := p.Element; !u.isOwn(e) && !slices.Contains(s.Parts[GateShunt], e) {
			s.Beside = append(s.Beside, e.Designator+
				" hangs between the crossed transistors; what it does there is not worked out")
		}
	}
}

// partner returns the npn whose collector and base lie on the two nets.
func (r *recogniser) partner(base, collector circuit.NodeID) *circuit.Element {
	for _, p := range r.w.On(base) {
		e := p.Element
		c, known := e.Pin("collector")
		b, _ := e.Pin("base")
		if e.Kind == circuit.NPN && known && r.w.Net(c) == base && r.w.Net(b) == collector {
			return e
		}
	}
	return nil
}

// isCrossed reports whether a pnp is half of a crossed pair.
func (r *recogniser) isCrossed(e *circuit.Element) bool {
	base, ok := e.Pin("base")
	collector, also := e.Pin("collector")
	return ok && also && r.partner(r.w.Net(base), r.w.Net(collector)) != nil
}

// isOwn reports whether an element is one of the devices that the stage stands
// around.
func (u *rampReading) isOwn(e *circuit.Element) bool {
	return slices.Contains([]*circuit.Element{u.stage.Anchor, u.stage.Partner}, e)
}
