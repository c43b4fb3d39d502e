package main

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/interp/flow"
)

const flowLong = `Where groundwater goes, and how sure that is. Every round and every zone of the
readings is worked out apart, a row each: the least squares plane through all wells
with its gradient (head lost per length) and flow azimuth (degrees clockwise from
grid north), their standard uncertainties, by how much the plane misses the heads,
and a verdict: sound; level; head range below noise (less than three times the
standard uncertainty of a head); wells nearly in line; direction uncertain (more than
30 degrees).

Uncertainties rest on the standard uncertainties of the heads (a column sigma, or
--sigma for wells that have none of their own) by the delta method; where the plane
misses the heads by more than their root mean square, on the misfit.

The parts, and their formats by extension:
  summary    .txt .csv .json  a row a round and zone; usual
  triangles  .csv .geojson    the solution of every three neighbouring wells
  lines      .csv .geojson    flow lines from the places of --starts
  arrows     .csv .geojson    heads and directions on a lattice of --arrows D
  divides    .geojson         divides and drains between planes, peaks and pits
  nests      .csv             vertical gradients between screens at one place
  rose       .svg             the planes' directions, an arrow a round and zone
  map        .svg             one round and zone: isolines, wells, lines, arrows

A flow line runs straight down each plane. At an edge it goes on if the plane beyond
leads away from it; if both planes drain into the edge, it follows the edge down. At
a vertex it takes the steepest way down. It ends in a pit, on level ground, or where
it leaves the surface. --method fitted-plane draws lines and arrows down the plane
through all wells instead, for a handful of wells.

Velocity is K i / n: conductivity times gradient over effective porosity.

Levels are those of the day they were read; seasons, pumping and tides change them.
Directions are apparent and horizontal, within one zone, and take the aquifer to
conduct equally in all horizontal directions. Contaminants need not follow them. A
licensed geologist or engineer, by local rules, signs what others rely on.`

const flowExample = `isofacet flow sample:landfill/heads-2024-q1.csv --sigma 0.02 --conductivity "12 ft/d" --porosity 0.2
isofacet flow sample:landfill/gauging.csv --wells sample:landfill/wells.csv --sigma 0.02 --out rounds.csv --out rose=rose.svg
isofacet flow sample:landfill/heads-2024-q1.csv --arrows 200 --out map=flow.svg --out arrows=arrows.csv
echo 1842600 613300 | isofacet flow sample:landfill/heads-2024-q1.csv --starts - --out lines=lines.geojson`

// The parts of flow.
const (
	partSummary = "summary"
	partArrows  = "arrows"
	partDivides = "divides"
	partNests   = "nests"
	partRose    = "rose"
	partMap     = "map"
)

// flowFormats says which format a part has, the usual one first.
var flowFormats = map[string][]string{
	partSummary: {formatText, formatCSV, formatJSON}, partTriangles: {formatCSV, formatGeoJSON}, partLines: {formatCSV, formatGeoJSON},
	partArrows: {formatCSV, formatGeoJSON}, partDivides: {formatGeoJSON}, partNests: {formatCSV}, partRose: {formatSVG}, partMap: {formatSVG},
}

// The words of --method.
const (
	methodTriangles = "triangles"
	methodPlane     = "fitted-plane"
)

