package triangulate

import (
	"fmt"

	"isofacet/triangulate/exact"
)

// Check returns nil if m is the Delaunay triangulation of its vertices with the
// tie rule of this package, else an error that names the first broken
// invariant and where. Every decision is exact. Time O(n), plus O(n log n) for
// proving that the vertices are distinct.
//
// The invariants: links of neighbours agree; every triangle is counter-
// clockwise; every inner edge passes the in-circle test with ties settled; the
// outline is one convex ring; there are 2n-2-h triangles, h being the vertices
// on it; positions are distinct and every input point has its vertex. Together
// they leave one triangulation only: a locally Delaunay one without overlap is
// the Delaunay triangulation (Delaunay 1934).
func (m *Mesh) Check() error {
	for _, f := range []func() error{m.checkInputs, m.checkLinks, m.checkTriangles, m.checkHull, m.checkEdges} {
		if err := f(); err != nil {
			return err
		}
	}
	return nil
}

func (m *Mesh) checkInputs() error {
	used := make([]bool, len(m.pos))
	for i, v := range m.vertexOf {
		if v < 0 || int(v) >= len(m.pos) {
			return fmt.Errorf("input %d: vertex %d of %d", i, v, len(m.pos))
		}
		used[v] = true
	}
	for v, ok := range used {
		if !ok {
			return fmt.Errorf("vertex %d at %v: no input point", v, m.pos[v])
		}
	}
	order := m.byPosition()
	for i := 1; i < len(order); i++ {
		if exact.CompareXY(m.pos[order[i-1]], m.pos[order[i]]) >= 0 {
			return fmt.Errorf("vertices %d and %d: both at %v", order[i-1], order[i], m.pos[order[i]])
		}
	}
	return nil
}

// checkLinks looks at ranges before it follows any number.
func (m *Mesh) checkLinks() error {
	for h, e := range m.half {
		if e.origin < 0 || int(e.origin) >= len(m.pos) {
			return fmt.Errorf("half-edge %d: origin %d of %d vertices", h, e.origin, len(m.pos))
		}
		if e.twin != NoHalfEdge && (e.twin < 0 || int(e.twin) >= len(m.half)) {
			return fmt.Errorf("half-edge %d: twin %d of %d half-edges", h, e.twin, len(m.half))
		}
	}
	for h := range HalfEdge(len(m.half)) {
		t := m.half[h].twin
		if t == NoHalfEdge {
			continue
		}
		if m.half[t].twin != h {
			return fmt.Errorf("half-edge %d: its twin %d has twin %d", h, t, m.half[t].twin)
		}
		if m.Origin(t) != m.Dest(h) || m.Dest(t) != m.Origin(h) {
			return fmt.Errorf("half-edge %d runs %d→%d, its twin %d→%d", h, m.Origin(h), m.Dest(h), m.Origin(t), m.Dest(t))
		}
	}
	return nil
}

func (m *Mesh) checkTriangles() error {
	for t := range Triangle(len(m.half) / 3) {
		c := m.Corners(t)
		if exact.Orient(m.pos[c[0]], m.pos[c[1]], m.pos[c[2]]) <= 0 {
			return fmt.Errorf("triangle %d: corners %v %v %v are not counter-clockwise", t, m.pos[c[0]], m.pos[c[1]], m.pos[c[2]])
		}
	}
	return nil
}

// checkHull proves that the outline is one ring, convex, and that the count of
// triangles leaves no room for an overlap or a hole.
func (m *Mesh) checkHull() error {
	if len(m.half) == 0 {
		order := m.byPosition()
		for i := 2; i < len(order); i++ {
			if exact.Orient(m.pos[order[0]], m.pos[order[1]], m.pos[order[i]]) != 0 {
				return fmt.Errorf("no triangles, but vertices %d, %d and %d are not on one line", order[0], order[1], order[i])
			}
		}
		return nil
	}
	rims := 0
	for h := range m.half {
		if m.half[h].twin == NoHalfEdge {
			rims++
		}
	}
	hull := m.Hull()
	if len(hull) != rims {
		return fmt.Errorf("outline: the ring from the first vertex has %d edges of %d", len(hull), rims)
	}
	turned := 0
	for i, v := range hull {
		u, w := hull[(i+len(hull)-1)%len(hull)], hull[(i+1)%len(hull)]
		if exact.Orient(m.pos[u], m.pos[v], m.pos[w]) < 0 {
			return fmt.Errorf("outline: turns clockwise at vertex %d at %v", v, m.pos[v])
		}
		// A ring that turns counter-clockwise only goes round once if it
		// changes from falling to rising x once.
		if exact.CompareXY(m.pos[u], m.pos[v]) > 0 && exact.CompareXY(m.pos[v], m.pos[w]) < 0 {
			turned++
		}
	}
	if turned != 1 {
		return fmt.Errorf("outline: goes round %d times", turned)
	}
	if got, want := len(m.half)/3, 2*len(m.pos)-2-len(hull); got != want {
		return fmt.Errorf("%d triangles of %d vertices, %d on the outline: expected %d", got, len(m.pos), len(hull), want)
	}
	return nil
}

func (m *Mesh) checkEdges() error {
	for h := range HalfEdge(len(m.half)) {
		t := m.half[h].twin
		if t == NoHalfEdge {
			continue
		}
		if m.IsConstrained(h) != m.IsConstrained(t) {
			return fmt.Errorf("edge %v–%v: constrained on one side only", m.pos[m.Origin(h)], m.pos[m.Dest(h)])
		}
		if t < h || m.IsConstrained(h) { // seen from the other side
			continue
		}
		a, b, c, d := m.Origin(h), m.Dest(h), m.Apex(h), m.Apex(t)
		if exact.InCircleTied(m.pos[a], m.pos[b], m.pos[c], m.pos[d]) > 0 {
			return fmt.Errorf("edge %v–%v: vertex %d at %v lies inside the circle of triangle %d",
				m.pos[a], m.pos[b], d, m.pos[d], h.Triangle())
		}
	}
	return nil
}
