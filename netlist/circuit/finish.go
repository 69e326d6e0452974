package circuit

import (
	"standoff/netlist/source"
)

// finish works out every spread, hands the nodes their pins and gathers the
// facts for the hygiene rules.
func (b *builder) finish() {
	for _, e := range b.circuit.Elements {
		if e.HasValue && e.Kind != Coupling && e.Kind != Jig {
			spreadOf(e)
		} else {
			e.Value.Low, e.Value.High = e.Value.Nominal, e.Value.Nominal
		}
		if k := e.Intent.Kind; e.Kind == Capacitor && (k == "electrolytic" || k == "tantalum") {
			e.Roles = polarRoles
		}
	}
	b.applyMains()
	b.pinNodes()
	b.unused()
}

// pinNodes gives every node its pins, in the order of the cards. All of them lie
// in one block, counted first.
func (b *builder) pinNodes() {
	nodes := b.circuit.Nodes
	counts := make([]int32, len(nodes))
	total := 0
	for _, e := range b.circuit.Elements {
		for _, n := range e.Nodes {
			counts[n]++
			total++
		}
	}
	block := make([]Pin, total)
	for i := range nodes {
		n := counts[i]
		nodes[i].Pins, block = block[:0:n], block[n:]
	}
	for _, e := range b.circuit.Elements {
		for i, n := range e.Nodes {
			nodes[n].Pins = append(nodes[n].Pins, Pin{e, i})
		}
	}
}

// unused notes what the netlist defines and nobody uses. A model that only a
// subcircuit without any use asks for is not meant.
func (b *builder) unused() {
	if b.stopped {
		return
	}
	b.markUsedInside()
	for _, def := range b.models {
		if def.used || def.guard != nil || !def.scope.placed {
			continue
		}
		in := &instance{scope: def.scope}
		in.env = b.environment(in, b.board.env, nil)
		b.circuit.UnusedModels = append(b.circuit.UnusedModels, b.model(def, in))
	}
	used := map[*scope]bool{}
	for _, s := range b.scopes {
		for i := range s.cards {
			if e := s.cards[i].e; e.Name.Text[0]|0x20 == 'x' && len(e.Fields) > 0 {
				used[s.findSubckt(e.Fields[len(e.Fields)-1].Text)] = true
			}
		}
	}
	for _, s := range b.scopes {
		if s.parent != nil && s.parent.parent == nil && s.deck.File == b.file && !s.placed && !used[s] {
			at := s.deck.Span(s.header.Name)
			b.circuit.UnusedSubckts = append(b.circuit.UnusedSubckts, Named{source.Visible(s.name), at})
		}
	}
}

// markUsedInside marks the models that cards of subcircuits name which were
// never placed, or are kept as one device.
func (b *builder) markUsedInside() {
	open := false
	for _, def := range b.models {
		open = open || !def.used
	}
	if !open {
		return
	}
	for _, s := range b.scopes {
		if s.placed {
			continue
		}
		for i := range s.cards {
			for _, f := range s.cards[i].e.Fields {
				if def := s.findModel(f.Text); def != nil {
					def.used = true
				}
			}
		}
	}
}
