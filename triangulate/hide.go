package triangulate

import (
	"github.com/paulmach/orb"
)

// Hide returns a mesh with the same vertices and edges that leaves out the
// triangles for which hidden is true: they are outside the surface. Triangles
// have new numbers, in the old order; those of m that it hides stay hidden.
// Time and memory O(triangles).
func (m *Mesh) Hide(hidden func(t Triangle) bool) *Mesh {
	count := len(m.half) / 3
	hide := make([]bool, count)
	shown := 0
	for t := range count {
		if 3*t >= m.shown || hidden(Triangle(t)) {
			hide[t] = true
		} else {
			shown++
		}
	}
	to := make([]HalfEdge, count)
	next, nextHidden := HalfEdge(0), HalfEdge(3*shown)
	for t := range count {
		if hide[t] {
			to[t], nextHidden = nextHidden, nextHidden+3
		} else {
			to[t], next = next, next+3
		}
	}
	out := &Mesh{pos: m.pos, vertexOf: m.vertexOf, chains: m.chains, shown: 3 * shown, half: make([]half, len(m.half))}
	if m.kept != nil {
		out.kept = newBits(len(m.half))
	}
	for h, e := range m.half {
		if e.twin != NoHalfEdge {
			e.twin = to[e.twin/3] + e.twin%3
		}
		g := to[h/3] + HalfEdge(h%3)
		out.half[g] = e
		if m.kept != nil && m.kept.get(h) {
			out.kept.set(int(g))
		}
	}
	return out
}

// Whole returns m with its hidden triangles shown again; their numbers follow
// those of the others. It shares the memory of m.
func (m *Mesh) Whole() *Mesh {
	return &Mesh{pos: m.pos, half: m.half, vertexOf: m.vertexOf, kept: m.kept, chains: m.chains, shown: len(m.half)}
}

// Trim hides every triangle that has an edge longer than edgeLenMax and reaches
// the outside through such triangles: long thin ones along a concave outline,
// but not a wide one in the middle. The result depends on the mesh alone.
func (m *Mesh) Trim(edgeLenMax float64) *Mesh {
	long := func(t Triangle) bool {
		c := m.Corners(t)
		for i, v := range c {
			if squaredLength(m.pos[v], m.pos[c[(i+1)%3]]) > float64(edgeLenMax*edgeLenMax) {
				return true
			}
		}
		return false
	}
	outside := make([]bool, m.NumTriangles())
	var stack []Triangle
	visit := func(t Triangle) {
		if !outside[t] && long(t) {
			outside[t] = true
			stack = append(stack, t)
		}
	}
	for h := range HalfEdge(m.shown) {
		if m.Twin(h) == NoHalfEdge {
			visit(h.Triangle())
		}
	}
	for len(stack) > 0 {
		t := stack[len(stack)-1]
		stack = stack[:len(stack)-1]
		for i := range 3 {
			if twin := m.Twin(t.HalfEdge(i)); twin != NoHalfEdge {
				visit(twin.Triangle())
			}
		}
	}
	return m.Hide(func(t Triangle) bool { return outside[t] })
}

func squaredLength(p, q orb.Point) float64 {
	dx, dy := q[0]-p[0], q[1]-p[1]
	return float64(dx*dx) + float64(dy*dy)
}
