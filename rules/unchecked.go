package rules

import (
	"fmt"
	"strings"

	"standoff/netlist"
	"standoff/netlist/circuit"
	"standoff/netlist/stage"
	"standoff/rules/rule"
)

// Unchecked is something that was not judged, and why. Rule is empty where it
// concerns all rules, Stage where it concerns no part.
type Unchecked struct {
	Rule, Stage, Because string
}

// unchecked lists what the chosen rules could not judge.
func unchecked(b *netlist.Board, opts Options) []Unchecked {
	var list []Unchecked
	for _, a := range b.Accounts {
		for _, u := range a.Unchecked {
			if u.Rule == "" || opts.chooses(u.Rule) {
				list = append(list, Unchecked{u.Rule, a.Stage.Anchor.Designator, u.Because})
			}
		}
	}
	return append(list, Unstaged(b)...)
}

// Unstaged lists what belongs to no stage that was recognised, though it could:
// trigger devices and thyristors, parts that nobody knows, subcircuits that no
// card uses.
func Unstaged(b *netlist.Board) []Unchecked {
	var list []Unchecked
	anchors := map[*circuit.Element]bool{}
	for _, a := range b.Accounts {
		anchors[a.Stage.Anchor] = true
		for _, e := range a.Stage.Parts[stage.CurrentSource] {
			anchors[e] = true // told with the stage
		}
	}
	for _, e := range b.Circuit.Elements {
		if why := noStage(e); why != "" && !anchors[e] {
			list = append(list, Unchecked{"", e.Designator, why})
		}
	}
	for _, s := range b.Circuit.UnusedSubckts {
		list = append(list, Unchecked{"", s.Name,
			"the subcircuit is defined and no card uses it: nothing in it was looked at"})
	}
	return list
}

// noStage says why no stage stands around an element that could anchor one, ""
// where the element could not.
func noStage(e *circuit.Element) string {
	switch e.Kind {
	case circuit.UJT, circuit.PUT, circuit.Diac, circuit.SCR:
		return "no stage was recognised around it"
	case circuit.Triac:
		return "gate stages of triacs are not worked out yet"
	case circuit.SourceIC:
		return "it charges no stage that was recognised"
	case circuit.Optotriac:
		return "opto-triac stages are not worked out yet"
	case circuit.Unknown:
		if !strings.ContainsRune("QJM", rune(e.Letter)) {
			return fmt.Sprintf("nothing is known of the part %s", rule.Name(e.PartName))
		}
	}
	return ""
}
