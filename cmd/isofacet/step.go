package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"isofacet/cmd/internal/memory"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/progress"
	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/report"
	"isofacet/cmd/internal/status"
	"isofacet/io/outfile"
)

// A step is one command line among several that run in one process: of a job, or of
// the rounds of one command. It runs like a program of its own, but what it says is
// collected, surfaces are shared, and it can be gone through dry: up to the point
// where outputs would be begun, to see whether anything is wrong with it.
type step struct {
	name string
	args []string // command, options, files

	shared  *sharedWork
	budget  memory.Budget
	workers int
	format  report.Format
	in      io.Reader
	out     io.Writer

	dry    bool
	expect *expectation // of a run from a record

	// What a dry run finds.
	cmd      *cobra.Command
	writes   []string // outputs, - left out
	reads    []string // inputs on the disk
	options  string   // which of them say how readings are read
	surface  string   // which surface it asks for
	rounds   bool     // it is to be done for every round
	standard bool     // it reads standard input or writes to standard output

	toStandard bool     // it writes to standard output
	roundNames []string // if it is to be done for every round
	of         *step    // the step of which this is a round
	failed     error    // known before it is run

	// What a run leaves.
	words  bytes.Buffer
	record *record.Record
}

// errChecked ends a dry run in which nothing was found wrong.
var errChecked = errors.New("checked")

// check goes through the step dry.
func (s *step) check(ctx context.Context) error {
	s.dry = true
	defer func() { s.dry = false }()
	err := s.run(ctx)
	if errors.Is(err, errChecked) {
		return nil
	}
	if err == nil {
		return status.Usage(fmt.Errorf("%s makes no outputs: expected a command that does", s.args[0]), "tasks are commands with an --out")
	}
	return err
}

// run runs the step and returns why it failed.
func (s *step) run(ctx context.Context) error {
	s.words.Reset()
	display := progress.New(io.Discard, false)
	p := &program{
		streams: streams{s.in, s.out, &s.words},
		running: running{args: s.args, display: display, report: report.For(s.name, &s.words, s.format, true), step: s},
	}
	err := p.execute(ctx, s.args)
	if err == nil && p.rec != nil {
		s.record = p.rec
	}
	return err
}

// beginStep makes the settings of a step hold: what concerns the whole process is
// the run's.
func (p *program) beginStep(cmd *cobra.Command, w *writing) {
	s := p.step
	s.cmd = cmd
	p.budget = s.budget
	s.options = readingKey(cmd)
	names := cmd.Flags().Args()
	if len(names) == 0 {
		names = []string{"-"}
	}
	s.surface = strings.Join(names, "\x00") + "\x00" + s.options
	p.startRecord(cmd, w)
}

// checkOutputs is what a dry run does in place of beginning its outputs.
func (p *program) checkOutputs(w *writing, list []*destination) error {
	s := p.step
	s.writes, s.standard, s.toStandard = nil, false, false
	reads, err := p.checkFiles(s.cmd)
	if err != nil {
		return err
	}
	s.reads = append(p.paths(), reads...)
	for _, in := range p.opened {
		s.standard = s.standard || in.file.Name == "-"
	}
	add := func(option, path string) error {
		if path == "-" {
			s.standard, s.toStandard = true, true
			return nil
		}
		if in, same := outfile.SameFile(path, s.reads...); same {
			return status.Usage(fmt.Errorf("%s %q: is the input %s as well: expected another file", option, path, in),
				"an output may not take the place of what it is made from: name another file")
		}
		if err := writable(option, path); err != nil {
			return err
		}
		s.writes = append(s.writes, path)
		return nil
	}
	for _, d := range list {
		if err := add("--out", d.path); err != nil {
			return err
		}
		if family(d.format) == formatRaw && d.path != "-" {
			if err := add("--out", besidePath(d.path)); err != nil {
				return err
			}
		}
	}
	for _, extra := range w.extras() {
		if err := add(extra.option, extra.path); err != nil {
			return err
		}
	}
	return errChecked
}

// writable refuses what is sure to fail: a folder that is not there, an output that
// is a folder.
func writable(option, path string) error {
	info, err := os.Stat(filepath.Dir(path))
	if errors.Is(err, fs.ErrNotExist) || err == nil && !info.IsDir() {
		return status.With(status.NotFinished, fmt.Errorf("%s %q: no such folder: expected one that exists", option, path), "make it first: mkdir -p "+filepath.Dir(path))
	}
	if info, err := os.Stat(path); err == nil && info.IsDir() {
		return status.Usage(fmt.Errorf("%s %q: is a folder: expected a file", option, path), "name a file in it")
	}
	return nil
}

// checkFiles looks for the files that options name beside the command's own.
func (p *program) checkFiles(cmd *cobra.Command) (paths []string, err error) {
	cmd.Flags().VisitAll(func(f *pflag.Flag) {
		if err != nil || !f.Changed || slices.Contains(writesFile, f.Name) || !strings.Contains(f.Value.Type(), "FILE") {
			return
		}
		for _, name := range fileNames(f.Value) {
			if name == "-" || strings.HasPrefix(name, samplePrefix) {
				continue
			}
			info, e := os.Stat(name)
			switch {
			case e != nil:
				err = fmt.Errorf("--%s %w", f.Name, fileError(name, e))
			case info.IsDir():
				err = status.With(status.NotFinished, fmt.Errorf("--%s %s: is a folder: expected a file", f.Name, name), "name a file in it")
			default:
				paths = append(paths, name)
			}
		}
	})
	return paths, err
}

// writesFile are the options whose FILE is an output.
var writesFile = []string{"out", "record", "method-statement", "write-suspects"}

// fileNames returns the names that an option of files holds.
func fileNames(v pflag.Value) []string {
	switch v := option.Inner(v).(type) {
	case *typed:
		if v.set {
			return []string{v.text}
		}
	case *parsedList[string]:
		return v.values
	}
	return nil
}
