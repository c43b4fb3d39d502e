package main

import (
	"errors"
	"slices"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/status"
	"isofacet/io/outfile"
	"isofacet/io/readings"
)

var (
	errEachAndRound = errors.New("--each with --round: expected all rounds, or one")
	errNoRounds     = errors.New("--each round: no readings: expected some")
)

// forEach makes a command that reads readings run for every round when --each asks
// for it.
func (p *program) forEach(cmd *cobra.Command) {
	each := cmd.Flags().Lookup("each")
	if each == nil || cmd.RunE == nil {
		return
	}
	once := cmd.RunE
	cmd.RunE = func(cmd *cobra.Command, files []string) error {
		r, ok := eachOf(each.Value)
		switch {
		case !ok:
			return once(cmd, files)
		case cmd.Flags().Lookup("from") != nil:
			return status.Usage(errTwoSurfaces, "isofacet change --from round=A --to round=B compares two rounds of a file")
		case r.round.set:
			return status.Usage(errEachAndRound, "leave one of them out")
		case p.step != nil:
			return p.listRounds(cmd, r, files)
		}
		return p.runRounds(cmd)
	}
}

// listRounds reads the inputs and notes their rounds: each becomes a step.
func (p *program) listRounds(cmd *cobra.Command, r *reading, files []string) error {
	p.begin(cmd, &writing{})
	list, err := p.inputs(files)
	if err != nil {
		return err
	}
	if _, err := p.checkFiles(cmd); err != nil {
		return err
	}
	parts, err := p.step.shared.rounds(cmd.Context(), p, r, list)
	if err != nil {
		return err
	}
	parts = slices.DeleteFunc(slices.Clone(parts), chosenAway)
	if len(parts) == 0 {
		return status.With(status.WrongData, errNoRounds, "look at what was left out: isofacet inspect lists all")
	}
	p.step.rounds = true
	for _, part := range parts {
		p.step.roundNames = append(p.step.roundNames, part.Name)
	}
	return errChecked
}

// chosenAway reports a round of which the command line chose no reading.
func chosenAway(part readings.Part) bool {
	if part.Err != nil || part.Set.Len() > 0 || len(part.Set.Refused) > 0 {
		return false
	}
	return !slices.ContainsFunc(part.Set.LeftOut, func(l readings.LeftOut) bool { return !isChoice(l.Reason) })
}

// runRounds runs a command for every round.
func (p *program) runRounds(cmd *cobra.Command) error {
	p.begin(cmd, &writing{})
	b := &batch{program: p, shared: newSharedWork()}
	args := withoutOptions(p.args, changesNothing, switchNames(p.root))
	faults := b.plan(cmd.Context(), []*step{p.newStep("", args, b.shared)})
	if len(faults) > 0 {
		return b.refuse(faults, nil)
	}
	path := ""
	if f, ok := changedFlag(cmd, "record"); ok {
		path = f.Value.String()
	}
	return b.doRecorded(cmd, path)
}

// doRecorded runs the steps and writes the run record, failed steps or not.
func (b *batch) doRecorded(cmd *cobra.Command, path string) error {
	if path == "" {
		return b.do(cmd.Context())
	}
	var reads []string
	for _, s := range b.steps {
		reads = append(reads, s.reads...)
	}
	o := &outputs{ctx: cmd.Context(), p: b.program}
	defer o.abort()
	f, err := o.create("--record", path, outfile.Options{}, reads)
	if err != nil {
		return err
	}
	rec := record.New(cmd.Name())
	b.fillRecord(cmd, rec)
	worst := b.do(cmd.Context())
	if cmd.Context().Err() != nil {
		return worst
	}
	b.describe(rec)
	if err := rec.Write(f); err != nil {
		return err
	}
	if err := o.set.Commit(); err != nil {
		return err
	}
	return worst
}
