package wiring

import (
	"fmt"
	"strings"

	"standoff/rules/rule"
)

func pinOrderContradicted() *rule.Rule {
	return &rule.Rule{
		ID: "pin-order-contradicted", Group: group, Title: "The wiring contradicts the terminal order of a part.",
		Why: "In the order that was declared, or that the library expects, the part makes no working stage; " +
			"in exactly one " +
			"other order it does. Either the order or the wiring is wrong. A declared order is kept to, and the " +
			"finding " +
			"is a hold; an order from the library gives way to the wiring, and it is a doubt.",
		Formula: "no working stage in the order taken, one in another", Source: practice,
		Failing: board("Ferry bell", append([]string{"*> XS1 pins=a,g,k"}, thyristor...)...),
		Mended:  board("Ferry bell", append([]string{"*> XS1 pins=a,k,g"}, thyristor...)...),
		Check: func(p *rule.Pass) {
			for _, a := range p.Accounts {
				o := a.Stage.Order
				if o == nil {
					continue
				}
				grade := rule.Hold
				if o.Followed {
					grade = rule.Doubt
				}
				e := a.Stage.Anchor
				f := about(e, grade, fmt.Sprintf("the terminals of %s were given as %s (%s), but only %s makes a "+
					"working stage",
					rule.Name(e.Designator), strings.Join(o.Taken, ", "), e.Order, strings.Join(o.Wiring, ", ")))
				f.Stage = e.Designator
				p.Report(f)
			}
		},
	}
}
