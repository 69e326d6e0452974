package main

import (
	"errors"
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
	"standoff/rules/report"
)

// isNetlist reports whether a file in a searched folder is taken for a netlist.
func isNetlist(path string) bool {
	switch strings.ToLower(filepath.Ext(path)) {
	case ".cir", ".net", ".sp", ".spice", ".ckt", ".cki":
		return true
	}
	return false
}

// readFlags are the flags of every command that reads boards.
type readFlags struct {
	parts, include, limits []string
}

func (f *readFlags) add(c *cobra.Command) {
	c.Flags().StringArrayVar(&f.parts, "parts", nil,
		"`FILE` of .model cards with more ratings (may be given again)")
	c.Flags().StringArrayVar(&f.include, "include", nil,
		"`DIR` from which netlists may include files, besides their own (may be given again)")
	c.Flags().StringArrayVar(&f.limits, "limit", nil, "`NAME=N` moves a limit (may be given again)")
	c.Long += "\n\n" + limitsHelp()
}

// options takes the flags over and reads the --parts files.
func (f *readFlags) options(s *streams) (netlist.Options, error) {
	opts := netlist.Options{IncludeDirs: f.include}
	if err := setLimits(&opts, f.limits); err != nil {
		return opts, err
	}
	for _, dir := range f.include {
		if info, err := os.Stat(dir); err != nil || !info.IsDir() {
			return opts, fmt.Errorf("--include %s: there is no such folder", dir)
		}
	}
	for _, path := range f.parts {
		file, err := source.Read(path, opts.FileLimits)
		if err != nil {
			return opts, err
		}
		list, problems := part.ParseFile(file)
		if s.tellProblems(problems); len(problems) > 0 {
			return opts, fmt.Errorf("%s has cards that cannot be used", path)
		}
		opts.Parts = append(opts.Parts, list...)
	}
	return opts, nil
}

// find turns arguments into files: folders are searched, in the order of names.
// What cannot be searched is told, and the work goes on.
func (s *streams) find(args []string) ([]string, error) {
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
		found := s.search(arg)
		slices.Sort(found)
		paths = append(paths, found...)
	}
	if len(paths) == 0 && s.status == exitClean {
		return nil, errors.New("no netlist here (.cir .net .sp .spice .ckt .cki)")
	}
	return paths, nil
}

// search lists the netlists below a folder; folders with a point in front are
// left out.
func (s *streams) search(folder string) []string {
	var found []string
	_ = filepath.WalkDir(folder, func(path string, d fs.DirEntry, err error) error {
		switch {
		case err != nil:
			s.trouble(fmt.Errorf("%s cannot be searched", path))
			return nil
		case d.IsDir() && path != folder && strings.HasPrefix(d.Name(), "."):
			return filepath.SkipDir
		case !d.IsDir() && isNetlist(path):
			found = append(found, path)
		}
		return nil
	})
	return found
}

// each works on every path on all cores and hands the results on in their
// order. A path that cannot be read is told and makes the exit status 2.
func each[T any](s *streams, args []string, opts netlist.Options, work func(*netlist.Board) T) ([]T, error) {
	paths, err := s.find(args)
	if err != nil {
		return nil, err
	}
	type outcome struct {
		value T
		told  []source.Problem
		err   error
	}
	outcomes := make([]outcome, len(paths))
	next := make(chan int)
	var wait sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), len(paths)) {
		wait.Go(func() {
			for i := range next {
				o := &outcomes[i]
				b, err := s.read(paths[i], opts)
				switch {
				case err != nil:
					o.err = err
				case b.NothingRead:
					o.told, o.err = b.Problems, fmt.Errorf("%s: nothing could be read", paths[i])
				default:
					o.value = work(b)
				}
			}
		})
	}
	for i := range paths {
		next <- i
	}
	close(next)
	wait.Wait()
	results := make([]T, 0, len(paths))
	for _, o := range outcomes {
		if o.err != nil {
			s.tellProblems(o.told)
			s.trouble(o.err)
			continue
		}
		results = append(results, o.value)
	}
	return results, nil
}

// read reads one board.
func (s *streams) read(path string, opts netlist.Options) (*netlist.Board, error) {
	if path != "-" {
		return netlist.Read(path, opts)
	}
	most := opts.FileLimits.FileBytes
	if most <= 0 {
		most = standardFileBytes
	}
	data, err := io.ReadAll(io.LimitReader(s.in, most+1))
	switch {
	case err != nil:
		return nil, errors.New("standard input cannot be read")
	case int64(len(data)) > most:
		return nil, fmt.Errorf("standard input has more than %d bytes", most)
	}
	b, err := netlist.ReadText("-", data, opts)
	if err != nil {
		return nil, fmt.Errorf("standard input: %w", err)
	}
	return b, nil
}

// tellProblems writes what is wrong with a file that cannot be used.
func (s *streams) tellProblems(list []source.Problem) {
	for _, p := range list {
		fmt.Fprintf(s.err, "%s: %s\n", report.Place(p.Span), source.Visible(p.Message))
	}
}

// trouble tells that part of the job could not be done.
func (s *streams) trouble(err error) {
	fmt.Fprintf(s.err, "standoff: %s\n", source.Visible(err.Error()))
	s.status = exitFailed
}
