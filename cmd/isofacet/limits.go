package main

import (
	"context"
	"errors"
	"fmt"
	"math"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/io/lines"
	"isofacet/triangulate"
)

// How far the surface reaches: the longest edge, boundary and voids.

// trim leaves out what reaches in from the outside over edges that are too long.
func (p *program) trim(l *loaded, most decimal.Number) error {
	before, area := l.surface.Mesh().NumTriangles(), l.surface.Area()
	s, err := interp.New(l.surface.Mesh().Trim(most.Float64()), l.surface.Z())
	if err != nil {
		return err
	}
	l.surface = s
	l.drawn.trimming = true
	l.drawn.trimmed = before - s.Mesh().NumTriangles()
	l.drawn.trimArea = area - s.Area()
	if before > 0 && s.Mesh().NumTriangles() == 0 {
		return status.With(status.WrongData, fmt.Errorf("max edge %s: each of the %s has a longer edge: nothing of the surface is left: expected a limit above the usual spacing", most, counted(before, "triangle")),
			"isofacet inspect without --max-edge suggests one")
	}
	l.drawn.alone = s.WithoutTriangle()
	xy, _ := l.digits(option.Decimals{})
	p.report.Note(fmt.Sprintf("max edge %s: %s left out, %v of area", most, counted(l.drawn.trimmed, "triangle"), number{l.drawn.trimArea, xy}),
		"triangles", l.drawn.trimmed, "area", l.drawn.trimArea)
	inputs := s.Mesh().Inputs()
	if len(l.drawn.alone) > 0 {
		p.report.Note(fmt.Sprintf("without a triangle: %s", countedVertices(len(l.drawn.alone))), "vertices", len(l.drawn.alone))
	}
	p.listSome(len(l.drawn.alone), func(i int) string {
		at := s.Mesh().Position(l.drawn.alone[i])
		return fmt.Sprintf("without a triangle: %s at (%v, %v)", l.inputPlace(int(inputs[l.drawn.alone[i]])), at[0], at[1])
	})
	return nil
}

// limit cuts the surface at boundary and voids.
func (p *program) limit(ctx context.Context, l *loaded, boundary, voids *lines.Set, opt triangulate.Options) error {
	if len(boundary.Lines)+len(voids.Lines) == 0 {
		return nil
	}
	d := l.drawn
	region, err := triangulate.NewRegion(boundary.Rings(), voids.Rings())
	if err != nil {
		return ringError(boundary, voids, err)
	}
	opt.Progress = nil
	if d.cut, err = l.surface.Clip(ctx, region, opt); err != nil {
		return err
	}
	d.region = region
	d.rings = ringReport{
		boundaries: len(boundary.Lines), voids: len(voids.Lines),
		keptArea: d.cut.Surface.Area(),
	}
	if d.rings.boundaryArea, err = enclosed(ctx, boundary.Rings(), opt); err != nil {
		return err
	}
	if d.rings.voidArea, err = enclosed(ctx, voids.Rings(), opt); err != nil {
		return err
	}
	d.rings.inBoundary = l.surface.Area()
	if len(boundary.Lines) > 0 {
		d.rings.inBoundary = d.rings.keptArea
		if len(voids.Lines) > 0 {
			only, err := triangulate.NewRegion(boundary.Rings(), nil)
			if err != nil {
				return ringError(boundary, voids, err)
			}
			within, err := l.surface.Clip(ctx, only, opt)
			if err != nil {
				return err
			}
			d.rings.inBoundary = within.Surface.Area()
		}
	}
	// What the areas of two ways of adding up may differ by says nothing.
	settle := func(part *float64, of float64) {
		if math.Abs(of-*part) <= 1e-9*of {
			*part = of
		}
	}
	d.rings.taken = max(d.rings.inBoundary-d.rings.keptArea, 0)
	settle(&d.rings.taken, d.rings.voidArea)
	if d.rings.taken <= min(1e-9*d.rings.voidArea, 1e-12*d.rings.inBoundary) {
		d.rings.taken = 0
	}
	if len(boundary.Lines) > 0 {
		settle(&d.rings.inBoundary, d.rings.boundaryArea)
	}
	for _, at := range l.set.Points {
		if !region.Contains(at) {
			d.outside++
		}
	}
	return p.tellRings(l, boundary, voids)
}

