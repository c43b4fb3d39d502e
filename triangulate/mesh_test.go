package triangulate_test

import (
	"context"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
	"isofacet/triangulate/pointsets"
)

// someMeshes are small enough for slow oracles.
func someMeshes(t testing.TB) map[string]*triangulate.Mesh {
	all := map[string]*triangulate.Mesh{}
	for name, pts := range map[string][]orb.Point{
		"one triangle":    {{0, 0}, {1, 0}, {0, 1}},
		"lattice":         lattice(9, 7, 0, 0, 1),
		"tilted lattice":  tilted345(6, 6),
		"circle":          integerCircle(65),
		"fan":             append(integerCircle(65), orb.Point{}),
		"row and a point": append(lattice(12, 1, 0, 0, 1), orb.Point{5, 3}),
		"survey":          pointsets.Survey(300, 2),
		"clustered":       pointsets.Clustered(300, 2),
		"repeated places": slices.Repeat(lattice(5, 5, 0, 0, 1), 3),
		"far lattice":     pointsets.Lattice01(64, 2),
	} {
		all[name] = checked(t, pts, triangulate.Options{})
	}
	return all
}

// TestHull compares with Andrew's monotone chain (1979), kept from dropping
// places in the middle of a straight side.
func TestHull(t *testing.T) {
	meshes := someMeshes(t)
	meshes["line"] = checked(t, line(20, 3, 3, -1, 2), triangulate.Options{})
	meshes["two"] = checked(t, line(2, 3, 3, -1, 2), triangulate.Options{})
	meshes["one"] = checked(t, line(1, 3, 3, -1, 2), triangulate.Options{})
	meshes["none"] = checked(t, nil, triangulate.Options{})
	for name, m := range meshes {
		var got []orb.Point
		for _, v := range m.Hull() {
			got = append(got, m.Position(v))
		}
		if want := monotoneChain(distinct(m.Positions())); !slices.Equal(got, want) {
			t.Errorf("%s: hull %v, want %v", name, got, want)
		}
	}
}

// monotoneChain returns the boundary of the hull of sorted places,
// counter-clockwise from the first; in order if all lie on one line.
func monotoneChain(pts []orb.Point) []orb.Point {
	half := func(pts []orb.Point) []orb.Point {
		var h []orb.Point
		for _, p := range pts {
			for len(h) >= 2 && exact.Orient(h[len(h)-2], h[len(h)-1], p) < 0 {
				h = h[:len(h)-1]
			}
			h = append(h, p)
		}
		return h
	}
	if len(pts) < 3 {
		return pts
	}
	lower := half(pts)
	if len(lower) == len(pts) && exact.Orient(pts[0], pts[1], pts[len(pts)-1]) == 0 {
		straight := true
		for _, p := range pts {
			straight = straight && exact.Orient(pts[0], pts[1], p) == 0
		}
		if straight {
			return pts
		}
	}
	back := slices.Clone(pts)
	slices.Reverse(back)
	upper := half(back)
	return append(lower, upper[1:len(upper)-1]...)
}

// TestAround: every half-edge once, at its origin; each next one to the left of
// the one before; on the outline one sweep with the outside before and after.
func TestAround(t *testing.T) {
	for name, m := range someMeshes(t) {
		rim := map[triangulate.Vertex]bool{}
		for _, v := range m.Hull() {
			rim[v] = true
		}
		seen := make([]int, m.NumHalfEdges())
		for v := range m.Vertices() {
			star := slices.Collect(m.Around(v))
			if len(star) == 0 {
				t.Fatalf("%s: nothing around vertex %d", name, v)
			}
			for i, h := range star {
				seen[h]++
				if m.Origin(h) != v {
					t.Fatalf("%s: half-edge %d of vertex %d starts at %d", name, h, v, m.Origin(h))
				}
				if i+1 < len(star) && m.Twin(m.Prev(h)) != star[i+1] {
					t.Fatalf("%s: vertex %d: half-edge %d follows %d", name, v, star[i+1], h)
				}
			}
			last := m.Twin(m.Prev(star[len(star)-1]))
			if rim[v] {
				if m.Twin(star[0]) != triangulate.NoHalfEdge || last != triangulate.NoHalfEdge {
					t.Errorf("%s: vertex %d on the outline: the sweep does not run from outside to outside", name, v)
				}
			} else if last != star[0] {
				t.Errorf("%s: vertex %d: the turn does not close", name, v)
			}
			for h := range m.Around(v) { // a loop may stop at any time
				if h == star[len(star)/2] {
					break
				}
			}
		}
		for h, n := range seen {
			if n != 1 {
				t.Errorf("%s: half-edge %d came %d times", name, h, n)
			}
		}
	}
	alone := checked(t, line(5, 0, 0, 1, 1), triangulate.Options{})
	for v := range alone.Vertices() {
		for h := range alone.Around(v) {
			t.Errorf("half-edge %d around vertex %d of a mesh without triangles", h, v)
		}
	}
}

