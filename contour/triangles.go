package contour

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// triangles is a surface as a source of lines. A passage is a half-edge.
type triangles struct {
	mesh *triangulate.Mesh
	pos  []orb.Point
	z    []float64
	// ranks holds, for every vertex, how many levels are not above its value: it is above level k if ranks > k.
	ranks []int32
	rim   []int32 // the vertices on the outline, once it was gone along
	probe *probe
}

// probe looks into the following of lines, and puts faults into it, for tests that must notice them.
type probe struct {
	passed   func(k int, h triangulate.HalfEdge)
	flip     triangulate.Triangle // here the corner across from where a line enters changes sides
	crossing func(a orb.Point, za float64, b orb.Point, zb, level float64) orb.Point
}

func newTriangles(s *interp.Surface) *triangles {
	m := s.Mesh()
	return &triangles{mesh: m, pos: m.Positions(), z: s.Z()}
}

func (s *triangles) cells() int   { return s.mesh.NumTriangles() }
func (s *triangles) slots() int64 { return int64(s.mesh.NumTriangles()) }

func (s *triangles) rank(zs []float64, workers int) {
	s.ranks = make([]int32, len(s.z))
	inRanges(len(s.z), workers, func(_, from, to int) { rankValues(s.ranks[from:to], s.z[from:to], zs) })
}

// rankValues stores in dst how many of the levels zs are not above each of the values. Neighbours are likely to have near
// values.
func rankValues(dst []int32, values, zs []float64) {
	near := 0
	lo, hi := math.Inf(-1), math.Inf(1) // the levels below and above number near
	if len(zs) > 0 {
		hi = zs[0]
	}
	for i, z := range values {
		if z < lo || z >= hi {
			near = below(zs, z)
			lo, hi = math.Inf(-1), math.Inf(1)
			if near > 0 {
				lo = zs[near-1]
			}
			if near < len(zs) {
				hi = zs[near]
			}
		}
		dst[i] = int32(near)
	}
}

func (s *triangles) spans(dst []span, first int, outline *[]passage) {
	for i := range dst {
		h := triangulate.Triangle(first + i).HalfEdge(0)
		a, b, c := s.ranks[s.mesh.Origin(h)], s.ranks[s.mesh.Origin(h+1)], s.ranks[s.mesh.Origin(h+2)]
		dst[i] = span{min(a, b, c), max(a, b, c)}
		if dst[i].lo == dst[i].hi {
			continue
		}
		for e := h; e < h+3; e++ {
			if s.mesh.Twin(e) == triangulate.NoHalfEdge {
				if sp := s.side(passage(e)); sp.lo < sp.hi {
					*outline = append(*outline, passage(e))
				}
			}
		}
	}
}

func (s *triangles) side(p passage) span {
	h := triangulate.HalfEdge(p)
	return span{s.ranks[s.mesh.Dest(h)], s.ranks[s.mesh.Origin(h)]}
}

func (s *triangles) begins(p passage) bool {
	return s.mesh.Twin(triangulate.HalfEdge(p)) == triangulate.NoHalfEdge
}

func (s *triangles) follow(k int, z float64, starts []passage, seeds []int32, m *marks, points *arena, use func(fragment)) {
	for _, p := range starts {
		h := triangulate.HalfEdge(p)
		if m.claim(int64(h.Triangle())) {
			use(s.followFrom(k, z, h, m, points))
		}
	}
	for _, t := range seeds {
		if m.claim(int64(t)) {
			use(s.followFrom(k, z, s.entry(k, triangulate.Triangle(t)), m, points))
		}
	}
}

// entry returns the half-edge of t through which the line of level k enters: from a corner above to one below.
func (s *triangles) entry(k int, t triangulate.Triangle) triangulate.HalfEdge {
	h := t.HalfEdge(0)
	r := int32(k)
	a, b, c := s.ranks[s.mesh.Origin(h)] > r, s.ranks[s.mesh.Origin(h+1)] > r, s.ranks[s.mesh.Origin(h+2)] > r
	switch {
	case a && !b:
		return h
	case b && !c:
		return h + 1
	case c && !a:
		return h + 2
	}
	panic("contour: a triangle in the list of a level that does not cross it")
}

