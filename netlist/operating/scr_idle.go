package operating

import (
	"math"

	"standoff/netlist/circuit"
	"standoff/netlist/stage"
)

// idleGate fills the account of a gate whose driver was not recognised: the
// gate before any pulse, and the anode circuit.
func (a *Account) idleGate(w *circuit.Wiring, s *stage.Stage) {
	a.Unchecked = append(a.Unchecked, Unchecked{Because: "what fires its gate was not recognised, so no pulse can be checked"})
	r := s.Anchor.Ratings
	if r == nil {
		return
	}
	m := &model{bench: newBench(w)}
	gate, ohms := m.gateMesh(s)
	load, err := newLoad(m.bench, s)
	m.evaluate = func(x []float64) {
		if gate != nil {
			gate(x)
		}
		if load != nil {
			load.at(x)
		}
	}
	if err == nil {
		load.figures(m, r)
	} else {
		load = nil
		a.Unchecked = append(a.Unchecked, Unchecked{Because: "the anode circuit: " + err.Error()})
	}
	if gate != nil {
		m.figure("gate_shunt_resistance", "ohm", ohms, func() string {
			return "dc resistance from gate to cathode through everything connected"
		})
		if v, mark, ok := r.Limit("rgk"); ok {
			m.evaluate(m.nominal()) // the nominal board counts, see quietLimits
			shunt := ohms()
			m.compare(contest{name: "gate_shunt_resistance", limitName: "rgk", unit: "ohm", bound: Max,
				value: func() float64 { return shunt }, limit: func() float64 { return v }, limitMark: mark,
				working: func() string { return "everything connected from gate to cathode" }})
		}
	}
	a.take(m)
	a.uses = nil
	if gate != nil {
		m.evaluate(m.nominal())
		a.Facts["gate-return-missing"] = ohms() > noPath
	}
}

// gateMesh readies the dc resistance from gate to cathode; nil where the
// network around the gate cannot be computed.
func (m *model) gateMesh(s *stage.Stage) (at func([]float64), ohms func() float64) {
	n := s.Nodes
	mesh, err := newCrestMesh(m.bench, []circuit.NodeID{n["gate"], n["cathode"]}, func(e *circuit.Element) bool {
		return contains(s.Parts[stage.Load], e)
	})
	if err != nil || mesh.compile() != nil {
		return nil, nil
	}
	result := math.NaN()
	return func(x []float64) {
		mesh.load(x)
		mesh.solver.Solve()
		result = mesh.between(n["gate"], n["cathode"])
	}, func() float64 { return result }
}
