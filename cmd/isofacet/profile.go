package main

import (
	"context"
	"errors"
	"fmt"
	"slices"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/advice"
	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/io/readings"
)

const profileLong = `The surface along lines: a row for every place where the line meets an edge, a
vertex or the end of the surface, and for every bend of the line. Between two rows
the surface is straight, so the rows are the whole profile. Each has the station
(distance along the line), the height, and the grade (rise over run, in the line's
direction) of the piece ahead; ahead says what follows: surface, gap or end.
Where the line leaves the surface a gap begins; gaps are told with their stations.

--along takes a file of lines (GeoJSON, or text with the columns line, x and y) or
places typed in quotes. --sections D cuts across the line: at its ends and at every
whole multiple of D, square to it, --left and --right so far; at a bend along the
bisector. Offsets are distances from the line, negative on the left. Sections that
meet on the inside of a bend are told: what lies beyond is cut twice.

--at writes where places lie beside the line: station, offset, left or right, and
the surface's height. --also puts a second surface on the same profile, read like
the first; breaklines, boundary, voids, code table and exclusions are the first's
alone.

There are three parts: profile, sections, places. Formats by extension: .csv,
.geojson (a line for every stretch with surface, with heights) and .svg, drawn with
stations, elevations and the exaggeration. The last is a quick look and no sheet.

Between readings the surface is a straight guess, and nobody has measured along the
line unless readings lie on it. Do not dig by a profile: have buried lines marked
first. A licensed person signs what others rely on.`

const profileExample = `isofacet profile sample:gravel-pit/shots.csv --without code=BP --along "431250,5621450 431400,5621600"
isofacet profile sample:gravel-pit/shots.csv --along "431250,5621450 431400,5621600" --out pit.svg
isofacet profile sample:gravel-pit/shots.csv --along sample:gravel-pit/lines/breaklines.csv --out along.geojson
isofacet profile sample:gravel-pit/shots.csv --along "431250,5621450 431400,5621600" --sections 25 --left 30 --right 30 --out sections=sections.csv`

// What options of lines to follow mean, in every command.
const (
	alongText  = "the line: a file of lines, or its places in quotes"
	acrossText = "distance of sections square to the line of --along"
	leftText   = "how far sections reach to the left of the line"
	rightText  = "how far sections reach to the right of the line"
)

// The parts of profiles.
const (
	partProfile  = "profile"
	partSections = "sections"
	partPlaces   = "places"
)

