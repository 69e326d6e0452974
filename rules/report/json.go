// Package report writes what was found in the forms that people and programs
// read: terminal, lines, JSON, SARIF. What goes in is results; what comes out is
// text. Text from a netlist is written so that it cannot steer a terminal.
package report

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"math"
	"unicode"
	"unicode/utf16"
	"unicode/utf8"

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
		Assumed []string          `json:"assumed,omitempty"`
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
		Rule   string   `json:"rule"`
		Stage  string   `json:"stage"`
		Parts  []string `json:"parts"`
		Reason string   `json:"reason"`
		Line   int      `json:"line"`
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
		f := lintFile{Path: r.Board.Path, Findings: []findingDoc{}, Waived: []waivedDoc{},
			Unchecked: []uncheckedDoc{}, Cautions: []cautionDoc{}, Problems: problems(r.Problems)}
		for _, x := range r.Findings {
			f.Findings = append(f.Findings, finding(x))
		}
		for _, x := range r.Waived {
			f.Waived = append(f.Waived, waivedDoc{x.Finding.Rule, x.Finding.Stage, orNone(x.Finding.Parts),
				x.Reason, x.Line})
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

// write writes a document. What a terminal might obey - control characters and
// invisible ones - is written as an escape, which means the same.
func write(w io.Writer, doc any) error {
	var text bytes.Buffer
	e := json.NewEncoder(&text)
	e.SetIndent("", " ")
	if err := e.Encode(doc); err != nil {
		return err
	}
	_, err := w.Write(escape(text.Bytes()))
	return err
}

// escape writes everything in a JSON text that is not visible as \uNNNN.
func escape(text []byte) []byte {
	out := make([]byte, 0, len(text))
	for len(text) > 0 {
		r, size := utf8.DecodeRune(text)
		switch {
		case r < 0x7f || unicode.IsPrint(r):
			out = append(out, text[:size]...)
		case r > 0xffff:
			a, b := utf16.EncodeRune(r)
			out = fmt.Appendf(out, `\u%04x\u%04x`, a, b)
		default:
			out = fmt.Appendf(out, `\u%04x`, r)
		}
		text = text[size:]
	}
	return out
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
	d := findingDoc{Rule: f.Rule, Grade: f.Grade.String(), Stage: f.Stage, Parts: orNone(f.Parts), File: at.Path,
		Line: at.Line, Column: at.Column, Message: f.Message, Corner: corner(f.Corner), Working: f.Working,
		Assumed: f.Assumed, Advice: []adviceDoc{}, None: f.NoAdvice}
	if k := f.Figure; k != nil {
		d.Figure = &figureDoc{k.Name, number(k.Value), number(k.Limit), k.Bound, k.Unit}
	}
	for _, a := range f.Advice {
		d.Advice = append(d.Advice, adviceDoc{a.Part, number(a.Value), a.Text})
	}
	return d
}

// orNone makes a list that JSON writes as [] where there is none.
func orNone(list []string) []string {
	if list == nil {
		return []string{}
	}
	return list
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
