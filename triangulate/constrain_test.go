package triangulate_test

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// segmentIsChain walks the segment's edges in the mesh.
func segmentIsChain(m *triangulate.Mesh, a, b triangulate.Vertex) bool {
	if a == b {
		return true
	}
	cur := a
	for cur != b {
		next := triangulate.NoVertex
		look := func(h triangulate.HalfEdge, u triangulate.Vertex) {
			p, q, r := m.Position(cur), m.Position(u), m.Position(b)
			if m.IsConstrained(h) && exact.Orient(p, q, r) == 0 && exact.CompareXY(p, q) == exact.CompareXY(p, r) {
				next = u
			}
		}
		for h := range m.Around(cur) {
			look(h, m.Dest(h))
			look(m.Prev(h), m.Origin(m.Prev(h)))
		}
		if next == triangulate.NoVertex {
			return false
		}
		cur = next
	}
	return true
}

func crosses(p, q, r, s orb.Point) bool {
	return exact.Orient(p, q, r)*exact.Orient(p, q, s) < 0 && exact.Orient(r, s, p)*exact.Orient(r, s, q) < 0
}

// randomScene has points on a small integer raster and segments that do not cross.
func randomScene(rng *rand.Rand, n, segs, size int) ([]orb.Point, []triangulate.Segment) {
	pts := make([]orb.Point, n)
	for i := range pts {
		pts[i] = orb.Point{float64(rng.IntN(size)), float64(rng.IntN(size))}
	}
	var out []triangulate.Segment
	for range segs {
		s := triangulate.Segment{From: int32(rng.IntN(n)), To: int32(rng.IntN(n))}
		ok := true
		for _, o := range out {
			if crosses(pts[s.From], pts[s.To], pts[o.From], pts[o.To]) {
				ok = false
			}
		}
		if ok {
			out = append(out, s)
		}
	}
	return pts, out
}

// permuted returns the scene with points, segments and ends in another order.
func permuted(rng *rand.Rand, pts []orb.Point, segs []triangulate.Segment) ([]orb.Point, []triangulate.Segment) {
	to := rng.Perm(len(pts))
	p := make([]orb.Point, len(pts))
	for i, k := range to {
		p[k] = pts[i]
	}
	q := make([]triangulate.Segment, len(segs))
	for i, k := range rng.Perm(len(segs)) {
		q[k] = triangulate.Segment{From: int32(to[segs[i].From]), To: int32(to[segs[i].To])}
		if rng.IntN(2) == 0 {
			q[k].From, q[k].To = q[k].To, q[k].From
		}
	}
	return p, q
}

// edges lists the constrained edges of m by place.
func constrainedEdges(m *triangulate.Mesh) [][2]orb.Point {
	var es [][2]orb.Point
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if m.IsConstrained(h) {
			a, b := m.Position(m.Origin(h)), m.Position(m.Dest(h))
			if exact.CompareXY(a, b) > 0 {
				a, b = b, a
			}
			es = append(es, [2]orb.Point{a, b})
		}
	}
	slices.SortFunc(es, func(p, q [2]orb.Point) int {
		if c := byXY(p[0], q[0]); c != 0 {
			return c
		}
		return byXY(p[1], q[1])
	})
	return slices.Compact(es)
}

// twiceArea is twice the exact area of all triangles.
func twiceArea(m *triangulate.Mesh) *big.Rat {
	sum := new(big.Rat)
	for t := range m.Triangles() {
		c := m.Corners(t)
		sum.Add(sum, twiceTriangle(m.Position(c[0]), m.Position(c[1]), m.Position(c[2])))
	}
	return sum
}

func twiceTriangle(a, b, c orb.Point) *big.Rat {
	r := func(x, y float64) *big.Rat {
		d := new(big.Rat).SetFloat64(x)
		return d.Sub(d, new(big.Rat).SetFloat64(y))
	}
	p, q := r(b[0], a[0]), r(b[1], a[1])
	p.Mul(p, r(c[1], a[1]))
	q.Mul(q, r(c[0], a[0]))
	return p.Sub(p, q)
}

// twiceHull is twice the exact area of the ring of hull vertices.
func twiceHull(m *triangulate.Mesh) *big.Rat {
	hull := m.Hull()
	sum := new(big.Rat)
	for i := 2; i < len(hull); i++ {
		sum.Add(sum, twiceTriangle(m.Position(hull[0]), m.Position(hull[i-1]), m.Position(hull[i])))
	}
	return sum
}

