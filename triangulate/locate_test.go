package triangulate_test

import (
	"math"
	"math/big"
	"math/rand/v2"
	"sync"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
	"isofacet/triangulate/pointsets"
)

// locateSlowly is the place of p by definition: exact signs against every
// triangle, and the owner as the triangle that holds p + (e, e²), with 2^-600
// for e in rationals.
func locateSlowly(m *triangulate.Mesh, p orb.Point) triangulate.Location {
	nowhere := triangulate.Location{
		Place: triangulate.Outside, Triangle: triangulate.NoTriangle,
		Edge: triangulate.NoHalfEdge, Vertex: triangulate.NoVertex,
	}
	var touching []triangulate.Triangle
	for t := range m.Triangles() {
		if c := m.Corners(t); side(m, c[0], c[1], p) >= 0 && side(m, c[1], c[2], p) >= 0 && side(m, c[2], c[0], p) >= 0 {
			touching = append(touching, t)
		}
	}
	if len(touching) == 0 {
		return nowhere
	}
	owner := triangulate.NoTriangle
	for _, t := range touching {
		if holdsShifted(m, t, p) {
			owner = t
		}
	}
	if owner == triangulate.NoTriangle {
		// p + (e, e²) is outside: the first triangle met turning counter-
		// clockwise about p is the one whose first edge has the least angle.
		owner = touching[0]
		for _, t := range touching[1:] {
			if sooner(p, firstMet(m, t, p), firstMet(m, owner, p)) {
				owner = t
			}
		}
	}
	loc := triangulate.Location{Place: triangulate.Inside, Triangle: owner, Edge: triangulate.NoHalfEdge, Vertex: triangulate.NoVertex}
	for i := range 3 {
		h := owner.HalfEdge(i)
		if side(m, m.Origin(h), m.Dest(h), p) == 0 && loc.Place == triangulate.Inside {
			loc.Place, loc.Edge = triangulate.OnEdge, h
		}
		if m.Position(m.Origin(h)) == p {
			loc.Place, loc.Edge, loc.Vertex = triangulate.OnVertex, h, m.Origin(h)
			break
		}
	}
	return loc
}

func side(m *triangulate.Mesh, u, v triangulate.Vertex, p orb.Point) int {
	return exact.Orient(m.Position(u), m.Position(v), p)
}

// shift is (e, e²).
var shift = [2]*big.Rat{
	new(big.Rat).SetFrac(big.NewInt(1), new(big.Int).Lsh(big.NewInt(1), 600)),
	new(big.Rat).SetFrac(big.NewInt(1), new(big.Int).Lsh(big.NewInt(1), 1200)),
}

// holdsShifted tells whether t holds p + (e, e²). Where p is off the line of an
// edge the shift changes nothing; on it, the sign is that of the cross product of
// the edge and the shift.
func holdsShifted(m *triangulate.Mesh, t triangulate.Triangle, p orb.Point) bool {
	c := m.Corners(t)
	for i := range c {
		u, v := m.Position(c[i]), m.Position(c[(i+1)%3])
		s := exact.Orient(u, v, p)
		if s == 0 {
			d := func(k int) *big.Rat {
				return new(big.Rat).Sub(new(big.Rat).SetFloat64(v[k]), new(big.Rat).SetFloat64(u[k]))
			}
			cross := new(big.Rat).Mul(d(0), shift[1])
			s = cross.Sub(cross, new(big.Rat).Mul(d(1), shift[0])).Sign()
		}
		if s <= 0 {
			return false
		}
	}
	return true
}

// firstMet is where the edge ends over which a turn about p, counter-clockwise,
// enters t: the half-edge that starts at p, or the one that p lies on.
func firstMet(m *triangulate.Mesh, t triangulate.Triangle, p orb.Point) orb.Point {
	for i := range 3 {
		h := t.HalfEdge(i)
		if m.Position(m.Dest(h)) != p && side(m, m.Origin(h), m.Dest(h), p) == 0 {
			return m.Position(m.Dest(h))
		}
	}
	panic("p is inside")
}

// sooner orders a and b by their direction from p, an angle in (0, 2π].
func sooner(p, a, b orb.Point) bool {
	half := func(d orb.Point) int {
		if d[1] > p[1] || d[1] == p[1] && d[0] < p[0] {
			return 0 // (0, π]
		}
		return 1
	}
	if half(a) != half(b) {
		return half(a) < half(b)
	}
	return exact.Orient(p, a, b) > 0
}

