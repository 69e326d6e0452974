package wiring

import (
	"fmt"
	"strings"

	"standoff/netlist/circuit"
	"standoff/rules/rule"
)

func partUnknown() *rule.Rule {
	return &rule.Rule{
		ID: "part-unknown", Group: group, Title: "Nothing is known of a part.",
		Why: "Neither the netlist nor a --parts file nor the library says what the part is or what it stands, " +
			"so it was " +
			"not checked. A .model card with its ratings, or part= with the name of a known equivalent, mends that. " +
			"Diodes and ordinary transistors without a model are told as a remark, and so is a model of the board's " +
			"own file that no card uses: one of the two names may be misspelt.",
		Formula: "no .model, no subcircuit, no library row of that name", Source: practice,
		Failing: board("Planetarium pointer", "XS1 vcc b1 0 ZZ9999"),
		Mended: board("Planetarium pointer", "RL vcc a 100", "RS b1 g 220", "RG g 0 1k", "XS1 a g 0 C106D",
			"*> board ambient=15..40"),
		Check: func(p *rule.Pass) {
			unknownParts(p)
			told := map[string]bool{}
			for _, m := range p.Circuit.UnusedModels {
				if name := strings.ToLower(m.Name); p.File != nil && m.At.File == p.File && !told[name] {
					told[name] = true
					p.Report(rule.Finding{Grade: rule.Remark, At: m.At, Parts: []string{m.Name},
						Message: fmt.Sprintf("the model %s is defined and never used", rule.Name(m.Name))})
				}
			}
		},
	}
}

// unknownParts tells every unknown name once, on the first card that bears it.
func unknownParts(p *rule.Pass) {
	bearers := map[string][]*circuit.Element{}
	var names []string
	for _, e := range p.Circuit.Elements {
		if e.Ratings != nil || e.PartName == "" {
			continue
		}
		name := string(e.Letter) + strings.ToLower(e.PartName)
		if bearers[name] == nil {
			names = append(names, name)
		}
		bearers[name] = append(bearers[name], e)
	}
	for _, name := range names {
		list := bearers[name]
		f := about(list[0], unknownGrade(list[0]), "")
		for _, e := range list[1:] {
			f.Parts = append(f.Parts, e.Designator)
		}
		what := rule.Name(list[0].Designator)
		if more := len(list) - 1; more > 0 {
			what += fmt.Sprintf(" and %d more", more)
		}
		f.Message = fmt.Sprintf("nothing is known of the part %s of %s: it is not "+
			"checked", rule.Name(list[0].PartName), what)
		if !list[0].ValueAt.IsZero() {
			f.At = list[0].ValueAt
		}
		p.Report(f)
	}
}

// unknownGrade is a doubt for what may be a trigger device or a thyristor, a
// remark for what is only a diode or a transistor.
func unknownGrade(e *circuit.Element) rule.Grade {
	if e.Letter == 'X' || e.Kind == circuit.Unknown && !strings.ContainsRune("QJM", rune(e.Letter)) {
		return rule.Doubt
	}
	return rule.Remark
}
