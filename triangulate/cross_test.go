package triangulate_test

import (
	"cmp"
	"fmt"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// The oracle of Cross works on small integers, where everything along a line is
// a fraction of two int64: exact, and quick enough for thousands of lines.

type point struct{ x, y int64 }

func whole(p orb.Point) point { return point{int64(p[0]), int64(p[1])} }

// cross is the exact orientation determinant.
func cross(a, b, c point) int64 { return (b.x-a.x)*(c.y-a.y) - (b.y-a.y)*(c.x-a.x) }

// fraction is num/den along a line, den > 0.
type fraction struct{ num, den int64 }

func (f fraction) compare(g fraction) int { return cmp.Compare(f.num*g.den, g.num*f.den) }

// met is one thing that the line meets.
type met struct {
	at     fraction
	vertex triangulate.Vertex // else an edge,
	edge   [2]triangulate.Vertex
}

// crossSlowly lists what the line from a to b meets: every vertex of a triangle, and
// every edge that it meets between its ends, other than by running along it. An
// edge that the line begins on and runs along counts as met at a.
func crossSlowly(m *triangulate.Mesh, a, b point) []met {
	var out []met
	length2 := (b.x-a.x)*(b.x-a.x) + (b.y-a.y)*(b.y-a.y)
	if m.NumTriangles() == 0 {
		return nil
	}
	surface := map[triangulate.Vertex]bool{}
	for t := range m.Triangles() {
		for _, v := range m.Corners(t) {
			surface[v] = true
		}
	}
	for v := range surface {
		p := whole(m.Position(v))
		if cross(a, b, p) != 0 || length2 == 0 && p != a {
			continue
		}
		along := (p.x-a.x)*(b.x-a.x) + (p.y-a.y)*(b.y-a.y)
		if along >= 0 && along <= length2 {
			out = append(out, met{at: fraction{along, max(length2, 1)}, vertex: v})
		}
	}
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if tw := m.Twin(h); tw != triangulate.NoHalfEdge && tw < h {
			continue
		}
		o, d := m.Origin(h), m.Dest(h)
		p, q := whole(m.Position(o)), whole(m.Position(d))
		e := [2]triangulate.Vertex{min(o, d), max(o, d)}
		sa, sb := cross(p, q, a), cross(p, q, b)
		sp, sq := cross(a, b, p), cross(a, b, q)
		switch {
		case sa == 0 && between64(p, q, a):
			out = append(out, met{at: fraction{0, 1}, vertex: triangulate.NoVertex, edge: e})
		case sa == 0 && sb == 0: // along it, or apart on one line
		case (sa <= 0 && sb >= 0 || sa >= 0 && sb <= 0) && (sp < 0 && sq > 0 || sp > 0 && sq < 0):
			at := fraction{sa, sa - sb}
			if at.den < 0 {
				at = fraction{-at.num, -at.den}
			}
			out = append(out, met{at: at, vertex: triangulate.NoVertex, edge: e})
		}
	}
	slices.SortFunc(out, func(x, y met) int { return x.at.compare(y.at) })
	return out
}

// between64 tells whether c, on the line through p and q, lies strictly between.
func between64(p, q, c point) bool {
	return (c.x-p.x)*(c.x-q.x)+(c.y-p.y)*(c.y-q.y) < 0
}

// beyond is what lies on the line just after the fraction f, up to the next one
// g: the triangle or the edge that holds the point in the middle of the two.
func beyond(m *triangulate.Mesh, a, b point, f, g fraction) (in triangulate.Triangle, on [2]triangulate.Vertex) {
	// The middle is mid/den, in integers.
	den := 2 * f.den * g.den
	num := f.num*g.den + g.num*f.den
	side := func(p, q point) int64 {
		return (q.x-p.x)*((a.y-p.y)*den+num*(b.y-a.y)) - (q.y-p.y)*((a.x-p.x)*den+num*(b.x-a.x))
	}
	for t := range m.Triangles() {
		c := m.Corners(t)
		inside, zero := true, -1
		for i := range c {
			s := side(whole(m.Position(c[i])), whole(m.Position(c[(i+1)%3])))
			inside = inside && s >= 0
			if s == 0 {
				zero = i
			}
		}
		if inside && zero < 0 {
			return t, on
		}
		if inside {
			u, v := c[zero], c[(zero+1)%3]
			return triangulate.NoTriangle, [2]triangulate.Vertex{min(u, v), max(u, v)}
		}
	}
	return triangulate.NoTriangle, on
}

