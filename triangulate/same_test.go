package triangulate_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
	"isofacet/triangulate/pointsets"
)

// sets are ten inputs large enough to be built by several goroutines.
func sets() map[string][]orb.Point {
	n := 20_000
	if testing.Short() {
		n = 9_000 // still enough for goroutines
	}
	all := map[string][]orb.Point{
		"kuzmin":          pointsets.Kuzmin(n, 3),
		"repeated places": append(pointsets.Survey(n/2, 3), pointsets.Survey(n/2, 3)...),
		"few places":      slices.Repeat(lattice(30, 30, 0, 0, 1), n/900),
	}
	for _, d := range pointsets.All {
		all[d.Name] = d.Points(n, 3)
	}
	return all
}

// TestOneAnswer is promise P2 at the level of the mesh: the triangles as written
// are the same for any order of the input and any number of workers.
func TestOneAnswer(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 1))
	numbers := []int{1, 2, 3, 8}
	if testing.Short() {
		numbers = []int{3}
	}
	for name, pts := range sets() {
		want := corners(checked(t, pts, triangulate.Options{Workers: 1}))
		for _, workers := range numbers {
			m := checked(t, shuffled(pts, r), triangulate.Options{Workers: workers})
			sameTriangles(t, fmt.Sprintf("%s, shuffled, %d workers", name, workers), corners(m), want)
		}
		sorted := slices.SortedFunc(slices.Values(pts), byXY)
		slices.Reverse(sorted)
		sameTriangles(t, name+", falling", corners(checked(t, sorted, triangulate.Options{Workers: 2})), want)
	}
}

// TestWorkersDoNotEvenRenumber: for one order of the input, vertices and triangles
// also have the same numbers whatever the number of workers, which is more than
// is promised, and makes failures repeatable.
func TestWorkersDoNotEvenRenumber(t *testing.T) {
	pts := pointsets.Survey(30_000, 5)
	want := checked(t, pts, triangulate.Options{Workers: 1})
	for _, workers := range []int{2, 3, 8} {
		got := checked(t, pts, triangulate.Options{Workers: workers})
		if !slices.Equal(got.Positions(), want.Positions()) {
			t.Errorf("%d workers: vertices are numbered otherwise", workers)
		}
		for tr := range want.Triangles() {
			if got.Corners(tr) != want.Corners(tr) {
				t.Fatalf("%d workers: triangle %d is %v, with one worker %v", workers, tr, got.Corners(tr), want.Corners(tr))
			}
		}
	}
}

// tieFree tells whether no inner edge has its four corners on one circle: then no
// tie was broken anywhere, and the triangulation is unique without a rule.
func tieFree(m *triangulate.Mesh) bool {
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		tw := m.Twin(h)
		if tw == triangulate.NoHalfEdge {
			continue
		}
		if exact.InCircle(m.Position(m.Origin(h)), m.Position(m.Dest(h)), m.Position(m.Apex(h)), m.Position(m.Apex(tw))) == 0 {
			return false
		}
	}
	return true
}

// byInputs is a mesh as triples of input numbers, so that meshes of moved points
// can be compared.
func byInputs(m *triangulate.Mesh) [][3]int32 {
	in := m.Inputs()
	out := make([][3]int32, 0, m.NumTriangles())
	for tr := range m.Triangles() {
		c := m.Corners(tr)
		t := [3]int32{in[c[0]], in[c[1]], in[c[2]]}
		slices.Sort(t[:])
		out = append(out, t)
	}
	slices.SortFunc(out, func(a, b [3]int32) int { return slices.Compare(a[:], b[:]) })
	return out
}

func mapped(pts []orb.Point, f func(orb.Point) orb.Point) []orb.Point {
	out := make([]orb.Point, len(pts))
	for i, p := range pts {
		out[i] = f(p)
	}
	return out
}

