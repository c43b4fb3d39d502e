package main

import (
	"fmt"
	"runtime"
	"runtime/debug"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/memory"
	"isofacet/cmd/internal/method"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/progress"
	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/report"
	"isofacet/cmd/internal/status"
)

// running is how a command runs, whatever it does: what it may use and how it
// speaks.
type running struct {
	threads  option.Threads
	memory   option.Size
	progress option.Choice
	quiet    manual.Switch
	log      option.Choice
	warnings option.Choice

	step     *step    // what it is among several, nil for a command by itself
	args     []string // as given
	listMost int      // how many readings that are not used are named one by one
	rec      *record.Record
	stating  bool          // the arithmetic of levels is wanted for a method statement
	facts    *method.Facts // for a method statement, once they are known
	opened   []*input      // every file that is read, in the order of opening
	again    bool          // a file that was opened before may be read again
	root     *cobra.Command
	report   *report.Reporter
	display  *progress.Display
	budget   memory.Budget
	helpErr  error
}

const groupRunning = "Running"

// runningOptions returns the options of every command that does work.
func (r *running) runningOptions() []manual.Option {
	r.progress = option.NewChoice(string(progress.Auto), string(progress.Always), string(progress.Never))
	r.log = option.NewChoice(string(report.Text), string(report.JSON))
	r.warnings = option.NewChoice("keep", "fail")
	const group = groupRunning
	return []manual.Option{
		{Group: group, Name: "threads", Value: &r.threads, Text: "processors to use; the results do not depend on it", Default: "all"},
		{Group: group, Name: "memory", Value: &r.memory, Text: "memory to stay within; work that would not fit is refused", Default: "three quarters of what is free"},
		{Group: group, Name: "progress", Value: &r.progress, Text: "show how far the work has come; auto: on a terminal"},
		{Group: group, Name: "quiet", Value: &r.quiet, Switch: true, Text: "no notes, only warnings and errors"},
		{Group: group, Name: "log", Value: &r.log, Text: "how messages are written: lines for people, or an object a line"},
		{Group: group, Name: "warnings", Value: &r.warnings, Text: "keep: say them and go on; fail: write nothing and end with status 3"},
	}
}

// begin makes the settings of the command line hold.
//
// The runtime is given the memory budget, so that near it garbage is collected
// harder instead of more memory taken. How often it collects below that is left as
// it is: a run makes a few large arrays without pointers, and collecting at 100,
// 200, 400 or 800 percent took the same time for a million readings.
func (p *program) begin(cmd *cobra.Command, w *writing) {
	p.listMost = fewLines
	w.named(cmd)
	if p.step != nil {
		p.beginStep(cmd, w)
		return
	}
	if p.threads > 0 {
		runtime.GOMAXPROCS(int(p.threads))
	}
	p.budget = memory.Of(uint64(p.memory))
	debug.SetMemoryLimit(int64(p.budget.Bytes))
	mode := progress.Mode(p.progress.Word())
	p.display = progress.New(p.err, !bool(p.quiet) && progress.Shown(mode, p.err))
	p.report = report.New(p.display, report.Format(p.log.Word()), bool(p.quiet))
	p.startRecord(cmd, w)
}

// workers is the number of goroutines that a stage may use.
func (r *running) workers() int {
	if r.step != nil {
		return r.step.workers
	}
	return runtime.GOMAXPROCS(0)
}

// largeShare is the part of the budget from which on a piece of work is large
// enough to say what it needs before it starts.
const largeShare = 8

// announce states what a piece of work needs, if that is much, and refuses it if
// it is more than the run may use.
func (p *program) announce(work string, need uint64) error {
	if err := p.budget.Check(work, need); err != nil {
		return err
	}
	if need > p.budget.Bytes/largeShare {
		p.report.Note(fmt.Sprintf("memory: %s needs about %v of %v", work, option.Size(need), option.Size(p.budget.Bytes)),
			"work", work, "need_bytes", need, "limit_bytes", p.budget.Bytes)
	}
	return nil
}

// settleWarnings counts the warnings at the end of the work, before anything is
// written, and refuses to go on if they count as errors.
func (p *program) settleWarnings() error {
	n := len(p.report.Warnings())
	if n == 0 || p.warnings.Word() != "fail" {
		return nil
	}
	return status.With(status.WrongData, fmt.Errorf("%s: expected none under --warnings fail; nothing is written", counted(n, "warning")),
		"--warnings keep goes on in spite of them")
}

// counted returns "1 warning", "3 warnings".
func counted(n int, thing string) string {
	if n == 1 {
		return "1 " + thing
	}
	return fmt.Sprintf("%d %ss", n, thing)
}
