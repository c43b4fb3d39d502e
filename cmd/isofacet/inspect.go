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
readings that each joins, show where the outline is not that of the survey.

Suspects lie off what the others around them make one expect: each reading is
expected from a surface without it, breaklines kept, and the scale is what readings
about it lie off (from the median, so that blunders do not count). What a blunder
makes of its neighbours does not count against them. A run is at least five shots in
succession that lie off by one amount; shots are in succession by the numbers that
end their ids, or as they come in the files if some id has none. Codes are named that
lie off the ground as a whole. Readings on the outline cannot be expected. Where heights
are as they were written, slips are named that would explain a suspect. Nothing is
corrected: --write-suspects writes a table in which a person decides, for --exclude.`

const inspectExample = `isofacet inspect sample:gravel-pit/shots.csv
isofacet inspect sample:gravel-pit/shots.csv --only code=GR --format json
isofacet inspect sample:gravel-pit/shots.csv --breaklines sample:gravel-pit/lines/breaklines.csv --boundary sample:gravel-pit/lines/boundary.csv
isofacet inspect sample:gravel-pit/shots.csv --without code=BP --write-suspects suspects.csv
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
	var s suspecting
	cmd := &cobra.Command{
		Use:     "inspect [options] [FILE...]",
		Short:   "what the readings hold, and which settings suit them",
		Long:    inspectLong,
		Example: inspectExample,
		RunE:    func(cmd *cobra.Command, files []string) error { return p.inspect(cmd, &r, &s, &w, files) },
	}
	fs := cmd.Flags()
	manual.Add(fs, s.suspectOptions()...)
	manual.Add(fs, r.readingOptions()...)
	manual.Add(fs, w.writingOptions([]string{"report"}, []string{formatText, formatJSON})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

func (p *program) inspect(cmd *cobra.Command, r *reading, s *suspecting, w *writing, files []string) error {
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
	table, err := out.openSuspects(s, p.paths())
	if err != nil {
		return err
	}

	l, err := p.load(cmd.Context(), r, list)
	if err != nil {
		return err
	}
	finding, err := p.find(l, r, w)
	if err != nil {
		return err
	}
	if finding.Suspects, err = p.suspects(cmd.Context(), l, r, s, w); err != nil {
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
	if err := finding.Suspects.writeTable(table, l, r); err != nil {
		return err
	}
	return out.commit()
}
