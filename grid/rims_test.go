package grid_test

import (
	"context"
	"math"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/triangulate"
)

// Nodes on the shore of a pond, a breakline, have the land's slope, not that of what
// is left out, and are the same as what is asked for place by place (P4).
func TestOwnOnRims(t *testing.T) {
	pts := []orb.Point{{0, 0}, {12, 0}, {12, 12}, {0, 12}, {6, 6}}
	z := []float64{0, 12, 12, 0, 6}
	shore := orb.Ring{{4, 4}, {8, 4}, {8, 8}, {4, 8}, {4, 4}}
	s, _, err := interp.WithBreaklines(context.Background(), pts, z, []interp.Breakline{{Name: "shore", Points: shore, Z: []float64{2, 2, 2, 2, 2}}}, interp.BreaklineOptions{})
	if err != nil {
		t.Fatal(err)
	}
	r, err := triangulate.NewRegion(nil, []orb.Ring{shore})
	if err != nil {
		t.Fatal(err)
	}
	c, err := s.Clip(context.Background(), r, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	one := decimal.FromInt(1)
	spec, err := grid.SpecFor(orb.MultiPoint(pts).Bound(), one, one, grid.Corners)
	if err != nil {
		t.Fatal(err)
	}
	for _, show := range []grid.Show{grid.Value, grid.Slope, grid.DownhillAzimuth} {
		g, err := grid.Fill(context.Background(), spec, s, grid.Options{Show: show})
		if err != nil {
			t.Fatal(err)
		}
		before := append([]float64(nil), g.Values...)
		g.Mask(r)
		g.OwnOnRims(r, s, c, show)
		tracer, whole, changed := c.Tracer(), s.Mesh().Locator(), 0
		for row := range spec.Rows {
			for col := range spec.Cols {
				p := orb.Point{spec.X(col), spec.Y(row)}
				got := g.Row(row)[col]
				if !r.Contains(p) {
					if !math.IsNaN(got) {
						t.Errorf("%v: %v in the void at %v", show, got, p)
					}
					continue
				}
				loc := tracer.Kept(p, whole.Locate(p))
				want := s.Value(loc, p)
				switch show {
				case grid.Slope:
					want = interp.Slope(s.Gradient(loc.Triangle))
				case grid.DownhillAzimuth:
					want = interp.DownhillAzimuth(s.Gradient(loc.Triangle))
				}
				if got != want && !(math.IsNaN(got) && math.IsNaN(want)) {
					t.Errorf("%v at %v: %v, want %v", show, p, got, want)
				}
				if got != before[row*spec.Cols+col] {
					if changed++; r.Place(p) != triangulate.OnEdge {
						t.Errorf("%v at %v, off the rim, has changed", show, p)
					}
				}
			}
		}
		if (changed > 0) != (show != grid.Value) {
			t.Errorf("%v: %d nodes changed", show, changed)
		}
	}
}
