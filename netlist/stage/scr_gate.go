package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// scr recognises what drives the gate of a thyristor and what stands in its
// anode circuit. It makes a working stage where the anode reaches a supply
// through a load (or the cathode does) and, if a unijunction transistor fires
// it, the cathode lies on the rail to which the pulse is referred.
func (r *recogniser) scr(anchor *circuit.Element, nets []circuit.NodeID) *Stage {
	g := &gateReading{r: r, w: r.w, stage: newStage(SCRGate, anchor), anode: nets[0], gate: nets[1], cathode: nets[2]}
	s := g.stage
	s.Nodes["anode"], s.Nodes["gate"], s.Nodes["cathode"] = g.anode, g.gate, g.cathode
	if g.anode == g.gate || g.anode == g.cathode || g.gate == g.cathode {
		s.Gap = "two of its terminals are on one net"
		return s
	}
	g.gateSide()
	g.anodeSide()
	s.Gap = g.fault()
	return s
}

// gateReading is the state of reading one gate stage.
type gateReading struct {
	r                    *recogniser
	w                    *circuit.Wiring
	stage                *Stage
	anode, gate, cathode circuit.NodeID
	driver               *Stage
	powered              bool // the anode circuit reaches a supply of the right sign
}

func passesPulse(e *circuit.Element) bool {
	return carriesDC(e) || e.Kind == circuit.Capacitor
}

// gateSide walks from the gate to whatever drives it.
func (g *gateReading) gateSide() {
	stop := func(n circuit.NodeID) bool {
		return g.w.IsFixed(n) || n == g.cathode || n == g.anode || g.r.outletAt(n) != nil
	}
	area := g.w.Walk([]circuit.NodeID{g.gate}, passesPulse, stop)
	for _, n := range area.Nets {
		if d := g.r.outletAt(n); d != nil && g.driver == nil {
			g.driver = d
			g.stage.add(Driver, d.Anchor)
			g.stage.Nodes["drive"] = n
		}
	}
	if g.driver == nil {
		area = g.w.Walk([]circuit.NodeID{g.gate}, carriesDC, stop)
	}
	drive := g.stage.Nodes["drive"]
	ends := func(n circuit.NodeID) bool {
		return n == g.gate || n == g.cathode || g.w.IsFixed(n) || g.driver != nil && n == drive
	}
	list := prune(g.w, area.Elements, ends)
	lead := g.leadParts(list)
	for _, e := range list {
		g.stage.add(g.gateRole(e, lead), e)
	}
	if g.driver != nil && drive == g.gate {
		g.stage.add(GateShunt, g.driver.Parts[BaseOne]...)
	}
}

// leadParts returns the elements of the gate network that lie on a way from the
// driver to the gate; without a driver, from any source to the gate.
func (g *gateReading) leadParts(list []*circuit.Element) []*circuit.Element {
	quiet := func(n circuit.NodeID) bool {
		n = g.w.Net(n)
		return n == g.cathode || g.driver != nil && g.w.IsFixed(n)
	}
	lead := slices.DeleteFunc(slices.Clone(list), func(e *circuit.Element) bool {
		return quiet(e.Nodes[0]) || quiet(e.Nodes[1])
	})
	drive := g.stage.Nodes["drive"]
	return prune(g.w, lead, func(n circuit.NodeID) bool {
		return n == g.gate || g.driver != nil && n == drive || g.driver == nil && g.w.IsFixed(n)
	})
}

// gateRole says whether an element of the gate network lies in the gate lead
// or across the gate.
func (g *gateReading) gateRole(e *circuit.Element, lead []*circuit.Element) Role {
	switch {
	case !slices.Contains(lead, e):
		return GateShunt
	case e.Kind == circuit.Capacitor:
		return GateCoupling
	}
	return GateSeries
}

// anodeSide walks from the anode (or, for a load in the cathode lead, from the
// cathode) to the supply.
func (g *gateReading) anodeSide() {
	own := func(n circuit.NodeID) bool { return n == g.gate || n == g.cathode || n == g.anode }
	stop := func(n circuit.NodeID) bool { return g.w.IsFixed(n) || own(n) }
	loadPart := func(e *circuit.Element) bool {
		return carriesDC(e) || e.Kind == circuit.Unknown || e.Kind == circuit.Switch
	}
	high := g.w.Walk([]circuit.NodeID{g.anode}, loadPart, stop)
	low := g.w.Walk([]circuit.NodeID{g.cathode}, loadPart, stop)
	g.powered = g.isAbove(high, low)
	for _, side := range []*circuit.Area{high, low} {
		for _, e := range g.loadParts(side) {
			g.stage.add(g.loadRole(e), e)
		}
	}
	for _, n := range append(slices.Clone(high.Nets), low.Nets...) {
		if g.w.IsFixed(n) {
			g.stage.add(Supply, g.w.Sources(n)...)
		}
	}
	g.snubber()
}