// places are positions of every kind about a mesh: at vertices, on edges, inside
// triangles, beside, far outside, on the lines of edges beyond their ends.
func places(m *triangulate.Mesh, r *rand.Rand) []orb.Point {
	b := orb.MultiPoint(m.Positions()).Bound()
	w, h := b.Max[0]-b.Min[0], b.Max[1]-b.Min[1]
	var out []orb.Point
	for v := range m.Vertices() {
		p := m.Position(v)
		out = append(out, p, orb.Point{beside(p[0], 1), p[1]}, orb.Point{beside(p[0], -1), p[1]},
			orb.Point{p[0], beside(p[1], 1)}, orb.Point{p[0], beside(p[1], -1)})
	}
	for e := range triangulate.HalfEdge(m.NumHalfEdges()) {
		p, q := m.Position(m.Origin(e)), m.Position(m.Dest(e))
		for _, f := range []float64{0.5, 0.25, 2, -1, -0.5} { // 0.5 is mostly exact, on the edge
			out = append(out, orb.Point{p[0] + f*(q[0]-p[0]), p[1] + f*(q[1]-p[1])})
		}
	}
	for range 300 {
		out = append(out, orb.Point{b.Min[0] + (1.4*r.Float64()-0.2)*w, b.Min[1] + (1.4*r.Float64()-0.2)*h})
	}
	for _, far := range []float64{1e3, 1e9, 1e60} {
		for _, d := range [][2]float64{{1, 0}, {0, 1}, {1, 1}, {-1, 0}, {0, -1}, {-1, 0.3}} {
			out = append(out, orb.Point{d[0] * far, d[1] * far})
		}
	}
	return out
}

// beside is the next accepted coordinate in a direction.
func beside(c, direction float64) float64 {
	if c == 0 {
		return direction * triangulate.CoordinateLeast
	}
	return math.Nextafter(c, direction*triangulate.CoordinateMost)
}

// withHidden adds, for every mesh, two in which some triangles are no part of
// the surface.
func withHidden(all map[string]*triangulate.Mesh) map[string]*triangulate.Mesh {
	r := rand.New(rand.NewPCG(12, 1))
	out := map[string]*triangulate.Mesh{}
	for name, m := range all {
		out[name] = m
		for what, share := range map[string]float64{"a third hidden": 1. / 3, "three quarters hidden": 0.75} {
			h := m.Hide(func(triangulate.Triangle) bool { return r.Float64() < share })
			if h.NumTriangles() > 0 {
				out[name+", "+what] = h
			}
		}
	}
	return out
}

// TestLocate against the definition, from a bucket and from where the last walk
// ended, in random order.
func TestLocate(t *testing.T) {
	for name, m := range withHidden(someMeshes(t)) {
		r := rand.New(rand.NewPCG(3, 3))
		queries := shuffled(places(m, r), r)
		if len(queries) > 1500 {
			queries = queries[:1500]
		}
		l, walker := m.Locator(), m.Locator()
		count := map[triangulate.Place]int{}
		for _, p := range queries {
			want := locateSlowly(m, p)
			count[want.Place]++
			if got := l.Locate(p); got != want {
				t.Fatalf("%s: Locate(%v) = %+v, want %+v", name, p, got, want)
			}
			if got := walker.LocateNext(p); got != want {
				t.Fatalf("%s: LocateNext(%v) = %+v, want %+v", name, p, got, want)
			}
		}
		for _, place := range []triangulate.Place{triangulate.Outside, triangulate.Inside, triangulate.OnEdge, triangulate.OnVertex} {
			if count[place] == 0 {
				t.Errorf("%s: no query came out as %v", name, place)
			}
		}
	}
}

// TestLocateOnALattice runs through every node of a lattice with half the step,
// one step beyond the hull.
func TestLocateOnALattice(t *testing.T) {
	for name, m := range map[string]*triangulate.Mesh{
		"lattice":        checked(t, lattice(6, 5, 0, 0, 2), triangulate.Options{}),
		"far lattice":    checked(t, lattice(6, 5, 430000, 5600000, 2), triangulate.Options{}),
		"tilted lattice": checked(t, tilted345(4, 4), triangulate.Options{}),
		"circle":         checked(t, append(integerCircle(5), orb.Point{}), triangulate.Options{}),
	} {
		l := m.Locator()
		b := orb.MultiPoint(m.Positions()).Bound()
		for x := b.Min[0] - 1; x <= b.Max[0]+1; x += 0.5 {
			for y := b.Min[1] - 1; y <= b.Max[1]+1; y += 0.5 {
				p := orb.Point{x, y}
				if got, want := l.Locate(p), locateSlowly(m, p); got != want {
					t.Fatalf("%s: Locate(%v) = %+v, want %+v", name, p, got, want)
				}
			}
		}
	}
}