// compareCross runs Cross and the oracle, and stops the test at a difference.
func compareCross(t testing.TB, name string, m *triangulate.Mesh, l *triangulate.Locator, a, b point) int {
	t.Helper()
	from, to := orb.Point{float64(a.x), float64(a.y)}, orb.Point{float64(b.x), float64(b.y)}
	want := crossSlowly(m, a, b)
	got := slices.Collect(l.Cross(from, to))
	where := fmt.Sprintf("%s: from %v to %v", name, from, to)
	if len(got) != len(want) {
		t.Fatalf("%s: %d crossings %+v, want %d: %+v", where, len(got), got, len(want), want)
	}
	for i, c := range got {
		w := want[i]
		if w.vertex != triangulate.NoVertex {
			if c.Place != triangulate.OnVertex || c.Vertex != w.vertex || c.Edge != triangulate.NoHalfEdge {
				t.Fatalf("%s: crossing %d is %+v, want vertex %d", where, i, c, w.vertex)
			}
		} else {
			if c.Place != triangulate.OnEdge || c.Vertex != triangulate.NoVertex || c.Edge == triangulate.NoHalfEdge {
				t.Fatalf("%s: crossing %d is %+v, want edge %v", where, i, c, w.edge)
			}
			if o, d := m.Origin(c.Edge), m.Dest(c.Edge); [2]triangulate.Vertex{min(o, d), max(o, d)} != w.edge {
				t.Fatalf("%s: crossing %d is edge %d–%d, want %v", where, i, o, d, w.edge)
			}
		}
		// What comes next.
		into, along := triangulate.NoTriangle, [2]triangulate.Vertex{}
		next := fraction{1, 1}
		if i+1 < len(want) {
			next = want[i+1].at
		}
		if from != to && w.at.compare(next) < 0 {
			into, along = beyond(m, a, b, w.at, next)
		}
		if c.Into != into {
			t.Fatalf("%s: crossing %d goes into triangle %d, want %d", where, i, c.Into, into)
		}
		if c.Place == triangulate.OnEdge && into != triangulate.NoTriangle && c.Edge.Triangle() != into {
			t.Fatalf("%s: crossing %d has half-edge %d, not of triangle %d", where, i, c.Edge, into)
		}
		checkAlong(t, where, m, c, along, from, to)
	}
	// A caller may stop at any crossing.
	for stop := range got {
		n := 0
		for range l.Cross(from, to) {
			if n++; n > stop {
				break
			}
		}
	}
	return len(got)
}

// checkAlong compares the half-edge along which a crossing goes on.
func checkAlong(t testing.TB, where string, m *triangulate.Mesh, c triangulate.Crossing, want [2]triangulate.Vertex, from, to orb.Point) {
	t.Helper()
	if want == ([2]triangulate.Vertex{}) {
		if c.Along != triangulate.NoHalfEdge {
			t.Fatalf("%s: %+v goes along a half-edge, want none", where, c)
		}
		return
	}
	if c.Along == triangulate.NoHalfEdge {
		t.Fatalf("%s: %+v, want along %v", where, c, want)
	}
	o, d := m.Origin(c.Along), m.Dest(c.Along)
	if [2]triangulate.Vertex{min(o, d), max(o, d)} != want {
		t.Fatalf("%s: %+v goes along %d–%d, want %v", where, c, o, d, want)
	}
	// It points the line's way unless the edge has only the other half.
	if byXY(m.Position(o), m.Position(d)) != byXY(from, to) && m.Twin(c.Along) != triangulate.NoHalfEdge {
		t.Fatalf("%s: %+v: half-edge %d points back although it has a twin", where, c, c.Along)
	}
}

// crossMeshes have integer coordinates, most of them even, so that integer places
// lie on edges and inside.
func crossMeshes(t testing.TB) map[string]*triangulate.Mesh {
	r := rand.New(rand.NewPCG(6, 6))
	random := func(n, size int) []orb.Point {
		pts := make([]orb.Point, n)
		for i := range pts {
			pts[i] = orb.Point{float64(2 * r.IntN(size)), float64(2 * r.IntN(size))}
		}
		return pts
	}
	all := map[string]*triangulate.Mesh{}
	for name, pts := range map[string][]orb.Point{
		"one triangle":    {{0, 0}, {6, 0}, {0, 6}},
		"two triangles":   {{0, 0}, {6, 0}, {0, 6}, {6, 6}},
		"lattice":         lattice(6, 5, 0, 0, 2),
		"tilted lattice":  tilted345(4, 4),
		"fan":             append(integerCircle(25), orb.Point{}),
		"row and a point": append(lattice(8, 1, 0, 0, 2), orb.Point{6, 8}),
		"random":          random(40, 15),
		"random, dense":   random(120, 12),
		"line":            line(10, 0, 0, 2, 2),
		"no point":        nil,
	} {
		all[name] = checked(t, pts, triangulate.Options{})
	}
	return all
}

