package main

import (
	"math"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/manual"
)

const inspectLong = `Looks at readings before anything is made of them: how many there are and what
became of each, where they lie, how far apart they stand, which surface they
make. Suggests a cell for rasters, an interval for isolines and a limit for the
length of edges, each with its reason.

How the text was read, and every reading that is not used with its file, line
and reason, goes to standard error. What goes to standard output does not depend
on the order of the readings.

The spacing is the median length of the edges between neighbouring readings.
Flat triangles have three equal heights: where they are no real flats, a line
along the crest or valley is missing. Slivers and the longest edges, with the two
readings that each joins, show where the outline is not that of the survey.`

const inspectExample = `isofacet inspect sample:gravel-pit/shots.csv
isofacet inspect sample:gravel-pit/shots.csv --only code=GR --format json
isofacet inspect sample:gravel-pit/shots.csv --breaklines sample:gravel-pit/lines/breaklines.csv --boundary sample:gravel-pit/lines/boundary.csv
isofacet inspect sample:landfill/heads-2024-q1.csv`

// The formats of inspect.
const (
	formatText = "text"
	formatJSON = "json"
)

// newInspect is "isofacet inspect".
func newInspect(p *program) *cobra.Command {
	var r reading
	var w writing
	cmd := &cobra.Command{
		Use:     "inspect [options] [FILE...]",
		Short:   "what the readings hold, and which settings suit them",
		Long:    inspectLong,
		Example: inspectExample,
		RunE:    func(cmd *cobra.Command, files []string) error { return p.inspect(cmd, &r, &w, files) },
	}
	fs := cmd.Flags()
	manual.Add(fs, r.readingOptions()...)
	manual.Add(fs, w.writingOptions([]string{"report"}, []string{formatText, formatJSON})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

func (p *program) inspect(cmd *cobra.Command, r *reading, w *writing, files []string) error {
	p.begin(cmd, w)
	p.listMost = math.MaxInt
	list, err := p.inputs(files)
	if err != nil {
		return err
	}
	named := byExtensions(map[string]string{".txt": formatText, ".json": formatJSON})
	dests, err := w.destinations("report", files, named, formatText)
	if err != nil {
		return err
	}
	out, err := p.open(cmd.Context(), w, dests, p.paths())
	if err != nil {
		return err
	}
	defer out.abort()

	l, err := p.load(cmd.Context(), r, list)
	if err != nil {
		return err
	}
	finding, err := p.find(l, r, w)
	if err != nil {
		return err
	}
	p.tellSurface(l)
	if err := p.settleWarnings(); err != nil {
		return err
	}
	finding.Warnings = p.report.Warnings()
	if p.rec != nil {
		p.recordReadings(list, l)
		p.rec.Stable.Result = finding
	}
	for _, d := range out.list {
		err := out.write(d, func(d *destination) error {
			if d.format == formatJSON {
				return finding.writeJSON(d.w)
			}
			return finding.writeText(d.w, l, r)
		})
		if err != nil {
			return err
		}
	}
	return out.commit()
}
