package interp

import "isofacet/triangulate"

// outside tells for every triangle of the divided mesh whether it lies outside the
// region. Pieces of rings are edges, so triangles that hang together across other
// edges lie on one side: one place well inside one of them decides for all.
//
// A point where a ring crosses the hull may round to just inside it. What is left
// between there and the hull is outside, and joins nothing.
func (c *Clip) outside(m *triangulate.Mesh, r *triangulate.Region, cut *cutter) []bool {
	n := m.NumTriangles()
	outside, seen := make([]bool, n), make([]bool, n)
	inputs := m.Inputs()
	for t := range triangulate.Triangle(n) {
		if cut.alongHull(m.Corners(t), inputs) {
			outside[t], seen[t] = true, true
		}
	}
	ring := func(h triangulate.HalfEdge) bool {
		is := m.SegmentsAlong(h)
		return len(is) > 0 && int(is[0]) < c.rings
	}
	var part []triangulate.Triangle
	for start := range triangulate.Triangle(n) {
		if seen[start] {
			continue
		}
		seen[start] = true
		part = append(part[:0], start)
		widest, area := start, -1.0
		for i := 0; i < len(part); i++ {
			t := part[i]
			if a := area2(m, t); a > area {
				widest, area = t, a
			}
			for k := range 3 {
				h := t.HalfEdge(k)
				twin := m.Twin(h)
				if twin != triangulate.NoHalfEdge && !seen[twin.Triangle()] && !ring(h) {
					seen[twin.Triangle()] = true
					part = append(part, twin.Triangle())
				}
			}
		}
		if !r.Contains(middle(m, widest)) {
			for _, t := range part {
				outside[t] = true
			}
		}
	}
	return outside
}

// alongHull tells whether all three vertices lie on one edge of the old hull.
func (c *cutter) alongHull(vs [3]triangulate.Vertex, inputs []int32) bool {
	old := c.whole.NumVertices()
	hull := triangulate.NoHalfEdge
	for _, v := range vs {
		if i := int(inputs[v]) - old; i >= 0 && c.supports[i].edge != triangulate.NoHalfEdge {
			hull = c.supports[i].edge
		}
	}
	if hull == triangulate.NoHalfEdge || c.whole.Twin(hull) != triangulate.NoHalfEdge {
		return false
	}
	for _, v := range vs {
		i := int(inputs[v])
		if i >= old {
			if c.supports[i-old].edge != hull {
				return false
			}
		} else if u := triangulate.Vertex(i); u != c.whole.Origin(hull) && u != c.whole.Dest(hull) {
			return false
		}
	}
	return true
}

// area2 is about twice the area of t.
func area2(m *triangulate.Mesh, t triangulate.Triangle) float64 {
	v := m.Corners(t)
	a, b, c := m.Position(v[0]), m.Position(v[1]), m.Position(v[2])
	return float64((b[0]-a[0])*(c[1]-a[1])) - float64((b[1]-a[1])*(c[0]-a[0]))
}

// wasHidden tells whether triangle t of the divided mesh is a part of a triangle
// that the old mesh hides.
func (c *cutter) wasHidden(m *triangulate.Mesh, t triangulate.Triangle) bool {
	shown := c.s.mesh.NumTriangles()
	if shown == c.whole.NumTriangles() {
		return false
	}
	at := c.loc.LocateNext(middle(m, t))
	return at.Place == triangulate.Outside || int(at.Triangle) >= shown
}
