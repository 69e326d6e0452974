package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// topology is one row of what can be recognised: the part that a stage stands
// around, its terminals in the order in which the builder takes their nets, and
// the builder.
type topology struct {
	part  circuit.Kind
	kind  Kind
	roles []string
	when  func(r *recogniser, e *circuit.Element) bool // nil: always
	build func(r *recogniser, anchor *circuit.Element, nets []circuit.NodeID) *Stage
	// last is a more lenient builder, tried where no terminal order makes a working stage;
	// nil for none.
	last func(r *recogniser, anchor *circuit.Element, nets []circuit.NodeID) *Stage
}

// topologies lists the timing stages first: a gate stage asks for its driver.
var topologies = [...]topology{
	{circuit.UJT, UJTOscillator, []string{"emitter", "base1", "base2"}, nil, (*recogniser).ujt, nil},
	{circuit.PUT, PUTOscillator, []string{"anode", "gate", "cathode"}, nil, (*recogniser).put, (*recogniser).unliftedPUT},
	{circuit.PNP, PUTOscillator, []string{"emitter", "base", "collector"}, (*recogniser).isCrossed, (*recogniser).crossedPair, nil},
	{circuit.Diac, BreakoverOscillator, []string{"1", "2"}, nil, (*recogniser).breakover, nil},
	{circuit.SCR, SCRGate, []string{"anode", "gate", "cathode"}, nil, (*recogniser).scr, nil},
}

// Recognise returns the stages of a circuit: the timing stages first, then the
// gate stages, those of one kind in the order of their anchors' cards. Links are
// followed: a timing stage lists the gate stages that it drives.
func Recognise(c *circuit.Circuit) []*Stage {
	if !slices.ContainsFunc(c.Elements, isAnchor) {
		return nil
	}
	r := &recogniser{w: circuit.NewWiring(c)}
	for i := range topologies {
		t := &topologies[i]
		for _, e := range c.Elements {
			if e.Kind == t.part && (t.when == nil || t.when(r, e)) {
				r.stages = append(r.stages, r.ordered(e, t))
			}
		}
	}
	r.link()
	return r.stages
}

// isAnchor reports whether a stage can stand around this element.
func isAnchor(e *circuit.Element) bool {
	return slices.ContainsFunc(topologies[:], func(t topology) bool { return t.part == e.Kind })
}

// recogniser is the state of one call of Recognise.
type recogniser struct {
	w      *circuit.Wiring
	stages []*Stage
}

// link notes which timing stage fires which gate stage.
func (r *recogniser) link() {
	for _, t := range r.stages {
		for _, g := range r.stages {
			if g != t && slices.Contains(g.Parts[Driver], t.Anchor) {
				t.Drives = append(t.Drives, g)
				g.DrivenBy = t
			}
		}
	}
}

// outletAt returns the oscillator whose pulse comes out at a net.
func (r *recogniser) outletAt(n circuit.NodeID) *Stage {
	for _, s := range r.stages {
		if outlet, ok := s.Nodes["outlet"]; ok && s.Gap == "" && outlet == n {
			return s
		}
	}
	return nil
}

// OrderNote says that wiring and terminal order do not agree.
type OrderNote struct {
	Taken    []string // roles in the order of the nodes, as taken by authority
	Wiring   []string // the only order that makes a working stage
	Followed bool     // the stage was read in the order of the wiring
}

// ordered builds a stage in the terminal order that was taken. Where that makes
// no working stage and exactly one other order does, the stage says so; an
// order that nobody wrote down then gives way to the wiring.
func (r *recogniser) ordered(e *circuit.Element, t *topology) *Stage {
	roles := e.Roles
	known := func(role string) bool { return slices.Contains(roles, role) }
	if len(roles) != len(e.Nodes) || slices.ContainsFunc(t.roles, func(role string) bool { return !known(role) }) {
		return &Stage{Anchor: e, Kind: t.kind, Gap: "its terminals are not known"}
	}
	taken := t.build(r, e, netsOf(r.w, e, roles, t.roles))
	if taken.Gap == "" {
		return taken
	}
	var other *Stage
	var order []string
	for _, candidate := range permutations(roles) {
		if slices.Equal(candidate, roles) {
			continue
		}
		if s := t.build(r, e, netsOf(r.w, e, candidate, t.roles)); s.Gap == "" {
			if other != nil {
				return taken // two ways to read it: no verdict from wiring
			}
			other, order = s, candidate
		}
	}
	if other == nil && t.last != nil {
		if s := t.last(r, e, netsOf(r.w, e, roles, t.roles)); s.Gap == "" {
			return s
		}
	}
	if other == nil {
		return taken
	}
	note := &OrderNote{Taken: roles, Wiring: order}
	if e.Order == circuit.ByLibrary || e.Order == circuit.ByLetter || e.Order == circuit.ByWiring {
		note.Followed = true
		other.Order = note
		return other
	}
	taken.Order = note
	return taken
}

func netsOf(w *circuit.Wiring, e *circuit.Element, roles, canonical []string) []circuit.NodeID {
	nets := make([]circuit.NodeID, len(canonical))
	for i, want := range canonical {
		if at := slices.Index(roles, want); at >= 0 {
			nets[i] = w.Net(e.Nodes[at])
		}
	}
	return nets
}

// permutations returns every order of the roles.
func permutations(roles []string) [][]string {
	if len(roles) < 2 {
		return [][]string{roles}
	}
	var list [][]string
	for i := range roles {
		rest := append(slices.Clone(roles[:i]), roles[i+1:]...)
		for _, p := range permutations(rest) {
			list = append(list, append([]string{roles[i]}, p...))
		}
	}
	return list
}

// newStage returns an empty stage.
func newStage(kind Kind, anchor *circuit.Element) *Stage {
	return &Stage{Kind: kind, Anchor: anchor, Parts: map[Role][]*circuit.Element{},
		Nodes: map[string]circuit.NodeID{}}
}

// add puts an element into a role once, keeping the order of the cards.
func (s *Stage) add(role Role, elements ...*circuit.Element) {
	for _, e := range elements {
		if !slices.Contains(s.Parts[role], e) {
			s.Parts[role] = append(s.Parts[role], e)
		}
	}
	slices.SortFunc(s.Parts[role], func(a, b *circuit.Element) int { return a.Index - b.Index })
}

// carriesDC reports whether direct current can flow through a two-terminal
// element that belongs to a network around a stage.
func carriesDC(e *circuit.Element) bool {
	switch e.Kind {
	case circuit.Resistor, circuit.Inductor, circuit.Diode, circuit.CurrentSource, circuit.VoltageSource:
		return true
	}
	return false
}

// prune drops elements that lead nowhere: an end that is not kept and on which
// no other element of the list stands. No current flows through them.
func prune(w *circuit.Wiring, elements []*circuit.Element, keep func(circuit.NodeID) bool) []*circuit.Element {
	for {
		degree := map[circuit.NodeID]int{}
		for _, e := range elements {
			degree[w.Net(e.Nodes[0])]++
			degree[w.Net(e.Nodes[1])]++
		}
		dead := func(n circuit.NodeID) bool { n = w.Net(n); return degree[n] == 1 && !keep(n) }
		left := slices.DeleteFunc(slices.Clone(elements), func(e *circuit.Element) bool {
			return dead(e.Nodes[0]) || dead(e.Nodes[1])
		})
		if len(left) == len(elements) {
			return left
		}
		elements = left
	}
}
