package flow

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/triangulate"
)

// Straight returns the flow line of a plane from a place to where it leaves the
// surface s, which gives it its limits and nothing else: heights are the plane's. It
// returns false if the place is outside. On a level plane the line has one point.
func (p *Plane) Straight(s *interp.Surface, from orb.Point) (Line, bool) {
	m := s.Mesh()
	l := m.Locator()
	if l.Locate(from).Place == triangulate.Outside {
		return Line{}, false
	}
	line := Line{Points: orb.LineString{from}, Z: []float64{p.At(from)}, Ending: Outline}
	g := p.Gradient
	if g.DzDx == 0 && g.DzDy == 0 {
		line.Ending = Flat
		return line, true
	}
	size := g.Size()
	ux, uy := -g.DzDx/size, -g.DzDy/size
	b := orb.MultiPoint(m.Positions()).Bound()
	far := float64(2 * (b.Max[0] - b.Min[0] + b.Max[1] - b.Min[1]))
	to := orb.Point{from[0] + float64(far*ux), from[1] + float64(far*uy)}
	end := from
	for c := range l.Cross(from, to) {
		if c.Into != triangulate.NoTriangle || c.Along != triangulate.NoHalfEdge {
			continue
		}
		if c.Place == triangulate.OnVertex {
			end = m.Position(c.Vertex)
		} else {
			end = triangulate.Intersection(from, to, m.Position(m.Origin(c.Edge)), m.Position(m.Dest(c.Edge)))
		}
		break
	}
	if end != from {
		line.Points = append(line.Points, end)
		line.Z = append(line.Z, min(p.At(end), line.Z[0]))
	}
	return line, true
}

// At returns the head of the plane at a place.
func (p *Plane) At(at orb.Point) float64 {
	return p.Head + (float64(p.Gradient.DzDx*(at[0]-p.Centre[0])) + float64(p.Gradient.DzDy*(at[1]-p.Centre[1])))
}

// LatticeMost bounds the nodes of a lattice.
const LatticeMost = 1_000_000

// Lattice returns the places on whole multiples of step within b, row by row from the
// south, and how many there would be if that is more than LatticeMost.
func Lattice(b orb.Bound, step decimal.Number) (nodes []orb.Point, tooMany float64) {
	s := step.Float64()
	if n := ((b.Max[0]-b.Min[0])/s + 1) * ((b.Max[1]-b.Min[1])/s + 1); n > LatticeMost {
		return nil, n
	}
	axis := func(low, high float64) (all []float64) {
		for k := int64(math.Ceil(low / s)); ; k++ {
			n, err := step.Times(k)
			if err != nil || n.Float64() > high {
				return all
			}
			if n.Float64() >= low {
				all = append(all, n.Float64())
			}
		}
	}
	xs := axis(b.Min[0], b.Max[0])
	for _, y := range axis(b.Min[1], b.Max[1]) {
		for _, x := range xs {
			nodes = append(nodes, orb.Point{x, y})
		}
	}
	return nodes, 0
}

// Divides returns the edges that the planes on both sides lead away from: water on
// one side does not come to the other. An edge is told by the half-edge whose origin is
// the smaller in (x, y) order; the order is that of the mesh. Time O(triangles).
func Divides(s *interp.Surface) []triangulate.HalfEdge { return edgesWhere(s, -1) }

// Drains returns the edges that the planes on both sides lead into, as Divides does.
func Drains(s *interp.Surface) []triangulate.HalfEdge { return edgesWhere(s, 1) }

func edgesWhere(s *interp.Surface, sign int) []triangulate.HalfEdge {
	t := NewTracer(s)
	m := s.Mesh()
	var all []triangulate.HalfEdge
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		twin := m.Twin(h)
		p, q := m.Position(m.Origin(h)), m.Position(m.Dest(h))
		if twin == triangulate.NoHalfEdge || q[0] < p[0] || q[0] == p[0] && q[1] < p[1] {
			continue
		}
		if t.drains(h) == sign && t.drains(twin) == sign {
			all = append(all, h)
		}
	}
	return all
}
