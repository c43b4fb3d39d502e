package triangulate

import (
	"cmp"
	"iter"
	"slices"

	"isofacet/triangulate/exact"
)

// byPosition lists the vertices in (x, y) order.
func (m *Mesh) byPosition() []Vertex {
	order := make([]Vertex, len(m.pos))
	for i := range order {
		order[i] = Vertex(i)
	}
	slices.SortFunc(order, func(a, b Vertex) int { return exact.CompareXY(m.pos[a], m.pos[b]) })
	return order
}

// Ordered returns the vertices in (x, y) order, the order in which they are
// written. Time O(n log n).
func (m *Mesh) Ordered() []Vertex { return m.byPosition() }

// Rank returns, for every vertex, its place in (x, y) order. Time O(n log n).
func (m *Mesh) Rank() []int32 {
	rank := make([]int32, len(m.pos))
	for i, v := range m.byPosition() {
		rank[v] = int32(i)
	}
	return rank
}

// CanonicalTriangles ranges over the triangles in the order in which they are
// written, each with its corners: the smallest corner in (x, y) order first,
// counter-clockwise, triangles sorted by their corners' ranks. The sequence
// depends on the set of positions alone. rank is what Rank returns.
// Time O(n log d) for vertices with d triangles or fewer, 4 bytes a vertex and a
// triangle.
func (m *Mesh) CanonicalTriangles(rank []int32) iter.Seq2[Triangle, [3]Vertex] {
	// Those whose smallest corner has rank r come to ts[end[r-1]:end[r]], by
	// counting; there are two on average, which are then sorted by the others.
	smallest := func(t Triangle) int32 {
		c := m.Corners(t)
		return min(rank[c[0]], rank[c[1]], rank[c[2]])
	}
	end := make([]int32, len(rank)+1)
	for t := range m.Triangles() {
		end[smallest(t)+1]++
	}
	for r := range rank {
		end[r+1] += end[r]
	}
	ts := make([]Triangle, m.NumTriangles())
	for t := range m.Triangles() {
		r := smallest(t)
		ts[end[r]] = t
		end[r]++
	}
	byOthers := func(a, b Triangle) int {
		ca, cb := m.Canonical(a, rank), m.Canonical(b, rank)
		return cmp.Or(cmp.Compare(rank[ca[1]], rank[cb[1]]), cmp.Compare(rank[ca[2]], rank[cb[2]]))
	}
	from := int32(0)
	for _, to := range end[:len(rank)] {
		slices.SortFunc(ts[from:to], byOthers)
		from = to
	}
	return func(yield func(Triangle, [3]Vertex) bool) {
		for _, t := range ts {
			if !yield(t, m.Canonical(t, rank)) {
				return
			}
		}
	}
}

// Canonical returns the corners of t counter-clockwise from the smallest in
// (x, y) order.
func (m *Mesh) Canonical(t Triangle, rank []int32) [3]Vertex {
	c := m.Corners(t)
	switch {
	case rank[c[1]] < rank[c[0]] && rank[c[1]] < rank[c[2]]:
		return [3]Vertex{c[1], c[2], c[0]}
	case rank[c[2]] < rank[c[0]] && rank[c[2]] < rank[c[1]]:
		return [3]Vertex{c[2], c[0], c[1]}
	}
	return c
}

// Hull returns the vertices on the boundary of the convex hull, those in the
// middle of a straight side included, counter-clockwise from the smallest in
// (x, y) order. When all vertices lie on one line it returns them in (x, y)
// order. Time O(n).
func (m *Mesh) Hull() []Vertex {
	if len(m.half) == 0 {
		return m.byPosition()
	}
	start := NoHalfEdge
	for h := range HalfEdge(len(m.half)) {
		if m.half[h].twin == NoHalfEdge &&
			(start == NoHalfEdge || exact.CompareXY(m.pos[m.Origin(h)], m.pos[m.Origin(start)]) < 0) {
			start = h
		}
	}
	var hull []Vertex
	for h := start; ; {
		hull = append(hull, m.Origin(h))
		h = h.next()
		for m.half[h].twin != NoHalfEdge {
			h = m.half[h].twin.next()
		}
		if h == start {
			return hull
		}
	}
}

// Outline returns every rim of the surface as a ring of half-edges, the surface
// on their left: outer rims run counter-clockwise, rims of voids clockwise. Where
// the surface touches itself at a vertex a ring turns back rather than crossing.
// Rings begin at their smallest vertex in (x, y) order and are sorted by it, and
// by the next. Time O(half-edges).
func (m *Mesh) Outline() [][]HalfEdge {
	seen := map[HalfEdge]bool{}
	var rings [][]HalfEdge
	for start := range HalfEdge(m.shown) {
		if m.Twin(start) != NoHalfEdge || seen[start] {
			continue
		}
		var ring []HalfEdge
		least := 0
		for h := start; !seen[h]; h = m.nextOutside(h) {
			seen[h] = true
			ring = append(ring, h)
			if m.compareRim(h, ring[least]) < 0 {
				least = len(ring) - 1
			}
		}
		rings = append(rings, slices.Concat(ring[least:], ring[:least]))
	}
	slices.SortFunc(rings, func(a, b []HalfEdge) int { return m.compareRim(a[0], b[0]) })
	return rings
}

// compareRim orders half-edges by the places of origin and destination.
func (m *Mesh) compareRim(g, h HalfEdge) int {
	if c := exact.CompareXY(m.pos[m.Origin(g)], m.pos[m.Origin(h)]); c != 0 {
		return c
	}
	return exact.CompareXY(m.pos[m.Dest(g)], m.pos[m.Dest(h)])
}

// nextOutside returns the half-edge after the outline's h, counter-clockwise
// round the surface.
func (m *Mesh) nextOutside(h HalfEdge) HalfEdge {
	h = h.next()
	for m.Twin(h) != NoHalfEdge {
		h = m.Twin(h).next()
	}
	return h
}
