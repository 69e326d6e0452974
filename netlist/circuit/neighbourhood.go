package circuit

// Wiring answers questions about the neighbourhood of a node. Links - resistors
// of 0 ohm and sources of 0 V, as people draw them for a bridge or a current
// probe - are collapsed: every question is about the joined net.
type Wiring struct {
	Circuit *Circuit
	net     []NodeID // node -> the node that stands for its net
	pins    [][]Pin  // pins of a net, links left out
	up      []hop    // net -> the voltage source that ties it towards ground
	fixed   []bool
}

// hop is one step from a net towards ground through a voltage source.
type hop struct {
	source *Element
	next   NodeID
}

// NewWiring joins the links of a circuit and finds the nets whose potential
// voltage sources fix. It takes time in proportion to the number of pins.
func NewWiring(c *Circuit) *Wiring {
	w := &Wiring{Circuit: c, net: make([]NodeID, len(c.Nodes))}
	for i := range w.net {
		w.net[i] = NodeID(i)
	}
	for _, e := range c.Elements {
		if IsLink(e) {
			w.join(e.Nodes[0], e.Nodes[1])
		}
	}
	w.pins = make([][]Pin, len(c.Nodes))
	for i := range c.Nodes {
		n := w.Net(NodeID(i))
		for _, p := range c.Nodes[i].Pins {
			if !IsLink(p.Element) {
				w.pins[n] = append(w.pins[n], p)
			}
		}
	}
	w.fix()
	return w
}

// IsLink reports whether an element is a piece of wire: a resistor of 0 ohm or
// a dc source of 0 V.
func IsLink(e *Element) bool {
	if len(e.Nodes) != 2 || !e.HasValue || e.Value.Low != 0 || e.Value.High != 0 {
		return false
	}
	return e.Kind == Resistor || e.Kind == VoltageSource && (e.Wave.Kind == "dc" || e.Wave.Kind == "")
}

func (w *Wiring) join(a, b NodeID) {
	a, b = w.Net(a), w.Net(b)
	if b < a {
		a, b = b, a // the lower number stands for the net, so ground stays 0
	}
	w.net[b] = a
}

// Net returns the node that stands for the net of n.
func (w *Wiring) Net(n NodeID) NodeID {
	for w.net[n] != n {
		w.net[n] = w.net[w.net[n]]
		n = w.net[n]
	}
	return n
}

// fix walks the voltage sources outwards from ground. A part of the board that
// no element ties to ground (an isolated supply, or a netlist without node 0)
// gets a reference of its own: the minus of its first voltage source.
func (w *Wiring) fix() {
	w.up = make([]hop, len(w.net))
	w.fixed = make([]bool, len(w.net))
	tied := make([]bool, len(w.net))
	w.fixFrom(Ground)
	w.tie(Ground, tied)
	for _, e := range w.Circuit.Elements {
		if e.Kind != VoltageSource || len(e.Nodes) != 2 || tied[w.Net(e.Nodes[1])] {
			continue
		}
		minus := w.Net(e.Nodes[1])
		w.fixFrom(minus)
		w.tie(minus, tied)
	}
}

// fixFrom fixes the reference and every net that voltage sources tie to it.
func (w *Wiring) fixFrom(reference NodeID) {
	w.fixed[reference] = true
	queue := []NodeID{reference}
	for len(queue) > 0 {
		at := queue[0]
		queue = queue[1:]
		for _, p := range w.pins[at] {
			if p.Element.Kind != VoltageSource || len(p.Element.Nodes) != 2 {
				continue
			}
			next := w.Net(p.Element.Nodes[1-p.Index])
			if !w.fixed[next] {
				w.fixed[next] = true
				w.up[next] = hop{p.Element, at}
				queue = append(queue, next)
			}
		}
	}
}

// tie marks every net that any element, capacitors and couplings left out,
// connects to start.
func (w *Wiring) tie(start NodeID, tied []bool) {
	tied[start] = true
	queue := []NodeID{start}
	for len(queue) > 0 {
		at := queue[0]
		queue = queue[1:]
		for _, p := range w.pins[at] {
			if p.Element.Kind == Capacitor || p.Element.Kind == Coupling || p.Element.Kind == Optotriac {
				continue
			}
			for _, n := range p.Element.Nodes {
				if n = w.Net(n); !tied[n] {
					tied[n] = true
					queue = append(queue, n)
				}
			}
		}
	}
}

