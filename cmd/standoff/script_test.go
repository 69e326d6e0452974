package main

import (
	"errors"
	"os"
	"os/exec"
	"strconv"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){
		"standoff": func() { os.Exit(run(os.Args[1:], os.Stdin, os.Stdout, os.Stderr)) },
	})
}

func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{Dir: "testdata/script",
		Cmds: map[string]func(*testscript.TestScript, bool, []string){"exits": exits}})
}

// exits STATUS COMMAND... runs a command and wants that exit status of it.
func exits(ts *testscript.TestScript, _ bool, args []string) {
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	status := 0
	if err := ts.Exec(args[1], args[2:]...); err != nil {
		failed := new(exec.ExitError)
		if !errors.As(err, &failed) {
			ts.Fatalf("%v", err)
		}
		status = failed.ExitCode()
	}
	if status != want {
		ts.Fatalf("exit status %d, want %d", status, want)
	}
}
