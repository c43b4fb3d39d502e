package main

import (
	"errors"
	"fmt"
	"slices"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid"
)

const gridLong = `Reads a raster off the surface: the value, slope, downhill azimuth or shade at every
node of a lattice. Nodes outside the surface have no value; a node on its outline
has one.

The lattice begins at whole multiples of the cell, so that rasters of one cell
size fit together: with --values-at centres the edges of the cells lie on them,
with --values-at corners the nodes. Without --extent the lattice covers readings
and lines.

Formats by extension: .csv, .raw and .png. A CSV matrix has the x of the columns in its
first row and the y of a row in its first column, the northern row first; a list
has a node a line. A raw file holds the bare numbers, little-endian, the northern
row first, and a .json beside it says what they are. A PNG is a quick look: values
by colour and shaded as relief, with a scale.

Slope is rise over run. The downhill azimuth is where water would run, in degrees
clockwise from grid north; a flat has none. Shade is the share, from 0 to 1, of a
light from the north-west, 45 degrees high, that a triangle is struck by.

` + trustLong

const gridExample = `isofacet grid sample:gravel-pit/shots.csv --cell 5 --out pit.csv
isofacet grid sample:gravel-pit/shots.csv --cell 2 --out slope=slope.raw
isofacet grid sample:landfill/heads-2024-q1.csv --cell 10 --out heads.png
isofacet grid sample:gravel-pit/shots.csv --cell 5 --show distance --out d.png
isofacet grid sample:landfill/heads-2024-q1.csv --cell 50 --layout list | head`