var sceneSizes = []int{3, 6, 12, 40, 1000, 1 << 30}

// P8: in random scenes whose segments touch, overlap, share ends and meet in T, on
// small and large integers, every segment is a chain of edges, every other edge
// passes the in-circle test, and the area is the hull's, exactly. P2: ten shuffles
// of points and lines give the same mesh and the same chains.
func TestConstrainedScenes(t *testing.T) {
	segments := 0
	for seed := range uint64(1000) {
		rng := rand.New(rand.NewPCG(seed, 7))
		pts, segs := randomScene(rng, 3+rng.IntN(60), 1+rng.IntN(40), sceneSizes[seed%6])
		segments += len(segs)
		var want [][3]orb.Point
		var wantEdges [][2]orb.Point
		for shuffle := range 11 {
			p, q := pts, segs
			if shuffle > 0 {
				p, q = permuted(rng, pts, segs)
			}
			m, err := triangulate.Constrained(context.Background(), p, q, triangulate.Options{Workers: 1 + shuffle%3})
			if err != nil {
				t.Fatalf("seed %d: %v", seed, err)
			}
			if shuffle > 0 {
				sameTriangles(t, fmt.Sprintf("seed %d, shuffle %d", seed, shuffle), corners(m), want)
				if got := constrainedEdges(m); !slices.Equal(got, wantEdges) {
					t.Fatalf("seed %d, shuffle %d: constrained edges %v, want %v", seed, shuffle, got, wantEdges)
				}
				continue
			}
			want, wantEdges = corners(m), constrainedEdges(m)
			if err := m.Check(); err != nil {
				draw(t, m)
				t.Fatalf("seed %d: %v", seed, err)
			}
			if m.NumTriangles() == 0 {
				continue
			}
			if a, h := twiceArea(m), twiceHull(m); a.Cmp(h) != 0 {
				t.Fatalf("seed %d: twice the area is %v, of the hull %v", seed, a, h)
			}
			for i, s := range q {
				if !segmentIsChain(m, m.VertexOf(int(s.From)), m.VertexOf(int(s.To))) {
					draw(t, m)
					t.Fatalf("seed %d: segment %d is not a chain of edges", seed, i)
				}
			}
		}
	}
	if segments < 5000 {
		t.Errorf("only %d segments in all scenes", segments)
	}
}

// The edges of a scene name their segments, overlaps all of them.
func TestSegmentsAlong(t *testing.T) {
	pts := []orb.Point{{0, 0}, {9, 0}, {9, 9}, {0, 9}, {2, 4}, {4, 4}, {6, 4}, {8, 4}}
	segs := []triangulate.Segment{{From: 4, To: 6}, {From: 7, To: 5}, {From: 5, To: 6}, {From: 3, To: 3}}
	m, err := triangulate.Constrained(context.Background(), pts, segs, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	want := map[float64][]int32{2: {0}, 4: {0, 1, 2}, 6: {1}}
	found := 0
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if a, b := m.Position(m.Origin(h)), m.Position(m.Dest(h)); m.IsConstrained(h) {
			found++
			if got := m.SegmentsAlong(h); !slices.Equal(got, want[min(a[0], b[0])]) {
				t.Errorf("%v–%v: segments %v", a, b, got)
			}
		}
	}
	if found != 6 {
		t.Errorf("%d constrained half-edges, want 6", found)
	}
}

