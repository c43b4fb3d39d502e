package interp_test

import (
	"context"
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// referenceTable reads a table of the reference folder.
func referenceTable(t *testing.T, name string) [][]string {
	t.Helper()
	dir := os.Getenv("ISOFACET_REFERENCE")
	if dir == "" {
		t.Skip("ISOFACET_REFERENCE is not set: no reference data")
	}
	f, err := os.Open(filepath.Join(dir, name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows[1:]
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	f, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// Plan areas and volumes of surfaces cut to polygons: clip_checks.csv of the
// reference folder, computed with Shapely 1.8.5, to 1e-8.
func TestClipChecks(t *testing.T) {
	want := map[string]float64{}
	for _, r := range referenceTable(t, "datasets/clip_checks.csv") {
		if f, err := strconv.ParseFloat(r[1], 64); err == nil {
			want[r[0]] = f
		}
	}
	surface := func(file string, x, y, z int) *interp.Surface {
		var pts []orb.Point
		var zs []float64
		for _, r := range referenceTable(t, file) {
			pts = append(pts, orb.Point{number(t, r[x]), number(t, r[y])})
			zs = append(zs, number(t, r[z]))
		}
		m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
		if err != nil {
			t.Fatal(err)
		}
		s, err := interp.FromInputs(m, zs)
		if err != nil {
			t.Fatal(err)
		}
		return s
	}
	check := func(s *interp.Surface, ring orb.Ring, area, volume string) {
		t.Helper()
		if ring[0] != ring[len(ring)-1] {
			ring = append(ring, ring[0]) // camg's region2 and region3 are written without it
		}
		r, err := triangulate.NewRegion([]orb.Ring{ring}, nil)
		if err != nil {
			t.Fatal(err)
		}
		c, err := s.Clip(context.Background(), r, triangulate.Options{})
		if err != nil {
			t.Fatal(err)
		}
		for _, q := range []struct {
			name string
			got  float64
		}{{area, c.Surface.Area()}, {volume, c.Surface.VolumeAboveZero()}} {
			w, ok := want[q.name]
			if !ok {
				t.Fatalf("no %q", q.name)
			}
			if math.Abs(q.got-w) > 1e-8*w {
				t.Errorf("%s: %.12g, want %.12g", q.name, q.got, w)
			}
		}
	}
	var area orb.Ring
	for _, r := range referenceTable(t, "datasets/meuse_area_polygon.csv") {
		area = append(area, orb.Point{number(t, r[1]), number(t, r[2])})
	}
	check(surface("datasets/meuse_points.csv", 1, 2, 3), area,
		"TIN clipped to area polygon: plan area_m2", "TIN clipped to area polygon: volume to z=0 m3")
	camg := surface("datasets/camg_points.csv", 1, 2, 3)
	polygons := map[string]orb.Ring{}
	for _, r := range referenceTable(t, "datasets/camg_polygons.csv") {
		polygons[r[0]] = append(polygons[r[0]], orb.Point{number(t, r[2]), number(t, r[3])})
	}
	for name, ring := range polygons {
		check(camg, ring, "camg TIN clipped to "+name+": plan area_m2", "camg TIN clipped to "+name+": volume to z=0 m3")
	}
}

// A void is the boundary's complement: what two clips keep adds up.
func TestClipAndVoidAddUp(t *testing.T) {
	var pts []orb.Point
	var z []float64
	for i := range 30 {
		for j := range 30 {
			pts = append(pts, orb.Point{float64(i), float64(j)})
			z = append(z, float64((i*i+3*j)%17))
		}
	}
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	m = m.Trim(100)
	s, err := interp.FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	// Through vertices, along edges and diagonals, and beyond the hull.
	ring := orb.Ring{{3, 3}, {20, 3}, {25.5, 9.25}, {20, 20}, {40, 31}, {10, 31}, {10, 10}, {3, 17}, {3, 3}}
	in, _ := triangulate.NewRegion([]orb.Ring{ring}, nil)
	out, _ := triangulate.NewRegion(nil, []orb.Ring{ring})
	a, err := s.Clip(context.Background(), in, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	b, err := s.Clip(context.Background(), out, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if err := a.Surface.Mesh().Check(); err != nil {
		t.Fatal(err)
	}
	if got, want := a.Surface.Area()+b.Surface.Area(), s.Area(); math.Abs(got-want) > 1e-12*want {
		t.Errorf("areas %v + %v, want %v", a.Surface.Area(), b.Surface.Area(), want)
	}
	if got, want := a.Surface.VolumeAboveZero()+b.Surface.VolumeAboveZero(), s.VolumeAboveZero(); math.Abs(got-want) > 1e-12*want {
		t.Errorf("volumes add up to %v, want %v", got, want)
	}
}
