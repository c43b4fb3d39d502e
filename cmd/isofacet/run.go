package main

import (
	"context"
	"io"
	"time"

	"isofacet/cmd/internal/progress"
	"isofacet/cmd/internal/report"
	"isofacet/cmd/internal/status"
	"isofacet/io/outfile"
)

// streams are where a run reads and writes.
type streams struct {
	in       io.Reader
	out, err io.Writer
}

// grace is how long a run that was interrupted may take to end by itself. A
// stage looks up every few milliseconds; only a read from a pipe or a terminal
// that never comes can outlast it, and holds nothing that has to be put away.
const grace = 2 * time.Second

// run executes one command line and returns the exit status. It ends no process
// and touches no global state except the settings of the Go runtime, and the
// signals while it runs.
func run(args []string, s streams) int {
	ctx, stop := signalContext()
	defer stop()
	p := newProgram(s, args)

	ended := make(chan error, 1)
	go func() { ended <- p.execute(ctx, args) }()
	var err error
	select {
	case err = <-ended:
	case <-ctx.Done():
		select {
		case err = <-ended:
		case <-time.After(grace):
			err = context.Cause(ctx)
		}
	}
	// Whatever ended the run, nothing half written stays behind.
	outfile.RemoveTemporaries()
	if err != nil && ctx.Err() != nil {
		err = context.Cause(ctx) // what a stage makes of being stopped is not the reason
	}
	return p.end(err)
}

// end says why a run failed, if it did, and returns its exit status.
func (p *program) end(err error) int {
	p.display.Close()
	if err == nil {
		return int(status.Done)
	}
	code, hints := explain(err)
	if code == status.Done {
		return int(code) // a reader that has seen enough
	}
	p.report.Fail(err, hints, int(code))
	return int(code)
}

// newProgram returns a program that can report before its options are read.
func newProgram(s streams, args []string) *program {
	format := report.Text
	if wantsJSON(args) {
		format = report.JSON
	}
	display := progress.New(s.err, false)
	return &program{
		streams: s,
		running: running{args: args, display: display, report: report.New(display, format, false)},
	}
}

// wantsJSON looks for --log json before the options are read, so that a fault of
// the command line is reported in the form that the same command line asks for.
func wantsJSON(args []string) bool {
	for i, a := range args {
		if a == "--log=json" || a == "--log" && i+1 < len(args) && args[i+1] == "json" {
			return true
		}
	}
	return false
}
