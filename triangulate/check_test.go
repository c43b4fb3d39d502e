package triangulate

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"
)

// broken returns a fresh mesh for a test to break: a lattice of 6 x 6 and a few
// places beside it, all far enough apart for any of them to move a little.
func broken(t testing.TB) *Mesh {
	t.Helper()
	var pts []orb.Point
	for i := range 36 {
		pts = append(pts, orb.Point{float64(i % 6), float64(i / 6)})
	}
	pts = append(pts, orb.Point{2.25, 2.5}, orb.Point{3.5, 7}, orb.Point{-1, 2.5})
	m, err := Delaunay(context.Background(), pts, Options{Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	if err := m.Check(); err != nil {
		t.Fatal(err)
	}
	return m
}

// flip turns the diagonal h of two triangles without asking whether that is
// allowed. (a, b, c) and (b, a, d) become (c, d, b) and (d, c, a).
func flip(m *Mesh, h HalfEdge) {
	g := m.half[h].twin
	a, b, c, d := m.Origin(h), m.Dest(h), m.Apex(h), m.Apex(g)
	bc, ca := m.half[h.next()].twin, m.half[h.prev()].twin
	ad, db := m.half[g.next()].twin, m.half[g.prev()].twin
	set := func(e HalfEdge, v Vertex, twin HalfEdge) {
		m.half[e] = half{v, twin}
		if twin != NoHalfEdge {
			m.half[twin].twin = e
		}
	}
	set(h, c, g)
	set(h.next(), d, db)
	set(h.prev(), b, bc)
	set(g, d, h)
	set(g.next(), c, ca)
	set(g.prev(), a, ad)
}

// between returns the half-edge from p to q.
func between(t testing.TB, m *Mesh, p, q orb.Point) HalfEdge {
	t.Helper()
	for h := range HalfEdge(len(m.half)) {
		if m.pos[m.Origin(h)] == p && m.pos[m.Dest(h)] == q {
			return h
		}
	}
	t.Fatalf("no edge %v–%v", p, q)
	return NoHalfEdge
}

// removeLast takes the last triangle away and makes its neighbours' edges rims.
func removeLast(m *Mesh) {
	n := len(m.half) - 3
	for _, e := range m.half[n:] {
		if e.twin != NoHalfEdge {
			m.half[e.twin].twin = NoHalfEdge
		}
	}
	m.half = m.half[:n]
	m.shown = len(m.half)
}

func vertexAt(m *Mesh, p orb.Point) Vertex { return Vertex(slices.Index(m.pos, p)) }

// TestCheckNamesWhatIsBroken breaks one thing at a time.
func TestCheckNamesWhatIsBroken(t *testing.T) {
	for _, row := range []struct {
		name string
		do   func(t *testing.T, m *Mesh)
		want string // part of the message
	}{
		{"input without vertex", func(_ *testing.T, m *Mesh) { m.vertexOf[7] = NoVertex }, "input 7: vertex -1 of 39"},
		{"input of no vertex", func(_ *testing.T, m *Mesh) { m.vertexOf[7] = 39 }, "input 7: vertex 39 of 39"},
		{"vertex without input", func(_ *testing.T, m *Mesh) { m.vertexOf[7] = m.vertexOf[8] }, "no input point"},
		{"two vertices at one place", func(_ *testing.T, m *Mesh) { m.pos[3] = m.pos[30] }, "both at"},
		{"two vertices at 0 and -0", func(_ *testing.T, m *Mesh) {
			m.pos[vertexAt(m, orb.Point{1, 0})] = orb.Point{0, math.Copysign(0, -1)}
		}, "both at"},
		{"origin out of range", func(_ *testing.T, m *Mesh) { m.half[10].origin = 39 }, "half-edge 10: origin 39 of 39"},
		{"origin missing", func(_ *testing.T, m *Mesh) { m.half[10].origin = NoVertex }, "half-edge 10: origin -1 of 39"},
		{"corners swapped", func(_ *testing.T, m *Mesh) {
			m.half[0].origin, m.half[1].origin = m.half[1].origin, m.half[0].origin
		}, "its twin"},
		{"origin replaced", func(t *testing.T, m *Mesh) {
			m.half[between(t, m, orb.Point{1, 1}, orb.Point{2, 1})].origin = vertexAt(m, orb.Point{5, 5})
		}, "its twin"},
		{"twin out of range", func(t *testing.T, m *Mesh) {
			m.half[between(t, m, orb.Point{1, 1}, orb.Point{2, 1})].twin = HalfEdge(len(m.half))
		}, "of 186 half-edges"},
		{"twin below none", func(t *testing.T, m *Mesh) {
			m.half[between(t, m, orb.Point{1, 1}, orb.Point{2, 1})].twin = -2
		}, "twin -2 of"},
		{"twin unlinked on one side", func(t *testing.T, m *Mesh) {
			m.half[between(t, m, orb.Point{1, 1}, orb.Point{2, 1})].twin = NoHalfEdge
		}, "has twin -1"},
		{"twin of itself", func(t *testing.T, m *Mesh) {
			h := between(t, m, orb.Point{0, 0}, orb.Point{1, 0})
			m.half[h].twin = h
		}, "its twin"},
		{"edge cut open", func(t *testing.T, m *Mesh) {
			h := between(t, m, orb.Point{1, 1}, orb.Point{2, 1})
			m.half[m.half[h].twin].twin, m.half[h].twin = NoHalfEdge, NoHalfEdge
		}, "outline: the ring from the first vertex has"},
		{"two pairs of twins crossed", func(t *testing.T, m *Mesh) {
			h, g := between(t, m, orb.Point{1, 1}, orb.Point{2, 1}), between(t, m, orb.Point{1, 3}, orb.Point{2, 3})
			th, tg := m.half[h].twin, m.half[g].twin
			m.half[h].twin, m.half[tg].twin, m.half[g].twin, m.half[th].twin = tg, h, th, g
		}, "its twin"},
		{"all clockwise", func(_ *testing.T, m *Mesh) {
			for i, p := range m.pos {
				m.pos[i] = orb.Point{-p[0], p[1]}
			}
		}, "not counter-clockwise"},
		{"vertex moved across an edge", func(_ *testing.T, m *Mesh) {
			m.pos[vertexAt(m, orb.Point{4, 4})] = orb.Point{4.9, 2.1}
		}, "not counter-clockwise"},
		{"vertex of a straight rim moved outwards", func(_ *testing.T, m *Mesh) {
			m.pos[vertexAt(m, orb.Point{2, 0})] = orb.Point{2, math.Nextafter(0, 1)}
		}, "outline: turns clockwise"},
		{"rim triangle missing", func(t *testing.T, m *Mesh) {
			rim := between(t, m, orb.Point{1, 0}, orb.Point{2, 0}).Triangle()
			swapTriangles(m, rim, Triangle(m.NumTriangles()-1))
			removeLast(m)
		}, "outline: turns clockwise"},
		{"inner triangle missing", func(t *testing.T, m *Mesh) {
			inner := between(t, m, orb.Point{3, 1}, orb.Point{4, 1}).Triangle()
			swapTriangles(m, inner, Triangle(m.NumTriangles()-1))
			removeLast(m)
		}, "outline: the ring from the first vertex has 14 edges of 17"},
		{"ears missing, still convex", func(_ *testing.T, m *Mesh) {
			// What touches (-1, 2.5): without it the rim is the lattice's straight side.
			for {
				ear := slices.IndexFunc(slices.Collect(m.Triangles()), func(u Triangle) bool {
					return slices.Contains(m.cornersAt(u), orb.Point{-1, 2.5})
				})
				if ear < 0 {
					return
				}
				swapTriangles(m, Triangle(ear), Triangle(m.NumTriangles()-1))
				removeLast(m)
			}
		}, "of 39 vertices, 17 on the outline: expected"},
		{"vertex in no triangle", func(_ *testing.T, m *Mesh) {
			m.pos = append(m.pos, orb.Point{1.5, 1.25})
			m.vertexOf = append(m.vertexOf, 39)
		}, "of 40 vertices, 14 on the outline: expected"},
		{"no triangle, not on one line", func(_ *testing.T, m *Mesh) { m.half = nil }, "no triangles, but vertices"},
		{"diagonal of a cell flipped against the tie rule", func(t *testing.T, m *Mesh) {
			flip(m, between(t, m, orb.Point{4, 5}, orb.Point{5, 4}))
		}, "lies inside the circle"},
	} {
		t.Run(row.name, func(t *testing.T) {
			m := broken(t)
			row.do(t, m)
			err := m.Check()
			if err == nil || !strings.Contains(err.Error(), row.want) {
				t.Errorf("got %v, want a text with %q", err, row.want)
			}
		})
	}
}

// cornersAt lists the positions of t's corners.
func (m *Mesh) cornersAt(t Triangle) []orb.Point {
	c := m.Corners(t)
	return []orb.Point{m.pos[c[0]], m.pos[c[1]], m.pos[c[2]]}
}

// swapTriangles exchanges the numbers of two triangles.
func swapTriangles(m *Mesh, s, t Triangle) {
	moved := func(h HalfEdge) HalfEdge {
		switch {
		case h == NoHalfEdge:
			return h
		case h.Triangle() == s:
			return t.HalfEdge(int(h % 3))
		case h.Triangle() == t:
			return s.HalfEdge(int(h % 3))
		}
		return h
	}
	for i := range m.half {
		m.half[i].twin = moved(m.half[i].twin)
	}
	for i := range 3 {
		a, b := s.HalfEdge(i), t.HalfEdge(i)
		m.half[a], m.half[b] = m.half[b], m.half[a]
	}
}

// TestCheckSeesEveryFlip flips each inner edge whose quadrilateral is strictly
// convex: the result is a triangulation, but not the one.
func TestCheckSeesEveryFlip(t *testing.T) {
	n := 0
	for h := range HalfEdge(len(broken(t).half)) {
		m := broken(t)
		if m.half[h].twin == NoHalfEdge {
			continue
		}
		flip(m, h)
		if m.checkLinks() != nil {
			t.Fatalf("half-edge %d: the flip of this test breaks links: %v", h, m.checkLinks())
		}
		if m.checkTriangles() != nil {
			continue // not convex
		}
		n++
		if err := m.Check(); err == nil || !strings.Contains(err.Error(), "lies inside the circle") {
			t.Errorf("half-edge %d: %v", h, err)
		}
		flip(m, h)
		if err := m.Check(); err != nil {
			t.Errorf("half-edge %d flipped there and back: %v", h, err)
		}
	}
	if n < 50 {
		t.Errorf("only %d half-edges could be flipped", n)
	}
}

// TestCheckSeesADoubleWinding: five corners of a star polygon go round the middle
// twice. Links, signs, convexity and counts are all in order.
func TestCheckSeesADoubleWinding(t *testing.T) {
	m := &Mesh{pos: []orb.Point{{0, 0}}, vertexOf: []Vertex{0, 1, 2, 3, 4, 5}}
	m.pos = append(m.pos, []orb.Point{{10, 0}, {-8, 6}, {3, -10}, {3, 10}, {-8, -6}}...)
	for i := range Vertex(5) {
		h := HalfEdge(3 * i)
		m.half = append(m.half,
			half{0, (h - 3 + 2 + 15) % 15}, // the middle to corner i, beside the triangle before
			half{1 + i, NoHalfEdge},
			half{1 + (i+1)%5, (h + 3) % 15})
	}
	m.shown = len(m.half)
	err := m.Check()
	if err == nil || !strings.Contains(err.Error(), "goes round 2 times") {
		t.Errorf("got %v", err)
	}
}

// TestCheckSeesAnyChange changes one origin or one twin to any other number.
func TestCheckSeesAnyChange(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	m := broken(t)
	for range 3000 {
		h := r.IntN(len(m.half))
		was := m.half[h]
		if r.IntN(2) == 0 {
			m.half[h].origin = Vertex(r.IntN(len(m.pos)+2) - 1)
		} else {
			m.half[h].twin = HalfEdge(r.IntN(len(m.half)+2) - 1)
		}
		if m.half[h] != was && m.Check() == nil {
			t.Fatalf("half-edge %d: %+v instead of %+v not noticed", h, m.half[h], was)
		}
		m.half[h] = was
	}
	if err := m.Check(); err != nil {
		t.Fatal(err)
	}
}
