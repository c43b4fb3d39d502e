package interp

import (
	"cmp"
	"slices"

	"isofacet/triangulate"
)

// Spread takes a number for every vertex of the cut surface that counts the vertex's
// height in something linear, such as a volume, and returns what every height of the
// surface that was cut counts in it: a vertex that was made where a ring crosses an
// edge hands its number on to the ends of that edge, one inside a triangle to its
// corners. The sum stays the same. It panics if there is not one number a vertex.
func (c *Clip) Spread(numbers []float64) []float64 {
	m := c.Surface.mesh
	if len(numbers) != m.NumVertices() {
		panic("interp: Spread needs a number for every vertex")
	}
	type gift struct {
		to triangulate.Vertex
		of float64
	}
	old := c.from.mesh.NumVertices()
	var gifts []gift
	loc := c.whole.Locator()
	full := &Surface{mesh: c.whole, pos: c.from.pos, z: c.from.z}
	inputs := m.Inputs()
	for v, number := range numbers {
		if number == 0 {
			continue
		}
		i := int(inputs[v])
		if i < old {
			gifts = append(gifts, gift{triangulate.Vertex(i), number})
			continue
		}
		p := m.Position(triangulate.Vertex(v))
		at := triangulate.Location{Place: triangulate.Outside}
		switch on := c.supports[i-old]; {
		case on.edge != triangulate.NoHalfEdge:
			at = triangulate.Location{Place: triangulate.OnEdge, Triangle: on.edge.Triangle(), Edge: on.edge, Vertex: triangulate.NoVertex}
		case on.triangle != triangulate.NoTriangle:
			at = triangulate.Location{Place: triangulate.Inside, Triangle: on.triangle, Edge: triangulate.NoHalfEdge, Vertex: triangulate.NoVertex}
		default:
			at = loc.Locate(p)
		}
		if at.Place == triangulate.Outside {
			continue // a crossing by rounding, a hair beyond the hull
		}
		corners, weights := full.Weights(at, p)
		for k, w := range weights {
			if w != 0 {
				gifts = append(gifts, gift{corners[k], float64(number * w)})
			}
		}
	}
	// Added in an order that does not depend on how vertices are numbered.
	slices.SortFunc(gifts, func(a, b gift) int {
		if a.to != b.to {
			return cmp.Compare(a.to, b.to)
		}
		return cmp.Compare(a.of, b.of)
	})
	spread := make([]float64, old)
	for _, g := range gifts {
		spread[g.to] += g.of
	}
	return spread
}
