package interp_test

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
)

// Elementary geometry (reference/volumes, roof_ridge): 10000 only when the ridge is
// honoured, 9966.667 without it.
func TestRoofRidge(t *testing.T) {
	pts := []orb.Point{}
	z := []float64{}
	for _, r := range referenceTable(t, "volumes/solid_roof_ridge_points.csv") {
		pts = append(pts, orb.Point{number(t, r[1]), number(t, r[2])})
		z = append(z, number(t, r[3]))
	}
	var ridge interp.Breakline
	ridge.Name = "ridge"
	for _, r := range referenceTable(t, "volumes/solid_roof_ridge_breaklines.csv") {
		i := int(number(t, r[1])) - 1
		ridge.Points, ridge.Z = append(ridge.Points, pts[i]), append(ridge.Z, z[i])
	}
	for _, c := range []struct {
		lines []interp.Breakline
		want  float64
	}{{nil, 9966 + 2.0/3}, {[]interp.Breakline{ridge}, 10000}} {
		s, _, err := interp.WithBreaklines(context.Background(), pts, z, c.lines, interp.BreaklineOptions{})
		if err != nil {
			t.Fatal(err)
		}
		if got := s.VolumeAboveZero(); math.Abs(got-c.want) > 1e-9*c.want {
			t.Errorf("%d lines: %v, want %v", len(c.lines), got, c.want)
		}
	}
}

func TestCrossingLines(t *testing.T) {
	pts := []orb.Point{{0, 0}, {10, 0}, {10, 10}, {0, 10}}
	z := []float64{0, 0, 0, 0}
	lines := []interp.Breakline{
		{"east", []orb.Point{{1, 5}, {9, 5}}, []float64{2, 4}},
		{"north", []orb.Point{{5, 1}, {5, 9}}, []float64{3.5, 3}},
	}
	_, _, err := interp.WithBreaklines(context.Background(), pts, z, lines, interp.BreaklineOptions{})
	var ce *interp.CrossingError
	if !errors.As(err, &ce) || ce.Crossings[0].At != (orb.Point{5, 5}) || ce.Crossings[0].ZA != 3 || ce.Crossings[0].ZB != 3.25 {
		t.Fatalf("refuse: %v", err)
	}
	_, _, err = interp.WithBreaklines(context.Background(), pts, z, lines, interp.BreaklineOptions{Crossing: interp.SplitCrossings})
	if !errors.As(err, &ce) || !ce.Crossings[0].SpreadTooLarge {
		t.Fatalf("split, heights apart: %v", err)
	}
	s, report, err := interp.WithBreaklines(context.Background(), pts, z, lines, interp.BreaklineOptions{Crossing: interp.SplitCrossings, CrossingSpreadMax: 0.25})
	if err != nil {
		t.Fatal(err)
	}
	if len(report.Made) != 1 || report.Made[0].Z != 3.125 {
		t.Errorf("made %v", report.Made)
	}
	if got := s.Sampler().At(orb.Point{5, 5}).Z; got != 3.125 {
		t.Errorf("height there %v", got)
	}
	if err := s.Mesh().Check(); err != nil {
		t.Error(err)
	}
}

// Lines through one place, in all orders, give the same surface.
func TestCrossingsInAnyOrder(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 1))
	pts := []orb.Point{{-20, -20}, {20, -21}, {21, 20}, {-20, 22}}
	z := []float64{0, 1, 2, 3}
	var lines []interp.Breakline
	for range 7 {
		a := orb.Point{float64(rng.IntN(31) - 15), float64(rng.IntN(31) - 15)}
		// Through the origin, exactly or nearly.
		b := orb.Point{-a[0] * 1.1, -a[1] * 1.1}
		lines = append(lines, interp.Breakline{Name: string(rune('a' + len(lines))), Points: []orb.Point{a, b}, Z: []float64{1, 1}})
	}
	var want []float64
	for round := range 12 {
		rng.Shuffle(len(lines), func(i, j int) { lines[i], lines[j] = lines[j], lines[i] })
		s, _, err := interp.WithBreaklines(context.Background(), pts, z, lines, interp.BreaklineOptions{Crossing: interp.SplitCrossings})
		if err != nil {
			t.Fatal(err)
		}
		if err := s.Mesh().Check(); err != nil {
			t.Fatal(err)
		}
		var got []float64
		for _, c := range s.Mesh().CanonicalTriangles(s.Mesh().Rank()) {
			for _, v := range c {
				p := s.Mesh().Position(v)
				got = append(got, p[0], p[1], s.Z()[v])
			}
		}
		if round == 0 {
			want = got
			continue
		}
		if len(got) != len(want) {
			t.Fatalf("round %d: %d numbers, want %d", round, len(got), len(want))
		}
		for i := range got {
			if math.Float64bits(got[i]) != math.Float64bits(want[i]) {
				t.Fatalf("round %d: %v, want %v", round, got[i], want[i])
			}
		}
	}
}

