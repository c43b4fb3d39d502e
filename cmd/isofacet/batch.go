package main

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"path/filepath"
	"slices"
	"strings"
	"sync"

	"isofacet/cmd/internal/job"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/report"
	"isofacet/cmd/internal/status"
	"isofacet/io/outfile"
)

// A batch runs several steps in one process: everything is checked before the first
// of them; they run side by side within threads and memory; one that fails does not
// stop the others.
type batch struct {
	*program
	steps  []*step
	shared *sharedWork
	state  *job.State // nil: nothing is remembered
	redo   bool
	key    string // of this program's version, for the state
	hashes fileHashes

	results []result
	lone    []int // steps that were too big beside others
}

type outcome uint8

const (
	notRun outcome = iota
	stepDone
	stepUnchanged
	stepFailed
)

func (o outcome) String() string { return [...]string{"not run", "done", "unchanged", "failed"}[o] }

// A result is what became of a step.
type result struct {
	outcome outcome
	err     error
	stable  []byte
}

// newStep returns a step that runs beside others of this program.
func (p *program) newStep(name string, args []string, shared *sharedWork) *step {
	return &step{
		name: name, args: args, shared: shared, budget: p.budget, workers: p.workers(),
		format: report.Format(p.log.Word()), in: p.in, out: p.out,
	}
}

// A stepFault is what a check finds wrong with a step.
type stepFault struct {
	step *step
	err  error
}

// plan goes through all steps dry, makes one of every round of those that are to be
// done for each, and looks for outputs that clash.
func (b *batch) plan(ctx context.Context, steps []*step) []stepFault {
	var faults []stepFault
	for _, s := range steps {
		if err := s.check(ctx); err != nil {
			faults = append(faults, stepFault{s, err})
			continue
		}
		if !s.rounds {
			b.steps = append(b.steps, s)
			continue
		}
		for _, name := range s.roundNames {
			one := b.newStep(strings.TrimSpace(s.name+" "+name), slices.Concat(s.args[:1], []string{"--round=" + name}, withoutOption(s.args[1:], "each", switchNames(b.root))), b.shared)
			one.of = s
			if name == "" {
				one.name = strings.TrimSpace(s.name + " (no round)")
				one.failed = status.With(status.WrongData, errors.New("readings without a round: expected the name of one in every row"),
					"fill the column in, or leave such rows out with --only round='?*'")
			} else if err := one.check(ctx); err != nil {
				faults = append(faults, stepFault{one, err})
				continue
			}
			b.steps = append(b.steps, one)
		}
	}
	if ctx.Err() != nil {
		return []stepFault{{nil, ctx.Err()}}
	}
	if len(faults) == 0 {
		faults = b.clashes()
	}
	for _, s := range b.steps {
		b.shared.expect(s)
	}
	return faults
}

// clashes finds outputs that two steps make, or that one makes and another reads.
func (b *batch) clashes() []stepFault {
	var faults []stepFault
	by := map[string]*step{}
	var standard *step
	var reads []string
	for _, s := range b.steps {
		reads = append(reads, s.reads...)
	}
	for _, s := range b.steps {
		for _, path := range s.writes {
			whole, err := filepath.Abs(path)
			if err != nil {
				return []stepFault{{s, err}}
			}
			if other := by[whole]; other != nil {
				faults = append(faults, stepFault{s, status.Usage(fmt.Errorf("--out %q: made by %s as well: expected one output a file", path, other.name),
					"put {round} or {file} into the name, or give each its own")})
				continue
			}
			by[whole] = s
			if in, same := outfile.SameFile(path, reads...); same {
				faults = append(faults, stepFault{s, status.Usage(fmt.Errorf("--out %q: is %s, which another task reads: expected outputs that no task of the same run reads", path, in),
					"tasks run side by side: make it in a run of its own")})
			}
		}
		if s.toStandard {
			if standard != nil {
				faults = append(faults, stepFault{s, status.Usage(fmt.Errorf("--out %q: written by %s as well: expected one output there", "-", standard.name),
					"name files, with {round} in the name")})
			}
			standard = s
		}
	}
	return faults
}

// do runs the steps that are not done yet, and says what became of each.
func (b *batch) do(ctx context.Context) error {
	n := len(b.steps)
	b.results = make([]result, n)
	parallel := max(1, min(b.workers(), n))
	each := b.budget
	each.Bytes /= uint64(parallel)
	for _, s := range b.steps {
		s.workers, s.budget = max(1, b.workers()/parallel), each
	}
	finished := make([]chan struct{}, n)
	for i := range finished {
		finished[i] = make(chan struct{})
	}
	next := make(chan int)
	var workers sync.WaitGroup
	for range parallel {
		workers.Go(func() {
			for i := range next {
				b.one(ctx, i, parallel > 1)
				close(finished[i])
			}
		})
	}
	go func() {
		defer close(next)
		for i := range n {
			select {
			case next <- i:
			case <-ctx.Done():
				return
			}
		}
	}()
	progress, end := b.display.Stage("tasks")
	for i := range n {
		select {
		case <-finished[i]:
			if progress != nil {
				progress(i+1, n)
			}
			if b.results[i].outcome != notRun {
				b.tell(i)
			}
		case <-ctx.Done():
			workers.Wait()
			end()
			return ctx.Err()
		}
	}
	end()
	workers.Wait()
	for _, i := range b.lone {
		b.steps[i].workers, b.steps[i].budget = b.workers(), b.budget
		b.one(ctx, i, false)
		b.tell(i)
	}
	if err := ctx.Err(); err != nil {
		return err
	}
	return b.summary()
}

