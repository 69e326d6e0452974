package stage

import (
	"slices"

	"standoff/netlist/circuit"
)

// Recognise returns the stages of a circuit: the timing stages first, then the
// gate stages, each in the order of their anchors' cards. Links are followed:
// a timing stage lists the gate stages that it drives.
func Recognise(c *circuit.Circuit) []*Stage {
	if !slices.ContainsFunc(c.Elements, isAnchor) {
		return nil
	}
	r := &recogniser{w: circuit.NewWiring(c)}
	for _, e := range c.Elements {
		if e.Kind == circuit.UJT {
			r.stages = append(r.stages, r.ordered(e, r.ujt))
		}
	}
	timing := slices.Clone(r.stages)
	for _, e := range c.Elements {
		if e.Kind == circuit.SCR {
			r.stages = append(r.stages, r.ordered(e, r.scr))
		}
	}
	link(timing, r.stages[len(timing):])
	return r.stages
}

// isAnchor reports whether a stage can stand around this element.
func isAnchor(e *circuit.Element) bool {
	return e.Kind == circuit.UJT || e.Kind == circuit.SCR
}

// recogniser is the state of one call of Recognise.
type recogniser struct {
	w      *circuit.Wiring
	stages []*Stage
}

// link notes which timing stage fires which gate stage.
func link(timing, gates []*Stage) {
	for _, t := range timing {
		for _, g := range gates {
			if slices.Contains(g.Parts[Driver], t.Anchor) {
				t.Drives = append(t.Drives, g)
				g.DrivenBy = t
			}
		}
	}
}

// builder recognises one topology around an anchor whose terminals lie on the
// given nets, in the order of its roles. What is missing stands in Gap.
type builder func(anchor *circuit.Element, nets [3]circuit.NodeID) *Stage

// OrderNote says that wiring and terminal order do not agree.
type OrderNote struct {
	Taken    []string // roles in the order of the nodes, as taken by authority
	Wiring   []string // the only order that makes a working stage
	Followed bool     // the stage was read in the order of the wiring
}

// ordered builds a stage in the terminal order that was taken. Where that makes
// no working stage and exactly one other order does, the stage says so; an
// order that nobody wrote down then gives way to the wiring.
func (r *recogniser) ordered(e *circuit.Element, build builder) *Stage {
	roles := e.Roles
	if len(e.Nodes) != 3 || len(roles) != 3 {
		return &Stage{Anchor: e, Kind: kindOf(e), Gap: "its terminals are not known"}
	}
	canonical := canonicalRoles(e.Kind)
	taken := build(e, netsOf(r.w, e, roles, canonical))
	if taken.Gap == "" {
		return taken
	}
	var other *Stage
	var order []string
	for _, candidate := range permutations(roles) {
		if slices.Equal(candidate, roles) {
			continue
		}
		if s := build(e, netsOf(r.w, e, candidate, canonical)); s.Gap == "" {
			if other != nil {
				return taken // two ways to read it: no verdict from wiring
			}
			other, order = s, candidate
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

func kindOf(e *circuit.Element) Kind {
	if e.Kind == circuit.UJT {
		return UJTOscillator
	}
	return SCRGate
}

// canonicalRoles returns the roles in the order in which a builder takes nets.
func canonicalRoles(k circuit.Kind) []string {
	if k == circuit.UJT {
		return []string{"emitter", "base1", "base2"}
	}
	return []string{"anode", "gate", "cathode"}
}

func netsOf(w *circuit.Wiring, e *circuit.Element, roles, canonical []string) (nets [3]circuit.NodeID) {
	for i, want := range canonical {
		if at := slices.Index(roles, want); at >= 0 {
			nets[i] = w.Net(e.Nodes[at])
		}
	}
	return nets
}

func permutations(r []string) [][]string {
	return [][]string{{r[0], r[1], r[2]}, {r[0], r[2], r[1]}, {r[1], r[0], r[2]},
		{r[1], r[2], r[0]}, {r[2], r[0], r[1]}, {r[2], r[1], r[0]}}
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
