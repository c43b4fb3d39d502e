package interp

import (
	"context"
	"errors"
	"fmt"
	"math"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// expectedWithout builds the surface without vertex v and asks it at its place.
func expectedWithout(t *testing.T, s *Surface, v triangulate.Vertex) float64 {
	t.Helper()
	m := s.Mesh()
	var pts []orb.Point
	var z []float64
	to := make([]int32, m.NumVertices())
	for u := range m.Vertices() {
		to[u] = int32(len(pts))
		if u != v {
			pts, z = append(pts, m.Position(u)), append(z, s.Z()[u])
		}
	}
	var segs []triangulate.Segment
	var ends []int32
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if tw := m.Twin(h); !m.IsConstrained(h) || tw != triangulate.NoHalfEdge && tw < h {
			continue
		}
		a, b := m.Origin(h), m.Dest(h)
		switch v {
		case a:
			ends = append(ends, to[b])
		case b:
			ends = append(ends, to[a])
		default:
			segs = append(segs, triangulate.Segment{From: to[a], To: to[b]})
		}
	}
	all := segs
	if len(ends) == 2 {
		all = append(segs[:len(segs):len(segs)], triangulate.Segment{From: ends[0], To: ends[1]})
	}
	rest, err := triangulate.Constrained(context.Background(), pts, all, triangulate.Options{})
	if _, crossing := errors.AsType[*triangulate.CrossingError](err); crossing {
		rest, err = triangulate.Constrained(context.Background(), pts, segs, triangulate.Options{})
	}
	if err != nil {
		t.Fatal(err)
	}
	without, err := FromInputs(rest, z)
	if err != nil {
		t.Fatal(err)
	}
	return without.Sampler().At(m.Position(v)).Z
}

// terraceLines are wavy lines across the unit square, each a chain of vertices.
func terraceLines(count, vertices int) (lines []Breakline) {
	for i := range count {
		l := Breakline{Name: fmt.Sprint("line ", i)}
		for k := range vertices {
			x := 0.02 + 0.96*float64(k)/float64(vertices-1)
			y := (float64(i)+0.5)/float64(count) + 0.3/float64(count)*float64((k*7919+i*31)%11-5)/5
			l.Points, l.Z = append(l.Points, orb.Point{x, y}), append(l.Z, 100+float64(i)+0.1*x)
		}
		lines = append(lines, l)
	}
	return lines
}

// TestLeaveOneOutIsARebuild: on 2,000 points every vertex is expected where a surface
// built without it has it, to the last bit.
func TestLeaveOneOutIsARebuild(t *testing.T) {
	const n = 2000
	check := func(name string, s *Surface) {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			l, err := s.LeaveOneOut(context.Background(), 2)
			if err != nil {
				t.Fatal(err)
			}
			step := 7 // a rebuild a vertex takes its time; with -long all
			if *long {
				step = 1
			}
			outline := map[triangulate.Vertex]bool{}
			for _, ring := range s.Mesh().Outline() {
				for _, h := range ring {
					outline[s.Mesh().Origin(h)] = true
				}
			}
			if l.Outline != len(outline) {
				t.Errorf("%d on the outline, want %d", l.Outline, len(outline))
			}
			seen := 0
			for v := 0; v < len(l.Expected); v += step {
				want := math.NaN()
				if !outline[triangulate.Vertex(v)] {
					want = expectedWithout(t, s, triangulate.Vertex(v))
				}
				if got := l.Expected[v]; got != want && !(math.IsNaN(got) && math.IsNaN(want)) {
					t.Errorf("vertex %d at %v: %v, want %v", v, s.Mesh().Position(triangulate.Vertex(v)), got, want)
				}
				seen++
			}
			if s.Mesh().HasConstraints() && l.Joined < 100 || seen < 100 {
				t.Errorf("%d vertices seen, %d joined: too few to show anything", seen, l.Joined)
			}
		})
	}
	for _, d := range []struct {
		name string
		pts  []orb.Point
	}{{"uniform", pointsets.Uniform(n, 1)}, {"clustered", pointsets.Clustered(n, 2)}, {"survey", pointsets.Survey(n, 3)}, {"unit lattice", pointsets.UnitLattice(n, 4)}, {"lattice of tenths", pointsets.Lattice01(n, 5)}, {"circle", pointsets.Circle(n, 6)}} {
		check(d.name, surfaceOf(t, d.pts, heights(d.pts, lumpy)))
	}
	for _, d := range []struct {
		name string
		pts  []orb.Point
	}{{"uniform", pointsets.Uniform(n-300, 7)}, {"lattice", unitLattice(41)}} {
		s, _, err := WithBreaklines(context.Background(), d.pts, heights(d.pts, lumpy), terraceLines(6, 50), BreaklineOptions{Crossing: SplitCrossings, CrossingSpreadMax: 9, SpotSpreadMax: 9})
		if err != nil {
			t.Fatal(err)
		}
		check(d.name+" with breaklines", s)
	}
}

