package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"slices"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"isofacet/cmd/internal/job"
	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/status"
)

const runLong = `Runs a job: many inputs and outputs, one list of settings, each surface made once.

A job file is TOML. [settings] holds what all tasks share, every [[task]] names a
command, its files and its options:

  [settings]
  columns = "id,x,y,z"
  [[task]]
  name    = "raster"
  command = "grid"
  files   = ["shots.csv"]
  cell    = 2
  out     = ["site.csv", "slope=slope.csv"]

Keys are the long options of the commands without their hyphens; a list stands for
an option given several times. File names are those of the folder that the program
is run in, as on the command line, not of the job's: go into its folder first.

Everything is checked before the first task: unknown keys, values, missing files,
outputs that clash. Then tasks run side by side within --threads and --memory. One
that fails does not stop the others; the exit status is the highest of all.

What is done is noted in JOB.toml.state. A later run leaves out what has the same
version, options and inputs and whose outputs are still there unchanged, so a run
that was interrupted goes on where it was.

With --record-in the commands of a run record run again, once the hashes of their
inputs are found to be the same. Outputs have to come to the same bytes; one that
does not is named, and its file is left as it is.`

const runExample = `isofacet run sample:landfill/heads.toml
isofacet run sample:landfill/heads.toml --task raster --record rasters.json
isofacet run --record-in rasters.json
isofacet run --schema job`

