package wiring

import (
	"fmt"
	"strings"

	"standoff/rules/rule"
)

func pinOrderAssumed() *rule.Rule {
	return &rule.Rule{
		ID: "pin-order-assumed", Group: group, Title: "The terminal order of a part was inferred from the wiring.",
		Why: "Nobody wrote the order down, and the usual one makes no working stage here. The board was " +
			"checked in the only " +
			"order that does. A pins= line settles it.",
		Formula: "exactly one order of the terminals makes a working stage", Source: practice,
		Failing: board("Chapel bell", thyristor...),
		Mended:  board("Chapel bell", append([]string{"*> XS1 pins=a,k,g"}, thyristor...)...),
		Check: func(p *rule.Pass) {
			for _, a := range p.Accounts {
				o := a.Stage.Order
				if o == nil || !o.Followed {
					continue
				}
				name := a.Stage.Anchor.Designator
				f := about(a.Stage.Anchor, rule.Remark, fmt.Sprintf("the terminals of %s were taken as %s, the only "+
					"order that "+
					"makes a working stage; settle it with *> %s pins=%s", rule.Name(name), strings.Join(o.Wiring, ", "),
					rule.Name(name), strings.Join(o.Wiring, ",")))
				f.Stage = name
				p.Report(f)
			}
		},
	}
}