// On returns the pins on the net of n.
func (w *Wiring) On(n NodeID) []Pin { return w.pins[w.Net(n)] }

// Reference returns the net against which the potential of a fixed net counts.
func (w *Wiring) Reference(n NodeID) NodeID {
	for n = w.Net(n); w.up[n].source != nil; {
		n = w.up[n].next
	}
	return n
}

// IsFixed reports whether voltage sources alone set the potential of n against
// its reference, which is ground unless its part of the board is isolated.
func (w *Wiring) IsFixed(n NodeID) bool { return w.fixed[w.Net(n)] }

// Sources returns the voltage sources between n and its reference,
// nearest first, for a net that they fix.
func (w *Wiring) Sources(n NodeID) []*Element {
	var list []*Element
	for n = w.Net(n); w.up[n].source != nil; n = w.up[n].next {
		list = append(list, w.up[n].source)
	}
	return list
}

// Potential returns the nominal dc potential of a fixed net in volt. ok is
// false where the net is not fixed or a source on the way is not a dc source.
func (w *Wiring) Potential(n NodeID) (volts float64, ok bool) {
	n = w.Net(n)
	if !w.fixed[n] {
		return 0, false
	}
	for w.up[n].source != nil {
		h := w.up[n]
		if !h.source.HasValue || h.source.Wave.Kind != "dc" && h.source.Wave.Kind != "" {
			return 0, false
		}
		if w.Net(h.source.Nodes[0]) == n {
			volts += h.source.Value.Nominal
		} else {
			volts -= h.source.Value.Nominal
		}
		n = h.next
	}
	return volts, true
}

// Area is what a walk reached: nets and elements in the order they were met.
type Area struct {
	Nets     []NodeID
	Elements []*Element
	netSet   map[NodeID]bool
	partSet  map[*Element]bool
}

// HasNet reports whether the walk reached the net of n.
func (a *Area) HasNet(w *Wiring, n NodeID) bool { return a.netSet[w.Net(n)] }

// Has reports whether the walk went through an element.
func (a *Area) Has(e *Element) bool { return a.partSet[e] }

// Walk goes out from the nets in from, through every two-terminal element for
// which through says yes, and does not go on from nets for which stop says yes.
// A starting net is left whatever stop says, unless voltage sources fix it: a
// rail leads everywhere. Nets where it stopped are part of the area.
func (w *Wiring) Walk(from []NodeID, through func(*Element) bool, stop func(NodeID) bool) *Area {
	area := &Area{netSet: map[NodeID]bool{}, partSet: map[*Element]bool{}}
	var queue []NodeID
	for _, n := range from {
		if n = w.Net(n); !area.netSet[n] {
			area.netSet[n] = true
			area.Nets = append(area.Nets, n)
			if !w.fixed[n] {
				queue = append(queue, n)
			}
		}
	}
	for len(queue) > 0 {
		at := queue[0]
		queue = queue[1:]
		for _, p := range w.pins[at] {
			e := p.Element
			if area.partSet[e] || len(e.Nodes) != 2 || !through(e) {
				continue
			}
			area.partSet[e] = true
			area.Elements = append(area.Elements, e)
			next := w.Net(e.Nodes[1-p.Index])
			if area.netSet[next] {
				continue
			}
			area.netSet[next] = true
			area.Nets = append(area.Nets, next)
			if !stop(next) {
				queue = append(queue, next)
			}
		}
	}
	return area
}

// Other returns the net at the far side of a two-terminal element.
func (w *Wiring) Other(e *Element, n NodeID) NodeID {
	if w.Net(e.Nodes[0]) == w.Net(n) {
		return w.Net(e.Nodes[1])
	}
	return w.Net(e.Nodes[0])
}

// Between returns the two-terminal elements straight between two nets.
func (w *Wiring) Between(a, b NodeID) []*Element {
	var list []*Element
	a, b = w.Net(a), w.Net(b)
	for _, p := range w.pins[a] {
		if len(p.Element.Nodes) == 2 && w.Net(p.Element.Nodes[1-p.Index]) == b {
			list = append(list, p.Element)
		}
	}
	return list
}
