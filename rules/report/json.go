// Package report writes what was found in the forms that people and programs
// read: terminal, lines, JSON, SARIF. What goes in is results; what comes out is
// text. Text from a netlist is written so that it cannot steer a terminal.
package report

import (
	"encoding/json"
	"io"
	"math"

	"standoff/netlist"
	"standoff/netlist/operating"
	"standoff/netlist/source"
	"standoff/rules"
	"standoff/rules/rule"
)

// Totals counts what was said of all files.
type Totals struct {
	Hold      int `json:"hold"`
	Doubt     int `json:"doubt"`
	Remark    int `json:"remark"`
	Waived    int `json:"waived"`
	Unchecked int `json:"unchecked"`
	Problems  int `json:"problems"`
}

// Count adds results up.
func Count(results []*rules.Result) Totals {
	var t Totals
	for _, r := range results {
		for _, f := range r.Findings {
			switch f.Grade {
			case rule.Hold:
				t.Hold++
			case rule.Doubt:
				t.Doubt++
			default:
				t.Remark++
			}
		}
		t.Waived += len(r.Waived)
		t.Unchecked += len(r.Unchecked)
		t.Problems += len(r.Problems)
	}
	return t
}

// number is a float that JSON can hold: infinite and undefined values are null.
type number float64

// MarshalJSON implements json.Marshaler.
func (n number) MarshalJSON() ([]byte, error) {
	if f := float64(n); math.IsInf(f, 0) || math.IsNaN(f) {
		return []byte("null"), nil
	}
	return json.Marshal(float64(n))
}

type (
	lintDoc struct {
		Schema string     `json:"schema"`
		Files  []lintFile `json:"files"`
		Totals Totals     `json:"totals"`
	}
	lintFile struct {
		Path      string         `json:"path"`
		Findings  []findingDoc   `json:"findings"`
		Waived    []waivedDoc    `json:"waived"`
		Unchecked []uncheckedDoc `json:"unchecked"`
		Cautions  []cautionDoc   `json:"cautions"`
		Problems  []problemDoc   `json:"problems"`
	}
	findingDoc struct {
		Rule    string            `json:"rule"`
		Grade   string            `json:"grade"`
		Stage   string            `json:"stage"`
		Parts   []string          `json:"parts"`
		File    string            `json:"file"`
		Line    int               `json:"line"`
		Column  int               `json:"column"`
		Message string            `json:"message"`
		Figure  *figureDoc        `json:"figure,omitempty"`
		Corner  map[string]number `json:"corner,omitempty"`
		Working string            `json:"working,omitempty"`
		Advice  []adviceDoc       `json:"advice"`
		None    string            `json:"advice_none,omitempty"`
	}
	figureDoc struct {
		Name  string `json:"name"`
		Value number `json:"value"`
		Limit number `json:"limit"`
		Bound string `json:"bound"`
		Unit  string `json:"unit"`
	}
	adviceDoc struct {
		Part  string `json:"part"`
		Value number `json:"value"`
		Text  string `json:"text"`
	}
	waivedDoc struct {
		Rule   string `json:"rule"`
		Stage  string `json:"stage"`
		Reason string `json:"reason"`
		Line   int    `json:"line"`
	}
	uncheckedDoc struct {
		Rule    string `json:"rule"`
		Stage   string `json:"stage"`
		Because string `json:"because"`
	}
	cautionDoc struct {
		Kind    string `json:"kind"`
		Message string `json:"message"`
	}
	problemDoc struct {
		File    string `json:"file"`
		Line    int    `json:"line"`
		Column  int    `json:"column"`
		Message string `json:"message"`
	}
)

// JSON writes the results in the form standoff.lint/1.
func JSON(w io.Writer, results []*rules.Result) error {
	doc := lintDoc{Schema: "standoff.lint/1", Files: []lintFile{}, Totals: Count(results)}
	for _, r := range results {
		f := lintFile{Path: r.Board.Path, Findings: []findingDoc{}, Waived: []waivedDoc{}, Unchecked: []uncheckedDoc{},
			Cautions: []cautionDoc{}, Problems: problems(r.Problems)}
		for _, x := range r.Findings {
			f.Findings = append(f.Findings, finding(x))
		}
		for _, x := range r.Waived {
			f.Waived = append(f.Waived, waivedDoc{x.Finding.Rule, x.Finding.Stage, x.Reason, x.Line})
		}
		for _, x := range r.Unchecked {
			f.Unchecked = append(f.Unchecked, uncheckedDoc(x))
		}
		for _, x := range r.Cautions {
			f.Cautions = append(f.Cautions, cautionDoc(x))
		}
		doc.Files = append(doc.Files, f)
	}
	return write(w, doc)
}

func write(w io.Writer, doc any) error {
	e := json.NewEncoder(w)
	e.SetIndent("", " ")
	return e.Encode(doc)
}

func problems(list []source.Problem) []problemDoc {
	docs := []problemDoc{}
	for _, p := range list {
		at := p.Span.Position()
		docs = append(docs, problemDoc{at.Path, at.Line, at.Column, p.Message})
	}
	return docs
}

func finding(f rule.Finding) findingDoc {
	at := f.At.Position()
	d := findingDoc{Rule: f.Rule, Grade: f.Grade.String(), Stage: f.Stage, Parts: f.Parts, File: at.Path, Line: at.Line,
		Column: at.Column, Message: f.Message, Corner: corner(f.Corner), Working: f.Working, Advice: []adviceDoc{}, None: f.NoAdvice}
	if d.Parts == nil {
		d.Parts = []string{}
	}
	if f.Figure != nil {
		d.Figure = &figureDoc{f.Figure.Name, number(f.Figure.Value), number(f.Figure.Limit), f.Figure.Bound, f.Figure.Unit}
	}
	for _, a := range f.Advice {
		d.Advice = append(d.Advice, adviceDoc{a.Part, number(a.Value), a.Text})
	}
	return d
}

func corner(c operating.Corner) map[string]number {
	if len(c) == 0 {
		return nil
	}
	m := map[string]number{}
	for _, s := range c {
		m[s.Name] = number(s.Value)
	}
	return m
}

type (
	sheetDoc struct {
		Schema string      `json:"schema"`
		Files  []sheetFile `json:"files"`
	}
	sheetFile struct {
		Path     string       `json:"path"`
		Stages   []stageDoc   `json:"stages"`
		Problems []problemDoc `json:"problems"`
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
		Unchecked []uncheckedDoc       `json:"unchecked,omitempty"`
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
		f := sheetFile{Path: b.Path, Stages: []stageDoc{}, Problems: problems(b.Problems)}
		for _, a := range b.Accounts {
			f.Stages = append(f.Stages, stageOf(a))
		}
		doc.Files = append(doc.Files, f)
	}
	return write(w, doc)
}

func stageOf(a *operating.Account) stageDoc {
	s := a.Stage
	d := stageDoc{Kind: string(s.Kind), Anchor: s.Anchor.Designator, Part: s.Anchor.PartName, Roles: map[string][]string{},
		Drives: []string{}, Figures: map[string]spreadDoc{}}
	d.Order, d.OrderFrom = order(a)
	for role, list := range s.Parts {
		for _, e := range list {
			d.Roles[string(role)] = append(d.Roles[string(role)], e.Designator)
		}
	}
	for _, g := range s.Drives {
		d.Drives = append(d.Drives, g.Anchor.Designator)
	}
	for _, f := range a.Figures {
		d.Figures[f.Name] = spreadDoc{number(f.Low), number(f.Nominal), number(f.High), f.Unit, f.Working, f.Assumed}
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
