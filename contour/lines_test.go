package contour

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"slices"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

func levelAt(z float64) Level {
	n, err := decimal.FromFloat(z)
	if err != nil {
		panic(err)
	}
	return Level{Number: n, Z: z}
}

// long asks for 150 places of a surface in place of 50, and for mutations on all samples.
var long = flag.Bool("long", false, "check bands at more places, and mutations of them on every sample")

// eachSample runs check on many samples of every kind.
func eachSample(t *testing.T, check func(s *interp.Surface, levels Levels) error) {
	for name := range samples {
		t.Run(name, func(t *testing.T) { eachOf(t, name, check) })
	}
}

// eachOf runs check on many samples of one kind.
func eachOf(t *testing.T, name string, check func(s *interp.Surface, levels Levels) error) {
	rapid.Check(t, func(rt *rapid.T) {
		in := samples[name](rt).oneValue()
		m, err := triangulate.Delaunay(context.Background(), in.pts, triangulate.Options{Workers: 1})
		if err != nil {
			rt.Fatal(err)
		}
		s, err := interp.FromInputs(m, in.z)
		if err != nil {
			rt.Fatal(err)
		}
		if err := check(s, in.levelSet()); err != nil {
			rt.Fatal(err)
		}
	})
}

// TestLinesAreValidP5 checks the form of lines on hard surfaces: against the oracle, and by the half-edges that the
// following itself passed.
func TestLinesAreValidP5(t *testing.T) {
	eachSample(t, func(s *interp.Surface, levels Levels) error {
		passed := make([][]triangulate.HalfEdge, len(levels))
		src := newTriangles(s)
		src.probe = &probe{
			passed:   func(k int, h triangulate.HalfEdge) { passed[k] = append(passed[k], h) },
			flip:     triangulate.NoTriangle,
			crossing: Crossing,
		}
		probed, _, err := collect(context.Background(), src, levels, Options{Workers: 1})
		if err != nil {
			return err
		}
		for k, l := range levels {
			if err := checkPassing(s, l.Z, passed[k]); err != nil {
				return fmt.Errorf("level %v: %w", l.Z, err)
			}
		}
		lines, r, err := Lines(context.Background(), s, levels, Options{})
		if err != nil {
			return err
		}
		if !sameLines(lines, probed) {
			return errors.New("lines differ when looked into")
		}
		return checkLines(s, levels, lines, r)
	})
}

func sameLines(a, b []Line) bool {
	return slices.EqualFunc(a, b, func(a, b Line) bool {
		return a.Level == b.Level && a.Closed == b.Closed && a.Depression == b.Depression && slices.Equal(a.Points, b.Points)
	})
}