// TestHalfEdgesOfATriangle: the numbering that Corners, Next, Prev, Apex and
// Triangle.HalfEdge promise to each other.
func TestHalfEdgesOfATriangle(t *testing.T) {
	for name, m := range someMeshes(t) {
		if m.NumHalfEdges() != 3*m.NumTriangles() {
			t.Fatalf("%s: %d half-edges of %d triangles", name, m.NumHalfEdges(), m.NumTriangles())
		}
		for tr := range m.Triangles() {
			c := m.Corners(tr)
			for i := range 3 {
				h := tr.HalfEdge(i)
				if h.Triangle() != tr || m.Origin(h) != c[i] || m.Dest(h) != c[(i+1)%3] || m.Apex(h) != c[(i+2)%3] ||
					m.Next(h) != tr.HalfEdge((i+1)%3) || m.Prev(h) != tr.HalfEdge((i+2)%3) {
					t.Fatalf("%s: half-edge %d of triangle %d with corners %v", name, i, tr, c)
				}
			}
		}
	}
}

// TestOrderOfOutput: design 2, order of output, against sorting by positions.
func TestOrderOfOutput(t *testing.T) {
	for name, m := range someMeshes(t) {
		rank := m.Rank()
		ordered := m.Ordered()
		for i, v := range ordered {
			if rank[v] != int32(i) {
				t.Fatalf("%s: vertex %d has rank %d, but comes at %d", name, v, rank[v], i)
			}
			if i > 0 && exact.CompareXY(m.Position(ordered[i-1]), m.Position(v)) >= 0 {
				t.Fatalf("%s: vertices %d and %d out of order", name, ordered[i-1], v)
			}
		}
		var last [3]orb.Point
		seen := map[triangulate.Triangle]bool{}
		for tr, c := range m.CanonicalTriangles(rank) {
			p := [3]orb.Point{m.Position(c[0]), m.Position(c[1]), m.Position(c[2])}
			if byXY(p[0], p[1]) >= 0 || byXY(p[0], p[2]) >= 0 || exact.Orient(p[0], p[1], p[2]) <= 0 {
				t.Errorf("%s: triangle %d as %v", name, tr, p)
			}
			if len(seen) > 0 && slices.CompareFunc(last[:], p[:], byXY) >= 0 {
				t.Errorf("%s: %v after %v", name, p, last)
			}
			own := m.Corners(tr)
			if i := slices.Index(own[:], c[0]); i < 0 || own[(i+1)%3] != c[1] || own[(i+2)%3] != c[2] {
				t.Errorf("%s: triangle %d has corners %v, came with %v", name, tr, own, c)
			}
			last, seen[tr] = p, true
		}
		if len(seen) != m.NumTriangles() {
			t.Errorf("%s: %d triangles of %d", name, len(seen), m.NumTriangles())
		}
		for range m.CanonicalTriangles(rank) {
			break
		}
	}
}

// TestInputs: the smallest number of an input at each place, whatever vertex
// the builder chose to stand for it.
func TestInputs(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 7))
	for _, pts := range [][]orb.Point{
		shuffled(slices.Repeat(lattice(7, 7, 0, 0, 1), 4), r),
		shuffled(append(slices.Repeat([]orb.Point{{3, 3}}, 300), lattice(12, 12, 0, 0, 1)...), r),
		shuffled(slices.Repeat(line(9, 0, 0, 1, 1), 9), r),
		slices.Repeat([]orb.Point{{1, 2}}, 5),
		append(pointsets.Survey(10_000, 4), pointsets.Survey(10_000, 4)...),
	} {
		m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{Workers: 2})
		if err != nil {
			t.Fatal(err)
		}
		first := map[orb.Point]int32{}
		for i, p := range pts {
			if _, ok := first[p]; !ok {
				first[p] = int32(i)
			}
			if m.Position(m.VertexOf(i)) != p {
				t.Fatalf("input %d at %v has its vertex at %v", i, p, m.Position(m.VertexOf(i)))
			}
		}
		for v, i := range m.Inputs() {
			if want := first[m.Position(triangulate.Vertex(v))]; i != want {
				t.Errorf("vertex %d: input %d, want %d", v, i, want)
			}
		}
	}
}
