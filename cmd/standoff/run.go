package main

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"os"
	"strconv"

	"github.com/spf13/cobra"

	"standoff/rules/report"
)

// The exit statuses.
const (
	exitClean  = 0
	exitFound  = 1
	exitFailed = 2
)

// streams are what a command talks to.
type streams struct {
	in       io.Reader
	out, err io.Writer
	terminal bool // out is a terminal
	status   int
}

// errFound says that something was found at or above --fail-at.
var errFound = errors.New("found")

// run is the whole program: arguments and streams in, exit status out.
func run(args []string, in io.Reader, out, trouble io.Writer) int {
	buffered := bufio.NewWriterSize(out, 64<<10)
	s := &streams{in: in, out: buffered, err: trouble, terminal: isTerminal(out)}
	root := newRoot(s)
	root.SetArgs(args)
	root.SetOut(buffered)
	root.SetErr(trouble)
	err := root.Execute()
	if flushed := buffered.Flush(); flushed != nil {
		s.trouble(fmt.Errorf("the report could not be written: %w", flushed))
	}
	switch {
	case err != nil && !errors.Is(err, errFound):
		s.trouble(err)
	case err != nil && s.status == exitClean:
		s.status = exitFound
	}
	return s.status
}

func isTerminal(w io.Writer) bool {
	f, ok := w.(*os.File)
	if !ok {
		return false
	}
	info, err := f.Stat()
	return err == nil && info.Mode()&os.ModeCharDevice != 0
}

func newRoot(s *streams) *cobra.Command {
	root := &cobra.Command{
		Use:   "standoff",
		Short: "Checks netlists of unijunction and thyristor trigger stages",
		Long: "standoff reads netlists, recognises relaxation oscillators and thyristor gates, works out their\n" +
			"worst case over every spread, and says what will go wrong on some board, why, and which value would\n" +
			"put it right.\n\n" +
			"Exit status: 0 nothing at or above --fail-at, 1 something, 2 the job could not be done.\n\n" +
			limitsHelp() +
			"\nWork on mains and on charged capacitors can kill: keep to the local codes and leave it to licensed\n" +
			"people.",
		SilenceErrors: true, SilenceUsage: true,
	}
	root.CompletionOptions.DisableDefaultCmd = true
	root.AddCommand(newLint(s), newWorksheet(s), newRules(s), newParts(s), newYield())
	return root
}

// paint returns how the terminal is written to.
func (s *streams) paint(mode string) (report.Terminal, error) {
	t := report.Terminal{Width: 100}
	if columns, err := strconv.Atoi(os.Getenv("COLUMNS")); err == nil && s.terminal {
		t.Width = min(columns, 120)
	}
	switch mode {
	case "always":
		t.Colour = true
	case "auto":
		t.Colour = s.terminal && os.Getenv("NO_COLOR") == "" && os.Getenv("TERM") != "dumb"
	case "never":
	default:
		return t, fmt.Errorf("--color is auto, always or never, not %q", mode)
	}
	return t, nil
}