func TestTouchWithin(t *testing.T) {
	pts := []orb.Point{{0, 0}, {10, 0}, {10, 10}, {0, 10}, {5, 5.0004}, {3, 5.002}}
	z := []float64{0, 0, 0, 0, 7, 1}
	line := []interp.Breakline{{"wall", []orb.Point{{1, 5}, {9, 5}}, []float64{2, 2}}}
	s, report, err := interp.WithBreaklines(context.Background(), pts, z, line, interp.BreaklineOptions{TouchWithin: 0.001})
	if err != nil {
		t.Fatal(err)
	}
	if len(report.Touched) != 1 || report.Touched[0].At != pts[4] || math.Abs(report.Touched[0].Distance-0.0004) > 1e-12 {
		t.Errorf("touched %v", report.Touched)
	}
	at := s.Mesh().Locator().Locate(pts[4])
	constrained := 0
	for h := range s.Mesh().Around(at.Vertex) {
		if s.Mesh().IsConstrained(h) {
			constrained++
		}
	}
	if constrained != 2 {
		t.Errorf("%d constrained edges at the point, want 2", constrained)
	}
}

// A line that is given twice counts once where it crosses another, whichever way it runs.
func TestRepeatedLinesCountOnceP2(t *testing.T) {
	pts := []orb.Point{{0, 0}, {10, 0}, {10, 10}, {0, 10}}
	z := []float64{0, 0, 0, 0}
	east := interp.Breakline{Name: "east", Points: []orb.Point{{1, 5}, {9, 5}}, Z: []float64{2, 4}}
	back := interp.Breakline{Name: "back", Points: []orb.Point{{9, 5}, {1, 5}}, Z: []float64{4, 2}}
	north := interp.Breakline{Name: "north", Points: []orb.Point{{5, 1}, {5, 9}}, Z: []float64{3.5, 4.5}}
	for _, lines := range [][]interp.Breakline{{east, north}, {east, north, east}, {back, north, east, back}, {north, north, back}} {
		s, report, err := interp.WithBreaklines(context.Background(), pts, z, lines, interp.BreaklineOptions{Crossing: interp.SplitCrossings, CrossingSpreadMax: 1})
		if err != nil {
			t.Fatal(err)
		}
		if got := s.Sampler().At(orb.Point{5, 5}).Z; got != 3.5 { // of 3 and 4
			t.Errorf("%d lines: height %v at the crossing, want 3.5", len(lines), got)
		}
		if n := len(report.Made); n != 1 || len(report.Made[0].Lines) != len(lines) {
			t.Errorf("%d lines: made %+v", len(lines), report.Made)
		}
	}
}

// Where a ring begins does not matter for the height of a place that it shares with
// others.
func TestRingsBeginAnywhereP2(t *testing.T) {
	pts := []orb.Point{{0, 0}, {10, 0}, {10, 10}, {0, 10}, {4, 4}, {6, 6}}
	z := []float64{0, 0, 0, 0, 3, 9}
	ring := []orb.Point{{4, 4}, {6, 4}, {6, 6}, {4, 6}}
	for turn := range ring {
		l := interp.Breakline{Name: "pond"}
		for k := range 5 {
			l.Points, l.Z = append(l.Points, ring[(turn+k)%4]), append(l.Z, 6)
		}
		s, report, err := interp.WithBreaklines(context.Background(), pts, z, []interp.Breakline{l}, interp.BreaklineOptions{SpotSpreadMax: 3})
		if err != nil {
			t.Fatal(err)
		}
		for p, want := range map[orb.Point]float64{{4, 4}: 4.5, {6, 6}: 7.5, {6, 4}: 6} {
			if got := s.Sampler().At(p).Z; got != want {
				t.Errorf("beginning at %v: height %v at %v, want %v", ring[turn], got, p, want)
			}
		}
		if report.Vertices != 5 {
			t.Errorf("%d vertices, want 5", report.Vertices)
		}
	}
}