// newGrid is "isofacet grid".
func newGrid(p *program) *cobra.Command {
	g := &gridCommand{program: p}
	cmd := &cobra.Command{
		Use:     "grid --cell S [options] [FILE...]",
		Short:   "a raster read off the surface",
		Long:    gridLong,
		Example: gridExample,
		RunE:    g.run,
	}
	fs := cmd.Flags()
	manual.Add(fs, g.options()...)
	manual.Add(fs, g.trustOptions("Raster")...)
	manual.Add(fs, g.reading.readingOptions()...)
	manual.Add(fs, g.writing.writingOptions(gridParts, []string{formatCSV, formatRaw, formatRaw32, formatPNG})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

// What a raster can show; also the parts of --out.
var gridParts = append([]string{grid.Value.String(), grid.Slope.String(), grid.DownhillAzimuth.String(), grid.Shade.String()}, trustNames...)

// The formats of a raster.
const (
	formatCSV   = "csv"
	formatRaw   = "raw"
	formatRaw32 = "raw-float32"
	formatPNG   = "png"
)

type gridCommand struct {
	*program
	reading
	writing
	trusting
	cell     option.Cell
	extent   option.Extent
	outward  manual.Switch
	valuesAt option.Choice
	noData   option.Number
	layout   option.Choice
	show     option.Choice
}

func (g *gridCommand) options() []manual.Option {
	g.valuesAt = option.NewChoice(grid.Centres.String(), grid.Corners.String())
	g.layout = option.NewChoice("matrix", "list")
	g.show = option.NewChoice(gridParts...)
	const group = "Raster"
	return []manual.Option{
		{Group: group, Name: "cell", Value: &g.cell, Text: "size of a cell, in the unit of x and y"},
		{Group: group, Name: "extent", Value: &g.extent, Default: "what covers readings and lines",
			Text: "sides of the raster, on whole multiples of the cell"},
		{Group: group, Name: "extent-outward", Value: &g.outward, Switch: true,
			Text: "move the sides of --extent outward to the next multiples"},
		{Group: group, Name: "values-at", Value: &g.valuesAt, Text: "where in its cell a value stands"},
		{Group: group, Name: "no-data", Value: &g.noData, Default: "an empty field; NaN in raw files",
			Text: "number that stands for no value"},
		{Group: group, Name: "layout", Value: &g.layout, Text: "of a CSV file: rows and columns, or a node a line"},
		{Group: group, Name: "show", Value: &g.show, Text: "what the raster holds"},
	}
}

// run is the command: readings, surface, rasters, files.
func (g *gridCommand) run(cmd *cobra.Command, files []string) error {
	g.begin(cmd, &g.writing)
	if err := g.check(); err != nil {
		return err
	}
	list, err := g.inputs(files)
	if err != nil {
		return err
	}
	dests, err := g.destinations(g.show.Word(), files, byExtensions(map[string]string{".csv": formatCSV, ".raw": formatRaw, ".png": formatPNG}), formatCSV)
	if err != nil {
		return err
	}
	if err := g.unused(cmd, dests); err != nil {
		return err
	}
	// A lattice that is given can be refused before anything is read.
	var spec grid.Spec
	if g.extent.IsSet() {
		if spec, err = g.lattice(nil); err != nil {
			return err
		}
		if err := spec.Check(int64(g.budget.Bytes)); err != nil {
			return err
		}
	}
	out, err := g.open(cmd.Context(), &g.writing, dests, g.paths())
	if err != nil {
		return err
	}
	defer out.abort()

	l, err := g.load(cmd.Context(), &g.reading, list)
	if err != nil {
		return err
	}
	if err := l.needsTriangles(); err != nil {
		return err
	}
	g.tellSurface(l)
	if err := l.guardCell(min(g.cell.X.Float64(), g.cell.Y.Float64()), cellText(g.cell.X, g.cell.Y)); err != nil {
		return err
	}
	if !g.extent.IsSet() {
		if spec, err = g.lattice(l); err != nil {
			return err
		}
	}
	if err := g.fits(l, spec, dests); err != nil {
		return err
	}
	return g.make(cmd, files, list, l, spec, out)
}

// check refuses what can be refused before anything is read.
func (g *gridCommand) check() error {
	if !g.cell.IsSet() {
		return status.Usage(errors.New("--cell is missing: expected the size of a cell, such as --cell 2"),
			"isofacet inspect suggests one")
	}
	if bool(g.outward) && !g.extent.IsSet() {
		return status.Usage(errors.New("--extent-outward without --extent: expected the extent that it moves outward"),
			"without --extent the raster covers readings and lines")
	}
	return nil
}

// unused refuses an option that nothing would follow.
func (g *gridCommand) unused(cmd *cobra.Command, dests []*destination) error {
	texts := slices.ContainsFunc(dests, func(d *destination) bool { return d.format == formatCSV })
	raws := slices.ContainsFunc(dests, func(d *destination) bool { return family(d.format) == formatRaw })
	switch {
	case !texts && cmd.Flags().Changed("layout"):
		return status.Usage(errors.New("--layout without a CSV output: expected an output that has a layout"), "add --out FILE.csv, or leave --layout out")
	case !texts && cmd.Flags().Changed("decimals"):
		return status.Usage(errors.New("--decimals without a CSV output: expected none: other formats do not write numbers as text"), "leave --decimals out")
	case g.noData.IsSet() && !raws && !texts:
		return status.Usage(errors.New("--no-data without a CSV or raw output: expected none: a picture has a colour for it"), "leave --no-data out")
	case g.noData.IsSet() && !raws && g.layout.Word() == "list":
		return status.Usage(errors.New("--no-data with --layout list: expected none: a list leaves nodes without a value out"), "leave --no-data out, or write --layout matrix")
	}
	return nil
}

// lattice returns the lattice that the command line asks for; l is looked at only
// where no extent is given.
func (g *gridCommand) lattice(l *loaded) (grid.Spec, error) {
	at, err := grid.ParseNodePlace(g.valuesAt.Word())
	if err != nil {
		return grid.Spec{}, err
	}
	if !g.extent.IsSet() {
		return grid.SpecFor(l.reach(), g.cell.X, g.cell.Y, at)
	}
	e := grid.Extent{XMin: g.extent.XMin, YMin: g.extent.YMin, XMax: g.extent.XMax, YMax: g.extent.YMax}
	if g.outward {
		return grid.SpecOutward(e, g.cell.X, g.cell.Y, at)
	}
	return grid.SpecFromExtent(e, g.cell.X, g.cell.Y, at)
}

// bytesVertex is what a reading takes once the surface stands: its columns, the
// mesh (68) and the surface's values (8).
const bytesVertex = 120

// bytesFilling is what a reading's two triangles take while a raster is filled.
const bytesFilling = 16

// A picture has at most so many pixels a side; it takes 8 bytes for each value that it
// shows and 4 a pixel, legend included.
const (
	pictureSide   = 2000
	picturePixels = pictureSide * pictureSide * 3 / 2
)

// fits states what the raster needs and refuses what would not fit beside the
// surface.
func (g *gridCommand) fits(l *loaded, spec grid.Spec, dests []*destination) error {
	taken := uint64(l.set.Len()) * (bytesVertex + bytesFilling)
	left := int64(g.budget.Bytes) - int64(taken)
	if err := spec.Check(max(left, 0)); err != nil {
		return err
	}
	need := taken + uint64(spec.Bytes())
	if slices.ContainsFunc(dests, func(d *destination) bool { return d.format == formatPNG }) {
		need += uint64(min(spec.NumNodes(), pictureSide*pictureSide))*8 + picturePixels*4
	}
	return g.announce(fmt.Sprintf("a raster of %d x %d nodes", spec.Cols, spec.Rows), need)
}