// tellRings says what boundary and voids left of the surface.
func (p *program) tellRings(l *loaded, boundary, voids *lines.Set) error {
	g := l.drawn.rings
	xy, _ := l.digits(option.Decimals{})
	area := func(a float64) number { return number{a, xy} }
	if g.boundaries > 0 {
		text := fmt.Sprintf("boundary: %s, enclosing %v", counted(g.boundaries, "ring"), area(g.boundaryArea))
		if rest := g.boundaryArea - g.inBoundary; rest > 0 {
			text += fmt.Sprintf("; %v of that has no surface", area(rest))
		}
		p.report.Note(text, "rings", g.boundaries, "area", g.boundaryArea, "with_surface", g.inBoundary)
	}
	if g.voids > 0 {
		text := fmt.Sprintf("voids: %s, enclosing %v", counted(g.voids, "ring"), area(g.voidArea))
		if rest := g.voidArea - g.taken; rest > 0 {
			text += fmt.Sprintf("; %v of that lies beyond the boundary or the surface", area(rest))
		}
		p.report.Note(text, "rings", g.voids, "area", g.voidArea, "taken", g.taken)
		if g.taken == 0 {
			p.report.Warn("voids-outside", "the voids take nothing away: they lie beyond the boundary or the surface")
		}
	}
	if n := l.drawn.outside; n > 0 {
		p.report.Note("outside: "+counted(n, "reading")+" beyond the boundary or in voids", "readings", n)
	}
	if l.drawn.cut.Surface.Mesh().NumTriangles() == 0 {
		return nothingLeft(l.bound, boundary, voids)
	}
	return nil
}

// nothingLeft reports rings that leave no surface.
func nothingLeft(readings orb.Bound, boundary, voids *lines.Set) error {
	text := func(b orb.Bound) string {
		return fmt.Sprintf("from (%v, %v) to (%v, %v)", b.Min[0], b.Min[1], b.Max[0], b.Max[1])
	}
	what, leave, rings := "the voids", "leave", voids
	if len(boundary.Lines) > 0 {
		what, leave, rings = "the boundary", "leaves", boundary
		if len(voids.Lines) > 0 {
			what += " with voids"
		}
	}
	b := orb.LineString(rings.Lines[0].Points).Bound()
	for _, r := range rings.Rings() {
		b = b.Union(r.Bound())
	}
	return status.With(status.WrongData, fmt.Errorf("%s: %s %s %s nothing of the surface of readings %s: expected rings that leave some of it",
		rings.Lines[0].File, what, text(b), leave, text(readings)), "are x and y of the rings in the same system and order as those of the readings?")
}

// enclosed is the area inside an odd number of rings: what they cut out of their
// bounding box.
func enclosed(ctx context.Context, rings []orb.Ring, opt triangulate.Options) (float64, error) {
	if len(rings) == 0 {
		return 0, nil
	}
	region, err := triangulate.NewRegion(rings, nil)
	if err != nil {
		return 0, err
	}
	b := rings[0].Bound()
	for _, ring := range rings {
		b = b.Union(ring.Bound())
	}
	box, err := triangulate.Delaunay(ctx, []orb.Point{b.Min, {b.Max[0], b.Min[1]}, b.Max, {b.Min[0], b.Max[1]}}, opt)
	if err != nil {
		return 0, err
	}
	s, err := interp.New(box, make([]float64, box.NumVertices()))
	if err != nil {
		return 0, err
	}
	cut, err := s.Clip(ctx, region, opt)
	if err != nil {
		return 0, err
	}
	return cut.Surface.Area(), nil
}

// ringError names the ring of an error by its file.
func ringError(boundary, voids *lines.Set, err error) error {
	e, ok := errors.AsType[*triangulate.RingError](err)
	if !ok {
		return err
	}
	set := boundary
	if e.Void {
		set = voids
	}
	ring := &set.Lines[e.Index]
	place := ring.At(max(e.Vertex, 0))
	text := fmt.Sprintf("%s: ring %q: %s", place, ring.Name, e.Reason)
	if e.Vertex >= 0 {
		text = fmt.Sprintf("%s: ring %q near (%v, %v): %s", place, ring.Name, e.At[0], e.At[1], e.Reason)
	}
	return status.With(status.WrongData, errors.New(text), "mend the ring there; two rings may touch or lie inside each other")
}

// limitSamples makes places that boundary and voids leave out outside, and gives those on
// a rim the triangle that owns them on what is left.
func (l *loaded) limitSamples(at []orb.Point, samples []interp.Sample) {
	d := l.drawn
	if d.region == nil {
		return
	}
	tracer := d.cut.Tracer()
	for i := range samples {
		s := &samples[i]
		switch d.region.Place(at[i]) {
		case triangulate.Outside:
			s.Location = triangulate.Location{Place: triangulate.Outside, Triangle: triangulate.NoTriangle, Edge: triangulate.NoHalfEdge, Vertex: triangulate.NoVertex}
		case triangulate.OnEdge:
			s.Location = tracer.Kept(at[i], s.Location)
		}
	}
}
