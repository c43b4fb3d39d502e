package main

import (
	"context"
	"fmt"
	"math"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/interp"
	"isofacet/interp/overlay"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

// differenceMaps draw the difference, to minus from, within all polygons together.
type differenceMaps struct {
	*volumes
	l       *loaded // the difference, as if it had been read
	raster  *grid.Grid
	drawing *drawing
}

// showDifference is what rasters of it are labelled with.
const showDifference = "difference"

func (m *differenceMaps) write(ctx context.Context, d *destination) error {
	if m.l == nil {
		if err := m.surface(ctx); err != nil {
			return err
		}
	}
	if d.part == partRaster {
		return m.writeRaster(ctx, d)
	}
	return m.writeShapes(ctx, d)
}

// surface makes the difference.
func (m *differenceMaps) surface(ctx context.Context) error {
	var region *triangulate.Region
	var rings []orb.Ring
	for _, r := range m.regions {
		rings = append(rings, r.rings...)
	}
	if rings != nil {
		var err error
		if region, err = triangulate.NewRegion(rings, nil); err != nil {
			return err
		}
	}
	_, finish := m.display.Stage("differences")
	s, err := overlay.DifferenceOf(ctx, m.from.ground, m.to.ground, region, overlay.Options{Workers: m.workers()})
	finish()
	if err != nil {
		return err
	}
	m.l = &loaded{set: &readings.Set{DecimalsXY: m.xy - 2, DecimalsZ: m.z - 2}, surface: s, drawn: &drawn{},
		decimalsXY: max(m.from.xy, m.to.xy), decimalsZ: max(m.from.z, m.to.z)}
	m.l.bound = shownBound(s)
	if s.Mesh().NumTriangles() == 0 {
		m.report.Warn("no-difference", "no place is covered by both: maps of the difference are empty")
	}
	return m.settleWarnings()
}

func shownBound(s *interp.Surface) orb.Bound {
	inf := math.Inf(1)
	b := orb.Bound{Min: orb.Point{inf, inf}, Max: orb.Point{-inf, -inf}}
	for t := range s.Mesh().Triangles() {
		for _, v := range s.Mesh().Corners(t) {
			b = b.Extend(s.Mesh().Position(v))
		}
	}
	return b
}

func (m *differenceMaps) mapLabels() grid.Labels {
	labels := m.to.labels
	if m.to.kind == kindLevel {
		labels = m.from.labels
	}
	labels.Show = showDifference
	return labels
}

func (m *differenceMaps) writeRaster(ctx context.Context, d *destination) error {
	g := m.grid
	g.writing, g.noData = m.writing, m.noData
	if m.raster == nil {
		if m.l.surface.Mesh().NumTriangles() == 0 && !g.extent.IsSet() {
			return fmt.Errorf("raster of the difference: no place is covered by both: expected surfaces that overlap")
		}
		spec, err := g.lattice(m.l)
		if err != nil {
			return err
		}
		if err := spec.Check(int64(m.budget.Bytes)); err != nil {
			return err
		}
		report, finish := m.display.Stage("filling")
		m.raster, err = grid.Fill(ctx, spec, m.l.surface, grid.Options{Workers: m.workers(), Progress: report})
		finish()
		if err != nil {
			return err
		}
		m.raster.Labels = m.mapLabels()
		g.describeRaster(m.l, m.raster)
		if err := m.settleWarnings(); err != nil {
			return err
		}
	}
	return g.writeRaster(d, m.raster, m.l)
}

func (m *differenceMaps) writeShapes(ctx context.Context, d *destination) error {
	if m.drawing == nil {
		c := m.contour
		c.writing = m.writing
		g := &ground{surface: m.l.surface, l: m.l, xy: m.l.decimalsXY + 2, labels: m.mapLabels(), low: math.Inf(1), high: math.Inf(-1)}
		for t := range m.l.surface.Mesh().Triangles() {
			for _, v := range m.l.surface.Mesh().Corners(t) {
				z := m.l.surface.Z()[v]
				g.low, g.high = min(g.low, z), max(g.high, z)
			}
		}
		levels, err := c.chosen(g)
		if err != nil {
			return err
		}
		m.drawing = &drawing{contourCommand: c, g: g, levels: levels, xy: c.decimals.Resolve(g.xy)}
		if err := m.settleWarnings(); err != nil {
			return err
		}
	}
	if d.part == partBands && m.drawing.made == nil {
		if err := m.drawing.makeBands(ctx); err != nil {
			return err
		}
	}
	return m.drawing.write(ctx, d)
}
