package interp

import (
	"cmp"
	"math"
	"slices"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Quality counts triangles that deserve a look before a surface is trusted.
type Quality struct {
	// Flat triangles have three equal heights. Where lines of equal height were
	// surveyed they bench the ground and hide crests and valleys.
	Flat     int
	FlatArea float64 // in plan
	// Slivers have an angle below SliverAngle.
	Slivers int
	// Longest holds the longest edges, at most as many as were asked for, the
	// longest first, each from its smaller vertex in (x, y) order.
	Longest []Edge
}

// SliverAngle is the angle in degrees below which a triangle counts as a sliver.
// Common practice looks at outer triangles below 5 to 10 degrees.
const SliverAngle = 5

// sinSliver is the sine of SliverAngle.
const sinSliver = 0.08715574274765817

// Edge is an edge of the surface.
type Edge struct {
	From, To triangulate.Vertex
	Length   float64 // in plan
}

// Quality looks at every triangle and at every edge; longest is how many of the
// longest edges are wanted. The result depends on the surface alone.
// Time O(triangles log longest).
func (s *Surface) Quality(longest int) Quality {
	var q Quality
	var flat exact.Sum
	m := s.mesh
	for t := range m.Triangles() {
		c := m.Corners(t)
		a, b, d := s.pos[c[0]], s.pos[c[1]], s.pos[c[2]]
		twice := exact.Area2(a[0], a[1], b[0], b[1], d[0], d[1])
		if s.z[c[0]] == s.z[c[1]] && s.z[c[1]] == s.z[c[2]] {
			q.Flat++
			flat.Add(twice / 2)
		}
		// The smallest angle lies between the two longest edges; its sine is twice
		// the area over their product.
		l := [3]float64{length(a[0], a[1], b[0], b[1]), length(b[0], b[1], d[0], d[1]), length(d[0], d[1], a[0], a[1])}
		slices.Sort(l[:])
		if twice < sinSliver*float64(l[1]*l[2]) {
			q.Slivers++
		}
	}
	q.FlatArea = flat.Value()
	q.Longest = s.longestEdges(longest)
	return q
}

func length(ax, ay, bx, by float64) float64 {
	dx, dy := bx-ax, by-ay
	return math.Sqrt(float64(dx*dx) + float64(dy*dy))
}

// longestEdges keeps the n longest edges seen so far in order.
func (s *Surface) longestEdges(n int) []Edge {
	m := s.mesh
	var best []Edge
	order := func(e, f Edge) int {
		if c := cmp.Compare(f.Length, e.Length); c != 0 {
			return c
		}
		if c := exact.CompareXY(s.pos[e.From], s.pos[f.From]); c != 0 {
			return c
		}
		return exact.CompareXY(s.pos[e.To], s.pos[f.To])
	}
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if t := m.Twin(h); t != triangulate.NoHalfEdge && t < h {
			continue
		}
		e := Edge{From: m.Origin(h), To: m.Dest(h)}
		if exact.CompareXY(s.pos[e.From], s.pos[e.To]) > 0 {
			e.From, e.To = e.To, e.From
		}
		p, q := s.pos[e.From], s.pos[e.To]
		e.Length = length(p[0], p[1], q[0], q[1])
		if len(best) == n && (n == 0 || order(e, best[n-1]) >= 0) {
			continue
		}
		i, _ := slices.BinarySearchFunc(best, e, order)
		best = slices.Insert(best, i, e)
		if len(best) > n {
			best = best[:n]
		}
	}
	return best
}

// WithoutTriangle returns the vertices that no triangle has, in (x, y) order.
// Time O(triangles + vertices).
func (s *Surface) WithoutTriangle() []triangulate.Vertex {
	used := make([]bool, len(s.pos))
	for t := range s.mesh.Triangles() {
		for _, v := range s.mesh.Corners(t) {
			used[v] = true
		}
	}
	var alone []triangulate.Vertex
	for v, ok := range used {
		if !ok {
			alone = append(alone, triangulate.Vertex(v))
		}
	}
	slices.SortFunc(alone, func(a, b triangulate.Vertex) int { return exact.CompareXY(s.pos[a], s.pos[b]) })
	return alone
}
