package main

import (
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
	"sync"

	"github.com/spf13/cobra"

	"standoff/netlist"
	"standoff/netlist/part"
	"standoff/netlist/source"
)

// extensions are the endings of netlists in a searched folder.
var extensions = []string{".cir", ".net", ".sp", ".spice", ".ckt", ".cki"}

// readFlags are the flags of every command that reads boards.
type readFlags struct {
	parts, include []string
}

func (f *readFlags) add(c *cobra.Command) {
	c.Flags().StringArrayVar(&f.parts, "parts", nil, "a file of .model cards with more ratings (may be "+
		"given again)")
	c.Flags().StringArrayVar(&f.include, "include", nil, "a folder from which netlists may include files "+
		"(may be given again)")
}

// options reads the --parts files.
func (f *readFlags) options(s *streams) (netlist.Options, error) {
	opts := netlist.Options{IncludeDirs: f.include}
	for _, path := range f.parts {
		file, err := source.Read(path, source.Limits{})
		if err != nil {
			return opts, err
		}
		list, problems := part.ParseFile(file)
		for _, p := range problems {
			at := p.Span.Position()
			fmt.Fprintf(s.err, "%s:%d:%d: %s\n", source.Visible(at.Path), at.Line, at.Column, p.Message)
		}
		if len(problems) > 0 {
			return opts, fmt.Errorf("%s has cards that cannot be used", path)
		}
		opts.Parts = append(opts.Parts, list...)
	}
	return opts, nil
}

// find turns arguments into files: folders are searched, in the order of names.
func find(args []string) ([]string, error) {
	if len(args) == 0 {
		args = []string{"."}
	}
	var paths []string
	for _, arg := range args {
		info, err := os.Stat(arg)
		if arg == "-" || err != nil || !info.IsDir() {
			paths = append(paths, arg) // a file, or one that reading will complain about
			continue
		}
		var found []string
		err = filepath.WalkDir(arg, func(path string, d fs.DirEntry, err error) error {
			switch {
			case err != nil:
				return err
			case d.IsDir() && path != arg && strings.HasPrefix(d.Name(), "."):
				return filepath.SkipDir
			case !d.IsDir() && slices.Contains(extensions, strings.ToLower(filepath.Ext(path))):
				found = append(found, path)
			}
			return nil
		})
		if err != nil {
			return nil, err
		}
		slices.Sort(found)
		paths = append(paths, found...)
	}
	if len(paths) == 0 {
		return nil, fmt.Errorf("no netlist here (%s)", strings.Join(extensions, " "))
	}
	return paths, nil
}

// each works on every path on all cores and hands the results on in their
// order. A path that cannot be read is told and makes the exit status 2.
func each[T any](s *streams, args []string, opts netlist.Options, work func(*netlist.Board) T) ([]T, error) {
	paths, err := find(args)
	if err != nil {
		return nil, err
	}
	type outcome struct {
		value T
		err   error
	}
	outcomes := make([]outcome, len(paths))
	next := make(chan int)
	var wait sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), len(paths)) {
		wait.Go(func() {
			for i := range next {
				b, err := s.read(paths[i], opts)
				if err == nil {
					outcomes[i].value = work(b)
				}
				outcomes[i].err = err
			}
		})
	}
	for i := range paths {
		next <- i
	}
	close(next)
	wait.Wait()
	var results []T
	for _, o := range outcomes {
		if o.err != nil {
			fmt.Fprintf(s.err, "standoff: %s\n", source.Visible(o.err.Error()))
			s.status = exitFailed
			continue
		}
		results = append(results, o.value)
	}
	return results, nil
}

// read reads one board; one of which nothing could be read is an error.
func (s *streams) read(path string, opts netlist.Options) (*netlist.Board, error) {
	var b *netlist.Board
	var err error
	if path == "-" {
		data, readErr := io.ReadAll(io.LimitReader(s.in, 64<<20))
		if readErr != nil {
			return nil, fmt.Errorf("standard input cannot be read")
		}
		b, err = netlist.ReadText("-", data, opts)
	} else {
		b, err = netlist.Read(path, opts)
	}
	if err != nil {
		return nil, err
	}
	if b.NothingRead {
		for _, p := range b.Problems {
			at := p.Span.Position()
			fmt.Fprintf(s.err, "%s:%d:%d: %s\n", source.Visible(at.Path), at.Line, at.Column, p.Message)
		}
		return nil, fmt.Errorf("%s: nothing could be read: no element card in it", path)
	}
	return b, nil
}