// unitLattice is a square of side by side nodes that fills the unit square.
func unitLattice(side int) (pts []orb.Point) {
	for i := range side {
		for k := range side {
			pts = append(pts, orb.Point{float64(i) / float64(side-1), float64(k) / float64(side-1)})
		}
	}
	return pts
}

// TestLeaveOneOutOfAPlane: where all readings lie on a plane each is expected where it
// is.
func TestLeaveOneOutOfAPlane(t *testing.T) {
	pts := pointsets.Survey(3000, 1)
	x0, y0 := pts[0][0], pts[0][1]
	s := surfaceOf(t, pts, heights(pts, func(x, y float64) float64 { return 100 + 0.25*(x-x0) - 0.125*(y-y0) }))
	l, err := s.LeaveOneOut(context.Background(), 0)
	if err != nil {
		t.Fatal(err)
	}
	for v := range s.Mesh().Vertices() {
		if r := l.Residual(v); math.Abs(r) > 4*ulp(2000) {
			t.Errorf("vertex %d: residual %v", v, r)
		}
	}
	if got, want := l.Outline, len(s.Mesh().Hull()); got != want || l.Predicted+l.Outline != len(pts) {
		t.Errorf("%d on the outline, %d predicted: want %d and the rest of %d", got, l.Predicted, want, len(pts))
	}
}

// TestLeaveOneOutIsTheSame whatever the number of goroutines.
func TestLeaveOneOutIsTheSame(t *testing.T) {
	pts := pointsets.Uniform(9000, 8)
	s, _, err := WithBreaklines(context.Background(), pts, heights(pts, lumpy), terraceLines(9, 200), BreaklineOptions{Crossing: SplitCrossings, CrossingSpreadMax: 9})
	if err != nil {
		t.Fatal(err)
	}
	one, err := s.LeaveOneOut(context.Background(), 1)
	if err != nil {
		t.Fatal(err)
	}
	many, err := s.LeaveOneOut(context.Background(), 5)
	if err != nil {
		t.Fatal(err)
	}
	for v := range one.Expected {
		if math.Float64bits(one.Expected[v]) != math.Float64bits(many.Expected[v]) {
			t.Fatalf("vertex %d: %v alone, %v together", v, one.Expected[v], many.Expected[v])
		}
	}
	if one.Predicted != many.Predicted || one.Joined != many.Joined || one.Lined != many.Lined {
		t.Errorf("counts %+v, %+v", one, many)
	}
}

// BenchmarkLeaveOneOut beside its floor, which builds the mesh.
func BenchmarkLeaveOneOut(b *testing.B) {
	onAll(b, func(b *testing.B, s *Surface, _ []orb.Point) {
		s.Mesh().Reduction()
		for b.Loop() {
			if _, err := s.LeaveOneOut(context.Background(), 0); err != nil {
				b.Fatal(err)
			}
		}
		rate(b, s.Mesh().NumVertices(), "vertices/s")
	})
}

// BenchmarkLeaveOneOutFloor is the triangulation of the same points.
func BenchmarkLeaveOneOutFloor(b *testing.B) {
	onAll(b, func(b *testing.B, s *Surface, _ []orb.Point) {
		for b.Loop() {
			if _, err := triangulate.Delaunay(context.Background(), s.Mesh().Positions(), triangulate.Options{}); err != nil {
				b.Fatal(err)
			}
		}
		rate(b, s.Mesh().NumVertices(), "vertices/s")
	})
}
