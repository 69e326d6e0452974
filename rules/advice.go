package rules

import (
	"runtime"
	"sync"

	"standoff/netlist"
	"standoff/rules/rule"
)

// A finding may cost so many trials - boards worked out anew with other values -
// and a board so many for all of its findings, fewer where it is large: every
// trial looks at the whole board.
const (
	trialsAFinding = 600
	trialsABoard   = 2000
	elementsTried  = 2_000_000 // elements of the board times trials
	plainStages    = 4         // a board with stages that cost more than so many plain ones has fewer trials
	trialsAtLeast  = 20        // a finding that may not have these is not looked at
)

// advise fills the advice of every finding that names something to change. A
// value is advised only after the whole board was worked out with it, the finding
// was gone, everything that was judged before was judged again, and nothing new or
// worse had come up.
func advise(b *netlist.Board, findings []rule.Finding) {
	hunts := gather(findings)
	if len(hunts) == 0 {
		return
	}
	budget := min(int(trialsABoard/max(effort(b)/plainStages, 1)), elementsTried/max(len(b.Circuit.Elements), 1))
	served := max(1, min(len(hunts), budget/trialsAtLeast))
	a := &adviser{board: b, now: judged(b, run(b, Options{}))}
	a.trials = min(trialsAFinding, max(trialsAtLeast, budget/served))
	for _, h := range hunts[served:] {
		h.tell(nil, "no value was looked for: this board has more findings than can be tried out")
	}
	a.all(hunts[:served])
}

// effort is what working all stages of a board out costs, in plain stages.
func effort(b *netlist.Board) float64 {
	sum := 0.0
	for _, a := range b.Accounts {
		sum += a.Effort()
	}
	return sum
}

// gather makes one hunt for all findings of a rule on a stage: what clears one has
// to clear the others.
func gather(findings []rule.Finding) []*hunt {
	var hunts []*hunt
	known := map[string]*hunt{}
	for i := range findings {
		f := &findings[i]
		if f.Grade < rule.Doubt || f.NoAdvice != "" || len(f.Mend) == 0 {
			continue
		}
		h := known[key(*f)]
		if h == nil {
			h = &hunt{}
			known[key(*f)] = h
			hunts = append(hunts, h)
		}
		h.findings = append(h.findings, f)
	}
	return hunts
}

// adviser looks for values that clear findings of one board.
type adviser struct {
	board  *netlist.Board
	now    verdict // on the board as it is
	trials int     // for each hunt
}

// all goes hunting on all cores: each hunt has trials of its own, so the outcome
// does not depend on the order.
func (a *adviser) all(hunts []*hunt) {
	next := make(chan *hunt)
	var wait sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), len(hunts)) {
		wait.Go(func() {
			for h := range next {
				h.adviser, h.left = a, a.trials
				h.tell(h.run())
			}
		})
	}
	for _, h := range hunts {
		next <- h
	}
	close(next)
	wait.Wait()
}
