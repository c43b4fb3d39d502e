package grid

import (
	"context"
	"math"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/triangulate"
)

func TestShade(t *testing.T) {
	const root = math.Sqrt2 / 2
	for _, row := range []struct {
		name       string
		dzdx, dzdy float64
		want       float64
	}{
		{"level", 0, 0, root},
		{"square to the light", root, -root, 1},
		{"wall to the north-west", 1e200, -1e200, root},
		{"wall to the west", 1e120, 0, 0.5},
		{"wall to the south-east", -1e200, 1e200, 0},
		{"edge-on to the light", -1, 1, 0},
		{"along the light's azimuth", 3, 3, root / math.Sqrt(19)},
		{"squares beyond every double", 0x1p800, -0x1p800, root},
	} {
		if got := shade(row.dzdx, row.dzdy); math.Abs(got-row.want) > 1e-15 {
			t.Errorf("%s: %v, want %v", row.name, got, row.want)
		}
	}
}

// The share is the cosine between light and normal, from their angles: azimuth 315 and height 45 degrees; those of the
// normal are the azimuth of steepest descent and 90 degrees less the angle of slope.
func TestShadeIsTheCosine(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		dzdx, dzdy := rapid.Float64Range(-1e3, 1e3).Draw(t, "dzdx"), rapid.Float64Range(-1e3, 1e3).Draw(t, "dzdy")
		down := math.Atan2(-dzdx, -dzdy) // clockwise from north
		steep := math.Atan(math.Hypot(dzdx, dzdy))
		want := math.Cos(math.Pi/4)*math.Cos(steep) + math.Sin(math.Pi/4)*math.Sin(steep)*math.Cos(down+math.Pi/4)
		got := shade(dzdx, dzdy)
		if math.Abs(got-max(0, want)) > 1e-12 || got > 1+1e-15 {
			t.Errorf("shade(%v, %v) = %v, want %v", dzdx, dzdy, got, want)
		}
	})
}

// A shaded raster holds the shade of each node's owner.
func TestFillShade(t *testing.T) {
	pts := []orb.Point{{0, 0}, {8, 0}, {0, 8}, {8, 8}, {5, 3}}
	z := []float64{0, 0.4, 0.1, 0.7, 0.9}
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := interp.FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	cell := decimal.MustParse("0.5")
	spec, err := SpecFor(orb.MultiPoint(pts).Bound(), cell, cell, Corners)
	if err != nil {
		t.Fatal(err)
	}
	g, err := Fill(context.Background(), spec, s, Options{Show: Shade, Workers: 2})
	if err != nil {
		t.Fatal(err)
	}
	loc := m.Locator()
	unlike := map[float64]bool{}
	for row := range spec.Rows {
		for col := range spec.Cols {
			want := shade(s.Gradient(loc.Locate(orb.Point{spec.X(col), spec.Y(row)}).Triangle))
			if got := g.At(row, col); got != want {
				t.Errorf("row %d, column %d: %v, want %v", row, col, got, want)
			}
			unlike[want] = true
		}
	}
	if len(unlike) != m.NumTriangles() {
		t.Errorf("%d shades on %d triangles", len(unlike), m.NumTriangles())
	}
}