// newFlow is "isofacet flow".
func newFlow(p *program) *cobra.Command {
	c := &flowCommand{program: p}
	cmd := &cobra.Command{
		Use:     "flow [options] [FILE...]",
		Short:   "groundwater gradient, direction, their uncertainty; flow lines",
		Long:    flowLong,
		Example: flowExample,
		RunE:    c.run,
	}
	zero := decimal.FromInt(0)
	c.sigma, c.porosity, c.arrows = option.Number{Least: &zero}, option.Number{Least: &zero}, option.Number{Least: &zero}
	c.nestWithin = option.Number{Least: &zero}
	c.conductivity = parsed[flow.Conductivity]{form: `"NUMBER UNIT/TIME"`, parse: parseConductivity}
	c.starts = typed{form: "FILE"}
	c.method = option.NewChoice(methodTriangles, methodPlane)
	const group = "Flow"
	fs := cmd.Flags()
	manual.Add(fs,
		manual.Option{Group: group, Name: "sigma", Value: &c.sigma, Default: "the readings' column sigma, or the misfit", Text: sigmaOptionText},
		manual.Option{Group: group, Name: "method", Value: &c.method, Text: "what lines and arrows follow: the planes of the triangles, or the one through all wells"},
		manual.Option{Group: group, Name: "starts", Value: &c.starts, Text: "file of places where flow lines begin, - for standard input"},
		manual.Option{Group: group, Name: "arrows", Value: &c.arrows, Default: "none", Text: "distance of arrows, which stand on whole multiples of it"},
		manual.Option{Group: group, Name: "conductivity", Value: &c.conductivity, Text: "hydraulic conductivity with its unit, as in \"12 ft/d\"; with --porosity it gives the velocity"},
		manual.Option{Group: group, Name: "porosity", Value: &c.porosity, Text: "effective porosity, above 0 and at most 1"},
		manual.Option{Group: group, Name: "nest-within", Value: &c.nestWithin, Default: "20", Text: "how far apart the wells of one nest may stand"})
	manual.Add(fs, c.reading.readingOptions()...)
	manual.Add(fs, c.writing.writingOptions([]string{partSummary, partTriangles, partLines, partArrows, partDivides, partNests, partRose, partMap},
		[]string{formatText, formatCSV, formatJSON, formatGeoJSON, formatSVG})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

func parseConductivity(text string) (flow.Conductivity, error) {
	k, err := flow.ParseConductivity(text)
	if err != nil {
		return k, errors.New("a number above zero and a unit such as \"12 ft/d\" or \"0.0003 m/s\"")
	}
	return k, nil
}

type flowCommand struct {
	*program
	reading
	writing
	sigma        option.Number
	method       option.Choice
	starts       typed
	arrows       option.Number
	conductivity parsed[flow.Conductivity]
	porosity     option.Number
	nestWithin   option.Number
}

func (c *flowCommand) run(cmd *cobra.Command, files []string) error {
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
	job := &flowing{flowCommand: c, list: list}
	var starts *input
	if c.starts.set {
		if starts, err = c.input(c.starts.text); err != nil {
			return err
		}
	}
	out, err := c.open(cmd.Context(), &c.writing, dests, c.paths())
	if err != nil {
		return err
	}
	defer out.abort()
	if err := job.readStarts(cmd.Context(), starts); err != nil {
		return err
	}
	if err := job.load(cmd.Context()); err != nil {
		return err
	}
	return job.make(cmd.Context(), out)
}

// check refuses what can be refused before anything is read.
func (c *flowCommand) check(files []string) error {
	switch {
	case c.starts.text == "-" && readsStandardInput(files):
		return status.Usage(errors.New(`--starts "-": standard input holds the readings: expected one of the two from a file`), "name the file of readings")
	case c.arrows.IsSet() && c.arrows.Value.Sign() == 0:
		return status.Usage(errors.New("--arrows 0: expected a distance above zero"), "as in --arrows 50")
	case (c.conductivity.text == "") != !c.porosity.IsSet():
		return status.Usage(errors.New("--conductivity and --porosity: expected both or neither: the velocity is K i / n"), `as in --conductivity "12 ft/d" --porosity 0.2`)
	case c.porosity.IsSet() && (c.porosity.Value.Sign() == 0 || c.porosity.Value.Float64() > 1):
		return status.Usage(fmt.Errorf("--porosity %s: expected a number above 0 and at most 1", c.porosity.Value), "as in --porosity 0.2")
	}
	return nil
}

// dests works out where everything goes.
func (c *flowCommand) dests(files []string) ([]*destination, error) {
	named := byExtensions(map[string]string{".txt": formatText, ".csv": formatCSV, ".json": formatJSON, ".geojson": formatGeoJSON, ".svg": formatSVG})
	dests, err := c.destinations(partSummary, files, named, formatText)
	if err != nil {
		return nil, err
	}
	has := func(parts ...string) bool {
		return slices.ContainsFunc(dests, func(d *destination) bool { return slices.Contains(parts, d.part) })
	}
	for _, d := range dests {
		formats := flowFormats[d.part]
		switch {
		case slices.Contains(formats, d.format):
		case d.path == "-" && d.format == formatText:
			d.format = formats[0]
		default:
			return nil, status.Usage(fmt.Errorf("--out %s=%s: format %s: expected %s for the part %s", d.part, d.path, d.format, strings.Join(formats, " or "), d.part),
				"choose another extension or part; --help lists them")
		}
	}
	switch {
	case has(partLines) && !c.starts.set:
		return nil, status.Usage(errors.New("--out lines= without --starts: expected the places where flow lines begin"), "as in --starts starts.csv")
	case c.starts.set && !has(partLines, partMap):
		return nil, status.Usage(errors.New("--starts without an output for flow lines: expected --out lines=FILE or --out map=FILE"), "add one, or leave --starts out")
	case has(partArrows) && !c.arrows.IsSet():
		return nil, status.Usage(errors.New("--out arrows= without --arrows: expected the distance of arrows"), "as in --arrows 50")
	case c.arrows.IsSet() && !has(partArrows, partMap):
		return nil, status.Usage(errors.New("--arrows without an output for them: expected --out arrows=FILE or --out map=FILE"), "add one, or leave --arrows out")
	case has(partNests) && !c.wells.set:
		return nil, status.Usage(errors.New("--out nests= without --wells: expected a table of wells with their screens"), "as in --wells wells.csv")
	case c.nestWithin.IsSet() && !has(partNests):
		return nil, status.Usage(errors.New("--nest-within without --out nests=FILE: expected an output of nests"), "add it, or leave --nest-within out")
	}
	return dests, nil
}
