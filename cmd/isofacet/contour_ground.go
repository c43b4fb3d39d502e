package main

import (
	"context"
	"fmt"
	"math"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/status"
	"isofacet/contour"
	"isofacet/grid"
	"isofacet/interp"
)

// A ground is what isolines are drawn through: a surface or a raster.
type ground struct {
	surface *interp.Surface
	raster  *grid.Grid

	low, high float64 // range of the values
	xy        int     // digits after the point that coordinates deserve
	labels    grid.Labels

	l    *loaded  // nil for a raster
	list []*input // of l
}

func (c *contourCommand) surfaceGround(list []*input, l *loaded) *ground {
	g := &ground{surface: l.shown(), l: l, list: list, xy: l.decimalsXY + 2, labels: c.labels("")}
	// What is asked is the range of the triangles: a vertex may be in none.
	g.low, g.high = math.Inf(1), math.Inf(-1)
	m, z := g.surface.Mesh(), g.surface.Z()
	for t := range m.Triangles() {
		for _, v := range m.Corners(t) {
			g.low, g.high = min(g.low, z[v]), max(g.high, z[v])
		}
	}
	return g
}

func (c *contourCommand) rasterGround(ctx context.Context, in *rasterInput) (*ground, error) {
	raster, err := c.readRaster(ctx, in, c.noData.String())
	if err != nil {
		return nil, err
	}
	if err := c.agree(raster); err != nil {
		return nil, err
	}
	s := raster.Statistics(c.workers())
	c.report.Note(fmt.Sprintf("raster: %d nodes with a value, %d without", s.Count(), s.NoData), "values", s.Count(), "no_data", s.NoData)
	if s.Count() == 0 || raster.Spec.Cols < 2 || raster.Spec.Rows < 2 {
		return nil, status.With(status.WrongData, fmt.Errorf("%s: %d x %d nodes, %d with a value: expected squares of four nodes with values",
			in.Name, raster.Spec.Cols, raster.Spec.Rows, s.Count()), "lines run between neighbouring nodes: take a raster of at least two columns and rows")
	}
	return &ground{raster: raster, low: s.Min, high: s.Max, xy: raster.Spec.Decimals() + 2, labels: raster.Labels}, nil
}

// agree puts the labels of the command line and those of the raster together. They
// may not contradict each other: nothing is converted.
func (c *contourCommand) agree(g *grid.Grid) error {
	for _, l := range []struct {
		option, given string
		has           *string
	}{
		{"crs", c.crs.String(), &g.Labels.CRS},
		{"horizontal-datum", c.horizontalDatum.String(), &g.Labels.HorizontalDatum},
		{"vertical-datum", c.verticalDatum.String(), &g.Labels.VerticalDatum},
	} {
		switch {
		case l.given == "" || l.given == *l.has:
		case *l.has == "":
			*l.has = l.given
		default:
			return status.Usage(fmt.Errorf("--%s %q: the raster says %q: expected the same", l.option, l.given, *l.has),
				"leave --"+l.option+" out: the raster's label is carried on")
		}
	}
	return nil
}

// eachLine gives the isolines to use, in output order.
func (g *ground) eachLine(ctx context.Context, levels contour.Levels, opt contour.Options, use func(contour.Line) error) (contour.Report, error) {
	if g.raster != nil {
		return contour.EachRasterLine(ctx, g.raster, levels, opt, use)
	}
	return contour.EachLine(ctx, g.surface, levels, opt, use)
}

// bands returns the parts between the levels.
func (g *ground) bands(ctx context.Context, levels contour.Levels, opt contour.Options) ([]contour.Band, contour.BandReport, error) {
	if g.raster != nil {
		return contour.RasterBands(ctx, g.raster, levels, opt)
	}
	return contour.Bands(ctx, g.surface, levels, opt)
}

// rims returns every rim of the surface as a ring, those of voids among them.
func (g *ground) rims(ctx context.Context, opt contour.Options) ([]orb.Ring, error) {
	if g.raster != nil {
		// Without levels there is one band, which is everything.
		all, _, err := contour.RasterBands(ctx, g.raster, nil, opt)
		var rims []orb.Ring
		for i := range all {
			rims = append(rims, all[i].Polygon...)
		}
		return rims, err
	}
	m := g.surface.Mesh()
	var rims []orb.Ring
	for _, halfEdges := range m.Outline() {
		rim := make(orb.Ring, 0, len(halfEdges)+1)
		for _, h := range halfEdges {
			rim = append(rim, m.Position(m.Origin(h)))
		}
		rims = append(rims, append(rim, rim[0]))
	}
	return rims, nil
}

// taken is what the ground holds of the memory.
func (g *ground) taken() uint64 {
	if g.raster != nil {
		return uint64(g.raster.Spec.Bytes())
	}
	return uint64(g.l.surface.Mesh().NumVertices()) * bytesVertex
}