// Segments in any order and number that cross: the finder agrees with all pairs,
// Constrained names them, and split they make the same mesh in every order.
func TestSplitScenes(t *testing.T) {
	made := 0
	for seed := range uint64(300) {
		rng := rand.New(rand.NewPCG(seed, 11))
		size := sceneSizes[1+seed%5]
		pts := make([]orb.Point, 4+rng.IntN(20))
		for i := range pts {
			pts[i] = orb.Point{float64(rng.IntN(size)), float64(rng.IntN(size))}
		}
		var segs []triangulate.Segment
		for range 1 + rng.IntN(12) {
			segs = append(segs, triangulate.Segment{From: int32(rng.IntN(len(pts))), To: int32(rng.IntN(len(pts)))})
		}
		var pairs []triangulate.Crossed
		for i := range segs {
			for j := i + 1; j < len(segs); j++ {
				a, b, c, d := pts[segs[i].From], pts[segs[i].To], pts[segs[j].From], pts[segs[j].To]
				if !crosses(a, b, c, d) {
					continue
				}
				at := triangulate.Intersection(a, b, c, d)
				if slices.Contains(pts, at) && exact.Orient(a, b, at) == 0 && exact.Orient(c, d, at) == 0 {
					continue // in an input point
				}
				pairs = append(pairs, triangulate.Crossed{A: int32(i), B: int32(j)})
			}
		}
		if got := triangulate.FindCrossings(pts, segs); !slices.Equal(got, pairs) {
			t.Fatalf("seed %d: crossings %v, want %v", seed, got, pairs)
		}
		_, err := triangulate.Constrained(context.Background(), pts, segs, triangulate.Options{})
		var ce *triangulate.CrossingError
		if errors.As(err, &ce) != (len(pairs) > 0 && !onOneLine(pts)) {
			t.Fatalf("seed %d: %d crossings, error %v", seed, len(pairs), err)
		}
		var want [][3]orb.Point
		for shuffle := range 6 {
			p, q := pts, segs
			if shuffle > 0 {
				p, q = permuted(rng, pts, segs)
			}
			split, err := triangulate.SplitCrossings(context.Background(), p, q)
			if err != nil {
				t.Fatalf("seed %d: %v", seed, err)
			}
			m, err := triangulate.Constrained(context.Background(), split.Points, split.Pieces, triangulate.Options{})
			if err != nil {
				t.Fatalf("seed %d, split: %v", seed, err)
			}
			if shuffle == 0 {
				want, made = corners(m), made+len(split.Made)
				if err := m.Check(); err != nil {
					t.Fatalf("seed %d, split: %v", seed, err)
				}
				// Where vertices were made, the hull can only have grown by rounding.
				area, _ := twiceArea(m).Float64()
				before, _ := twiceHull(mustDelaunay(t, p)).Float64()
				if d := math.Abs(area - before); d > 4*float64(size)*ulpOf(float64(size)) {
					t.Fatalf("seed %d: area moved by %v", seed, d/2)
				}
				continue
			}
			sameTriangles(t, fmt.Sprintf("seed %d, shuffle %d", seed, shuffle), corners(m), want)
		}
	}
	if made < 500 {
		t.Errorf("only %d vertices made in all scenes", made)
	}
}

func onOneLine(pts []orb.Point) bool {
	d := distinct(pts)
	for i := 2; i < len(d); i++ {
		if exact.Orient(d[0], d[1], d[i]) != 0 {
			return false
		}
	}
	return true
}

func mustDelaunay(t testing.TB, pts []orb.Point) *triangulate.Mesh {
	t.Helper()
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return m
}

func ulpOf(x float64) float64 { return math.Nextafter(x, math.Inf(1)) - x }

// FuzzConstrained makes points and segments of bytes, splits what crosses, and
// checks the mesh.
func FuzzConstrained(f *testing.F) {
	f.Add([]byte{0, 0, 5, 0, 5, 5, 0, 5, 2, 2}, []byte{0, 2, 1, 3})
	f.Add([]byte{1, 1, 2, 2, 3, 3, 4, 4, 9, 1}, []byte{0, 3, 1, 4, 2, 2})
	f.Fuzz(func(t *testing.T, places, joins []byte) {
		if len(places) > 120 || len(joins) > 80 {
			return
		}
		var pts []orb.Point
		for i := 1; i < len(places); i += 2 {
			// Small integers, and thirds, which are not.
			x, y := float64(places[i-1]&31), float64(places[i]&31)
			if places[i]&128 != 0 {
				x, y = x/3, y/3
			}
			pts = append(pts, orb.Point{x, y})
		}
		if len(pts) == 0 {
			return
		}
		var segs []triangulate.Segment
		for i := 1; i < len(joins); i += 2 {
			segs = append(segs, triangulate.Segment{From: int32(joins[i-1]) % int32(len(pts)), To: int32(joins[i]) % int32(len(pts))})
		}
		split, err := triangulate.SplitCrossings(context.Background(), pts, segs)
		if err != nil {
			t.Fatal(err)
		}
		m, err := triangulate.Constrained(context.Background(), split.Points, split.Pieces, triangulate.Options{})
		if err != nil {
			t.Fatal(err)
		}
		if err := m.Check(); err != nil {
			t.Fatal(err)
		}
		for i, s := range split.Pieces {
			if m.NumTriangles() > 0 && !segmentIsChain(m, m.VertexOf(int(s.From)), m.VertexOf(int(s.To))) {
				t.Fatalf("piece %d is not a chain of edges", i)
			}
		}
	})
}
