package rules

import (
	"fmt"
	"strings"

	"standoff/netlist/operating"
	"standoff/netlist/quantity"
	"standoff/rules/rule"
)

// Remedies says in words what would bring a period inside its target, a sentence
// each; nothing where it is met.
func Remedies(b *operating.Budget) []string {
	if b.Met {
		return nil
	}
	have, want := b.High/b.Low, b.Target.High/b.Target.Low
	list := []string{fmt.Sprintf("the spreads alone make the period vary %.3g-fold and the target allows %.3g-fold", have, want)}
	if have <= want {
		list[0] = fmt.Sprintf("the spreads (%.3g-fold) fit into the target (%.3g-fold), the values do not lie in its middle", have, want)
	}
	if b.Tolerance > 0 {
		text := fmt.Sprintf("%s with %.3g %% would meet it", listed(b.Parts), b.Tolerance*100)
		if b.Scale != 1 {
			text += fmt.Sprintf(", with a time constant %.3g times as long", b.Scale)
		}
		list = append(list, text)
	} else if have > want && len(b.Parts) > 0 {
		list = append(list, "no tolerance of "+listed(b.Parts)+" would do")
	}
	switch {
	case b.Trimmer != nil:
		list = append(list, fmt.Sprintf("a trimmer in place of %s that covers %s .. %s would meet it: set to the middle of the target, "+
			"a board still varies %.3g-fold with supply and temperature", rule.Name(b.TrimmedPart), quantity.Format(b.Trimmer.Low, "ohm"),
			quantity.Format(b.Trimmer.High, "ohm"), b.Service))
	case b.Service > want:
		list = append(list, fmt.Sprintf("no trimmer would do: supply and temperature alone make one and the same board vary %.3g-fold", b.Service))
	}
	return list
}

// remedy is Remedies as one text.
func remedy(b *operating.Budget) string { return strings.Join(Remedies(b), "; ") }

// listed writes designators as a sentence does: "R1, R2 and C1".
func listed(parts []string) string {
	words := make([]string, len(parts))
	for i, p := range parts {
		words[i] = rule.Name(p)
	}
	if len(words) < 2 {
		return strings.Join(words, "")
	}
	return strings.Join(words[:len(words)-1], ", ") + " and " + words[len(words)-1]
}
