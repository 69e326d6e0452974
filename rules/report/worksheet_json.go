package report

import (
	"io"

	"standoff/netlist"
	"standoff/netlist/operating"
	"standoff/rules"
)

type (
	sheetDoc struct {
		Schema string      `json:"schema"`
		Files  []sheetFile `json:"files"`
	}
	sheetFile struct {
		Path      string         `json:"path"`
		Stages    []stageDoc     `json:"stages"`
		Unchecked []uncheckedDoc `json:"unchecked"`
		Problems  []problemDoc   `json:"problems"`
	}
	stageDoc struct {
		Kind      string               `json:"kind"`
		Anchor    string               `json:"anchor"`
		Part      string               `json:"part"`
		Order     []string             `json:"terminal_order"`
		OrderFrom string               `json:"terminal_order_from"`
		Roles     map[string][]string  `json:"roles"`
		Drives    []string             `json:"drives"`
		Figures   map[string]spreadDoc `json:"figures"`
		Budget    *budgetDoc           `json:"budget,omitempty"`
		Unchecked []uncheckedDoc       `json:"unchecked,omitempty"`
	}
	// budgetDoc is where the spread of a declared period comes from: parts add to 1.
	budgetDoc struct {
		Figure     string     `json:"figure"`
		Low        number     `json:"low"`
		High       number     `json:"high"`
		TargetLow  number     `json:"target_low"`
		TargetHigh number     `json:"target_high"`
		Shares     []shareDoc `json:"shares"`
		Remedies   []string   `json:"remedies"`
	}
	shareDoc struct {
		Name string `json:"name"`
		Low  number `json:"low"`
		High number `json:"high"`
		Unit string `json:"unit"`
		Part number `json:"part"`
	}
	spreadDoc struct {
		Low     number   `json:"low"`
		Nominal number   `json:"nominal"`
		High    number   `json:"high"`
		Unit    string   `json:"unit"`
		Working string   `json:"working"`
		Assumed []string `json:"assumed,omitempty"`
	}
)

// WorksheetJSON writes the stages in the form standoff.worksheet/1.
func WorksheetJSON(w io.Writer, boards []*netlist.Board) error {
	doc := sheetDoc{Schema: "standoff.worksheet/1", Files: []sheetFile{}}
	for _, b := range boards {
		f := sheetFile{Path: b.Path, Stages: []stageDoc{}, Unchecked: []uncheckedDoc{},
			Problems: problems(b.Problems)}
		for _, a := range b.Accounts {
			f.Stages = append(f.Stages, stageOf(a))
		}
		for _, u := range rules.Unstaged(b) {
			f.Unchecked = append(f.Unchecked, uncheckedDoc(u))
		}
		doc.Files = append(doc.Files, f)
	}
	return write(w, doc)
}

func stageOf(a *operating.Account) stageDoc {
	s := a.Stage
	d := stageDoc{Kind: string(s.Kind), Anchor: s.Anchor.Designator, Part: s.Anchor.PartName,
		Roles: map[string][]string{}, Drives: []string{}, Figures: map[string]spreadDoc{}}
	d.Order, d.OrderFrom = order(a)
	d.Order = orNone(d.Order)
	for role, list := range s.Parts {
		for _, e := range list {
			d.Roles[string(role)] = append(d.Roles[string(role)], e.Designator)
		}
	}
	for _, g := range s.Drives {
		d.Drives = append(d.Drives, g.Anchor.Designator)
	}
	for _, f := range a.Figures() {
		d.Figures[f.Name] = spreadDoc{number(f.Low), number(f.Nominal), number(f.High), f.Unit, f.Working,
			f.Assumed}
	}
	if b, ok := a.Budget(); ok {
		d.Budget = budgetOf(b)
	}
	for _, u := range a.Unchecked {
		d.Unchecked = append(d.Unchecked, uncheckedDoc{u.Rule, s.Anchor.Designator, u.Because})
	}
	return d
}

// order returns the terminal order that was used and where it was taken from.
func order(a *operating.Account) ([]string, string) {
	if o := a.Stage.Order; o != nil && o.Followed {
		return o.Wiring, "wiring"
	}
	return a.Stage.Anchor.Roles, string(a.Stage.Anchor.Order)
}

func budgetOf(b *operating.Budget) *budgetDoc {
	d := &budgetDoc{Figure: b.Figure, Low: number(b.Low), High: number(b.High), TargetLow: number(b.Target.Low),
		TargetHigh: number(b.Target.High), Shares: []shareDoc{}, Remedies: orNone(rules.Remedies(b))}
	for _, s := range b.Shares {
		d.Shares = append(d.Shares, shareDoc{s.Name, number(s.Low), number(s.High), s.Unit, number(s.Part)})
	}
	return d
}
