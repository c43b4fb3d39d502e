package main

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"isofacet/cmd/internal/advice"
	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/contour"
	"isofacet/grid/decimal"
)

const contourLong = `Draws isolines straight through the triangles, or fills the bands between them.
Lines never cross, branch or end inside the surface: each closes or ends on the
outline. Higher ground is on the left of a line. A value equal to a level counts
as above it.

Levels are the multiples of --interval counted from --count-from, every fifth of
them an index level, or those of --levels. They are computed as decimal numbers:
the third multiple of 0.1 is 0.3.

With --bands, or --out bands=FILE, the surface is cut into polygons between
neighbouring levels, the lowest open below and the highest open above. A reading
that no polygon of its band holds, for want of width, is listed.

Formats by extension: .geojson, .csv and .svg. In GeoJSON a line has its level as
height and the properties level, rank (index or intermediate), closed and
depression (a closed line round lower ground); a band has lower and upper. A CSV
of lines has a vertex a row: line, level, rank, closed, x, y. An SVG is a quick
look: index lines heavier and with their level, the outline, a scale bar.

--inferred-beyond D divides lines where they come further than D from the nearest
reading or vertex of a line. What lies beyond has inferred true in GeoJSON and CSV,
and is dashed in an SVG. The parts of a closed line are open; depression stays that of
the whole line. It says how far the readings are, not how wrong the line may be.

--from-raster draws through a raster instead of readings, a CSV or raw file as
grid writes them: straight through each square between four nodes, the mean of
the four deciding where a line could turn either way.`

const contourExample = `isofacet contour sample:gravel-pit/shots.csv --interval 1 --out pit.geojson
isofacet contour sample:gravel-pit/shots.csv --levels 205,210,215 --bands
isofacet contour sample:landfill/heads-2024-q1.csv --interval 0.5 --out q1.svg
isofacet contour sample:gravel-pit/shots.csv --interval 2 --inferred-beyond 9
isofacet grid sample:gravel-pit/shots.csv --cell 5 --out raster.csv
isofacet contour --from-raster raster.csv --interval 2 --format csv | head`

