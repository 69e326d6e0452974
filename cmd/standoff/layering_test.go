package main

import (
	"go/parser"
	"go/token"
	"io/fs"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// allowed says which packages of the project a package may import. Data flows
// one way: text, syntax, circuit, stages, figures, findings, output. Do not edit
// this to make a build pass: a package that needs what stands after it in the
// flow is doing another package's work.
var allowed = map[string]string{
	"fixtures":         "",
	"netlist/source":   "",
	"netlist/quantity": "",
	"netlist/numeric":  "",
	"netlist/network":  "netlist/numeric",
	"netlist/syntax":   "netlist/source netlist/quantity",
	"netlist/part":     "netlist/source netlist/quantity netlist/syntax",
	"netlist/circuit":  "netlist/source netlist/quantity netlist/syntax netlist/part",
	"netlist/stage":    "netlist/circuit netlist/part netlist/quantity",
	"netlist/operating": "netlist/stage netlist/circuit netlist/part netlist/quantity netlist/numeric " +
		"netlist/network",
	"netlist": "netlist/source netlist/syntax netlist/part netlist/circuit netlist/stage " +
		"netlist/operating",
	"rules/rule": "netlist/source netlist/quantity netlist/part netlist/circuit netlist/stage " +
		"netlist/operating",
	"rules/wiring": "rules/rule netlist/source netlist/quantity netlist/circuit netlist/stage " +
		"netlist/operating netlist/part",
	"rules/oscillator": "rules/rule netlist/quantity netlist/circuit netlist/stage netlist/operating " +
		"netlist/part",
	"rules/trigger": "rules/rule netlist/quantity netlist/circuit netlist/stage netlist/operating " +
		"netlist/part",
	"rules": "netlist rules/rule rules/wiring rules/oscillator rules/trigger netlist/source " +
		"netlist/quantity netlist/circuit " +
		"netlist/stage netlist/operating",
	"rules/report": "netlist rules rules/rule netlist/source netlist/quantity netlist/part netlist/circuit " +
		"netlist/stage netlist/operating",
	"cmd/standoff": "netlist rules rules/rule rules/report netlist/part netlist/source",
}

func TestImportsFollowTheFlow(t *testing.T) {
	root := filepath.Join("..", "..")
	err := filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err != nil || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") {
			return err
		}
		rel, err := filepath.Rel(root, filepath.Dir(path))
		if err != nil {
			return err
		}
		pkg := filepath.ToSlash(rel)
		list, known := allowed[pkg]
		if !known {
			t.Errorf("%s: the package %s has no row in the table", path, pkg)
		}
		file, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.ImportsOnly)
		if err != nil {
			return err
		}
		for _, i := range file.Imports {
			name, ours := strings.CutPrefix(strings.Trim(i.Path.Value, `"`), "standoff/")
			if ours && !slices.Contains(strings.Fields(list), name) {
				t.Errorf("%s imports %s", path, name)
			}
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
}
