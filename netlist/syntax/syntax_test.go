package syntax_test

import (
	"fmt"
	"strings"
	"testing"

	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

func parse(text string) *syntax.Deck { return syntax.Parse(source.New("t.cir", text), true) }

// dump writes a deck in one line a statement, for comparing.
func dump(d *syntax.Deck) string {
	var b strings.Builder
	value := func(v syntax.Value) string {
		switch {
		case v.Expr != nil:
			return "{" + v.Text + "}"
		case v.Quoted:
			return `"` + v.Text + `"`
		}
		return v.Text
	}
	pairs := func(list []syntax.Pair) {
		for _, p := range list {
			fmt.Fprintf(&b, " %s=%s", p.Key.Text, value(p.Value))
		}
	}
	for _, s := range d.Statements {
		switch {
		case s.Element != nil:
			b.WriteString(s.Element.Name.Text)
			for _, f := range s.Element.Fields {
				b.WriteString(" " + value(f))
			}
			if f := s.Element.Function; f != nil {
				fmt.Fprintf(&b, " %s(", f.Name.Text)
				for _, a := range f.Args {
					b.WriteString(" " + value(a))
				}
				b.WriteString(" )")
			}
			pairs(s.Element.Pairs)
		case s.Model != nil:
			fmt.Fprintf(&b, "model %s %s", s.Model.Name.Text, s.Model.Type.Text)
			for _, f := range s.Model.Flags {
				b.WriteString(" " + f.Text)
			}
			pairs(s.Model.Pairs)
		case s.Subckt != nil:
			b.WriteString("subckt " + s.Subckt.Name.Text)
			for _, n := range s.Subckt.Nodes {
				b.WriteString(" " + n.Text)
			}
			pairs(s.Subckt.Defaults)
		case s.Ends != nil:
			b.WriteString("ends " + s.Ends.Name.Text)
		case s.Param != nil:
			b.WriteString("param")
			pairs(s.Param.Pairs)
		case s.Include != nil:
			fmt.Fprintf(&b, "include %s %s", s.Include.Path.Text, s.Include.Section.Text)
		case s.Lib != nil:
			fmt.Fprintf(&b, "lib %s %v", s.Lib.Section.Text, s.Lib.Close)
		case s.Global != nil:
			fmt.Fprintf(&b, "global %d", len(s.Global.Nodes))
		case s.Temp != nil:
			b.WriteString("temp")
		case s.Condition != nil:
			b.WriteString("condition " + s.Condition.Keyword)
		case s.Stop != nil:
			b.WriteString("end")
		case s.Other != nil:
			fmt.Fprintf(&b, "other %s %v", s.Other.Keyword.Text, s.Other.Known)
		case s.Intent != nil:
			b.WriteString("intent " + s.Intent.Subject.Text + " " + s.Intent.Letter.Text)
			for _, p := range s.Intent.Pairs {
				fmt.Fprintf(&b, " %s=%s|%s", p.Key.Text, p.Low.Text, p.High.Text)
			}
			if w := s.Intent.Waive; w != nil {
				fmt.Fprintf(&b, "%s %s: %s", w.Rule.Text, w.Designator.Text, w.Reason.Text)
			}
		}
		b.WriteString("; ")
	}
	for _, p := range d.Problems {
		at := p.Span.Position()
		fmt.Fprintf(&b, "! %d:%d %s; ", at.Line, at.Column, p.Message)
	}
	return strings.Join(strings.Fields(b.String()), " ")
}

func TestCards(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"R1 a b 4k7 tol = 1%", "R1 a b 4k7 tol=1%;"},
		{"r 1 2 1k", "r 1 2 1k;"},
		{"V1 l 0 SIN(0 325 50)", "V1 l 0 SIN( 0 325 50 );"},
		{"V1 a gnd PULSE 0 5 1n 1n 1n '5n-1n' '9n'", "V1 a gnd PULSE 0 5 1n 1n 1n {5n-1n} {9n};"},
		{"V1 +24V GND DC 24", "V1 +24V GND DC 24;"},
		{"VCC VCC gnd VCC", "VCC VCC gnd VCC;"},
		{"R4 n1 -VEE 1k", "R4 n1 -VEE 1k;"},
		{"X9 in out vdd / CELL", "X9 in out vdd / CELL;"},
		{"X1 a b c PART PARAMS: N=3 W={2*N}", "X1 a b c PART PARAMS: N=3 W={2*N};"},
		{"R7 Net-_U3A--_ /block/sub/_RST 1k", "R7 Net-_U3A--_ /block/sub/_RST 1k;"},
		{"E§fix a 0 b 0 1", "E§fix a 0 b 0 1;"},
		{"R1 a b\n* note\n\n  + 10k ; tail\n+", "R1 a b 10k;"},
		{".model m NPN\n* charge part\n+ CJE=1p", "model m NPN CJE=1p;"},
		{".model Q9.Qabc PNP(BF=50 IS = 1e-14)", "model Q9.Qabc PNP BF=50 IS=1e-14;"},
		{".MODEL m VDMOS NCHAN", "model m VDMOS NCHAN;"},
		{".MODELO part npn (EG= 0,9)", "model part npn EG=0,9;"},
		{".SUBCKT 7XX/ABC 1 2 PARAMS: A=1", "subckt 7XX/ABC 1 2 A=1;"},
		{".subckt K1 a b\n+ PARAMS:\n\n+ T1=5m ; note", "subckt K1 a b T1=5m;"},
		{".ends\n.ends foo", "ends ; ends foo;"},
		{".param", "param;"},
		{".param A='B*2' C = {1+2}", "param A={B*2} C={1+2};"},
		{".include '/x/lib -- v2/cell.cdl'", "include /x/lib -- v2/cell.cdl ;"},
		{`.lib "a b.lib" tt`, "include a b.lib tt;"},
		{".lib tt\n.endl tt", "lib tt false; lib true;"},
		{"  .if(on==1)\nR1 a b 1k\n.else\n.endif", "condition if; R1 a b 1k; condition else; condition endif;"},
		{".tran 1u 1m\n.foo bar", "other .tran true; other .foo false;"},
		{".control\nrun\n+ plot\n.endc\nR1 a b 1k", "other .control true; R1 a b 1k;"},
		{".temp -40C", "temp;"},
		{"V1 a 0 PWL(0,0 1m,5)", "V1 a 0 PWL( 0 0 1m 5 );"},
		{"R1 a b 1k $note\nR2 a$b c 1k $ x", "R1 a b 1k; R2 a$b c 1k;"},
		{"// remark\nR1 a b 1k", "R1 a b 1k;"},
		{"R1 a b 1k\r\r\nR2 b c 2k\r\n", "R1 a b 1k; R2 b c 2k;"},
		{"B1 a 0 V=V(b)*2", "B1 a 0 b *2 V=V;"},
		{"E1 a 0 POLY(1) b 0 0 2", "E1 a 0 POLY 1 b 0 0 2;"},
		{"E1 a 0 VALUE = { V(b)*2 }", "E1 a 0 VALUE={ V(b)*2 };"},
		{"*> board ambient=-10..50 mains=207..253 line=50", "intent board ambient=-10|50 mains=207|253 line=50|50;"},
		{"*> all R tol=1%", "intent all R tol=1%|1%;"},
		{"*> X1.R3 travel=1k..100k ; pot", "intent X1.R3 travel=1k|100k;"},
		{"*> XQ1 pins=b2,e,b1 frequency=5.5..6.5", "intent XQ1 pins=b2,e,b1|b2,e,b1 frequency=5.5|6.5;"},
		{"*> waive base-two-resistor-missing XQ1 : the drift does not matter", "intent waive base-two-resistor-missing XQ1: the drift does not matter;"},
		{"*> waive rule XQ1:told", "intent waive rule XQ1: told;"},
		{"*> waive rule XQ1", "intent waive rule XQ1: ;"},
		{"R1 a b\n*> R1 tol=1%\n+ 10k", "R1 a b 10k; intent R1 tol=1%|1%;"},
	} {
		if got := dump(parse("title\n" + c.text)); got != c.want {
			t.Errorf("%q\n got %s\nwant %s", c.text, got, c.want)
		}
	}
}

