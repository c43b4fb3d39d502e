package interp

import (
	"cmp"
	"context"
	"errors"
	"maps"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Clip is a surface cut at the rings of a region.
type Clip struct {
	// Surface has the triangles inside the region, those that a ring passes
	// through cut into smaller ones along it. Its vertices are those of the
	// surface that was cut, with their values, and new ones where a ring has a
	// vertex or crosses an edge; a new one has the value that the surface had
	// there. Its mesh's inputs are the old vertices, by number, then the new.
	Surface *Surface

	from     *Surface
	segments [][]int32 // of the mesh's segments, those of the old mesh that they lie along
	rings    int       // the first so many are pieces of rings

	whole    *triangulate.Mesh // the old one, hidden triangles shown
	supports []support         // of the mesh's inputs after the old vertices
}

// SegmentsAlong returns the numbers of the old mesh's segments (its breaklines)
// that half-edge h of the cut surface lies along.
func (c *Clip) SegmentsAlong(h triangulate.HalfEdge) []int32 {
	var along []int32
	for _, i := range c.Surface.mesh.SegmentsAlong(h) {
		along = append(along, c.segments[i]...)
	}
	slices.Sort(along)
	return slices.Compact(along)
}

// OnRing tells whether half-edge h of the cut surface lies along a ring.
func (c *Clip) OnRing(h triangulate.HalfEdge) bool {
	is := c.Surface.mesh.SegmentsAlong(h)
	return len(is) > 0 && int(is[0]) < c.rings
}

// Clip cuts s at the rings of r and leaves out what is outside. The triangles of s
// are not changed, only divided: heights inside stay as they were, to the rounding
// of the places where rings cross edges.
//
// Products that need geometry, such as isolines, bands, areas and volumes, are
// taken from the clipped surface; values at places from s itself, where
// r.Contains decides.
//
// Time: that of triangulating the vertices again, and some microseconds for each
// crossing of a ring with an edge. It returns ctx.Err() if ctx ends first.
func (s *Surface) Clip(ctx context.Context, r *triangulate.Region, opt triangulate.Options) (*Clip, error) {
	c := newCutter(s)
	boundary, voids := r.Rings()
	for _, ring := range slices.Concat(boundary, voids) {
		for i := 1; i < len(ring); i++ {
			c.ringEdge(ring[i-1], ring[i])
		}
	}
	rings := len(c.segs)
	c.keepEdges()

	pts, segs, of := c.pts, c.segs, c.of
	mesh, err := triangulate.Constrained(ctx, pts, segs, opt)
	var crossing *triangulate.CrossingError
	if errors.As(err, &crossing) {
		// Rounding moved a crossing over a vertex or an edge nearby.
		var split *triangulate.Split
		if split, err = triangulate.SplitCrossings(ctx, pts, segs); err != nil {
			return nil, err
		}
		pts, segs = split.Points, split.Pieces
		of = make([][]int32, len(segs))
		pieces := 0
		for i, k := range split.Of {
			of[i] = c.of[k]
			if int(k) < rings {
				pieces++ // pieces keep the order of what they are of
			}
		}
		rings = pieces
		for range split.Made {
			c.supports = append(c.supports, support{triangulate.NoHalfEdge, triangulate.NoTriangle})
		}
		mesh, err = triangulate.Constrained(ctx, pts, segs, opt)
	}
	if err != nil {
		return nil, err
	}
	z := make([]float64, mesh.NumVertices())
	for i := len(pts) - 1; i >= 0; i-- { // an old vertex has the last word
		z[mesh.VertexOf(i)] = c.valueAt(i, pts[i])
	}
	clip := &Clip{from: s, segments: of, rings: rings, whole: c.whole, supports: c.supports}
	outside := clip.outside(mesh, r, c)
	mesh = mesh.Hide(func(t triangulate.Triangle) bool { return outside[t] || c.wasHidden(mesh, t) })
	clip.Surface, err = New(mesh, z)
	return clip, err
}

// support is what of the old mesh a new point lies on: one of the two, or, for a
// point made to undo a crossing by rounding, neither is known.
type support struct {
	edge     triangulate.HalfEdge
	triangle triangulate.Triangle
}

// cutter collects the points and segments that divide the triangles of a surface
// along rings.
type cutter struct {
	s     *Surface
	whole *triangulate.Mesh // hidden triangles shown: they are cut as well
	loc   *triangulate.Locator

	pts      []orb.Point
	supports []support // of the points after the old vertices
	index    map[orb.Point]int32
	segs     []triangulate.Segment
	of       [][]int32

	cuts    map[triangulate.HalfEdge][]int32 // points on an edge, by its smaller half-edge
	touched map[triangulate.Triangle]bool
}

func newCutter(s *Surface) *cutter {
	whole := s.mesh.Whole()
	return &cutter{
		s: s, whole: whole, loc: whole.Locator(),
		pts:     slices.Clone(whole.Positions()),
		index:   map[orb.Point]int32{},
		cuts:    map[triangulate.HalfEdge][]int32{},
		touched: map[triangulate.Triangle]bool{},
	}
}

// ringEdge adds the piece of a ring from a to b, as far as there are triangles.
func (c *cutter) ringEdge(a, b orb.Point) {
	if a == b || c.whole.NumTriangles() == 0 {
		return
	}
	var chain []int32
	add := func(k int32) {
		if n := len(chain); n == 0 || chain[n-1] != k {
			chain = append(chain, k)
		}
	}
	if at := c.loc.Locate(a); at.Place == triangulate.Inside {
		add(c.point(a, support{triangulate.NoHalfEdge, at.Triangle}))
	}
	for x := range c.loc.Cross(a, b) {
		if x.Place == triangulate.OnVertex {
			add(int32(x.Vertex))
		} else {
			add(c.onEdge(x.Edge, a, b))
		}
		if x.Into != triangulate.NoTriangle {
			c.touched[x.Into] = true
		}
	}
	if at := c.loc.Locate(b); at.Place == triangulate.Inside {
		add(c.point(b, support{triangulate.NoHalfEdge, at.Triangle}))
	}
	for i := 1; i < len(chain); i++ {
		c.segs, c.of = append(c.segs, triangulate.Segment{From: chain[i-1], To: chain[i]}), append(c.of, nil)
	}
}

// point returns the number of the point at p, which lies on what is given. Where
// edges run together, crossings with several of them may round to one point: it has
// its value from the first by place, whichever way the rings run.
func (c *cutter) point(p orb.Point, on support) int32 {
	k, ok := c.index[p]
	if !ok {
		k = int32(len(c.pts))
		c.index[p] = k
		c.pts, c.supports = append(c.pts, p), append(c.supports, on)
	} else if old := &c.supports[int(k)-c.whole.NumVertices()]; c.compare(on, *old) < 0 {
		*old = on
	}
	if on.triangle != triangulate.NoTriangle {
		c.touched[on.triangle] = true
	}
	return k
}

// compare orders supports, edges before triangles, by the places of their vertices.
func (c *cutter) compare(a, b support) int {
	if (a.edge == triangulate.NoHalfEdge) != (b.edge == triangulate.NoHalfEdge) {
		if a.edge != triangulate.NoHalfEdge {
			return -1
		}
		return 1
	}
	return slices.CompareFunc(c.corners(a), c.corners(b), func(p, q orb.Point) int { return exact.CompareXY(p, q) })
}

// corners returns the places of a support's vertices in order.
func (c *cutter) corners(s support) []orb.Point {
	m := c.whole
	var at []orb.Point
	if s.edge != triangulate.NoHalfEdge {
		at = []orb.Point{m.Position(m.Origin(s.edge)), m.Position(m.Dest(s.edge))}
	} else {
		for _, v := range m.Corners(s.triangle) {
			at = append(at, m.Position(v))
		}
	}
	slices.SortFunc(at, func(p, q orb.Point) int { return exact.CompareXY(p, q) })
	return at
}

// onEdge returns the number of the point where the line from a to b crosses the
// edge of h.
func (c *cutter) onEdge(h triangulate.HalfEdge, a, b orb.Point) int32 {
	m := c.whole
	if t := m.Twin(h); t != triangulate.NoHalfEdge && t < h {
		h = t
	}
	o, d := m.Position(m.Origin(h)), m.Position(m.Dest(h))
	var p orb.Point
	switch {
	case exact.Orient(o, d, a) == 0:
		p = a
	case exact.Orient(o, d, b) == 0:
		p = b
	default:
		p = triangulate.Intersection(o, d, a, b)
	}
	switch p {
	case o:
		return int32(m.Origin(h))
	case d:
		return int32(m.Dest(h))
	}
	k := c.point(p, support{h, triangulate.NoTriangle})
	if !slices.Contains(c.cuts[h], k) {
		c.cuts[h] = append(c.cuts[h], k)
	}
	c.touched[h.Triangle()] = true
	if t := m.Twin(h); t != triangulate.NoHalfEdge {
		c.touched[t.Triangle()] = true
	}
	return k
}

// keepEdges adds the edges of all touched triangles, and those along breaklines,
// divided where they are cut, so that triangulating again changes none.
func (c *cutter) keepEdges() {
	m := c.whole
	done := map[triangulate.HalfEdge]bool{}
	keep := func(h triangulate.HalfEdge) {
		if t := m.Twin(h); t != triangulate.NoHalfEdge && t < h {
			h = t
		}
		if done[h] {
			return
		}
		done[h] = true
		along := m.SegmentsAlong(h)
		o, d := m.Position(m.Origin(h)), m.Position(m.Dest(h))
		cuts := c.cuts[h]
		// Rounding keeps the order along each axis.
		slices.SortFunc(cuts, func(i, j int32) int {
			for axis := range 2 {
				order := cmp.Compare(c.pts[i][axis], c.pts[j][axis]) * cmp.Compare(d[axis], o[axis])
				if order != 0 {
					return order
				}
			}
			return 0
		})
		from := int32(m.Origin(h))
		for _, k := range append(slices.Clone(cuts), int32(m.Dest(h))) {
			c.segs, c.of = append(c.segs, triangulate.Segment{From: from, To: k}), append(c.of, along)
			from = k
		}
	}
	for _, t := range slices.Sorted(maps.Keys(c.touched)) {
		for i := range 3 {
			keep(t.HalfEdge(i))
		}
	}
	if m.HasConstraints() {
		for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
			if m.IsConstrained(h) {
				keep(h)
			}
		}
	}
}

// valueAt is the value of input i of the new mesh, at p.
func (c *cutter) valueAt(i int, p orb.Point) float64 {
	old := c.whole.NumVertices()
	if i < old {
		return c.s.z[i]
	}
	on := c.supports[i-old]
	full := &Surface{mesh: c.whole, pos: c.s.pos, z: c.s.z}
	switch {
	case on.edge != triangulate.NoHalfEdge:
		return full.Value(triangulate.Location{Place: triangulate.OnEdge, Triangle: on.edge.Triangle(), Edge: on.edge, Vertex: triangulate.NoVertex}, p)
	case on.triangle != triangulate.NoTriangle:
		return full.Value(triangulate.Location{Place: triangulate.Inside, Triangle: on.triangle, Edge: triangulate.NoHalfEdge, Vertex: triangulate.NoVertex}, p)
	}
	return full.Value(c.loc.Locate(p), p)
}