// followFrom returns the fragment that begins at h, whose triangle is claimed.
func (s *triangles) followFrom(k int, z float64, h triangulate.HalfEdge, m *marks, points *arena) fragment {
	f := fragment{first: passage(h)}
	line := points.begin()
	// The side that is passed runs from a, above, to b, below.
	a, b := s.mesh.Origin(h), s.mesh.Dest(h)
	pa, pb := s.pos[a], s.pos[b]
	za, zb := s.z[a], s.z[b]
	for {
		if s.probe == nil {
			line = appendPoint(line, Crossing(pa, za, pb, zb, z))
		} else {
			s.probe.passed(k, h)
			line = appendPoint(line, s.probe.crossing(pa, za, pb, zb, z))
		}
		out := s.mesh.Prev(h) // c→a
		c := s.mesh.Origin(out)
		above := s.z[c] >= z
		if s.probe != nil && s.probe.flip == h.Triangle() {
			above = !above
		}
		if above {
			out = s.mesh.Next(h) // b→c
			pa, za = s.pos[c], s.z[c]
		} else {
			pb, zb = s.pos[c], s.z[c]
		}
		h = s.mesh.Twin(out)
		if h == triangulate.NoHalfEdge {
			line = appendPoint(line, Crossing(pa, za, pb, zb, z))
			f.after = noPassage
			break
		}
		if !m.claim(int64(h.Triangle())) {
			f.after = passage(h)
			break
		}
	}
	if f.after == f.first {
		line = append(line, line[0]) // room for the point that will repeat the first
	}
	f.points = points.keep(line)
	return f
}

// appendPoint appends p unless it repeats the last point.
func appendPoint(line []orb.Point, p orb.Point) []orb.Point {
	if n := len(line); n > 0 && line[n-1] == p {
		return line
	}
	return append(line, p)
}

func (s *triangles) release(seeds []int32, m *marks) {
	for _, t := range seeds {
		m.free(int64(t))
	}
}

func (s *triangles) outline(zs []float64, use func(a, b orb.Point, ra, rb int, at func(k int) orb.Point) error) error {
	for h := range triangulate.HalfEdge(s.mesh.NumHalfEdges()) {
		if s.mesh.Twin(h) != triangulate.NoHalfEdge {
			continue
		}
		a, b := s.mesh.Origin(h), s.mesh.Dest(h)
		s.rim = append(s.rim, int32(a))
		at := func(k int) orb.Point { return Crossing(s.pos[a], s.z[a], s.pos[b], s.z[b], zs[k]) }
		if err := use(s.pos[a], s.pos[b], int(s.ranks[a]), int(s.ranks[b]), at); err != nil {
			return err
		}
	}
	return nil
}

func (s *triangles) reading(v int32) (orb.Point, float64) { return s.pos[v], s.z[v] }

func (s *triangles) near(within float64, zs []float64, workers int) []int32 {
	parts := make([][]int32, max(1, workers), max(1, workers)+1)
	inRanges(s.mesh.NumTriangles(), workers, func(w, from, to int) {
		found := parts[w]
		for t := from; t < to; t++ {
			v := s.mesh.Corners(triangulate.Triangle(t))
			p, q, r := &s.pos[v[0]], &s.pos[v[1]], &s.pos[v[2]]
			ux, uy, vx, vy := q[0]-p[0], q[1]-p[1], r[0]-p[0], r[1]-p[1]
			area := float64(ux*vy) - float64(uy*vx)
			// No side is longer: the altitudes are area/longest at least. Twice the distance makes up for what is lost
			// to rounding.
			longest := math.Abs(ux) + math.Abs(uy) + math.Abs(vx) + math.Abs(vy)
			least := float64(2 * within * longest)
			k := s.ranks[v[0]]
			if area > least && k == s.ranks[v[1]] && k == s.ranks[v[2]] {
				continue // high, and no level crosses it
			}
			found = s.nearIn(v, area, least, within, zs, found)
		}
		parts[w] = found
	})
	return sortedOnce(append(parts, s.rim))
}

// nearIn appends the corners of a triangle to which a line or a side may come within some distance; area is twice
// its area, and least what its altitudes times its sides, and so on, are compared with.
func (s *triangles) nearIn(v [3]triangulate.Vertex, area, least, within float64, zs []float64, found []int32) []int32 {
	z := [3]float64{s.z[v[0]], s.z[v[1]], s.z[v[2]]}
	gap := [3]float64{math.Inf(1), math.Inf(1), math.Inf(1)}
	spread := 0.0
	if s.ranks[v[0]] != s.ranks[v[1]] || s.ranks[v[0]] != s.ranks[v[2]] {
		spread = max(z[0], z[1], z[2]) - min(z[0], z[1], z[2])
		for i := range 3 {
			gap[i] = levelGap(z[i], s.ranks[v[i]], zs)
		}
	}
	if keeps(area, min(gap[0], gap[1], gap[2]), spread, least) {
		return found
	}
	for i := range 3 {
		a, b := s.pos[v[(i+1)%3]], s.pos[v[(i+2)%3]]
		dx, dy := b[0]-a[0], b[1]-a[1]
		if !keeps(area, gap[i], spread, float64(2*within*math.Sqrt(float64(dx*dx)+float64(dy*dy)))) {
			found = append(found, int32(v[i]))
		}
	}
	return found
}
