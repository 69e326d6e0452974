package circuit_test

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"standoff/netlist/circuit"
	"standoff/netlist/source"
	"standoff/netlist/syntax"
)

// folder serves included files from a map.
type folder struct {
	texts map[string]string
	files map[string]*source.File
}

func (f *folder) Load(_ *source.File, path string) (*source.File, error) {
	if path == "quiet" {
		return nil, nil
	}
	text, ok := f.texts[path]
	if !ok {
		return nil, errors.New(path + " is not there")
	}
	if f.files == nil {
		f.files = map[string]*source.File{}
	}
	if f.files[path] == nil {
		f.files[path] = source.New(path, text)
	}
	return f.files[path], nil
}

// withFiles builds a deck with files beside it and shows elements and problems.
func withFiles(text string, texts map[string]string, limits circuit.Limits) (elements, problems string) {
	deck := syntax.Parse(source.New("t.cir", "title\n"+text+"\n"), true)
	c, list := circuit.Build(deck, circuit.Options{Includes: &folder{texts: texts}, Limits: limits})
	var shown, told []string
	for _, e := range c.Elements {
		shown = append(shown, show(c, e))
	}
	for _, p := range list {
		at := p.Span.Position()
		told = append(told, fmt.Sprintf("%s:%d: %s", at.Path, at.Line, p.Message))
	}
	return strings.Join(shown, "; "), strings.Join(told, "; ")
}

func TestIncludes(t *testing.T) {
	texts := map[string]string{
		"r.inc":    "R1 a 0 {x}\n",
		"x.inc":    ".param x=5\n",
		"nest.inc": ".include x.inc\n.include r.inc\n",
		"loop.inc": ".include loop.inc\nR7 a 0 7\n",
		"bad.inc":  "R8 a\nR9 a 0 9\n",
		"end.inc":  "R1 a 0 1\n.end\n",
		"sub.inc":  ".subckt s a\nR1 a 0 1\n.ends\n",
		"mod.inc":  ".model M npn\n",
		"corner.lib": ".lib TT\n.param x=1\n.lib corner.lib common\n.endl\n.lib ss\n.param x=2\n.endl ss\n" +
			".lib common\nR5 a 0 {x}\n.endl\nR6 a 0 6\n",
		"plain": "R4 a 0 4\n",
	}
	for _, c := range []struct{ name, text, want, told string }{
		{"one in the other", ".include nest.inc", "R1 r a,0 5", ""},
		{"the same twice counts once", ".include x.inc\n.include x.inc\n.include r.inc\n.include r.inc",
			"R1 r a,0 5", ""},
		{"a missing file is told once", ".include gone\n.include gone\nR1 a 0 1", "R1 r a,0 1",
			"t.cir:2: gone is not there"},
		{"nothing to say", ".include quiet\nR1 a 0 1", "R1 r a,0 1", ""},
		{"a loop", ".include loop.inc", "R7 r a,0 7",
			"loop.inc:1: loop.inc includes itself; it is not read again"},
		{"a bad card in it", ".include bad.inc", "R9 r a,0 9", "bad.inc:1: R8 needs two nodes and a value"},
		{"its end is not ours", ".include end.inc\nR2 a 0 2", "R1 r a,0 1; R2 r a,0 2", ""},
		{"a section that fetches another of its file", ".lib corner.lib tt", "R5 r a,0 1", ""},
		{"another section", ".lib corner.lib SS\nR1 a 0 {x}", "R1 r a,0 2", ""},
		{"what stands in no section", ".include corner.lib", "R6 r a,0 6", ""},
		{"no such section", ".lib corner.lib ff\nR1 a 0 1", "R1 r a,0 1",
			"t.cir:2: corner.lib has no section ff"},
		{"a .lib that nothing closes names a file", ".lib plain\nR1 a 0 1", "R4 r a,0 4; R1 r a,0 1", ""},
		{"for each subcircuit anew", ".subckt p c b e\n.include mod.inc\nQ1 c b e M\n.ends\n.subckt q c b e\n" +
			".include mod.inc\n" +
			"Q1 c b e M\n.ends\nX1 c b e p\nX2 c b e q", "X1.Q1 npn c,b,e 0; X2.Q1 npn c,b,e 0", ""},
		{"in a branch that is not taken", ".if(0)\n.include gone\n.endif\nR1 a 0 1", "R1 r a,0 1", ""},
		{"under the condition of the subcircuit",
			".param x=1\n.subckt p a on=0\n.if(on)\n.include r.inc\n.endif\nR2 a 0 2\n.ends\n" +
				"X1 a p\nX2 a p on=1", "X1.R2 r a,0 2; X2.R1 r a,0 1; X2.R2 r a,0 2", ""},
		{"the same subcircuit from two files", ".include sub.inc\n.subckt s a\nR1 a 0 1\n.ends\nX1 n s",
			"X1.R1 r n,0 1", ""},
		{"another of the same name", ".include sub.inc\n.subckt s a\nR1 a 0 2\n.ends\nX1 n s", "X1.R1 r n,0 1",
			"t.cir:3: the subcircuit s is defined twice, and differently; the one on line 1 of sub.inc counts"},
	} {
		got, told := withFiles(c.text, texts, circuit.Limits{})
		if got != c.want || told != c.told {
			t.Errorf("%s:\n got %s | %s\nwant %s | %s", c.name, got, told, c.want, c.told)
		}
	}
}

func TestIncludeLimits(t *testing.T) {
	texts := map[string]string{}
	for i := range 30 {
		// Every file includes the next one twice, in two subcircuits: 2^30 of them.
		texts[fmt.Sprint("f", i)] = fmt.Sprintf(".subckt a%d x\n.include f%d\n.ends\n.subckt b%d x\n"+
			".include f%d\n.ends\n",
			i, i+1, i, i+1)
	}
	texts["f30"] = "R1 a 0 1\n"
	_, told := withFiles(".include f0", texts, circuit.Limits{})
	if !strings.HasSuffix(told, "more than 1000 files are included; the rest is not read") {
		t.Errorf("told %q", told)
	}
	_, told = withFiles(".include f0", texts, circuit.Limits{Depth: 3})
	if !strings.HasSuffix(told, "includes nest deeper than 3; this one is not read") {
		t.Errorf("told %q", told)
	}
}
