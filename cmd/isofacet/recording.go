package main

import (
	"slices"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"isofacet/cmd/internal/record"
)

// changesNothing are the options that no result depends on; they stay out of the
// stable part of a run record.
var changesNothing = []string{"threads", "memory", "progress", "quiet", "log", "record"}

// startRecord begins the run record, if one is wanted.
func (p *program) startRecord(cmd *cobra.Command, w *writing) {
	p.stating = stating(cmd)
	if !w.record.set && p.step == nil && !w.statement.set {
		return
	}
	p.rec = record.New(cmd.Name())
	p.fillRecord(cmd, p.rec)
}

// fillRecord notes the version, the command line and the settings.
func (p *program) fillRecord(cmd *cobra.Command, rec *record.Record) {
	v := buildVersion()
	rec.Stable.Version, rec.Stable.Commit = v.Version, v.Commit
	rec.Stable.Arguments = withoutOptions(p.args, changesNothing, switchNames(p.root))
	rec.Stable.Rerun = record.Shell(append([]string{"isofacet"}, rec.Stable.Arguments...))
	cmd.Flags().VisitAll(func(f *pflag.Flag) {
		if f.Name == "help" || slices.Contains(changesNothing, f.Name) {
			return
		}
		value := f.Value.String()
		if value == "" {
			value = defaultText(f)
		}
		rec.Stable.Settings = append(rec.Stable.Settings, record.Setting{Option: f.Name, Value: value, Given: f.Changed})
	})
	rec.ThisRun.Arguments = p.args
	rec.ThisRun.Threads = p.workers()
	rec.ThisRun.Memory = p.memoryText()
}

// defaultText is what holds where an option has no value.
func defaultText(f *pflag.Flag) string {
	if d := f.Annotations["default"]; d != nil {
		return d[0]
	}
	return ""
}

// withoutOptions takes options, with their values, out of a command line.
func withoutOptions(args, names []string, switches map[string]bool) []string {
	var kept []string
	for i := 0; i < len(args); i++ {
		if args[i] == "--" {
			return append(kept, args[i:]...)
		}
		name, isOption := strings.CutPrefix(args[i], "--")
		name, _, joined := strings.Cut(name, "=")
		if !isOption || !slices.Contains(names, name) {
			kept = append(kept, args[i])
			continue
		}
		if !joined && !switches[name] {
			i++ // its value
		}
	}
	return kept
}

// recordReadings puts the account of the readings into the record.
func (p *program) recordReadings(list []*input, l *loaded) {
	if p.rec == nil {
		return
	}
	c := l.set.Counts
	p.rec.Stable.Readings = &record.Readings{
		Read: c.Read, Used: c.Used, Merged: c.Merged, LeftOut: c.LeftOut, Refused: c.Refused,
		NotUsed: p.notUsed(list, l.set),
	}
}

// recordInput adds an input to the record.
func (p *program) recordInput(in *input) {
	if p.rec != nil {
		p.rec.Stable.Inputs = append(p.rec.Stable.Inputs, in.file)
	}
}