// newContour is "isofacet contour".
func newContour(p *program) *cobra.Command {
	c := &contourCommand{program: p}
	cmd := &cobra.Command{
		Use:     "contour --interval D|--levels Z,Z,... [options] [FILE...]",
		Short:   "isolines, or filled bands",
		Long:    contourLong,
		Example: contourExample,
		RunE:    c.run,
	}
	fs := cmd.Flags()
	manual.Add(fs, c.options()...)
	manual.Add(fs, c.reading.readingOptions()...)
	manual.Add(fs, c.writing.writingOptions(contourParts, []string{formatGeoJSON, formatCSV, formatSVG})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

// What contour makes; also the parts of --out.
const (
	partLines = "lines"
	partBands = "bands"
)

var contourParts = []string{partLines, partBands}

// Formats of shapes.
const (
	formatGeoJSON = "geojson"
	formatSVG     = "svg"
)

var contourFormats = map[string]string{".geojson": formatGeoJSON, ".csv": formatCSV, ".svg": formatSVG}

const groupIsolines = "Isolines"

type contourCommand struct {
	*program
	reading
	writing
	interval     parsed[decimal.Number]
	countFrom    option.Number
	levels       parsed[[]decimal.Number]
	indexEvery   parsed[int]
	bands        manual.Switch
	shortest     option.Number
	showReadings manual.Switch
	inferred     option.Number
	fromRaster   typed
	noData       option.Number
}

func (c *contourCommand) options() []manual.Option {
	zero := decimal.FromInt(0)
	c.interval = parsed[decimal.Number]{form: "D", parse: parseInterval}
	c.levels = parsed[[]decimal.Number]{form: "Z,Z,...", parse: parseLevels}
	c.indexEvery = parsed[int]{value: 5, text: "5", form: "N", parse: parseEvery}
	c.shortest, c.inferred = option.Number{Least: &zero}, option.Number{Least: &zero}
	c.fromRaster = typed{form: "FILE"}
	const group = groupIsolines
	return []manual.Option{
		{Group: group, Name: "interval", Value: &c.interval, Text: "step from level to level, in the unit of z"},
		{Group: group, Name: "count-from", Value: &c.countFrom, Default: "0", Text: "level from which the interval is counted"},
		{Group: group, Name: "levels", Value: &c.levels, Text: "the levels one by one, rising, instead of an interval"},
		{Group: group, Name: "index-every", Value: &c.indexEvery,
			Text: "every how many levels one is an index level, counted from --count-from or the first of --levels"},
		{Group: group, Name: "bands", Value: &c.bands, Switch: true, Text: "filled bands between the levels instead of lines"},
		{Group: group, Name: "shortest", Value: &c.shortest, Default: "0",
			Text: "leave out lines shorter than this, in the unit of x and y, and list them"},
		{Group: group, Name: "inferred-beyond", Value: &c.inferred, Default: "nothing is marked",
			Text: "divide lines where they come further than this from the nearest reading, in the unit of x and y, and mark what lies beyond as inferred"},
		{Group: group, Name: "show-readings", Value: &c.showReadings, Switch: true, Text: "a dot at every reading in an SVG"},
		{Group: group, Name: "from-raster", Value: &c.fromRaster,
			Text: "raster to draw through instead of readings: a CSV or raw file, - for a CSV on standard input"},
		{Group: group, Name: "no-data", Value: &c.noData, Default: "an empty field; NaN in raw files",
			Text: "number that stands for no value"},
	}
}

func parseInterval(text string) (decimal.Number, error) {
	n, err := decimal.Parse(text)
	if err != nil || n.Sign() <= 0 {
		return n, errors.New("a number above 0, such as 0.5")
	}
	return n, nil
}

func parseLevels(text string) ([]decimal.Number, error) {
	var list []decimal.Number
	for word := range strings.SplitSeq(text, ",") {
		n, err := decimal.Parse(word)
		if err != nil {
			return nil, errors.New("numbers such as 100,102.5,105")
		}
		list = append(list, n)
	}
	if _, err := contour.List(list, 0); err != nil {
		e, ok := errors.AsType[*contour.OrderError](err)
		switch {
		case !ok:
			return nil, fmt.Errorf("levels that can be: %w", err)
		case e.SameDouble:
			return nil, fmt.Errorf("levels that can be told apart, unlike %s and %s", e.Before, e.Value)
		}
		return nil, fmt.Errorf("levels that rise, not %s after %s", e.Value, e.Before)
	}
	return list, nil
}

func parseEvery(text string) (int, error) {
	n, err := decimal.Parse(text)
	if err != nil || n.Sign() <= 0 || n.Decimals() > 0 || n.Cmp(decimal.FromInt(contour.LevelsMost)) > 0 {
		return 0, fmt.Errorf("a whole number from 1 to %d", contour.LevelsMost)
	}
	return int(n.Float64()), nil
}

// run is the command: readings or a raster, levels, lines or bands, files.
func (c *contourCommand) run(cmd *cobra.Command, files []string) error {
	c.begin(cmd, &c.writing)
	if err := c.check(cmd, files); err != nil {
		return err
	}
	usual, named := partLines, files
	if c.bands {
		usual = partBands
	}
	if c.fromRaster.set {
		named = []string{c.fromRaster.text}
	}
	dests, err := c.destinations(usual, named, byExtensions(contourFormats), formatGeoJSON)
	if err != nil {
		return err
	}
	if err := c.unused(cmd, dests); err != nil {
		return err
	}
	source, err := c.source(files)
	if err != nil {
		return err
	}
	out, err := c.open(cmd.Context(), &c.writing, dests, c.paths())
	if err != nil {
		return err
	}
	defer out.abort()
	ground, err := source(cmd.Context())
	if err != nil {
		return err
	}
	levels, err := c.chosen(ground)
	if err != nil {
		return err
	}
	return c.make(cmd.Context(), ground, levels, out)
}

// check refuses what can be refused before anything is read.
func (c *contourCommand) check(cmd *cobra.Command, files []string) error {
	switch {
	case c.interval.text == "" && c.levels.text == "":
		return status.Usage(errors.New("--interval is missing: expected a step, such as --interval 0.5, or --levels"), "isofacet inspect suggests one")
	case c.interval.text != "" && c.levels.text != "":
		return status.Usage(errors.New("--interval and --levels: expected one of the two"), "leave one of them out")
	case c.countFrom.IsSet() && c.levels.text != "":
		return status.Usage(errors.New("--count-from with --levels: expected --interval, which is counted from there"), "leave --count-from out: the levels are as they are listed")
	case c.noData.IsSet() && !c.fromRaster.set:
		return status.Usage(errors.New("--no-data without --from-raster: expected a raster, in which a number can stand for no value"), "for readings, --missing names what means no value")
	case !c.fromRaster.set:
		return nil
	case c.noData.IsSet() && isRaw(c.fromRaster.text):
		return status.Usage(errors.New("--no-data with a raw raster: expected none: its description says what stands for no value"), "leave --no-data out")
	case len(files) > 0:
		return status.Usage(fmt.Errorf("%q beside --from-raster: expected readings or a raster, not both", files[0]), "leave one of them out")
	case c.inferred.IsSet():
		return status.Usage(errors.New("--inferred-beyond with --from-raster: expected readings from which to measure"), "leave --inferred-beyond out: a raster has none")
	case bool(c.showReadings):
		return status.Usage(errors.New("--show-readings with --from-raster: expected readings to show"), "leave --show-readings out: a raster has none")
	}
	return c.noReadings(cmd)
}

// noReadings refuses options that say how readings are read or chosen.
func (c *contourCommand) noReadings(cmd *cobra.Command) error {
	var err error
	cmd.Flags().Visit(func(f *pflag.Flag) {
		switch group := f.Annotations["group"]; {
		case err != nil || group == nil || slices.Contains([]string{groupIsolines, groupLabels, groupOutput, groupRunning}, group[0]):
		default:
			err = status.Usage(fmt.Errorf("--%s with --from-raster: expected none: it is for readings", f.Name), "leave --"+f.Name+" out")
		}
	})
	return err
}

// unused refuses an option that nothing would follow.
func (c *contourCommand) unused(cmd *cobra.Command, dests []*destination) error {
	var lines, ranked, svg, text bool
	for _, d := range dests {
		lines = lines || d.part == partLines
		ranked = ranked || d.part == partLines || d.format == formatSVG
		svg = svg || d.format == formatSVG
		text = text || d.format != formatSVG
	}
	switch fs := cmd.Flags(); {
	case !lines && c.shortest.IsSet():
		return status.Usage(errors.New("--shortest without lines: expected an output of lines: bands cover the whole surface"), "leave --shortest out")
	case !ranked && c.inferred.IsSet():
		return status.Usage(errors.New("--inferred-beyond without lines: expected an output of lines: bands are not divided"), "leave --inferred-beyond out")
	case !ranked && fs.Changed("index-every"):
		return status.Usage(errors.New("--index-every without lines: expected an output of lines: bands have no rank"), "leave --index-every out")
	case !svg && bool(c.showReadings):
		return status.Usage(errors.New("--show-readings without an SVG output: expected an output that shows something"), "add --out FILE.svg, or leave --show-readings out")
	case !text && fs.Changed("decimals"):
		return status.Usage(errors.New("--decimals without a GeoJSON or CSV output: expected none: a picture is as fine as it can be seen"), "leave --decimals out")
	}
	return nil
}

// chosen returns the levels that the command line asks for.
func (c *contourCommand) chosen(g *ground) (contour.Levels, error) {
	var levels contour.Levels
	var err error
	if c.levels.text != "" {
		if levels, err = contour.List(c.levels.value, c.indexEvery.value); err == nil {
			err = levels.Within(g.low, g.high)
		}
	} else {
		levels, err = contour.Every(c.interval.value, c.countFrom.Value, c.indexEvery.value, g.low, g.high)
	}
	if e, ok := errors.AsType[*contour.RangeError](err); ok {
		c.report.Warn("no-lines", e.Error(), "low", g.low, "high", g.high)
		return levels, nil
	}
	if err != nil {
		return nil, err
	}
	first, last := levels[0].Number, levels[len(levels)-1].Number
	c.report.Note(fmt.Sprintf("levels: %d, from %s to %s", len(levels), first, last), "levels", len(levels), "first", first, "last", last)
	return levels, nil
}

// source works out what to draw through, so that what is wrong with the names of
// files shows at once; the returned function reads it.
func (c *contourCommand) source(files []string) (func(context.Context) (*ground, error), error) {
	if c.fromRaster.set {
		in, err := c.rasterInput(c.fromRaster.text)
		if err != nil {
			return nil, err
		}
		return func(ctx context.Context) (*ground, error) { return c.rasterGround(ctx, in) }, nil
	}
	list, err := c.inputs(files)
	if err != nil {
		return nil, err
	}
	return func(ctx context.Context) (*ground, error) {
		l, err := c.load(ctx, &c.reading, list)
		if err != nil {
			return nil, err
		}
		if err := l.needsTriangles(); err != nil {
			return nil, err
		}
		c.tellSurface(l)
		c.warnOfLongOutline(l, advice.MaxEdge(advice.Spacing(l.surface.Mesh(), c.workers())))
		return c.surfaceGround(list, l), nil
	}, nil
}

// explainContour is the way out of levels that cannot be.
func explainContour(err error) (status.Code, string, bool) {
	if e, ok := errors.AsType[*contour.CountError](err); ok {
		if e.Fits.Sign() > 0 {
			return status.TooBig, "--interval " + e.Fits.String() + " would do", true
		}
		return status.TooBig, "use a larger --interval, or fewer --levels", true
	}
	if errors.Is(err, contour.ErrLevels) {
		return status.WrongUsage, "look at --interval, --count-from and --levels", true
	}
	return 0, "", false
}
