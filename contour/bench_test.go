package contour

import (
	"context"
	"math"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// smoothHeights are five periods of sines across the unit square, 95 to 105 or so.
func smoothHeights(pts []orb.Point) []float64 {
	z := make([]float64, len(pts))
	for i, p := range pts {
		z[i] = 100 + 5*math.Sin(10*math.Pi*p[0])*math.Sin(10*math.Pi*p[1])
	}
	return z
}

// noiseHeights are white noise, 95 to 105.
func noiseHeights(pts []orb.Point) []float64 {
	z := make([]float64, len(pts))
	for i, p := range pointsets.Uniform(len(pts), 99) {
		z[i] = 95 + 10*p[0]
	}
	return z
}

// twentyLevels is 95.25, 95.75, ..., 104.75.
func twentyLevels(t testing.TB) Levels {
	levels, err := Every(decimal.MustParse("0.5"), decimal.MustParse("0.25"), 5, 95, 105)
	if err != nil || len(levels) != 20 {
		t.Fatal(len(levels), err)
	}
	return levels
}

func benchmarkSurface(b *testing.B, heights func([]orb.Point) []float64) *interp.Surface {
	pts := pointsets.Uniform(1e6, 1)
	return surfaceOf(b, pts, heights(pts), 0)
}

func BenchmarkIsolines(b *testing.B) {
	for _, d := range []struct {
		name    string
		heights func([]orb.Point) []float64
	}{{"smooth", smoothHeights}, {"noise", noiseHeights}} {
		b.Run(d.name+"/n=1e6", func(b *testing.B) {
			s, levels := benchmarkSurface(b, d.heights), twentyLevels(b)
			var r Report
			for b.Loop() {
				var err error
				if r, err = EachLine(context.Background(), s, levels, Options{}, func(Line) error { return nil }); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(r.Pieces)*float64(b.N)/b.Elapsed().Seconds(), "pieces/s")
			b.ReportMetric(float64(r.Pieces), "pieces")
		})
	}
}

// BenchmarkFloor reads the values of every triangle's corners once.
func BenchmarkFloor(b *testing.B) {
	b.Run("smooth/n=1e6", func(b *testing.B) {
		s := benchmarkSurface(b, smoothHeights)
		m, z := s.Mesh(), s.Z()
		sum := 0.0
		for b.Loop() {
			for t := range m.Triangles() {
				c := m.Corners(t)
				sum += z[c[0]] + z[c[1]] + z[c[2]]
			}
		}
		b.ReportMetric(float64(m.NumTriangles())*float64(b.N)/b.Elapsed().Seconds(), "triangles/s")
		_ = sum
	})
}

// BenchmarkDelaunay is the time that isolines are compared with.
func BenchmarkDelaunay(b *testing.B) {
	b.Run("uniform/n=1e6", func(b *testing.B) {
		pts := pointsets.Uniform(1e6, 1)
		for b.Loop() {
			if _, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{}); err != nil {
				b.Fatal(err)
			}
		}
		b.ReportMetric(1e6*float64(b.N)/b.Elapsed().Seconds(), "points/s")
	})
}

func BenchmarkBands(b *testing.B) {
	for _, d := range []struct {
		name    string
		n       int
		heights func([]orb.Point) []float64
	}{{"smooth/n=1e6", 1e6, smoothHeights}, {"noise/n=1e5", 1e5, noiseHeights}} {
		b.Run(d.name, func(b *testing.B) {
			pts := pointsets.Uniform(d.n, 1)
			s, levels := surfaceOf(b, pts, d.heights(pts), 0), twentyLevels(b)
			points := 0
			b.ReportAllocs()
			for b.Loop() {
				bands, _, err := Bands(context.Background(), s, levels, Options{})
				if err != nil {
					b.Fatal(err)
				}
				points = 0
				for _, band := range bands {
					for _, ring := range band.Polygon {
						points += len(ring)
					}
				}
			}
			b.ReportMetric(float64(points)*float64(b.N)/b.Elapsed().Seconds(), "points/s")
		})
	}
}

func BenchmarkRasterLines(b *testing.B) {
	b.Run("smooth/n=4e6", func(b *testing.B) {
		step := decimal.MustParse("0.0005")
		g, err := grid.New(grid.Spec{CellX: step, CellY: step, Cols: 2000, Rows: 2000})
		if err != nil {
			b.Fatal(err)
		}
		var places []orb.Point
		for _, y := range g.Spec.Ys() {
			for _, x := range g.Spec.Xs() {
				places = append(places, orb.Point{x, y})
			}
		}
		g.Values = smoothHeights(places)
		levels := twentyLevels(b)
		var r Report
		for b.Loop() {
			if r, err = EachRasterLine(context.Background(), g, levels, Options{}, func(Line) error { return nil }); err != nil {
				b.Fatal(err)
			}
		}
		b.ReportMetric(float64(r.Pieces)*float64(b.N)/b.Elapsed().Seconds(), "pieces/s")
	})
}
