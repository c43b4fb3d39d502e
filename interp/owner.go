package interp

import (
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// A Tracer leads from a clipped surface back to the one that was cut. One goroutine at a
// time may use it.
type Tracer struct {
	cut, whole *triangulate.Locator
	pieces     *triangulate.Mesh
	uncut      *triangulate.Mesh
}

// Tracer returns a new tracer.
func (c *Clip) Tracer() *Tracer {
	pieces, uncut := c.Surface.mesh, c.from.mesh
	return &Tracer{pieces.Locator(), uncut.Locator(), pieces, uncut}
}

// TriangleOf returns the triangle of the surface that was cut which triangle t of the
// clipped one is a piece of; NoTriangle if rounding moved a sliver outside.
func (r *Tracer) TriangleOf(t triangulate.Triangle) triangulate.Triangle {
	return r.whole.LocateNext(middle(r.pieces, t)).Triangle
}

// Kept returns the location of p on the surface that was cut, with the owner that p has
// on what is left of it: along a ring, the triangle that owns p may be one that the
// region leaves out. at is the location that the whole surface gives.
//
// Values do not depend on it, slopes do. Where the rounded ring passes p by, at is
// returned: then both triangles reach into the region.
func (r *Tracer) Kept(p orb.Point, at triangulate.Location) triangulate.Location {
	if at.Place != triangulate.OnEdge && at.Place != triangulate.OnVertex {
		return at // in one triangle, or in none
	}
	left := r.cut.Locate(p)
	if left.Place == triangulate.Outside {
		return at
	}
	t := r.TriangleOf(left.Triangle)
	if t == triangulate.NoTriangle || t == at.Triangle {
		return at
	}
	for i := range 3 {
		h := t.HalfEdge(i)
		if at.Place == triangulate.OnVertex && r.uncut.Origin(h) == at.Vertex ||
			at.Place == triangulate.OnEdge && h == r.uncut.Twin(at.Edge) {
			at.Triangle, at.Edge = t, h
			return at
		}
	}
	return at
}

// middle is about the centroid of t, whichever of its corners is the first.
func middle(m *triangulate.Mesh, t triangulate.Triangle) orb.Point {
	var c [3]orb.Point
	for i, v := range m.Corners(t) {
		c[i] = m.Position(v)
	}
	slices.SortFunc(c[:], func(a, b orb.Point) int { return exact.CompareXY(a, b) })
	return orb.Point{c[0][0] + ((c[1][0]-c[0][0])+(c[2][0]-c[0][0]))/3, c[0][1] + ((c[1][1]-c[0][1])+(c[2][1]-c[0][1]))/3}
}