// TestOneOwner: of all triangles exactly the owner says that a position is its
// own.
func TestOneOwner(t *testing.T) {
	for name, m := range withHidden(someMeshes(t)) {
		if m.NumTriangles() > 150 {
			continue
		}
		r := rand.New(rand.NewPCG(4, 3))
		l := m.Locator()
		for _, p := range places(m, r) {
			want := l.Locate(p)
			for tr := range m.Triangles() {
				got := m.LocateIn(tr, p)
				if tr == want.Triangle {
					if got != want {
						t.Fatalf("%s: LocateIn(%d, %v) = %+v, want %+v", name, tr, p, got, want)
					}
				} else if got.Place != triangulate.Outside || got.Triangle != triangulate.NoTriangle {
					t.Fatalf("%s: LocateIn(%d, %v) = %+v, but triangle %d owns it", name, tr, p, got, want.Triangle)
				}
			}
		}
	}
}

// TestLocateWithoutTriangles: everything is outside, the vertices as well.
func TestLocateWithoutTriangles(t *testing.T) {
	for _, pts := range [][]orb.Point{nil, {{1, 1}}, line(10, 0, 0, 1, 1)} {
		m := checked(t, pts, triangulate.Options{})
		l := m.Locator()
		for _, p := range []orb.Point{{0, 0}, {1, 1}, {1.5, 1.5}, {5, 6}} {
			if got := l.Locate(p); got.Place != triangulate.Outside || got.Triangle != triangulate.NoTriangle {
				t.Errorf("%d points: Locate(%v) = %+v", len(pts), p, got)
			}
			if got := l.LocateNext(p); got.Place != triangulate.Outside {
				t.Errorf("%d points: LocateNext(%v) = %+v", len(pts), p, got)
			}
		}
	}
}

// TestLocateRefused: a coordinate that a mesh cannot have is outside, and no walk
// goes round in circles over it.
func TestLocateRefused(t *testing.T) {
	m := checked(t, append(lattice(9, 9, -4, -4, 1), orb.Point{1e60, 0}), triangulate.Options{})
	l := m.Locator()
	for _, bad := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), 1e61, math.MaxFloat64, 1e-61, math.SmallestNonzeroFloat64} {
		for _, p := range []orb.Point{{bad, 0}, {0, bad}, {bad, bad}, {bad, 0.5}} {
			if got := l.Locate(p); got.Place != triangulate.Outside {
				t.Errorf("Locate(%v) = %+v", p, got)
			}
			if got := l.LocateNext(p); got.Place != triangulate.Outside {
				t.Errorf("LocateNext(%v) = %+v", p, got)
			}
			for range l.Cross(p, orb.Point{1, 1}) {
				t.Errorf("a line from %v crosses something", p)
			}
			for range l.Cross(orb.Point{1, 1}, p) {
				t.Errorf("a line to %v crosses something", p)
			}
		}
	}
}

// TestLocatorsShareAMesh: a mesh is read-only; its indexes are made once though
// many ask at the same time (run with -race).
func TestLocatorsShareAMesh(t *testing.T) {
	m := checked(t, pointsets.Survey(3000, 1), triangulate.Options{})
	queries := places(m, rand.New(rand.NewPCG(1, 9)))[:2000]
	results := make([][]triangulate.Location, 4)
	var wg sync.WaitGroup
	for w := range results {
		wg.Go(func() {
			l := m.Locator()
			for i, p := range queries {
				if w%2 == 0 {
					results[w] = append(results[w], l.Locate(p))
				} else {
					results[w] = append(results[w], l.LocateNext(p))
				}
				for range m.Around(triangulate.Vertex(i)) {
					break
				}
			}
		})
	}
	wg.Wait()
	for w := range results {
		for i := range queries {
			if results[w][i] != results[0][i] {
				t.Fatalf("goroutine %d: %v is at %+v, for goroutine 0 at %+v", w, queries[i], results[w][i], results[0][i])
			}
		}
	}
}

// TestPlaceWords are what outputs print (design 6, query).
func TestPlaceWords(t *testing.T) {
	for place, want := range map[triangulate.Place]string{
		triangulate.Outside: "outside", triangulate.Inside: "inside", triangulate.OnEdge: "edge", triangulate.OnVertex: "vertex",
	} {
		if got := place.String(); got != want {
			t.Errorf("%d is %q, want %q", place, got, want)
		}
	}
}
