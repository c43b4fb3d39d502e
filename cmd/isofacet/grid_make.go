package main

import (
	"context"
	"fmt"
	"io"
	"path/filepath"
	"slices"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/advice"
	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/io/gridcsv"
	"isofacet/io/gridraw"
)

// gridResult is what the run record says of the rasters.
type gridResult struct {
	Extent  extents        `json:"extent"`
	Surface surfaceCounts  `json:"surface"`
	Lattice lattice        `json:"lattice"`
	Rasters []rasterResult `json:"rasters"`
}

type lattice struct {
	XMin     string `json:"xmin"`
	YMin     string `json:"ymin"`
	XMax     string `json:"xmax"`
	YMax     string `json:"ymax"`
	CellX    string `json:"cell_x"`
	CellY    string `json:"cell_y"`
	Columns  int    `json:"columns"`
	Rows     int    `json:"rows"`
	ValuesAt string `json:"values_at"`
}

type rasterResult struct {
	Show   string `json:"show"`
	Nodes  int    `json:"nodes"`
	NoData int    `json:"no_data"`
	Min    number `json:"min"`
	Max    number `json:"max"`
	Mean   number `json:"mean"`
	// Includes says what an uncertainty includes.
	Includes string `json:"includes,omitempty"`
}

// make fills one raster after the other and writes each, so that only one is in
// memory; the one for standard output comes last, since what went there cannot be
// taken back.
func (g *gridCommand) make(cmd *cobra.Command, files []string, list []*input, l *loaded, spec grid.Spec, out *outputs) error {
	var rasters []rasterResult
	sides := describe(spec)
	slices.SortStableFunc(out.list, func(a, b *destination) int { return boolCompare(a.path == "-", b.path == "-") })
	g.report.Note(fmt.Sprintf("lattice: %s and %s of cell %s, from %s,%s to %s,%s, values at %s",
		counted(spec.Cols, "column"), counted(spec.Rows, "row"), cellText(spec.CellX, spec.CellY),
		sides.XMin, sides.YMin, sides.XMax, sides.YMax, spec.ValuesAt),
		"columns", spec.Cols, "rows", spec.Rows)
	g.warnOfLongOutline(l, advice.MaxEdge(advice.Spacing(l.surface.Mesh(), g.workers())))

	trust := &trust{p: g.program, l: l, r: &g.reading, t: &g.trusting}
	var shown string
	var raster *grid.Grid
	for _, d := range out.list {
		if d.part != shown {
			raster = nil // before the next one takes its place
			var err error
			if raster, err = g.fill(cmd.Context(), l, spec, d.part, trust); err != nil {
				return err
			}
			shown = d.part
			rasters = append(rasters, g.describeRaster(l, raster))
		}
		if err := g.settleWarnings(); err != nil {
			return err
		}
		if err := out.write(d, func(d *destination) error { return g.writeRaster(d, raster, l) }); err != nil {
			return err
		}
	}
	if g.rec != nil {
		g.recordReadings(list, l)
		g.rec.Stable.Result = &gridResult{l.extents(g.decimals), l.surfaceCounts(g.decimals), sides, rasters}
	}
	return out.commit()
}

func boolCompare(a, b bool) int {
	switch {
	case a == b:
		return 0
	case b:
		return -1
	}
	return 1
}

// fill makes one raster.
func (g *gridCommand) fill(ctx context.Context, l *loaded, spec grid.Spec, part string, trust *trust) (*grid.Grid, error) {
	trusted := slices.Contains(trustNames, part)
	if trusted {
		if err := trust.prepare(ctx, part); err != nil {
			return nil, err
		}
	}
	report, finish := g.display.Stage("filling")
	defer finish()
	show := grid.Value
	for _, s := range []grid.Show{grid.Slope, grid.DownhillAzimuth, grid.Shade} {
		if part == s.String() {
			show = s
		}
	}
	raster, err := grid.Fill(ctx, spec, l.surface, grid.Options{Show: show, Workers: g.workers(), Progress: report})
	if err != nil {
		return nil, err
	}
	if l.drawn.region != nil {
		raster.Mask(l.drawn.region)
		raster.OwnOnRims(l.drawn.region, l.surface, l.drawn.cut, show)
	}
	if trusted {
		if err := trust.raster(ctx, raster, part); err != nil {
			return nil, err
		}
	}
	raster.Labels = g.labels(part)
	return raster, nil
}