// TestTurnsAndScales: what moves the plane without rounding moves a triangulation
// without ties into itself. Scaling by positive powers of two and exact shifts
// keep the (x, y) order, so there ties are settled alike as well.
func TestTurnsAndScales(t *testing.T) {
	type move struct {
		name  string
		f     func(orb.Point) orb.Point
		order bool // keeps the (x, y) order
	}
	moves := []move{
		{"quarter turn", func(p orb.Point) orb.Point { return orb.Point{-p[1], p[0]} }, false},
		{"half turn", func(p orb.Point) orb.Point { return orb.Point{-p[0], -p[1]} }, false},
		{"three quarter turns", func(p orb.Point) orb.Point { return orb.Point{p[1], -p[0]} }, false},
		{"mirrored east to west", func(p orb.Point) orb.Point { return orb.Point{-p[0], p[1]} }, false},
		{"mirrored about the diagonal", func(p orb.Point) orb.Point { return orb.Point{p[1], p[0]} }, false},
	}
	for _, e := range []int{-170, -60, -1, 1, 10, 100, 170} {
		moves = append(moves, move{fmt.Sprintf("times 2^%d", e), func(p orb.Point) orb.Point {
			return orb.Point{math.Ldexp(p[0], e), math.Ldexp(p[1], e)}
		}, true})
	}
	for name, pts := range map[string][]orb.Point{
		"uniform":      pointsets.Uniform(5000, 8),
		"clustered":    pointsets.Clustered(5000, 8),
		"kuzmin":       pointsets.Kuzmin(5000, 8),
		"unit-lattice": pointsets.UnitLattice(900, 8),
		"lattice-0.1m": pointsets.Lattice01(900, 8),
		"circles":      pointsets.Circle(972, 8),
	} {
		m := checked(t, pts, triangulate.Options{})
		want, free := byInputs(m), tieFree(m)
		if lattices := len(pts) < 5000; free == lattices {
			t.Errorf("%s: free of ties: %v", name, free)
		}
		for _, mv := range moves {
			moved := checked(t, mapped(pts, mv.f), triangulate.Options{})
			if (free || mv.order) && !slices.Equal(byInputs(moved), want) {
				t.Errorf("%s, %s: another triangulation", name, mv.name)
			}
		}
	}
}

// TestAnySmallSet draws small sets full of ties, repeats and straight rows, and
// compares with the definition, shuffled, shifted and scaled.
func TestAnySmallSet(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		side := rapid.IntRange(1, 6).Draw(rt, "side")
		coordinate := rapid.IntRange(0, side)
		ints := rapid.SliceOfN(rapid.Custom(func(rt *rapid.T) [2]int {
			return [2]int{coordinate.Draw(rt, "x"), coordinate.Draw(rt, "y")}
		}), 0, 14).Draw(rt, "points")
		step := math.Ldexp(1, rapid.IntRange(-20, 20).Draw(rt, "step"))
		x0 := step * float64(rapid.IntRange(-1<<20, 1<<20).Draw(rt, "x0"))
		y0 := step * float64(rapid.IntRange(-1<<20, 1<<20).Draw(rt, "y0"))
		var pts []orb.Point
		for _, p := range ints {
			pts = append(pts, orb.Point{x0 + step*float64(p[0]), y0 + step*float64(p[1])})
		}
		m := checked(rt2t{t, rt}, pts, triangulate.Options{})
		places := distinct(pts)
		if m.NumVertices() != len(places) {
			rt.Fatalf("%d vertices, want %d", m.NumVertices(), len(places))
		}
		sameTriangles(rt2t{t, rt}, "by definition", corners(m), tiedDelaunay(places))
	})
}

// rt2t lets the helpers that want a testing.TB report to rapid, which then can
// look for the smallest example.
type rt2t struct {
	testing.TB
	rt *rapid.T
}

func (r rt2t) Helper()                         {}
func (r rt2t) Fatal(args ...any)               { r.rt.Fatal(args...) }
func (r rt2t) Fatalf(f string, args ...any)    { r.rt.Fatalf(f, args...) }
func (r rt2t) Logf(format string, args ...any) { r.rt.Logf(format, args...) }
