package rule

import (
	"fmt"
	"strings"

	"standoff/netlist/circuit"
	"standoff/netlist/operating"
	"standoff/netlist/quantity"
	"standoff/netlist/source"
	"standoff/netlist/stage"
)

// NewPass returns a rule's view of a board; findings go to report.
func NewPass(c *circuit.Circuit, accounts []*operating.Account, report func(Finding)) *Pass {
	return &Pass{Circuit: c, Accounts: accounts, report: report}
}

// Each calls f for every stage of a kind that was worked out.
func (p *Pass) Each(kind stage.Kind, f func(*operating.Account)) {
	for _, a := range p.Accounts {
		if a.Stage.Kind == kind && a.Stage.Gap == "" {
			f(a)
		}
	}
}

// Timing calls f for every timing stage that was worked out.
func (p *Pass) Timing(f func(*operating.Account)) {
	for _, a := range p.Accounts {
		if a.Stage.Kind.IsTiming() && a.Stage.Gap == "" {
			f(a)
		}
	}
}

// Words puts the device of a stage into a text: {device} and {terminal}, where the
// charge goes in.
func Words(a *operating.Account, text string) string {
	device, terminal := "transistor", "emitter"
	switch a.Stage.Kind {
	case stage.PUTOscillator:
		device, terminal = "programmable unijunction", "anode"
		if a.Stage.Partner != nil {
			device = "crossed pair"
		}
	case stage.BreakoverOscillator:
		device, terminal = "breakover device", "breakover device"
	}
	return strings.NewReplacer("{device}", device, "{terminal}", terminal).Replace(text)
}

// Case says how one comparison is judged and told. A role that a gate stage does
// not have is looked for in the stage that fires it.
type Case struct {
	Comparison string
	Place      []stage.Role // whose card the finding belongs to: the first that exists, else the anchor
	Mend       []stage.Role // whose value may be changed, in order of preference
	Fails      string       // what happens on the board where the limit is broken
	Value      string       // the value in words: "the charging current at the peak"
	Limit      string       // the limit in words: "the peak current the transistor needs"
	FailsOnly  bool         // no doubt where the limit is kept by less than a quarter
	Most       Grade        // the worst grade; 0 means Hold
	Percent    bool         // value and limit are shares, told in percent
}

// Judge holds one comparison of a stage against its limit. Broken: a hold, or a
// doubt where the verdict is not certain. Kept by less than a quarter: a doubt.
func (p *Pass) Judge(a *operating.Account, c Case) {
	k, ok := a.Comparison(c.Comparison)
	if !ok || !k.Fails() && (c.FailsOnly || !k.Tight()) {
		return
	}
	p.Report(Finding{Grade: c.grade(k), Message: Words(a, c.message(k))}.For(a, k, c))
}

// parts returns the elements of a role: the stage's own, else those of the stage
// that fires it.
func parts(s *stage.Stage, role stage.Role) []*circuit.Element {
	list := s.Parts[role]
	if len(list) == 0 && s.DrivenBy != nil {
		list = s.DrivenBy.Parts[role]
	}
	return list
}

func (c Case) grade(k operating.Comparison) Grade {
	g := Doubt
	if k.Fails() && k.Certain {
		g = Hold
	}
	if c.Most != 0 {
		g = min(g, c.Most)
	}
	return g
}

// message tells what happens, then value and limit.
func (c Case) message(k operating.Comparison) string {
	relation := map[operating.Bound]string{operating.Min: "below", operating.Max: "above"}[k.Bound]
	show := quantity.Format
	if c.Percent {
		show = func(v float64, _ string) string { return fmt.Sprintf("%.3g %%", 100*v) }
	}
	figures := fmt.Sprintf("%s is %s, %s %s", c.Value, show(k.Value, k.Unit), c.Limit, show(k.Limit, k.Unit))
	if !k.Fails() {
		return fmt.Sprintf("little margin: %s; it clears the limit by less than a quarter", figures)
	}
	text := fmt.Sprintf("%s: %s (%s the limit)", c.Fails, figures, relation)
	if !k.Certain && k.Because != "" {
		text += "; no more than a doubt because " + k.Because
	}
	return text
}

// For fills a finding with a stage, a comparison and the places of a case.
func (f Finding) For(a *operating.Account, k operating.Comparison, c Case) Finding {
	f = f.Placed(a, c.Place...)
	f.Figure = &Figure{Name: k.Name, Value: k.Value, Limit: k.Limit, Bound: string(k.Bound), Unit: k.Unit}
	f.Corner, f.Working, f.Assumed = k.Corner, k.Working, k.Assumed
	for _, role := range c.Mend {
		for _, e := range parts(a.Stage, role) {
			f.Mend = append(f.Mend, Mend{Parts: []*circuit.Element{e}})
		}
	}
	return f
}

// Placed puts a finding on the card of the first role that the stage or the one
// that fires it has, else on its anchor.
func (f Finding) Placed(a *operating.Account, roles ...stage.Role) Finding {
	f.Stage = a.Stage.Anchor.Designator
	for _, role := range roles {
		if list := parts(a.Stage, role); len(list) > 0 {
			f.At = list[0].NameAt
			for _, e := range list {
				f.Parts = append(f.Parts, e.Designator)
			}
			return f
		}
	}
	f.At, f.Parts = a.Stage.Anchor.NameAt, []string{a.Stage.Anchor.Designator}
	return f
}

// Name makes a name from a netlist fit for a message.
func Name(text string) string { return source.Visible(text) }

// Validate reports what is wrong with a rule's declaration; nil where it is sound.
func (r *Rule) Validate() error {
	for word := range strings.SplitSeq(r.ID, "-") {
		if word == "" || strings.Trim(word, "abcdefghijklmnopqrstuvwxyz0123456789") != "" {
			return fmt.Errorf("rule %q: an ID is lower-case words with hyphens between", r.ID)
		}
	}
	for _, part := range [...]struct{ name, text string }{{"group", r.Group}, {"title", r.Title}, {"why", r.Why},
		{"formula", r.Formula}, {"source", r.Source}, {"failing netlist", r.Failing},
		{"mended netlist", r.Mended}} {
		if strings.TrimSpace(part.text) == "" {
			return fmt.Errorf("rule %s has no %s", r.ID, part.name)
		}
	}
	if r.Check == nil {
		return fmt.Errorf("rule %s checks nothing", r.ID)
	}
	return nil
}
