package triangulate

import (
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// ByPlace returns the indices of points in (x, y) order, those at one place by
// index. Time O(n log n).
func ByPlace(points []orb.Point) []int32 {
	order := make([]int32, len(points))
	for i := range order {
		order[i] = int32(i)
	}
	slices.SortStableFunc(order, func(a, b int32) int { return exact.CompareXY(points[a], points[b]) })
	return order
}

// Reordered returns a mesh of the same places whose inputs are numbered like points.
// It shares triangles and places with m, so that sets of values at the same places
// need one triangulation, whatever order they come in. byPlace is what ByPlace
// returns of points. It reports false if points are not as many as the vertices of m
// and at their places. Time O(n log n), 4 bytes a point.
func (m *Mesh) Reordered(points []orb.Point, byPlace []int32) (*Mesh, bool) {
	if len(points) != len(m.pos) || len(byPlace) != len(m.pos) {
		return nil, false
	}
	vertexOf := make([]Vertex, len(points))
	for k, v := range m.byPosition() {
		if points[byPlace[k]] != m.pos[v] {
			return nil, false
		}
		vertexOf[byPlace[k]] = v
	}
	return &Mesh{pos: m.pos, half: m.half, vertexOf: vertexOf, shown: m.shown, kept: m.kept, chains: m.chains}, true
}