// loadParts returns the elements of one side that carry the main current.
func (g *gateReading) loadParts(side *circuit.Area) []*circuit.Element {
	own := append(slices.Clone(g.stage.Parts[GateSeries]), g.stage.Parts[GateShunt]...)
	list := without(side.Elements, own)
	list = slices.DeleteFunc(list, func(e *circuit.Element) bool {
		a, b := g.w.Net(e.Nodes[0]), g.w.Net(e.Nodes[1])
		return a == g.gate || b == g.gate || g.driver != nil && g.belongsToDriver(e)
	})
	start := side.Nets[0]
	return prune(g.w, list, func(n circuit.NodeID) bool { return n == start || g.w.IsFixed(n) })
}

func (g *gateReading) belongsToDriver(e *circuit.Element) bool {
	for _, role := range []Role{TimingResistor, BaseOne, BaseTwo, EmitterSeries} {
		if slices.Contains(g.driver.Parts[role], e) {
			return true
		}
	}
	return false
}

// loadRole tells a freewheel diode, which lies across the load with its cathode
// at the supply, from the load itself.
func (g *gateReading) loadRole(e *circuit.Element) Role {
	if e.Kind == circuit.VoltageSource {
		return Supply
	}
	if e.Kind != circuit.Diode {
		return Load
	}
	anode, _ := e.Pin("anode")
	cathode, _ := e.Pin("cathode")
	if g.w.Net(anode) == g.anode && g.w.IsFixed(cathode) || g.w.Net(cathode) == g.cathode && g.w.IsFixed(anode) {
		return Freewheel
	}
	return Rectifier
}

// isAbove reports whether the anode side reaches a supply that lies above the
// cathode side for at least part of the time.
func (g *gateReading) isAbove(high, low *circuit.Area) bool {
	for _, top := range high.Nets {
		if !g.w.IsFixed(top) {
			continue
		}
		v, dc := g.w.Potential(top)
		for _, bottom := range low.Nets {
			if !g.w.IsFixed(bottom) || top == bottom {
				continue
			}
			if u, bottomDC := g.w.Potential(bottom); !dc || !bottomDC || v > u {
				return true
			}
		}
	}
	return false
}

// snubber collects a capacitor, or a resistor and a capacitor in series, across
// the thyristor.
func (g *gateReading) snubber() {
	passes := func(e *circuit.Element) bool { return e.Kind == circuit.Capacitor || e.Kind == circuit.Resistor }
	for _, p := range g.w.On(g.anode) {
		e := p.Element
		if len(e.Nodes) != 2 || !passes(e) {
			continue
		}
		far := g.w.Other(e, g.anode)
		if far == g.cathode && e.Kind == circuit.Capacitor {
			g.stage.add(Snubber, e)
			continue
		}
		if pins := g.w.On(far); len(pins) == 2 && !g.w.IsFixed(far) {
			for _, q := range pins {
				f := q.Element
				if f != e && len(f.Nodes) == 2 && passes(f) && f.Kind != e.Kind && g.w.Other(f, far) == g.cathode {
					g.stage.add(Snubber, e, f)
				}
			}
		}
	}
}

// fault says why this is no working stage, "" where it is one.
func (g *gateReading) fault() string {
	switch {
	case !g.powered && (g.hasSwitch(g.anode) || g.hasSwitch(g.cathode)):
		return "a switch stands in its anode circuit; switches are not followed"
	case !g.powered:
		return "its anode has no way to a supply above its cathode"
	case g.gateOnRail():
		return "its gate lies on a dc rail"
	case g.driver != nil && g.stage.Nodes["drive"] == g.cathode:
		return "the trigger pulse arrives at its cathode"
	case g.driver != nil && !g.reaches(g.cathode, g.driver.Nodes["lower"]):
		return "its cathode does not lie on the rail to which the pulse is referred"
	}
	return ""
}

// hasSwitch reports whether a controlled switch stands on a net.
func (g *gateReading) hasSwitch(n circuit.NodeID) bool {
	return slices.ContainsFunc(g.w.On(n), func(p circuit.Pin) bool { return p.Element.Kind == circuit.Switch })
}

// gateOnRail reports whether a dc rail holds the gate.
func (g *gateReading) gateOnRail() bool {
	_, dc := g.w.Potential(g.gate)
	return dc
}

// reaches reports whether b can be reached from a through parts that carry dc.
func (g *gateReading) reaches(a, b circuit.NodeID) bool {
	area := g.w.Walk([]circuit.NodeID{a}, carriesDC, func(n circuit.NodeID) bool {
		return g.w.IsFixed(n) || n == g.anode
	})
	return area.HasNet(g.w, b)
}