func TestProblemsStandAtTheirPlace(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"R1 a b {2*ct+}\nR2 a b 1k", `R2 a b 1k; ! 2:14 a value is missing here;`},
		{"R1 a b {2*ct", "! 2:8 this brace is never closed;"},
		{"R1 a b tol=", "! 2:8 tol= has no value;"},
		{"V1 a 0 SIN(0 325", "! 2:11 this bracket is never closed;"},
		{"R1 a b )", "! 2:8 a closing bracket without an opening one;"},
		{".model", "! 2:1 this .model card is not complete: write .model NAME TYPE (key=value ...);"},
		{".model m npn(bf=1", "! 2:13 this bracket is never closed;"},
		{"1N4148 a b", `! 2:1 no card starts with "1N4148": an element starts with a letter, a dot card with a dot, a comment with *;`},
		{"*> board", "! 2:1 this intent line is not complete: an intent line reads *> SUBJECT key=value ..., or *> waive RULE DESIGNATOR : reason;"},
		{"*> R1 5%", `! 2:7 "5%" has no place here: an intent line reads *> SUBJECT key=value ..., or *> waive RULE DESIGNATOR : reason;`},
		{"*> R1 tol=", "! 2:7 tol= has no value;"},
		{"*> R1 travel=1k...5k", `! 2:14 "1k...5k" is no range; write LOW..HIGH, as 9..15;`},
		{"R1 a b\n* µµ\n+ µ {1+}", "! 4:8 a value is missing here;"},
		{"R1 a b 1k\n.end\nR2 a b 1k", "R1 a b 1k; end; ! 4:1 this stands behind .end and is not read;"},
		{"KEY=VALUE", "! 2:1 KEY= stands alone: a setting belongs behind a card, or on a line that starts with +;"},
	} {
		if got := dump(parse("title\n" + c.text)); got != c.want {
			t.Errorf("%q\n got %s\nwant %s", c.text, got, c.want)
		}
	}
}

