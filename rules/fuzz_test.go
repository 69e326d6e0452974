package rules_test

import (
	"bytes"
	"io"
	"testing"

	"standoff/netlist"
	"standoff/netlist/circuit"
	"standoff/rules"
	"standoff/rules/report"
)

// Whatever the text, the whole way from text to report ends, and no control
// character reaches the terminal.
func FuzzBoard(f *testing.F) {
	for _, r := range rules.Catalogue() {
		f.Add([]byte(r.Failing))
		f.Add([]byte(r.Mended))
	}
	f.Add([]byte("t\n.subckt s a\nX1 a s\n.ends\nX1 a s\nR1 a b {1/0}\nXQ1 a a a 2N2646\nV1 a 0 SIN(0 1 " +
		"50)\nV2 a 0 1\n"))
	f.Add([]byte("t\nV1 v 0 -20\nR1 v e 0\nC1 e 0 1e300\nXQ1 e 0 v 2N2646\n*> R1 travel=0..1e300\n"))
	opts := netlist.Options{Limits: circuit.Limits{Elements: 2000}}
	f.Fuzz(func(t *testing.T, data []byte) {
		if len(data) > 4000 {
			return
		}
		b, err := netlist.ReadText("f.cir", data, opts)
		if err != nil {
			return
		}
		results := []*rules.Result{rules.Check(b, rules.Options{NoAdvice: true})}
		if err := report.JSON(io.Discard, results); err != nil {
			t.Fatal(err)
		}
		if err := report.WorksheetJSON(io.Discard, []*netlist.Board{b}); err != nil {
			t.Fatal(err)
		}
		var screen bytes.Buffer
		paint := report.Terminal{Width: 80}
		paint.Lint(&screen, results)
		paint.Worksheet(&screen, []*netlist.Board{b})
		report.Lines(&screen, results)
		for _, c := range screen.Bytes() {
			if c < 0x20 && c != '\n' || c == 0x7f {
				t.Fatalf("control character %#x on the screen", c)
			}
		}
	})
}
