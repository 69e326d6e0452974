package circuit

import (
	"slices"
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/syntax"
)

// deviceGuess is what the insides of a subcircuit show.
type deviceGuess struct {
	kind  Kind
	roles []string
	by    Authority
}

// guess tells a subcircuit that is the model of one trigger device from a piece
// of a board: a crossed pair of transistors with a pin at each end and one at a
// base, or header names that only a triac or a unijunction transistor has, with
// the controlled sources of a model behind them. nil where it is neither.
func (b *builder) guess(sub *scope) *deviceGuess {
	if sub.insides == nil {
		sub.insides = &deviceGuess{}
		if len(sub.pins) == 3 && !sub.holdsBoard() {
			if g := b.crossedPair(sub); g != nil {
				sub.insides = g
			} else if g := sub.namedModel(); g != nil {
				sub.insides = g
			}
		}
	}
	if sub.insides.kind == "" {
		return nil
	}
	return sub.insides
}

// holdsBoard reports whether a subcircuit has parts inside that the model of a
// device has not.
func (s *scope) holdsBoard() bool {
	return slices.ContainsFunc(s.cards, func(c cardRef) bool {
		return strings.IndexByte("rcldqvieghfbsw", c.e.Name.Text[0]|0x20) < 0
	})
}

// namedModel goes by header names that leave no doubt, in front of a model that
// works with controlled sources or switches.
func (s *scope) namedModel() *deviceGuess {
	if !slices.ContainsFunc(s.cards, func(c cardRef) bool {
		return strings.IndexByte("ghfbsw", c.e.Name.Text[0]|0x20) >= 0
	}) {
		return nil
	}
	for _, kind := range []part.Kind{part.UJT, part.Triac} {
		if slices.ContainsFunc(s.pins, func(pin string) bool { return pin == "a" || pin == "k" }) {
			break // could be a thyristor as well
		}
		if roles := rolesOf(roleNames(kind), s.pins); complete(roles, part.NetlistOrder(kind)) {
			return &deviceGuess{Kind(kind), roles, ByHeader}
		}
	}
	return nil
}

// bipolar is a transistor inside a subcircuit.
type bipolar struct{ collector, base, emitter string }

// nets joins the nodes inside a subcircuit that are one as far as terminals go.
type nets map[string]string

func (n nets) root(name string) string {
	for {
		next, ok := n[name]
		if !ok {
			return name
		}
		if after, ok := n[next]; ok {
			n[name] = after // halve the way for the next one
		}
		name = next
	}
}

func (n nets) join(a, b string) {
	if a, b = n.root(a), n.root(b); a != b {
		n[a] = b
	}
}

// crossedPair looks for a pair of which the npn's collector feeds the base of the
// pnp and the other way round. The anode then is the side of the pnp's emitter,
// the cathode that of the npn's, the gate one of the bases. Lead resistances and
// sensing sources are wires; where that leaves a pin open, a diode in the anode's
// or cathode's way and a series resistor in the gate's are followed as well. A
// pin that is still open then is the gate.
func (b *builder) crossedPair(sub *scope) *deviceGuess {
	npn, pnp := b.transistors(sub)
	if len(npn) == 0 || len(pnp) == 0 || len(npn)+len(pnp) > 20 {
		return nil
	}
	tight, loose := nets{}, nets{}
	for i := range sub.cards {
		bridge(sub.cards[i].e, tight, loose)
	}
	for _, n := range npn {
		for _, p := range pnp {
			if tight.root(n.collector) != tight.root(p.base) || tight.root(p.collector) != tight.root(n.base) {
				continue
			}
			for i, wires := range []nets{tight, loose, tight} {
				g := pairRoles(sub, wires, n, p)
				if g != nil && (i == 2 || g.takes("gate")) && g.closed() != nil {
					return g
				}
			}
		}
	}
	return nil
}

// transistors returns the npn and pnp transistors of a subcircuit.
func (b *builder) transistors(sub *scope) (npn, pnp []bipolar) {
	for _, c := range sub.cards {
		f := c.e.Fields
		if c.e.Name.Text[0]|0x20 != 'q' || len(f) < 4 {
			continue
		}
		q := bipolar{strings.ToLower(f[0].Text), strings.ToLower(f[1].Text), strings.ToLower(f[2].Text)}
		switch sub.typeOf(f[3:]) {
		case part.NPN:
			npn = append(npn, q)
		case part.PNP:
			pnp = append(pnp, q)
		}
	}
	return npn, pnp
}

// typeOf returns the type of the first word that names a model, seen from inside
// a subcircuit.
func (s *scope) typeOf(words []syntax.Value) part.Kind {
	for _, w := range words {
		if def := s.findModel(w.Text); def != nil {
			return part.Kind(strings.ToLower(def.m.Type.Text))
		}
	}
	return ""
}

// bridge joins the nodes that a card ties together.
func bridge(e *syntax.Element, tight, loose nets) {
	f := e.Fields
	if len(f) < 2 {
		return
	}
	a, b := strings.ToLower(f[0].Text), strings.ToLower(f[1].Text)
	switch e.Name.Text[0] | 0x20 {
	case 'r':
		ohm, ok := 0.0, false
		if len(f) > 2 {
			ohm, ok = part.Plain(f[2])
		}
		if ok && ohm < 5 {
			tight.join(a, b)
		}
		if ok && ohm < 200 {
			loose.join(a, b)
		}
	case 'l', 'v':
		tight.join(a, b)
		loose.join(a, b)
	case 'd':
		loose.join(a, b)
	}
}

// pairRoles finds the pins at the ends and at a base of a crossed pair.
func pairRoles(sub *scope, wires nets, n, p bipolar) *deviceGuess {
	ends := [4]string{wires.root(p.emitter), wires.root(n.emitter), wires.root(n.base), wires.root(p.base)}
	for i := range ends {
		for k := range i {
			if ends[i] == ends[k] {
				return nil // followed too far: two terminals in one
			}
		}
	}
	roles, kind := make([]string, len(sub.pins)), SCR
	for i, pin := range sub.pins {
		switch wires.root(pin) {
		case ends[0]:
			roles[i] = "anode"
		case ends[1]:
			roles[i] = "cathode"
		case ends[2]:
			roles[i] = "gate"
		case ends[3]:
			roles[i], kind = "gate", PUT
		}
	}
	return &deviceGuess{kind, roles, ByInsides}
}

func (g *deviceGuess) takes(role string) bool { return slices.Contains(g.roles, role) }

// closed returns a guess of which every pin is known, one open one being the
// gate; else nil.
func (g *deviceGuess) closed() *deviceGuess {
	if open := slices.Index(g.roles, ""); open >= 0 && !g.takes("gate") {
		g.roles[open] = "gate"
	}
	if !complete(g.roles, part.NetlistOrder(part.SCR)) {
		return nil
	}
	return g
}
