package main

import (
	"errors"
	"fmt"
	"path/filepath"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/status"
)

const changeLong = `One round of readings minus another, or one file minus another: --to minus --from,
positive is a rise. Wells are the same if their ids are; readings without ids if their
places are. The table has every well: common to both with its change, added, or lost;
those added and lost are named. The zones have to be the same.
Files of readings do not name their datums and units: the options state them once
for both sides, and you have to see that they hold for both.

A side is a file of readings, or round=NAME of the files named behind. Options that say
how readings are read hold for both.

--out raster=FILE, lines=FILE and bands=FILE draw the change over the common wells
alone: planes over triangles between their changes. A well that only one round has
changes no line. Two surveys whose readings stand at different places have no common
ones: isofacet volume draws the difference of their surfaces.

A change of levels has many causes besides flow: seasons, pumping, tides, the
barometer, a resurveyed measuring point. Formats by extension: table .csv and
.geojson; raster .csv, .raw and .png; lines and bands .geojson, .csv and .svg.`

const changeExample = `isofacet change --from round=2024-Q1 --to round=2025-Q1 sample:landfill/gauging.csv --wells sample:landfill/wells.csv --only zone=shallow
isofacet change --from round=2024-Q1 --to round=2024-Q2 sample:landfill/gauging.csv --wells sample:landfill/wells.csv --only zone=shallow --interval 0.1 --out table=change.csv --out lines=change.svg`

// partTable is the table of wells.
const partTable = "table"

var changeParts = []string{partTable, partRaster, partLines, partBands}

// changeFormats are the formats of each part.
var changeFormats = map[string][]string{
	partTable:  {formatCSV, formatGeoJSON},
	partRaster: volumeFormats[partRaster],
	partLines:  volumeFormats[partLines],
	partBands:  volumeFormats[partBands],
}

type changeCommand struct {
	*program
	reading
	writing
	grid    *gridCommand    // of the raster
	contour *contourCommand // of lines and bands

	from, to typed
}