// describeRaster says what a raster holds, and warns if that is nothing.
func (g *gridCommand) describeRaster(l *loaded, raster *grid.Grid) rasterResult {
	s := raster.Statistics(g.workers())
	digits := g.valueDigits(l, raster.Labels.Show)
	value := func(v float64) number { return number{v, digits} }
	r := rasterResult{raster.Labels.Show, s.Nodes, s.NoData, value(s.Min), value(s.Max), value(s.Mean), trustIncludes(raster.Labels.Show)}
	text := fmt.Sprintf("%s: %d nodes with a value, %d without", r.Show, s.Count(), s.NoData)
	if s.Count() > 0 {
		text += fmt.Sprintf("; from %v to %v, mean %v", r.Min, r.Max, r.Mean)
	}
	g.report.Note(text, "show", r.Show, "values", s.Count(), "no_data", s.NoData, "min", r.Min, "max", r.Max, "mean", r.Mean)
	if s.Count() == 0 {
		g.report.Warn("no-values", "no node of the raster "+r.Show+" has a value: does the extent meet the readings?")
	}
	return r
}

// valueDigits returns the digits after the point of what a raster shows.
func (g *gridCommand) valueDigits(l *loaded, part string) int {
	switch part {
	case grid.Slope.String():
		return g.decimals.Resolve(slopeDigits)
	case grid.DownhillAzimuth.String():
		return g.decimals.Resolve(azimuthDigits)
	case grid.Shade.String():
		return g.decimals.Resolve(shadeDigits)
	}
	return trustDigits(l, g.decimals, part)
}

// writeRaster writes a raster to one output.
func (g *gridCommand) writeRaster(d *destination, raster *grid.Grid, l *loaded) error {
	switch d.format {
	case formatRaw, formatRaw32:
		return g.writeRaw(d, raster, l)
	case formatPNG:
		return g.writePicture(d, raster, l)
	}
	opt := gridcsv.Options{
		// Nodes stand at decimal places, which may need more digits than the
		// readings have.
		CoordinateDecimals: g.decimals.Resolve(max(l.set.DecimalsXY+2, raster.Spec.Decimals())),
		ValueDecimals:      g.valueDigits(l, d.part),
		NoData:             g.noData.String(),
		Workers:            g.workers(),
	}
	if g.layout.Word() == "list" {
		opt.Layout = gridcsv.List
	}
	return gridcsv.Write(d.w, raster, opt)
}

// describe puts a lattice into words.
func describe(spec grid.Spec) lattice {
	e := spec.Extent()
	return lattice{
		e.XMin.String(), e.YMin.String(), e.XMax.String(), e.YMax.String(),
		spec.CellX.String(), spec.CellY.String(), spec.Cols, spec.Rows, spec.ValuesAt.String(),
	}
}

// besidePath returns where the description of a raw raster goes.
func besidePath(path string) string { return path + ".json" }

// writeRaw writes the numbers alone and what they are beside them.
func (g *gridCommand) writeRaw(d *destination, raster *grid.Grid, l *loaded) error {
	opt := gridraw.Options{NoData: g.noData.String(), Workers: g.workers()}
	if d.format == formatRaw32 {
		opt.Type = gridraw.Float32
		// Half a unit in the last place that the readings carry.
		opt.LossMax = decimal.Float64(5, g.digitsCarried(l, d.part)+1)
	}
	if opt.Type == gridraw.Float32 {
		// What is lost has to be known before anything goes to a pipe.
		info, err := gridraw.Encode(io.Discard, raster, opt)
		if err != nil {
			return err
		}
		if info.Lossy > 0 {
			g.report.Warn("float32", fmt.Sprintf("%s: %d values differ by up to %v from what float32 holds, more than half a unit of the readings' last digit: raw keeps them",
				d.path, info.Lossy, info.Loss), "values", info.Lossy, "loss", info.Loss)
		}
		if err := g.settleWarnings(); err != nil {
			return err
		}
	}
	info, err := gridraw.Encode(d.w, raster, opt)
	if err != nil {
		return err
	}
	if d.beside == nil {
		g.report.Note("a pipe has no place for the description of the raw numbers: the lattice above is all that says what they are")
		return nil
	}
	_, err = d.beside.Write(gridraw.Describe(filepath.Base(d.path), raster, opt, info))
	return err
}

// digitsCarried returns the digits after the point that a quantity deserves by
// the readings alone.
func (g *gridCommand) digitsCarried(l *loaded, part string) int {
	switch part {
	case grid.Slope.String():
		return slopeDigits
	case grid.DownhillAzimuth.String():
		return azimuthDigits
	case grid.Shade.String():
		return shadeDigits
	case showDistance:
		return l.set.DecimalsXY
	}
	return l.set.DecimalsZ
}
