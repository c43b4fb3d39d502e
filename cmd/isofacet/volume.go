package main

import (
	"errors"
	"fmt"
	"path/filepath"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/io/units"
)

const volumeLong = `Says what must be taken away (cut) and brought in (fill) to get from one surface to
another: exact integrals of the planes, with plan and slope areas, and the share of
the area that both cover. Nothing is counted where only one of them is.

--from and --to are each a file of readings; triangles, as isofacet triangles writes
them (GeoJSON, or the table of triangles with --from-vertices or --to-vertices); a
raster (a CSV or raw file as isofacet grid writes it, its squares cut in two from
north west to south east); or level=Z. Where options say how readings are read, and
what lines and limits they have, they hold for both. A surface with lines of its own
is best written by isofacet triangles first.

--inside FILE measures within polygons, one by one, each by its name. --toe FILE
measures piles and pits: from a base within each ring to the surface --to. The base is
a level, the least squares plane through the ring's vertices, or triangles between
them; the ring's heights are its own, or else the surface's.

--stage-step D adds a table of the area and the volume below and above each level of
the surface, with the figures that average end areas and cones would give. --sections
D cuts square to the line --along and adds average end area and prismoidal volumes.
Both are approximations, printed beside the exact integral.

--sigma S is the standard uncertainty of every height; that of the volumes follows in
closed form, heights taken as independent. --simulate N draws all heights N times as a
check.

--out raster=FILE, lines=FILE and bands=FILE draw the difference, to minus from:
positive is a rise. The line of 0 parts cut from fill.

Volumes rest on the surfaces named and their outlines; the uncertainty is from the
heights alone, not from what nobody measured between them. Payment, licensing and safety
of earthworks follow local rules: a licensed professional signs. Have buried
lines marked before anyone digs.`

const volumeExample = `isofacet volume --from level=205 --to sample:gravel-pit/shots.csv --without code=BP
isofacet volume --to sample:gravel-pit/shots.csv --without code=BP --toe sample:gravel-pit/lines/stockpile-toe.csv --toe-base plane
isofacet volume --to sample:gravel-pit/shots.csv --without code=BP --stage-step 2 --format csv --out stages=-
isofacet volume --from sample:landfill/heads-2024-q1.csv --to level=100 --format json`

// newVolume is "isofacet volume".
// What the two sides are, in every command.
const (
	beforeText = "what was before: a file, or where the command takes them level=Z or round=NAME"
	afterText  = "what is after: the same"
)

