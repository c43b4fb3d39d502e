package interp_test

import (
	"context"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

func TestQuality(t *testing.T) {
	// A square with its middle raised on one side: two flat triangles of area 4,
	// and a sliver along a far point just off the east side.
	pts := []orb.Point{{0, 0}, {4, 0}, {4, 4}, {0, 4}, {2, 2}, {4.01, 2}}
	z := []float64{1, 1, 5, 1, 1, 3}
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := interp.FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	q := s.Quality(2)
	if q.Flat != 2 || q.FlatArea != 8 || q.Slivers != 0 {
		t.Errorf("got %+v", q)
	}
	if len(q.Longest) != 2 || q.Longest[0].Length != 4 || m.Position(q.Longest[0].From) != (orb.Point{0, 0}) || m.Position(q.Longest[0].To) != (orb.Point{0, 4}) {
		t.Errorf("longest %+v", q.Longest)
	}
	thin, _ := triangulate.Delaunay(context.Background(), []orb.Point{{0, 0}, {10, 0}, {5, 0.4}}, triangulate.Options{})
	s, _ = interp.New(thin, []float64{0, 0, 1})
	if q := s.Quality(0); q.Slivers != 1 || q.Longest != nil {
		t.Errorf("thin: %+v", q)
	}
	trimmed := thin.Trim(1)
	s, _ = interp.New(trimmed, []float64{0, 0, 1})
	if got := len(s.WithoutTriangle()); got != 3 {
		t.Errorf("%d vertices without a triangle, want 3", got)
	}
}

func TestSlopeDoesNotOverflow(t *testing.T) {
	if got := interp.Slope(3e200, 4e200); got < 4.99999e200 || got > 5.00001e200 {
		t.Errorf("got %v, want 5e200", got)
	}
}
