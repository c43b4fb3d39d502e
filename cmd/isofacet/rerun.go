package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"strings"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/status"
)

// expectation is what a run from a record has to come to.
type expectation struct {
	inputs, outputs []*record.File
}

// met compares a run with what was expected, before its outputs appear.
func (e *expectation) met(rec *record.Record) error {
	if err := compareFiles("input", e.inputs, rec.Stable.Inputs); err != nil {
		return err
	}
	return compareFiles("output", e.outputs, rec.Stable.Outputs)
}

func compareFiles(what string, want, got []*record.File) error {
	of := map[string]string{}
	for _, f := range got {
		of[f.Name] = f.SHA256
	}
	var faults []string
	for _, f := range want {
		sum, ok := of[f.Name]
		switch {
		case !ok:
			faults = append(faults, fmt.Sprintf("%s %s: is none of this run: expected it as the record has it", what, f.Name))
		case sum != f.SHA256:
			faults = append(faults, fmt.Sprintf("%s %s: SHA-256 %s: expected %s, as the record has it", what, f.Name, short(sum), short(f.SHA256)))
		}
	}
	if len(want) == len(got) && faults == nil {
		return nil
	}
	if faults == nil {
		faults = []string{fmt.Sprintf("%d %ss: expected %d, as the record has it", len(got), what, len(want))}
	}
	return status.With(status.WrongData, errors.New(strings.Join(faults, "\n")), "the files are left as they are; is it the version that wrote the record?")
}

// short is enough of a hash to tell it from another.
func short(sum string) string {
	if len(sum) > 16 {
		return sum[:16] + "..."
	}
	if sum == "" {
		return "of nothing"
	}
	return sum
}

// rerun runs what a record holds.
func (r *runCommand) rerun(cmd *cobra.Command) error {
	name := r.recordIn.text
	f, err := os.Open(name)
	if err != nil {
		return fileError(name, err)
	}
	defer f.Close()
	rec, err := record.Read(f)
	if err != nil {
		return status.With(status.WrongData, fmt.Errorf("%s: %w", name, err), "a run record is what --record writes; isofacet run --schema record describes it")
	}
	parts, err := r.recorded(name, rec)
	if err != nil {
		return err
	}
	if err := r.inputsUnchanged(name, parts); err != nil {
		return err
	}
	if v := buildVersion(); rec.Stable.Version != v.Version || rec.Stable.Commit != v.Commit {
		r.report.Warn("other-version", fmt.Sprintf("%s was written by version %s %s, this is %s %s", name, rec.Stable.Version, rec.Stable.Commit, v.Version, v.Commit))
	}
	b := &batch{program: r.program, shared: newSharedWork()}
	var steps []*step
	outputs := 0
	for _, one := range parts {
		s := r.newStep(one.Name, one.stable.Arguments, b.shared)
		s.out = io.Discard
		s.expect = &expectation{one.stable.Inputs, one.stable.Outputs}
		outputs += len(one.stable.Outputs)
		steps = append(steps, s)
	}
	if faults := b.plan(cmd.Context(), steps); len(faults) > 0 {
		return b.refuse(faults, nil)
	}
	if err := b.do(cmd.Context()); err != nil {
		return err
	}
	r.report.Note(fmt.Sprintf("the same bytes: %s of %s", counted(outputs, "output"), counted(len(parts), "task")), "outputs", outputs, "tasks", len(parts))
	return nil
}

// recordedTask is one command of a record.
type recordedTask struct {
	record.Task
	stable record.Stable
}

// recorded returns the commands of a record that were done.
func (r *runCommand) recorded(name string, rec *record.Record) ([]recordedTask, error) {
	one := recordedTask{record.Task{Name: rec.Stable.Command, State: "done"}, rec.Stable}
	all := []recordedTask{one}
	if len(rec.Stable.Tasks) > 0 {
		all = nil
		for _, t := range rec.Stable.Tasks {
			if t.State != "done" {
				r.report.Note(fmt.Sprintf("%s: %s when the record was made, left out: %s", t.Name, t.State, t.Fault), "task", t.Name)
				continue
			}
			one := recordedTask{Task: t}
			stable, err := record.ReadStable(t.Stable)
			if err != nil {
				return nil, status.With(status.WrongData, fmt.Errorf("%s: task %q: %w: expected the stable part of a run record", name, t.Name, err), "a run record is what --record writes")
			}
			one.stable = *stable
			all = append(all, one)
		}
	}
	v := r.vocabulary()
	for _, t := range all {
		if _, ok := v.Command(t.stable.Command); !ok || len(t.stable.Arguments) == 0 || t.stable.Arguments[0] != t.stable.Command {
			return nil, status.With(status.WrongData, fmt.Errorf("%s: command %q with the arguments %q: expected a command that makes outputs", name, t.stable.Command, strings.Join(t.stable.Arguments, " ")), "a run record is what --record writes")
		}
	}
	if len(all) == 0 {
		return nil, status.With(status.WrongData, fmt.Errorf("%s: no task that was done: expected one", name), "there is nothing to run again")
	}
	return all, nil
}

// inputsUnchanged compares the hashes of all inputs before anything is run.
func (r *runCommand) inputsUnchanged(name string, tasks []recordedTask) error {
	var hashes fileHashes
	var faults []string
	told := map[string]bool{}
	for _, t := range tasks {
		for _, in := range t.stable.Inputs {
			if in.Name == "-" || told[in.Name] {
				continue // standard input is compared when it has been read
			}
			told[in.Name] = true
			sum := hashes.hash(in.Name)
			if sum == "" {
				faults = append(faults, fmt.Sprintf("input %s: cannot be read: expected the file that %s names", in.Name, name))
			} else if sum != in.SHA256 {
				faults = append(faults, fmt.Sprintf("input %s: has changed: SHA-256 %s: expected %s, as %s has it", in.Name, short(sum), short(in.SHA256), name))
			}
		}
	}
	if faults == nil {
		return nil
	}
	return status.With(status.WrongData, errors.New(strings.Join(faults, "\n")), "nothing was run; run the command itself to make new outputs of new inputs")
}