// newRun is "isofacet run".
func newRun(p *program) *cobra.Command {
	r := &runCommand{program: p}
	cmd := &cobra.Command{
		Use:     "run JOB.toml [options]",
		Short:   "many tasks from a job file, or again what a record holds",
		Long:    runLong,
		Example: runExample,
		RunE:    r.run,
	}
	r.tasks = parsedList[string]{form: "NAME", parse: func(s string) (string, error) { return s, nil }}
	r.recordIn, r.record, r.schema = typed{form: "FILE"}, typed{form: "FILE"}, parsed[string]{form: "job|record", parse: parseSchemaName}
	const group = "Job"
	fs := cmd.Flags()
	manual.Add(fs,
		manual.Option{Group: group, Name: "task", Value: &r.tasks, Repeatable: true, Default: "all tasks", Text: "run this task of the job only"},
		manual.Option{Group: group, Name: "redo", Value: &r.redo, Switch: true, Text: "run tasks that are done already and unchanged as well"},
		manual.Option{Group: group, Name: "record-in", Value: &r.recordIn, Text: "run again what this run record holds, and compare the bytes"},
		manual.Option{Group: group, Name: "schema", Value: &r.schema, Text: "write the JSON Schema of job files, or that of run records, and do nothing else"},
		manual.Option{Group: groupOutput, Name: "record", Value: &r.record, Text: recordText})
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

type runCommand struct {
	*program
	tasks    parsedList[string]
	redo     manual.Switch
	recordIn typed
	record   typed
	schema   parsed[string]
}

func parseSchemaName(text string) (string, error) {
	if text != "job" && text != "record" {
		return "", errors.New("one of job, record")
	}
	return text, nil
}

func (r *runCommand) run(cmd *cobra.Command, files []string) error {
	r.begin(cmd, &writing{})
	switch {
	case r.schema.text != "":
		text, err := r.schemaText()
		if err != nil {
			return err
		}
		_, err = r.out.Write(text)
		return err
	case r.recordIn.set && len(files) > 0:
		return status.Usage(errors.New("--record-in with a job: expected one of them"), "a record holds the commands itself")
	case r.recordIn.set && (r.record.set || len(r.tasks.values) > 0 || bool(r.redo)):
		return status.Usage(errors.New("--record-in with --record, --task or --redo: expected --record-in alone"), "the record holds what is to be run")
	case r.recordIn.set:
		return r.rerun(cmd)
	case len(files) != 1:
		return status.Usage(fmt.Errorf("%s: expected one job file", counted(len(files), "file")), "as in isofacet run quarter.toml; isofacet run --help describes it")
	}
	return r.runJob(cmd, files[0])
}

// vocabulary is what a job may say: the commands that make outputs, and their
// options but for those that concern the whole run.
func (p *program) vocabulary() *job.Vocabulary {
	v := &job.Vocabulary{}
	for _, cmd := range p.root.Commands() {
		if cmd.Flags().Lookup("out") == nil || !cmd.IsAvailableCommand() {
			continue
		}
		c := job.Command{Name: cmd.Name()}
		repeatable := manual.Repeatable(cmd.Flags())
		cmd.Flags().VisitAll(func(f *pflag.Flag) {
			if f.Name != "help" && !f.Hidden && !slices.Contains(ofTheRun, f.Name) {
				c.Options = append(c.Options, job.OptionOf(f, slices.Contains(repeatable, f.Name)))
			}
		})
		v.Commands = append(v.Commands, c)
	}
	return v
}

// ofTheRun are the options that are said to run, not to a task.
var ofTheRun = []string{"threads", "memory", "progress", "quiet", "log"}

// runJob runs the tasks of a job file.
func (r *runCommand) runJob(cmd *cobra.Command, name string) error {
	data, err := r.readJob(name)
	if err != nil {
		return err
	}
	v := r.vocabulary()
	j, err := job.Decode(name, data, v)
	if err != nil {
		return status.Usage(err, "keys are the long options of the commands: isofacet COMMAND --help lists them; isofacet run --schema job writes a schema for editors")
	}
	tasks, err := r.chosen(j)
	if err != nil {
		return err
	}
	r.warnUnused(j, v)
	b := &batch{program: r.program, shared: newSharedWork(), redo: bool(r.redo), key: versionKey()}
	var steps []*step
	of := map[*step]*job.Task{}
	for _, t := range tasks {
		c, _ := v.Command(t.Command)
		s := r.newStep(t.Name, taskArgs(j, t, &c), b.shared)
		steps, of[s] = append(steps, s), t
	}
	faults := b.plan(cmd.Context(), steps)
	if len(faults) == 0 {
		for _, s := range b.steps {
			if s.standard {
				faults = append(faults, stepFault{s, status.Usage(errors.New("reads standard input or writes to standard output: expected files for both"), `say files = ["..."] and out = ["..."]`)})
			}
		}
	}
	if len(faults) > 0 {
		besideTheJob(name, tasks, faults)
		return b.refuse(faults, func(f stepFault) error { return placed(j, of, f) })
	}
	if !strings.HasPrefix(name, samplePrefix) {
		if b.state, err = job.OpenState(name + ".state"); err != nil {
			return status.With(status.NotFinished, err, "move that file away: isofacet writes its own there")
		}
		defer b.state.Close()
	}
	return b.doRecorded(cmd, r.record.text)
}

// readJob reads the job file.
func (p *program) readJob(name string) ([]byte, error) {
	if sample, ok := strings.CutPrefix(name, samplePrefix); ok {
		return readSample(sample)
	}
	f, err := os.Open(name)
	if err != nil {
		return nil, fileError(name, err)
	}
	defer f.Close()
	data, err := io.ReadAll(io.LimitReader(f, job.Most+1))
	if err != nil {
		return nil, fileError(name, err)
	}
	return data, nil
}

// chosen returns the tasks to run.
func (r *runCommand) chosen(j *job.Job) ([]*job.Task, error) {
	var tasks []*job.Task
	var names []string
	for i := range j.Tasks {
		t := &j.Tasks[i]
		names = append(names, t.Name)
		if len(r.tasks.values) == 0 || slices.Contains(r.tasks.values, t.Name) {
			tasks = append(tasks, t)
		}
	}
	for _, name := range r.tasks.values {
		if !slices.Contains(names, name) {
			return nil, status.Usage(fmt.Errorf("--task %q: %s has none of that name: expected one of %s", name, j.Name, strings.Join(names, ", ")), "did you mean "+job.Nearest(name, names)+"?")
		}
	}
	return tasks, nil
}

// warnUnused tells of settings that no task's command takes.
func (r *runCommand) warnUnused(j *job.Job, v *job.Vocabulary) {
	for _, s := range j.Settings {
		used := false
		for _, t := range j.Tasks {
			c, _ := v.Command(t.Command)
			_, takes := c.Option(s.Option.Name)
			used = used || takes
		}
		if !used {
			r.report.Warn("unused-setting", fmt.Sprintf("%s:%d:%d: %s: no command of a task takes it", j.Name, s.At.Line, s.At.Column, s.Option.Name), "key", s.Option.Name)
		}
	}
}

// taskArgs is the command line of a task: the settings that its command takes and
// that it does not say itself, its own, and its files.
func taskArgs(j *job.Job, t *job.Task, c *job.Command) []string {
	args := []string{t.Command}
	add := func(s job.Setting) {
		for _, value := range s.Values {
			if s.Option.Kind == job.Switch && value.Text == "true" {
				args = append(args, "--"+s.Option.Name)
				continue
			}
			args = append(args, "--"+s.Option.Name+"="+value.Text)
		}
	}
	for _, s := range j.Settings {
		own := slices.ContainsFunc(t.Settings, func(o job.Setting) bool { return o.Option.Name == s.Option.Name })
		if o, takes := c.Option(s.Option.Name); takes && !own {
			s.Option = o
			add(s)
		}
	}
	for _, s := range t.Settings {
		add(s)
	}
	for _, f := range t.Files {
		name := f.Text
		if strings.HasPrefix(name, "-") && name != "-" {
			name = "./" + name
		}
		args = append(args, name)
	}
	return args
}

// placed puts the place in the job file in front of a fault.
func placed(j *job.Job, of map[*step]*job.Task, f stepFault) error {
	if f.step == nil {
		return f.err
	}
	s := f.step
	for s.of != nil {
		s = s.of
	}
	t := of[s]
	at := t.At
	text := f.err.Error()
	if rest, ok := strings.CutPrefix(text, "--"); ok {
		name, _, _ := strings.Cut(rest, " ")
		for _, list := range [][]job.Setting{j.Settings, t.Settings} { // the task's own count
			for _, setting := range list {
				if setting.Option.Name == name {
					at = valueAt(setting, text)
				}
			}
		}
	}
	for _, file := range t.Files {
		if strings.HasPrefix(text, file.Text+":") || strings.HasPrefix(text, fmt.Sprintf("%q", file.Text)) {
			at = file.At
		}
	}
	return fmt.Errorf("%s:%d:%d: task %q: %w", j.Name, at.Line, at.Column, f.step.name, f.err)
}

// valueAt returns where the value stands that a message names, or the first.
func valueAt(s job.Setting, text string) job.Position {
	for _, v := range s.Values {
		if strings.Contains(text, v.Text) {
			return v.At
		}
	}
	return s.Values[0].At
}