func newVolume(p *program) *cobra.Command {
	c := &volumeCommand{program: p, grid: &gridCommand{program: p}, contour: &contourCommand{program: p}}
	cmd := &cobra.Command{
		Use:     "volume --from A --to B [options]",
		Short:   "what must be taken away and brought in to get from one surface to another",
		Long:    volumeLong,
		Example: volumeExample,
		Args:    noArguments,
		RunE:    func(cmd *cobra.Command, _ []string) error { return c.run(cmd) },
	}
	fs := cmd.Flags()
	manual.Add(fs, c.options()...)
	manual.Add(fs, c.reading.readingOptions()...)
	manual.Add(fs, c.writing.writingOptions(volumeParts, []string{formatText, formatCSV, formatJSON, formatGeoJSON, formatSVG, formatRaw, formatRaw32, formatPNG})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

// What volume writes; also the parts of --out.
const (
	partFigures = "figures"
	partStages  = "stages"
	partRaster  = "raster"
)

var volumeParts = []string{partFigures, partStages, partSections, partRaster, partLines, partBands}

// volumeFormats are the formats of each part.
var volumeFormats = map[string][]string{
	partFigures:  {formatText, formatCSV, formatJSON},
	partStages:   {formatCSV, formatText},
	partSections: {formatCSV, formatText},
	partRaster:   {formatCSV, formatRaw, formatRaw32, formatPNG},
	partLines:    {formatGeoJSON, formatCSV, formatSVG},
	partBands:    {formatGeoJSON, formatCSV, formatSVG},
}

type volumeCommand struct {
	*program
	reading
	writing
	grid    *gridCommand    // of the raster
	contour *contourCommand // of lines and bands

	from, to                 typed
	fromVertices, toVertices typed
	inside                   parsedList[string]
	toe                      parsedList[string]
	toeBase                  parsed[toeBase]
	stageStep                option.Number
	sections                 option.Number
	along                    option.Along
	left, right              option.Number
	heightSigma              option.Number
	volumeUnit               parsed[units.Volume]
	areaUnit                 parsed[units.Area]
	simulate                 parsed[int]
	noData                   option.Number
}

func (c *volumeCommand) options() []manual.Option {
	zero := decimal.FromInt(0)
	name := func(text string) (string, error) { return text, nil }
	c.from, c.to = typed{form: "A"}, typed{form: "B"}
	c.fromVertices, c.toVertices = typed{form: "FILE"}, typed{form: "FILE"}
	c.inside = parsedList[string]{form: "FILE", parse: name}
	c.toe = parsedList[string]{form: "FILE", parse: name}
	c.toeBase = parsed[toeBase]{form: "level=Z|plane|ring", parse: parseToeBase}
	c.left, c.right = option.Number{Least: &zero}, option.Number{Least: &zero}
	c.heightSigma = option.Number{Least: &zero}
	c.simulate = parsed[int]{form: "N", parse: parseDraws}
	c.volumeUnit = parsed[units.Volume]{form: "m3|ft3|yd3|acre-ft", parse: units.ParseVolume}
	c.areaUnit = parsed[units.Area]{form: "m2|ft2|ha|acre", parse: units.ParseArea}
	const sides, where, more, maps = "Surfaces", "Where", "Tables and uncertainty", "Maps of the difference"
	list := []manual.Option{
		{Group: sides, Name: "from", Value: &c.from, Text: beforeText},
		{Group: sides, Name: "to", Value: &c.to, Text: afterText},
		{Group: sides, Name: "from-vertices", Value: &c.fromVertices, Text: "the table of vertices that goes with a table of triangles in --from"},
		{Group: sides, Name: "to-vertices", Value: &c.toVertices, Text: "the table of vertices that goes with a table of triangles in --to"},
		{Group: sides, Name: "no-data", Value: &c.noData, Default: "an empty field; NaN in raw files", Text: "number that stands for no value"},
		{Group: where, Name: "inside", Value: &c.inside, Repeatable: true, Text: "polygons within which to measure, one by one"},
		{Group: where, Name: "toe", Value: &c.toe, Repeatable: true, Text: "rings at the foot of piles, or along the crest of pits"},
		{Group: where, Name: "toe-base", Value: &c.toeBase, Text: "what --toe measures from: a level, the plane through the ring's vertices, or triangles between them"},
		{Group: more, Name: "stage-step", Value: &c.stageStep, Text: "table of area and volume by level, at multiples of this step"},
		{Group: more, Name: "sections", Value: &c.sections, Text: acrossText},
		{Group: more, Name: "along", Value: &c.along, Text: alongText},
		{Group: more, Name: "left", Value: &c.left, Default: "as far as the surfaces reach", Text: leftText},
		{Group: more, Name: "right", Value: &c.right, Default: "as far as the surfaces reach", Text: rightText},
		{Group: more, Name: "sigma", Value: &c.heightSigma, Text: sigmaOptionText},
		{Group: more, Name: "simulate", Value: &c.simulate, Text: "draw all heights so many times, as a check of the uncertainty"},
	}
	list = append(list,
		manual.Option{Group: more, Name: "volume-unit", Value: &c.volumeUnit, Default: "that of x, y and z",
			Text: "unit of volumes; feet, yards and acres are of the foot that --xy-unit names, international with metres"},
		manual.Option{Group: more, Name: "area-unit", Value: &c.areaUnit, Default: "that of x and y", Text: "unit of areas, likewise"},
	)
	for _, o := range slices.Concat(c.grid.options(), c.contour.options()) {
		if slices.Contains([]string{"cell", "extent", "extent-outward", "values-at", "layout", "interval", "count-from", "levels", "index-every", "shortest"}, o.Name) {
			o.Group = maps
			list = append(list, o)
		}
	}
	return list
}

func parseDraws(text string) (int, error) {
	n, err := decimal.Parse(text)
	if err != nil || n.Decimals() > 0 || n.Cmp(decimal.FromInt(2)) < 0 || n.Cmp(decimal.FromInt(1000000)) > 0 {
		return 0, errors.New("a whole number from 2 to 1000000")
	}
	return int(n.Float64()), nil
}

// run is the command: two sides, regions, figures, tables, maps.
func (c *volumeCommand) run(cmd *cobra.Command) error {
	c.begin(cmd, &c.writing)
	usual := partFigures
	dests, err := c.destinations(usual, c.namedInputs(), c.formatByExtension, formatText)
	if err != nil {
		return err
	}
	for _, d := range dests {
		if d.path == "-" && d.format == formatText && c.format.Word() == byExtension {
			d.format = volumeFormats[d.part][0]
		}
		if !slices.Contains(volumeFormats[d.part], d.format) {
			return status.Usage(fmt.Errorf("--out %s=%s as %s: expected one of %s", d.part, d.path, d.format, strings.Join(volumeFormats[d.part], ", ")),
				"change the extension, or name the format with --format")
		}
	}
	if err := c.check(cmd, dests); err != nil {
		return err
	}
	c.mixedSettled = true // see settleVolumeUnits
	v := &volumes{volumeCommand: c}
	if err := v.name(); err != nil {
		return err
	}
	out, err := c.open(cmd.Context(), &c.writing, dests, c.paths())
	if err != nil {
		return err
	}
	defer out.abort()
	return v.make(cmd.Context(), out)
}

func (c *volumeCommand) namedInputs() []string {
	var names []string
	for _, t := range []*typed{&c.from, &c.to} {
		if t.set && !strings.HasPrefix(t.text, levelPrefix) {
			names = append(names, t.text)
		}
	}
	return names
}

func (c *volumeCommand) formatByExtension(path string) (string, bool) {
	f, ok := map[string]string{".txt": formatText, ".csv": formatCSV, ".json": formatJSON, ".geojson": formatGeoJSON,
		".svg": formatSVG, ".raw": formatRaw, ".png": formatPNG}[strings.ToLower(filepath.Ext(path))]
	return f, ok
}

// check refuses what can be refused before anything is read.
func (c *volumeCommand) check(cmd *cobra.Command, dests []*destination) error {
	has := func(parts ...string) bool {
		return slices.ContainsFunc(dests, func(d *destination) bool { return slices.Contains(parts, d.part) })
	}
	maps := has(partRaster, partLines, partBands)
	stagesOnly := !has(partFigures, partSections) && !maps
	usage := func(hint, format string, values ...any) error {
		return status.Usage(fmt.Errorf(format, values...), hint)
	}
	levels := strings.HasPrefix(c.from.text, levelPrefix) && strings.HasPrefix(c.to.text, levelPrefix)
	switch {
	case !c.to.set:
		return usage("isofacet volume --help has examples", "--to is missing: expected the surface after, such as --to FILE or --to level=100")
	case c.toe.values != nil && c.from.set:
		return usage("leave --from out: the base of the toe is what is measured from", "--toe with --from: expected --to alone")
	case c.toe.values != nil && c.inside.values != nil:
		return usage("measure the one, then the other", "--toe with --inside: expected one of the two")
	case c.toe.values != nil && c.toeBase.text == "":
		return usage("plane suits piles on even ground", "--toe-base is missing: expected level=Z, plane or ring")
	case c.toe.values == nil && c.toeBase.text != "":
		return usage("name the ring with --toe", "--toe-base without --toe: expected a ring that it is the base of")
	case c.toe.values != nil && (maps || c.sections.IsSet() || c.simulate.text != ""):
		return usage("a base through the ring is made anew for each ring and is no surface over the site, so maps, sections and draws do not know it; --sigma gives the uncertainty in closed form; for the rest compare --from level=Z --to FILE --inside the ring, or with the ground before as --from",
			"--toe with maps, --sections or --simulate: expected --from and --to")
	case c.toe.values == nil && !c.from.set && !(stagesOnly && c.stageStep.IsSet()):
		return usage("isofacet volume --help has examples; a stage table alone is --stage-step D --out stages=FILE", "--from is missing: expected the surface before, such as --from FILE or --from level=100")
	case levels:
		return usage("the volume between two levels is area times height", "--from and --to are levels: expected at least one surface")
	case c.toe.values != nil && strings.HasPrefix(c.to.text, levelPrefix):
		return usage("name the surface of the pile with --to", "--toe with a level: expected a surface")
	case has(partStages) && !c.stageStep.IsSet():
		return usage("such as --stage-step 1", "--out stages without --stage-step: expected the step of the levels")
	case c.stageStep.IsSet() && c.stageStep.Value.Sign() <= 0:
		return usage("such as --stage-step 1", "--stage-step %s: expected a step above 0", c.stageStep.String())
	case has(partSections) && !c.sections.IsSet():
		return usage("such as --sections 25", "--out sections without --sections: expected the distance of sections")
	case c.sections.IsSet() && c.sections.Value.Sign() <= 0:
		return usage("such as --sections 25", "--sections %s: expected a distance above 0", c.sections.String())
	case c.sections.IsSet() != (c.along.IsSet()):
		return usage(`such as --sections 25 --along "0,0 300,0"`, "--sections and --along: expected both or neither")
	case (c.left.IsSet() || c.right.IsSet()) && !c.sections.IsSet():
		return usage("leave them out", "--left and --right without --sections: expected sections")
	case c.simulate.text != "" && !c.heightSigma.IsSet():
		return usage("such as --sigma 0.02", "--simulate without --sigma: expected the standard uncertainty of heights")
	case c.simulate.text != "" && len(c.boundary.values)+len(c.voids.values) > 0:
		return usage("measure --inside the boundary instead", "--simulate with --boundary or --voids: expected surfaces that are whole")
	case has(partRaster) != c.grid.cell.IsSet():
		return usage("such as --cell 5 --out raster=FILE.csv", "--cell and --out raster: expected both or neither")
	case has(partLines, partBands) != (c.contour.interval.text != "" || c.contour.levels.text != ""):
		return usage("such as --interval 0.5 --out lines=FILE.geojson", "--out lines or bands, and --interval or --levels: expected both or neither")
	case c.contour.interval.text != "" && c.contour.levels.text != "":
		return usage("leave one of them out", "--interval and --levels: expected one of the two")
	case c.contour.countFrom.IsSet() && c.contour.levels.text != "":
		return usage("leave --count-from out: the levels are as they are listed", "--count-from with --levels: expected --interval, which is counted from there")
	}
	for _, name := range []string{"extent", "extent-outward", "values-at", "layout"} {
		if cmd.Flags().Changed(name) && !has(partRaster) {
			return usage("add --cell S --out raster=FILE", "--%s without a raster: expected one", name)
		}
	}
	for _, name := range []string{"count-from", "index-every", "shortest"} {
		if cmd.Flags().Changed(name) && !has(partLines, partBands) {
			return usage("add --interval D --out lines=FILE", "--%s without lines or bands: expected some", name)
		}
	}
	return nil
}
