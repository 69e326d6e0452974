package circuit

import (
	"strings"

	"standoff/netlist/part"
	"standoff/netlist/syntax"
)

// letterRoles returns the terminals in the order that the letter fixes.
func letterRoles(letter byte, count int) []string {
	var roles []string
	switch letter {
	case 'D':
		roles = []string{"anode", "cathode"}
	case 'Q':
		roles = []string{"collector", "base", "emitter", "substrate"}
	case 'J':
		roles = []string{"drain", "gate", "source"}
	case 'M':
		roles = []string{"drain", "gate", "source", "bulk"}
	}
	return roles[:min(count, len(roles))]
}

// semiconductor makes a diode or transistor of the plain letters. Without its
// model nobody knows the polarity of a transistor.
func (p *placing) semiconductor(letter byte, fields []syntax.Value, at int) {
	least := leastNodes(letter)
	if at < least {
		p.fail(p.card.e.Name, "%s needs %d nodes and a model", p.shown(), least)
		return
	}
	if most := len(letterRoles(letter, 9)); at > most {
		p.fail(fields[most].Word, "%s has %d nodes before its model; %d are the most", p.shown(), at, most)
		return
	}
	kind := Unknown
	if letter == 'D' {
		kind = Diode
	}
	e := p.start(letter, kind, fields[:at], fields[at])
	if r := p.ratings(e.PartName); r != nil && r.Kind != "" {
		e.Kind, e.Ratings = Kind(r.Kind), r
	} else if def := p.model(e.PartName); def != nil {
		e.Ratings = r
		if letter == 'M' && strings.EqualFold(def.m.Type.Text, "vdmos") {
			e.Kind = powerKind(def.m)
		}
	}
	e.Roles = letterRoles(letter, at)
	p.noteChip(letter)
	p.add(e)
}

// noteChip notes that the netlist draws a chip, where femtofarads are at home:
// the gate of a transistor is given in micrometres.
func (p *placing) noteChip(letter byte) {
	if letter != 'M' || p.b.circuit.Micron {
		return
	}
	if v, ok := p.pair("l", "w"); ok {
		size, err := p.value(v)
		p.b.circuit.Micron = err == nil && size > 0 && size < 100e-6
	}
}

// powerKind tells the channel of a power transistor, which stands in a flag.
func powerKind(m *syntax.Model) Kind {
	for _, w := range m.Flags {
		if strings.EqualFold(w.Text, "pchan") {
			return PMOS
		}
	}
	return NMOS
}

// line makes a transmission line.
func (p *placing) line(fields []syntax.Value) {
	if len(fields) < 4 {
		p.fail(p.card.e.Name, "%s needs 4 nodes", p.shown())
		return
	}
	p.add(p.new('T', Line, fields[:4]))
}

// model turns a .model card into ratings. A card whose settings hang on the
// parameters of a subcircuit gives every instance its own.
func (b *builder) model(def *modelDef, in *instance) *part.Ratings {
	if def.ratings != nil {
		return def.ratings
	}
	shared := def.scope.parent == nil || !hangsOnParameters(def.m)
	at := in
	for at != nil && at.scope != def.scope {
		at = at.outer
	}
	if at == nil {
		at = in
	}
	if r := at.models[def]; r != nil {
		return r
	}
	b.work += len(def.m.Pairs)
	resolve := func(v syntax.Value) (float64, bool) {
		x, err := at.env.value(v)
		return x, err == nil
	}
	r, problems := part.FromModel(def.deck, def.m, resolve, "netlist")
	for _, p := range problems {
		b.inside(in, p.Span, "%s", p.Message)
	}
	if shared {
		def.ratings = r
		return r
	}
	if at.models == nil {
		at.models = map[*modelDef]*part.Ratings{}
	}
	at.models[def] = r
	return r
}

// hangsOnParameters reports whether a setting is anything but a plain number or
// a text.
func hangsOnParameters(m *syntax.Model) bool {
	for _, p := range m.Pairs {
		if p.Value.Expr != nil || !p.Value.Quoted && isName(p.Value.Text) {
			return true
		}
	}
	return false
}