// newChange is "isofacet change".
func newChange(p *program) *cobra.Command {
	c := &changeCommand{program: p, grid: &gridCommand{program: p}, contour: &contourCommand{program: p}}
	cmd := &cobra.Command{
		Use:     "change --from A --to B [options] [FILE...]",
		Short:   "one round or survey minus another at common places",
		Long:    changeLong,
		Example: changeExample,
		RunE:    c.run,
	}
	c.from, c.to = typed{form: "A"}, typed{form: "B"}
	const sides, maps = "Sides", "Maps of the change"
	fs := cmd.Flags()
	manual.Add(fs,
		manual.Option{Group: sides, Name: "from", Value: &c.from, Text: beforeText},
		manual.Option{Group: sides, Name: "to", Value: &c.to, Text: afterText})
	for _, o := range slices.Concat(c.grid.options(), c.contour.options()) {
		if slices.Contains([]string{"cell", "extent", "extent-outward", "values-at", "layout", "no-data", "interval", "count-from", "levels", "index-every", "shortest"}, o.Name) && fs.Lookup(o.Name) == nil {
			o.Group = maps
			manual.Add(fs, o)
		}
	}
	manual.Add(fs, c.reading.readingOptions()...)
	manual.Add(fs, c.writing.writingOptions(changeParts, []string{formatCSV, formatGeoJSON, formatSVG, formatRaw, formatRaw32, formatPNG})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

// roundPrefix begins a side that is a round.
const roundPrefix = "round="

// isRound returns the name of the round that a side is.
func isRound(side string) (string, bool) { return strings.CutPrefix(side, roundPrefix) }

func (c *changeCommand) run(cmd *cobra.Command, files []string) error {
	c.begin(cmd, &c.writing)
	if err := c.check(files); err != nil {
		return err
	}
	var list []*input
	var err error
	if _, ok := isRound(c.from.text); ok {
		list, err = c.inputs(files)
	} else {
		list, err = c.inputs([]string{c.from.text, c.to.text})
	}
	if err != nil {
		return err
	}
	named := func(path string) (string, bool) {
		f, ok := map[string]string{".csv": formatCSV, ".geojson": formatGeoJSON, ".svg": formatSVG, ".raw": formatRaw, ".png": formatPNG}[strings.ToLower(filepath.Ext(path))]
		return f, ok
	}
	dests, err := c.destinations(partTable, files, named, formatCSV)
	if err != nil {
		return err
	}
	if err := c.checkParts(cmd, dests); err != nil {
		return err
	}
	out, err := c.open(cmd.Context(), &c.writing, dests, c.paths())
	if err != nil {
		return err
	}
	defer out.abort()
	return c.make(cmd.Context(), list, dests, out)
}

// check refuses what can be refused before anything is read.
func (c *changeCommand) check(files []string) error {
	_, fromRound := isRound(c.from.text)
	_, toRound := isRound(c.to.text)
	switch {
	case !c.from.set || !c.to.set:
		return status.Usage(errors.New("--from and --to: expected both: a file of readings each, or round=NAME each"), "as in --from round=2024-Q1 --to round=2024-Q2 gauging.csv")
	case fromRound != toRound:
		return status.Usage(fmt.Errorf("--from %s --to %s: expected two rounds of the same files, or two files", c.from.text, c.to.text), "take the round out of its file first, or name two rounds")
	case fromRound && c.from.text == c.to.text:
		return status.Usage(fmt.Errorf("--from %s --to %s: expected two rounds", c.from.text, c.to.text), "nothing changes from a round to itself")
	case !fromRound && len(files) > 0:
		return status.Usage(fmt.Errorf("%q: --from and --to name the files: expected none behind them", files[0]), "leave it out; or name rounds of it, as in --from round=A --to round=B")
	case c.round.set:
		return status.Usage(errors.New("--round with change: expected --from round=A --to round=B"), "leave --round out")
	case len(c.breaklines.values) > 0:
		return status.Usage(errors.New("--breaklines with change: expected none: lines have the heights of one survey"), "leave them out; isofacet volume draws the difference of surfaces with lines")
	}
	return nil
}

// checkParts refuses formats that a part does not have, and maps without a cell or
// levels.
func (c *changeCommand) checkParts(cmd *cobra.Command, dests []*destination) error {
	has := func(parts ...string) bool {
		return slices.ContainsFunc(dests, func(d *destination) bool { return slices.Contains(parts, d.part) })
	}
	for _, d := range dests {
		if !slices.Contains(changeFormats[d.part], d.format) {
			return status.Usage(fmt.Errorf("--out %s=%s as %s: expected one of %s", d.part, d.path, d.format, strings.Join(changeFormats[d.part], ", ")),
				"change the extension, or name the format with --format")
		}
	}
	levels := c.contour.interval.text != "" || c.contour.levels.text != ""
	switch {
	case has(partRaster) != c.grid.cell.IsSet():
		return status.Usage(errors.New("--cell and --out raster: expected both or neither"), "such as --cell 5 --out raster=FILE.csv")
	case has(partLines, partBands) != levels:
		return status.Usage(errors.New("--out lines or bands, and --interval or --levels: expected both or neither"), "such as --interval 0.5 --out lines=FILE.geojson")
	case c.contour.interval.text != "" && c.contour.levels.text != "":
		return status.Usage(errors.New("--interval and --levels: expected one of the two"), "leave one of them out")
	}
	for name, part := range map[string]bool{
		"extent": has(partRaster), "extent-outward": has(partRaster), "values-at": has(partRaster), "layout": has(partRaster), "no-data": has(partRaster),
		"count-from": has(partLines, partBands), "index-every": has(partLines, partBands), "shortest": has(partLines, partBands),
	} {
		if cmd.Flags().Changed(name) && !part {
			return status.Usage(fmt.Errorf("--%s without the map that it is about: expected one", name), "add --cell S --out raster=FILE, or --interval D --out lines=FILE")
		}
	}
	return nil
}