// newProfile is "isofacet profile".
func newProfile(p *program) *cobra.Command {
	c := &profileCommand{program: p}
	cmd := &cobra.Command{
		Use:     "profile --along LINE [options] [FILE...]",
		Short:   "the surface along a line, every break of grade",
		Long:    profileLong,
		Example: profileExample,
		RunE:    c.run,
	}
	zero := decimal.FromInt(0)
	c.sections, c.left, c.right = option.Number{Least: &zero}, option.Number{Least: &zero}, option.Number{Least: &zero}
	c.atColumns = parsed[readings.Columns]{form: "LIST", parse: readings.ParseColumns}
	c.also = parsedList[string]{form: "FILE", parse: func(text string) (string, error) { return text, nil }}
	const group = "Lines to follow"
	fs := cmd.Flags()
	manual.Add(fs,
		manual.Option{Group: group, Name: "along", Value: &c.along, Text: alongText},
		manual.Option{Group: group, Name: "station-from", Value: &c.stationFrom, Default: "0", Text: "station of the line's beginning"},
		manual.Option{Group: group, Name: "sections", Value: &c.sections, Default: "none", Text: acrossText},
		manual.Option{Group: group, Name: "left", Value: &c.left, Default: "0", Text: leftText},
		manual.Option{Group: group, Name: "right", Value: &c.right, Default: "0", Text: rightText},
		manual.Option{Group: group, Name: "at", Value: &c.at, Repeatable: true, Text: "a place, or a file of places, - for standard input"},
		manual.Option{Group: group, Name: "at-columns", Value: &c.atColumns, Default: "the header's words",
			Text: "what the columns of the file of places hold, like --columns"},
		manual.Option{Group: group, Name: "also", Value: &c.also, Repeatable: true, Text: "readings of another surface for the same profile"})
	manual.Add(fs, c.reading.readingOptions()...)
	manual.Add(fs, c.writing.writingOptions([]string{partProfile, partSections, partPlaces}, []string{formatCSV, formatGeoJSON, formatSVG})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

type profileCommand struct {
	*program
	reading
	writing
	asking
	along       option.Along
	stationFrom option.Number
	sections    option.Number
	left, right option.Number
	also        parsedList[string]
}

func (c *profileCommand) run(cmd *cobra.Command, files []string) error {
	c.begin(cmd, &c.writing)
	if err := c.check(files); err != nil {
		return err
	}
	list, err := c.inputs(files)
	if err != nil {
		return err
	}
	dests, err := c.dests(files)
	if err != nil {
		return err
	}
	asked, err := c.askedInput(c.program)
	if err != nil {
		return err
	}
	job := &profiling{profileCommand: c}
	follow, others, err := c.moreInputs()
	if err != nil {
		return err
	}
	out, err := c.open(cmd.Context(), &c.writing, dests, c.paths())
	if err != nil {
		return err
	}
	defer out.abort()
	// Lines and places are read first: they are few, and a fault in them should not
	// show only after the readings have been worked on.
	if err := job.readLines(cmd.Context(), follow); err != nil {
		return err
	}
	if len(c.asking.at.Places)+len(c.asking.at.Files) > 0 {
		if job.places, err = c.asking.places(cmd.Context(), c.program, asked, bool(c.lenient), besideNames); err != nil {
			return err
		}
	}
	if err := c.loadSurfaces(cmd.Context(), job, list, others); err != nil {
		return err
	}
	if err := job.layLines(); err != nil {
		return err
	}
	return job.make(cmd.Context(), list, out)
}

// moreInputs names the files of lines and of other surfaces.
func (c *profileCommand) moreInputs() (follow *input, others [][]*input, err error) {
	if c.along.File != "" {
		if follow, err = c.input(c.along.File); err != nil {
			return nil, nil, err
		}
	}
	for _, name := range c.also.values {
		in, err := c.input(name)
		if err != nil {
			return nil, nil, err
		}
		others = append(others, []*input{in})
	}
	return follow, others, nil
}

// loadSurfaces makes the surfaces, the main one first.
func (c *profileCommand) loadSurfaces(ctx context.Context, job *profiling, list []*input, others [][]*input) error {
	for i, in := range append([][]*input{list}, others...) {
		r := &c.reading
		if i > 0 {
			plain := c.reading
			plain.edges.breaklines.values, plain.edges.boundary.values, plain.edges.voids.values = nil, nil, nil
			plain.edges.codeTable, plain.exclude = typed{}, typed{}
			plain.edges.table, plain.edges.codes = nil, nil
			plain.fit, plain.fitWithin = typed{}, option.Number{} // it is made already
			r = &plain
			c.report.Note("also: " + in[0].Name)
		}
		c.again = i > 0 // tables of wells and of status words hold for all
		l, err := c.load(ctx, r, in)
		c.again = false
		if err != nil {
			return err
		}
		if err := l.needsTriangles(); err != nil {
			return err
		}
		c.tellSurface(l)
		job.surfaces = append(job.surfaces, &profiled{l: l, name: l.title()})
	}
	main := job.surfaces[0].l
	c.warnOfLongOutline(main, advice.MaxEdge(advice.Spacing(main.surface.Mesh(), c.workers())))
	return nil
}

// profiled is a surface with its name on the profile.
type profiled struct {
	l    *loaded
	name string
}

func (s *profiled) surface() *interp.Surface { return s.l.surface }

// check refuses what can be refused before anything is read.
func (c *profileCommand) check(files []string) error {
	stdin := len(files) == 0 || slices.Contains(files, "-")
	sides := c.left.Value.Sign() + c.right.Value.Sign()
	switch {
	case !c.along.IsSet():
		return status.Usage(errors.New("--along is missing: expected a file of lines, or the places of a line"), `as in --along "431250,5621450 431400,5621600"`)
	case c.along.File == "-" && stdin:
		return status.Usage(errors.New(`--along "-": standard input holds the readings: expected one of the two from a file`), "name the file of readings")
	case c.sections.IsSet() && c.sections.Value.Sign() == 0:
		return status.Usage(errors.New("--sections 0: expected a distance above zero"), "as in --sections 25")
	case c.sections.IsSet() && sides == 0:
		return status.Usage(errors.New("--sections without --left and --right: expected how far sections go to the sides"), "as in --left 20 --right 20")
	case !c.sections.IsSet() && (c.left.IsSet() || c.right.IsSet()):
		return status.Usage(errors.New("--left and --right without --sections: expected the distance of sections"), "as in --sections 25")
	}
	return c.asking.check(stdin)
}

// dests works out where everything goes; every part needs what it shows.
func (c *profileCommand) dests(files []string) ([]*destination, error) {
	usual := partProfile
	asked := len(c.asking.at.Places)+len(c.asking.at.Files) > 0
	switch {
	case c.sections.IsSet():
		usual = partSections
	case asked:
		usual = partPlaces
	}
	named := byExtensions(map[string]string{".csv": formatCSV, ".geojson": formatGeoJSON, ".svg": formatSVG})
	dests, err := c.destinations(usual, files, named, formatCSV)
	if err != nil {
		return nil, err
	}
	has := func(part string) bool {
		return slices.ContainsFunc(dests, func(d *destination) bool { return d.part == part })
	}
	switch {
	case has(partSections) && !c.sections.IsSet():
		return nil, status.Usage(errors.New("--out sections= without --sections: expected the distance of sections"), "as in --sections 25 --left 20 --right 20")
	case !has(partSections) && c.sections.IsSet():
		return nil, status.Usage(errors.New("--sections without an output for them: expected --out sections=FILE"), "add one, or leave --sections out")
	case has(partPlaces) && !asked:
		return nil, status.Usage(errors.New("--out places= without --at: expected places"), "as in --at 431300,5621500")
	case !has(partPlaces) && asked:
		return nil, status.Usage(errors.New("--at without an output for places: expected --out places=FILE"), "add one, or leave --at out")
	}
	for _, d := range dests {
		if d.part == partPlaces && d.format == formatSVG {
			return nil, status.Usage(fmt.Errorf("--out places=%s: expected .csv or .geojson: places are no drawing", d.path), "draw the profile: --out profile=FILE.svg")
		}
	}
	return dests, nil
}