// one runs a step. One that is too big for its share of the memory waits until it can
// have all of it.
func (b *batch) one(ctx context.Context, i int, beside bool) {
	s, r := b.steps[i], &b.results[i]
	if s.failed != nil {
		*r = result{stepFailed, s.failed, nil}
		return
	}
	if b.state != nil && !b.redo {
		if e, ok := b.state.Done(s.name); ok && b.unchanged(s, e) {
			*r = result{stepUnchanged, nil, e.Stable}
			b.shared.done(s)
			return
		}
	}
	err := s.run(ctx)
	if code, _ := explain(err); err != nil && code == status.TooBig && beside {
		b.mu().Lock()
		b.lone = append(b.lone, i)
		b.mu().Unlock()
		return
	}
	b.shared.done(s)
	if err != nil {
		*r = result{stepFailed, err, nil}
		return
	}
	stable, err := json.Marshal(&s.record.Stable)
	s.record = nil
	if err == nil && b.state != nil {
		err = b.state.Add(job.Entry{Step: s.name, Key: b.stepKey(s), Stable: stable})
	}
	if err != nil {
		*r = result{stepFailed, err, nil}
		return
	}
	*r = result{stepDone, nil, stable}
}

func (b *batch) mu() *sync.Mutex { return &b.shared.mu }

// tell says what a step said, and what became of it.
func (b *batch) tell(i int) {
	s, r := b.steps[i], &b.results[i]
	// Words of tasks have their form already.
	io.WriteString(b.display, s.words.String()) // an error of standard error has nowhere to go
	switch r.outcome {
	case stepDone:
		b.report.Note(fmt.Sprintf("%s: done: %s", s.name, written(r.stable)), "task", s.name, "state", "done")
	case stepUnchanged:
		b.report.Note(fmt.Sprintf("%s: unchanged: %s", s.name, written(r.stable)), "task", s.name, "state", "unchanged")
	case stepFailed:
		code, hints := explain(r.err)
		report.For(s.name, b.display, s.format, bool(b.quiet)).Fail(r.err, hints, int(code))
	}
}

// written names the outputs of a step.
func written(stable []byte) string {
	var s struct{ Outputs []record.File }
	if err := json.Unmarshal(stable, &s); err != nil || len(s.Outputs) == 0 {
		return "no outputs"
	}
	var names []string
	for _, o := range s.Outputs {
		names = append(names, o.Name)
	}
	return strings.Join(names, ", ")
}

// summary counts what became of the steps; the highest exit status of those that
// failed is that of the run.
func (b *batch) summary() error {
	var count [4]int
	code := status.Done
	var failed []string
	for i, r := range b.results {
		count[r.outcome]++
		if r.outcome == stepFailed {
			c, _ := explain(r.err)
			code = max(code, c)
			failed = append(failed, b.steps[i].name)
		}
	}
	text := fmt.Sprintf("tasks: %d: %d done, %d unchanged, %d failed", len(b.results), count[stepDone], count[stepUnchanged], count[stepFailed])
	if count[stepDone] == 0 && failed != nil {
		text += ": nothing was written"
	}
	if count[stepUnchanged] == len(b.results) {
		text = fmt.Sprintf("nothing to do: %s unchanged", counted(len(b.results), "task"))
	}
	b.report.Note(text, "tasks", len(b.results), "done", count[stepDone], "unchanged", count[stepUnchanged], "failed", count[stepFailed])
	if failed == nil {
		return nil
	}
	const most = 10
	if n := len(failed) - most; n > 0 {
		failed = append(failed[:most], fmt.Sprintf("%d more", n))
	}
	return status.With(code, fmt.Errorf("%d of %d tasks failed: %s", count[stepFailed], len(b.results), listed(failed)), "what each said stands above; the outputs of the others are there")
}

// describe puts the tasks into a run record.
func (b *batch) describe(rec *record.Record) {
	for i, r := range b.results {
		t := record.Task{Name: b.steps[i].name, State: "done", Stable: r.stable}
		if r.outcome == stepFailed {
			t = record.Task{Name: b.steps[i].name, State: "failed", Fault: r.err.Error()}
		}
		rec.Stable.Tasks = append(rec.Stable.Tasks, t)
		if r.outcome == stepUnchanged {
			rec.ThisRun.Unchanged = append(rec.ThisRun.Unchanged, t.Name)
		}
	}
}

// memoryText describes the limit for a run record.
func (p *program) memoryText() string {
	return option.Size(p.budget.Bytes).String() + ", " + p.budget.Source
}