// TestCross compares with the oracle: lines through vertices, along edges and the
// hull, from and to the outside, edges, vertices and insides, and of no length.
func TestCross(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 8))
	for name, m := range withHidden(crossMeshes(t)) {
		l := m.Locator()
		b := orb.Bound{Max: orb.Point{10, 10}}
		if m.NumVertices() > 0 {
			b = orb.MultiPoint(m.Positions()).Bound()
		}
		anywhere := func() point {
			return point{
				int64(b.Min[0]) - 4 + r.Int64N(int64(b.Max[0]-b.Min[0])+9),
				int64(b.Min[1]) - 4 + r.Int64N(int64(b.Max[1]-b.Min[1])+9),
			}
		}
		some := func() point {
			if m.NumHalfEdges() == 0 {
				return anywhere()
			}
			h := triangulate.HalfEdge(r.IntN(m.NumHalfEdges()))
			p, q := whole(m.Position(m.Origin(h))), whole(m.Position(m.Dest(h)))
			switch r.IntN(5) {
			case 0:
				return p
			case 1: // the middle of an edge, where that is an integer
				return point{(p.x + q.x) / 2, (p.y + q.y) / 2}
			case 2: // beyond the end of an edge
				return point{2*q.x - p.x, 2*q.y - p.y}
			}
			return anywhere()
		}
		crossings, lines := 0, 2000
		if testing.Short() {
			lines = 300
		}
		for range lines {
			a, b := some(), some()
			crossings += compareCross(t, name, m, l, a, b)
			if r.IntN(20) == 0 {
				compareCross(t, name+", no length", m, l, a, a)
			}
			if r.IntN(4) == 0 && m.NumHalfEdges() > 0 {
				// Along an edge, begun and ended anywhere on its line.
				h := triangulate.HalfEdge(r.IntN(m.NumHalfEdges()))
				p, q := whole(m.Position(m.Origin(h))), whole(m.Position(m.Dest(h)))
				u := point{q.x - p.x, q.y - p.y}
				i, j := r.Int64N(9)-4, r.Int64N(9)-4
				compareCross(t, name+", along an edge", m, l, point{p.x + i*u.x/2, p.y + i*u.y/2}, point{p.x + j*u.x/2, p.y + j*u.y/2})
			}
		}
		if crossings == 0 && m.NumTriangles() > 0 {
			t.Errorf("%s: no line crosses anything", name)
		}
	}
}

// TestCrossEveryPair runs every line between two nodes of a small area about a
// few triangles: no case is left to chance.
func TestCrossEveryPair(t *testing.T) {
	for name, pts := range map[string][]orb.Point{
		"square":     {{0, 0}, {4, 0}, {0, 4}, {4, 4}},
		"four cells": lattice(3, 3, 0, 0, 2),
		"kite":       {{0, 2}, {2, 0}, {4, 2}, {2, 4}, {2, 2}},
	} {
		m := checked(t, pts, triangulate.Options{})
		l := m.Locator()
		var nodes []point
		for x := int64(-1); x <= 5; x++ {
			for y := int64(-1); y <= 5; y++ {
				nodes = append(nodes, point{x, y})
			}
		}
		for _, a := range nodes {
			for _, b := range nodes {
				compareCross(t, name, m, l, a, b)
			}
		}
	}
}

// TestCrossFarAway: a line far longer than the mesh meets the same as a short one.
func TestCrossFarAway(t *testing.T) {
	m := checked(t, lattice(9, 9, 0, 0, 1), triangulate.Options{})
	l := m.Locator()
	for _, far := range []float64{1e3, 1e15, 1e59} {
		for _, y := range []float64{0, 3, 8} {
			n := 0
			for c := range l.Cross(orb.Point{-far, y}, orb.Point{far, y}) {
				if c.Place != triangulate.OnVertex || m.Position(c.Vertex) != (orb.Point{float64(n), y}) {
					t.Errorf("from %g at y = %v: crossing %d is %+v", -far, y, n, c)
				}
				n++
			}
			if n != 9 {
				t.Errorf("from %g at y = %v: %d vertices, want 9", -far, y, n)
			}
		}
		for range l.Cross(orb.Point{-far, 8.5}, orb.Point{far, 8.5}) {
			t.Errorf("from %g: a line above the mesh meets something", -far)
		}
	}
}