// TestMutationsAreNoticed puts faults into the following of lines: the checks must fail.
func TestMutationsAreNoticed(t *testing.T) {
	pts := []orb.Point{{0, 0}, {3.1, 0.2}, {6, -0.3}, {0.2, 3}, {3, 2.8}, {6.2, 3.1}, {-0.1, 6}, {2.9, 6.1}, {6, 6.3}}
	z := []float64{0, 1, 0, 1, 3, 1, 0, 2, 1}
	s := surfaceOf(t, pts, z, 1)
	levels := Levels{levelAt(0.7), levelAt(1), levelAt(1.3), levelAt(2.2)}
	run := func(p probe) (lines []Line, r Report, passed [][]triangulate.HalfEdge) {
		src := newTriangles(s)
		passed = make([][]triangulate.HalfEdge, len(levels))
		p.passed = func(k int, h triangulate.HalfEdge) { passed[k] = append(passed[k], h) }
		src.probe = &p
		lines, r, err := collect(context.Background(), src, levels, Options{Workers: 1})
		if err != nil {
			t.Fatal(err)
		}
		return lines, r, passed
	}
	// What runs astray asks for crossings on sides that are not crossed.
	somewhere := func(a orb.Point, za float64, b orb.Point, zb, level float64) orb.Point {
		if (za >= level) == (zb >= level) {
			return a
		}
		return Crossing(a, za, b, zb, level)
	}
	fault := func(passed [][]triangulate.HalfEdge) bool {
		for k, l := range levels {
			if checkPassing(s, l.Z, passed[k]) != nil {
				return true
			}
		}
		return false
	}

	lines, r, passed := run(probe{flip: triangulate.NoTriangle, crossing: Crossing})
	if err := checkLines(s, levels, lines, r); err != nil || fault(passed) {
		t.Fatalf("without a fault: %v, passing wrong: %v", err, fault(passed))
	}
	astray := 0 // at the outline a wrong turn ends the line like the right one
	for tr := range s.Mesh().Triangles() {
		lines, r, passed := run(probe{flip: tr, crossing: somewhere})
		if err := checkLines(s, levels, lines, r); err == nil {
			t.Errorf("a corner of triangle %d on the wrong side: not noticed in the lines", tr)
		}
		if fault(passed) {
			astray++
		}
	}
	if astray == 0 {
		t.Error("corners on the wrong side: never noticed in what was passed")
	}
	unordered := func(a orb.Point, za float64, b orb.Point, zb, level float64) orb.Point {
		return crossing(a[0], a[1], za, b[0], b[1], zb, level)
	}
	lines, r, _ = run(probe{flip: triangulate.NoTriangle, crossing: unordered})
	if err := checkLines(s, levels, lines, r); err == nil {
		t.Error("ends of sides not taken in (x, y) order: not noticed")
	}
}

// TestOneAnswerP2 compares lines and bands of shuffled readings and of several numbers of workers, bit for bit.
func TestOneAnswerP2(t *testing.T) {
	seed := uint64(0)
	eachSample(t, func(s *interp.Surface, levels Levels) error {
		m := s.Mesh()
		order := make([]orb.Point, m.NumVertices()) // numbers in x, to be shuffled
		for i := range order {
			order[i][0] = float64(i)
		}
		seed++
		pointsets.Shuffle(order, seed)
		pts, z := make([]orb.Point, len(order)), make([]float64, len(order))
		for i, o := range order {
			pts[i], z[i] = m.Position(triangulate.Vertex(o[0])), s.Z()[int(o[0])]
		}
		m2, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
		if err != nil {
			return err
		}
		s2, err := interp.FromInputs(m2, z)
		if err != nil {
			return err
		}
		want, wantReport, err := Lines(context.Background(), s, levels, Options{Workers: 1})
		if err != nil {
			return err
		}
		wantBands, wantNarrow, err := Bands(context.Background(), s, levels, Options{Workers: 1})
		if err != nil {
			return err
		}
		for _, workers := range []int{1, 2, 3, 8} {
			opt := Options{Workers: workers, unitPieces: int64(workers)} // many units, so that lines are joined
			got, r, err := Lines(context.Background(), s2, levels, opt)
			if err != nil {
				return err
			}
			if !sameLines(got, want) || r.WithoutLength != wantReport.WithoutLength {
				return fmt.Errorf("%d workers, shuffled: other lines", workers)
			}
			bands, report, err := Bands(context.Background(), s2, levels, opt)
			if err != nil {
				return err
			}
			if !sameBands(bands, wantBands) {
				return fmt.Errorf("%d workers, shuffled: other bands", workers)
			}
			if report.Off != wantNarrow.Off || !slices.Equal(report.TooNarrow, wantNarrow.TooNarrow) {
				return fmt.Errorf("%d workers, shuffled: other report of bands, %+v and %+v", workers, report, wantNarrow)
			}
		}
		return nil
	})
}

func sameBands(a, b []Band) bool {
	same := func(l, m *Level) bool { return (l == nil) == (m == nil) && (l == nil || *l == *m) }
	return slices.EqualFunc(a, b, func(a, b Band) bool {
		return same(a.Lower, b.Lower) && same(a.Upper, b.Upper) &&
			slices.EqualFunc(a.Polygon, b.Polygon, func(r, q orb.Ring) bool { return slices.Equal(r, q) })
	})
}
