package main

import (
	"cmp"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"isofacet/cmd/internal/job"
	"isofacet/cmd/internal/status"
)

// What is said of a batch that cannot begin.

// faultsMost is how many rounds of a task have their faults told one by one.
const faultsMost = 3

// tasksOf returns the steps whose rounds have faults, each once, in order.
func (b *batch) tasksOf(faults []stepFault) []*step {
	var list []*step
	for _, f := range faults {
		if f.step != nil && f.step.of != nil && !slices.Contains(list, f.step.of) {
			list = append(list, f.step.of)
		}
	}
	return list
}

func ofTask(s *step) string {
	if s.name == "" {
		return ""
	}
	return fmt.Sprintf(" of task %q", s.name)
}

// refuse reports every fault of a plan, and returns them as one error.
func (b *batch) refuse(faults []stepFault, place func(stepFault) error) error {
	code := status.Done
	var lines []string
	var hints []string
	shown := map[*step]int{} // faults of rounds, by their task
	for _, f := range faults {
		if f.step != nil && f.step.of != nil {
			if shown[f.step.of]++; shown[f.step.of] > faultsMost {
				continue // what is wrong with one round is mostly wrong with all
			}
		}
		err := f.err
		if place != nil {
			err = place(f)
		}
		c, h := explain(f.err)
		code = max(code, c)
		lines = append(lines, err.Error())
		for _, hint := range h {
			if !slices.Contains(hints, hint) {
				hints = append(hints, hint)
			}
		}
	}
	for _, s := range b.tasksOf(faults) {
		if more := shown[s] - faultsMost; more > 0 {
			lines = append(lines, fmt.Sprintf("and %s%s with a fault", counted(more, "more round"), ofTask(s)))
		}
	}
	if len(faults) == 1 && place == nil {
		return faults[0].err
	}
	return status.With(cmp.Or(code, status.WrongUsage), errors.New(strings.Join(lines, "\n")), hints...)
}

// besideTheJob says so when a file that is not there lies in the job file's folder:
// the names in a job are those of the folder that the program is run in.
func besideTheJob(name string, tasks []*job.Task, faults []stepFault) {
	folder := filepath.Dir(name)
	if folder == "." || strings.HasPrefix(name, samplePrefix) {
		return
	}
	for i, f := range faults {
		for _, t := range tasks {
			for _, file := range t.Files {
				if !strings.HasPrefix(f.err.Error(), file.Text+": no such file") || filepath.IsAbs(file.Text) {
					continue
				}
				if _, err := os.Stat(filepath.Join(folder, file.Text)); err == nil {
					code, _ := explain(f.err)
					faults[i].err = status.With(code, f.err, fmt.Sprintf("%s is there: names in a job are those of the folder that isofacet is run in, not of the job's: cd %s first",
						filepath.Join(folder, file.Text), folder))
				}
			}
		}
	}
}
