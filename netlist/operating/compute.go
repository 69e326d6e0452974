package operating

import (
	"standoff/netlist/circuit"
	"standoff/netlist/stage"
)

// Compute works out every stage of a circuit, in their order. A stage that
// cannot be worked out has an account all the same, which says why.
func Compute(c *circuit.Circuit, stages []*stage.Stage) []*Account {
	return Update(c, stages, nil)
}

// Update is Compute for a circuit in which some elements have other values than
// when the accounts before were made: accounts that those elements did not
// enter are taken over.
func Update(c *circuit.Circuit, stages []*stage.Stage, before []*Account) []*Account {
	if len(stages) == 0 {
		return nil
	}
	w := circuit.NewWiring(c)
	accounts := make([]*Account, len(stages))
	for i, s := range stages {
		if len(before) == len(stages) && before[i].holds(c, s) {
			accounts[i] = before[i]
			continue
		}
		accounts[i] = account(w, s)
	}
	return accounts
}

// holds reports whether an account is still right: it is of the same stage, and
// every element that entered it stands in the circuit unchanged.
func (a *Account) holds(c *circuit.Circuit, s *stage.Stage) bool {
	if a.uses == nil || a.Stage.Kind != s.Kind || a.Stage.Anchor != s.Anchor || a.Stage.Gap != s.Gap {
		return false
	}
	for e := range a.uses {
		if e.Index >= len(c.Elements) || c.Elements[e.Index] != e {
			return false
		}
	}
	return true
}

func account(w *circuit.Wiring, s *stage.Stage) *Account {
	a := &Account{Stage: s, Facts: map[string]bool{}}
	if s.Gap != "" {
		a.Unchecked = append(a.Unchecked, Unchecked{Because: "the stage is not complete: " + s.Gap})
		return a
	}
	for _, because := range s.Beside {
		a.Unchecked = append(a.Unchecked, Unchecked{Because: because})
	}
	a.Unchecked = append(a.Unchecked, sourceNotes(s)...)
	switch s.Kind {
	case stage.UJTOscillator:
		a.oscillator(w, s)
	case stage.PUTOscillator:
		a.programmable(w, s)
	case stage.BreakoverOscillator:
		a.breakover(w, s)
	case stage.SCRGate:
		a.gate(w, s)
	}
	return a
}

// cannot notes that the whole stage could not be worked out.
func (a *Account) cannot(err error) {
	a.Unchecked = append(a.Unchecked, Unchecked{Because: err.Error()})
}

// take works out the comparisons of a model and keeps it for the figures.
func (a *Account) take(m *model) {
	a.model, a.uses = m, m.slots
	a.Comparisons = m.allComparisons()
}

// oscillator fills the account of a unijunction oscillator.
func (a *Account) oscillator(w *circuit.Wiring, s *stage.Stage) {
	m, err := newUJT(w, s)
	if err != nil {
		a.cannot(err)
		return
	}
	a.times(&m.relaxation)
	a.baseTwo(m)
	a.Unchecked = append(a.Unchecked, m.unchecked()...)
	a.Facts["base-one-missing"] = len(s.Parts[stage.BaseOne]) == 0 && !w.IsFixed(s.Nodes["base1"])
}

// programmable fills the account of a PUT oscillator.
func (a *Account) programmable(w *circuit.Wiring, s *stage.Stage) {
	m, err := newPUT(w, s)
	if err != nil {
		a.cannot(err)
		return
	}
	a.times(&m.relaxation)
	a.Unchecked = append(a.Unchecked, m.unchecked()...)
}

// breakover fills the account of a breakover oscillator.
func (a *Account) breakover(w *circuit.Wiring, s *stage.Stage) {
	m, err := newBreakover(w, s)
	if err != nil {
		a.cannot(err)
		return
	}
	if m.line == nil && !m.blocked {
		a.times(&m.relaxation)
	} else {
		a.take(&m.model)
	}
	a.Unchecked = append(a.Unchecked, m.unchecked()...)
}

// times takes over what all oscillators have.
func (a *Account) times(m *relaxation) {
	a.take(&m.model)
	a.timing = m
	a.Facts["capacitor-leaks"] = m.caps.leaks()
	a.drift(&drifting{&m.model, m.frequency}, a.Stage)
}

// drift adds what the drift over the ambient range is held against, and keeps
// what the figure needs.
func (a *Account) drift(d *drifting, s *stage.Stage) {
	if d.span() == 0 {
		return
	}
	a.drifting = d
	t := s.Anchor.Intent
	a.Comparisons = append(a.Comparisons, d.comparisons(frequencyTarget(t.Frequency, t.Period))...)
}

// gate fills the account of a gate stage.
func (a *Account) gate(w *circuit.Wiring, s *stage.Stage) {
	d := s.DrivenBy
	if d == nil {
		a.idleGate(w, s)
		return
	}
	m, err := newSCRGate(w, s, d)
	if err != nil {
		a.cannot(err)
		return
	}
	load, err := newLoad(m.bench, s)
	if err != nil {
		a.Unchecked = append(a.Unchecked, Unchecked{Rule: "latching-too-slow", Because: "the anode circuit: " + err.Error()})
	} else {
		m.withLoad(load)
		if load.discharges() {
			a.Unchecked = append(a.Unchecked, Unchecked{Rule: "latching-too-slow",
				Because: "it empties a capacitor, and the current of that is not worked out yet"})
		}
	}
	a.take(&m.model)
	a.Comparisons = severest(a.Comparisons)
	a.Unchecked = append(a.Unchecked, m.unchecked()...)
	m.evaluate(m.nominal())
	a.Facts["gate-return-missing"] = m.g.shunt > noPath
	a.Facts["gate-polarity"] = m.g.open < noPulse*m.cycle.vp
}

// noPulse is the share of the peak voltage below which no pulse arrives at all.
const noPulse = 1e-3

// withLoad adds the anode circuit to a gate stage.
func (m *scrGate) withLoad(l *loadCircuit) {
	gate := m.evaluate
	m.evaluate = func(x []float64) {
		gate(x)
		l.at(x)
	}
	l.figures(&m.model, m.scr)
	if latch, mark, ok := m.scr.Limit("il"); ok && l.hertz == 0 && m.need.ok && !l.discharges() {
		m.latching = func() float64 { return l.latching(latch) }
		m.compare(contest{name: "latching_time", limitName: "gate_pulse_width", unit: "s", bound: Max,
			value: m.latching, limit: func() float64 {
				if m.g.sheet.width == 0 && l.latching(latch) == 0 {
					return 1 // a pulse that does not fire is another rule's matter
				}
				return max(m.g.sheet.width, 1e-12)
			}, limitMark: mark, because: m.smallNote(""), working: func() string {
				return "load of " + show(l.resistance, "ohm") + " and " + show(l.inductance, "H") + " on " + show(l.block, "V")
			}})
	}
}

// severest keeps one comparison of each name: the first that fails (they are
// ordered from the certain to the assumed), else the one nearest to its limit.
func severest(list []Comparison) []Comparison {
	var kept []Comparison
	at := map[string]int{}
	for _, c := range list {
		i, ok := at[c.Name]
		if !ok {
			at[c.Name] = len(kept)
			kept = append(kept, c)
			continue
		}
		if known := kept[i]; !known.Fails() && (c.Fails() || c.Tight() && !known.Tight()) {
			kept[i] = c
		}
	}
	return kept
}
