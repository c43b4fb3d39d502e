package picture_test

import (
	"bytes"
	"context"
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/contour"
	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/io/picture"
	"isofacet/samples"
	"isofacet/triangulate"
)

// scene is something to draw.
type scene struct {
	points  []orb.Point
	z       []float64
	surface *interp.Surface
	low     float64
	high    float64
}

func newScene(t testing.TB, points []orb.Point, z []float64) scene {
	t.Helper()
	m, err := triangulate.Delaunay(context.Background(), points, triangulate.Options{Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	s, err := interp.FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	sc := scene{points, z, s, math.Inf(1), math.Inf(-1)}
	for _, v := range z {
		sc.low, sc.high = min(sc.low, v), max(sc.high, v)
	}
	return sc
}

// pit is the sample survey without the shots that its decisions leave out.
func pit(t testing.TB) scene {
	t.Helper()
	rows := func(name string) [][]string {
		text, err := samples.FS.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		all, err := csv.NewReader(bytes.NewReader(text)).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		return all[1:]
	}
	out := map[string]bool{}
	for _, row := range rows(samples.GravelPitDecisions) {
		out[row[0]] = row[1] == "leave out"
	}
	var points []orb.Point
	var z []float64
	for _, row := range rows(samples.GravelPitShots) {
		var v [3]float64
		for i := range v {
			var err error
			if v[i], err = strconv.ParseFloat(row[1+i], 64); err != nil {
				t.Fatal(err)
			}
		}
		if !out[row[0]] && row[4] != "BP" {
			points, z = append(points, orb.Point{v[1], v[0]}), append(z, v[2])
		}
	}
	return newScene(t, points, z)
}

func (s scene) levels(t testing.TB, interval string, every int) contour.Levels {
	t.Helper()
	levels, err := contour.Every(decimal.MustParse(interval), decimal.Number{}, every, s.low, s.high)
	if err != nil {
		t.Fatal(err)
	}
	return levels
}

func (s scene) bound() orb.Bound { return orb.MultiPoint(s.points).Bound() }

func (s scene) hull() orb.Ring {
	var ring orb.Ring
	for _, v := range s.surface.Mesh().Hull() {
		ring = append(ring, s.surface.Mesh().Position(v))
	}
	return append(ring, ring[0])
}

// draw makes a map of the scene: lines, or bands with their borders, and readings if asked for.
func (s scene) draw(t testing.TB, levels contour.Levels, opt picture.MapOptions, bands, readings bool) ([]byte, picture.Report) {
	t.Helper()
	opt.Extent = s.bound()
	var made []contour.Band
	if bands {
		for _, l := range levels {
			opt.Bands = append(opt.Bands, l.Number.String())
		}
		var err error
		if made, _, err = contour.Bands(context.Background(), s.surface, levels, contour.Options{Workers: 1}); err != nil {
			t.Fatal(err)
		}
	}
	var text bytes.Buffer
	m, err := picture.NewMap(&text, opt)
	if err != nil {
		t.Fatal(err)
	}
	for _, b := range made {
		k := 0
		for b.Lower != nil && levels[k].Z <= b.Lower.Z {
			if k++; k == len(levels) {
				break
			}
		}
		if err := m.Band(b.Polygon, k); err != nil {
			t.Fatal(err)
		}
	}
	lines, _, err := contour.Lines(context.Background(), s.surface, levels, contour.Options{Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	for _, l := range lines {
		if err := m.Isoline(picture.Isoline{Level: l.Level.Number.String(), Index: l.Level.Rank == contour.Index, Points: l.Points}); err != nil {
			t.Fatal(err)
		}
	}
	if err := m.Outline(s.hull()); err != nil {
		t.Fatal(err)
	}
	if readings {
		if err := m.Readings(s.points); err != nil {
			t.Fatal(err)
		}
	}
	report, err := m.Close()
	if err != nil {
		t.Fatal(err)
	}
	return text.Bytes(), report
}

// raster fills a grid from the scene.
func (s scene) raster(t testing.TB, cell string, labels grid.Labels) *grid.Grid {
	t.Helper()
	c := decimal.MustParse(cell)
	spec, err := grid.SpecFor(s.bound(), c, c, grid.Centres)
	if err != nil {
		t.Fatal(err)
	}
	g, err := grid.Fill(context.Background(), spec, s.surface, grid.Options{Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	g.Labels = labels
	return g
}

// keep leaves a picture to look at: go test -artifacts -outputdir DIR.
func keep(t testing.TB, name string, picture []byte) {
	t.Helper()
	if err := os.WriteFile(filepath.Join(t.ArtifactDir(), name), picture, 0o644); err != nil {
		t.Fatal(err)
	}
}
