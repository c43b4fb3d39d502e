package readings

import (
	"context"
	"slices"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"

	"github.com/paulmach/orb"
)

// Chains of near places.
//
// Two readings belong together if a chain of readings with steps of at most D joins
// them. The shortest tree that joins all places holds such a chain if there is one,
// and the Delaunay triangulation holds that tree (Preparata & Shamos 1985, section
// 6.1): so its edges of at most D, joined by a union-find, give the chains in the
// time of a triangulation, whatever the readings look like. A grid of cells of size
// D is faster on ordinary data and quadratic where many readings share a cell.

// chains groups the readings by chains of steps of at most s.o.Spots.Within.
func (s *collected) chains(ctx context.Context) (groups, error) {
	m, err := triangulate.Delaunay(ctx, s.Points, triangulate.Options{Workers: s.o.Workers})
	if err != nil {
		return groups{}, err
	}
	join := make([]int32, m.NumVertices())
	for v := range join {
		join[v] = int32(v)
	}
	near := func(a, b triangulate.Vertex) bool {
		return s.near(m.Position(a), m.Position(b), s.o.Spots.Within)
	}
	if m.NumTriangles() == 0 {
		// All on a line: a place is next to its neighbours in (x, y).
		along := make([]triangulate.Vertex, 0, m.NumVertices())
		for v := range m.Vertices() {
			along = append(along, v)
		}
		slices.SortFunc(along, func(a, b triangulate.Vertex) int { return exact.CompareXY(m.Position(a), m.Position(b)) })
		for i := 1; i < len(along); i++ {
			if near(along[i-1], along[i]) {
				union(join, int32(along[i-1]), int32(along[i]))
			}
		}
	}
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if twin := m.Twin(h); twin > h {
			continue // its twin asks
		}
		if a, b := m.Origin(h), m.Dest(h); near(a, b) {
			union(join, int32(a), int32(b))
		}
	}
	root := make([]int32, len(s.Points))
	for i := range root {
		root[i] = find(join, int32(m.VertexOf(i)))
	}
	return groupByRoot(root, len(join)), nil
}

// near reports whether two places are at most d apart. The differences are those of
// the decimals as written, so that 0.01 apart is within 0.01.
func (s *collected) near(p, q orb.Point, d float64) bool {
	dx, dy := asWritten(p[0]-q[0], s.DecimalsXY), asWritten(p[1]-q[1], s.DecimalsXY)
	return float64(dx*dx)+float64(dy*dy) <= float64(d*d)
}

// union joins the sets of a and b; the smaller number becomes the root. find halves
// the paths it walks, so both are nearly constant in time.
func union(join []int32, a, b int32) {
	a, b = find(join, a), find(join, b)
	if a < b {
		join[b] = a
	} else {
		join[a] = b
	}
}

func find(join []int32, v int32) int32 {
	for join[v] != v {
		join[v] = join[join[v]]
		v = join[v]
	}
	return v
}

// groupByRoot lists the readings of every root that has two or more, in the order
// of the first of each.
func groupByRoot(root []int32, roots int) (g groups) {
	count := make([]int32, roots)
	for _, r := range root {
		count[r]++
	}
	// Where the group of a root begins, -1 before its first member is met.
	at := make([]int32, roots)
	for r := range at {
		at[r] = -1
	}
	g.start = []int32{0}
	for _, r := range root {
		if count[r] > 1 && at[r] < 0 {
			at[r] = g.start[len(g.start)-1]
			g.start = append(g.start, at[r]+count[r])
		}
	}
	g.members = make([]int32, g.start[len(g.start)-1])
	for i, r := range root {
		if count[r] > 1 {
			g.members[at[r]] = int32(i)
			at[r]++
		}
	}
	return g
}