func TestTitle(t *testing.T) {
	for _, c := range []struct{ text, title, want string }{
		{"Relay timer for a kiln\nR1 a b 1k", "Relay timer for a kiln", "R1 a b 1k;"},
		{"* commented title\nR1 a b 1k", "commented title", "R1 a b 1k;"},
		{"R1 a b 1k\nR2 a b 2k", "", "R1 a b 1k; R2 a b 2k;"},
		{".SUBCKT x 1 2\n.ends", "", "subckt x 1 2; ends ;"},
		{".title shown\nR1 a b 1k", "shown", "other .title true; R1 a b 1k;"},
		{"\nR1 a b 1k", "", "R1 a b 1k;"},
		{"Dimmer with snubber lamp\nR1 a b 1k", "Dimmer with snubber lamp", "R1 a b 1k;"},
		{"1 kHz oscillator", "1 kHz oscillator", ""},
		{"V1 a 0 12\nR1 a 0 1k", "", "V1 a 0 12; R1 a 0 1k;"},
		{"(c) {unclosed", "(c) {unclosed", ""},
	} {
		d := parse(c.text)
		if got := dump(d); got != c.want || d.Title != c.title {
			t.Errorf("%q\n got title %q, %s\nwant %q, %s", c.text, d.Title, got, c.title, c.want)
		}
	}
	if d := syntax.Parse(source.New("inc", "R1 a b 1k"), false); dump(d) != "R1 a b 1k;" {
		t.Error("an included file has no title")
	}
}

func TestCommentsStandWithTheirHeader(t *testing.T) {
	d := parse("t\n* TERMINALS: A G K\n.subckt SCR 1 2 3 ; first\n* Nodes: anode\nR1 1 2 1k\n.ends\n")
	got := d.Statements[0].Subckt.Comments
	if len(got) != 3 || got[0].Text != "TERMINALS: A G K" || got[1].Text != "first" {
		t.Errorf("got %+v", got)
	}
}

func FuzzFile(f *testing.F) {
	for _, s := range []string{"t\nR1 a b 1k\n+ tol=1\n", "t\n.model m npn(bf={1+2})\n", "t\n*> R1 tol=1%\n.control\n.endc", "\x00", "t\nV1 a 0 SIN(0 1 2)\n.end\nx",
		"t\n.if(1)\n.endif\n", "t\n.subckt a b c\n*x\n.ends", "t\nR1 a b {((((1))))}", "t\n*> waive a b : c", "+\n+\n", "t\n.lib a\n.endl", "t\nB1 a b V=(x"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		d := parse(text)
		for _, p := range d.Problems {
			if p.Span.Start < 0 || p.Span.End < p.Span.Start || int(p.Span.End) > len(text) {
				t.Fatalf("span %d..%d outside %d bytes: %s", p.Span.Start, p.Span.End, len(text), p.Message)
			}
		}
		last := int32(0)
		for _, s := range d.Statements {
			if s.Start < 0 || s.End < s.Start || int(s.End) > len(text) {
				t.Fatalf("statement %d..%d outside %d bytes", s.Start, s.End, len(text))
			}
			last = max(last, s.Start)
		}
	})
}

func deckOf(cards int) string {
	var b strings.Builder
	b.WriteString("title\n")
	for i := range cards {
		switch i % 10 {
		case 0:
			b.WriteString("* a comment between\n")
			fmt.Fprintf(&b, "Q%d c%d b%d e%d BC547\n", i, i, i, i)
		case 3:
			fmt.Fprintf(&b, "C%d n%d 0 {2*ct}\n", i, i)
		default:
			fmt.Fprintf(&b, "R%d n%d n%d 4.7k tol=5\n", i, i, i+1)
		}
	}
	return b.String()
}

func BenchmarkParse(b *testing.B) {
	for _, n := range []int{30, 1000, 10_000, 100_000} {
		b.Run(fmt.Sprint(n), func(b *testing.B) {
			text := deckOf(n)
			b.SetBytes(int64(len(text)))
			b.ReportAllocs()
			for b.Loop() {
				parse(text)
			}
		})
	}
}

// A card of more words than any board needs is told and not kept.
func TestTooManyWordsOnOneCard(t *testing.T) {
	d := parse("title\nX1" + strings.Repeat(" n", 150_000) + "\n+ more\n+ and more\nR1 a b 1k\n")
	if got := dump(d); got != "R1 a b 1k; ! 2:200002 more than 100000 words on one card; the rest of it is not read;" {
		t.Error(got)
	}
}
