package picture_test

import (
	"image"
	"image/png"
	"io"
	"math"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/io/picture"
)

func BenchmarkMap(b *testing.B) {
	lines := make([]picture.Isoline, 1000)
	for i := range lines {
		points := make(orb.LineString, 1000)
		for k := range points {
			t := float64(k) / 1000
			points[k] = orb.Point{1000 * t, float64(i) + 20*math.Sin(9*t)}
		}
		lines[i] = picture.Isoline{Level: "431.5", Index: i%5 == 0, Points: points}
	}
	b.Run("waves/n=1e6", func(b *testing.B) {
		for b.Loop() {
			m, err := picture.NewMap(io.Discard, picture.MapOptions{Extent: orb.Bound{Min: orb.Point{0, -20}, Max: orb.Point{1000, 1020}}})
			if err != nil {
				b.Fatal(err)
			}
			for _, l := range lines {
				if err := m.Isoline(l); err != nil {
					b.Fatal(err)
				}
			}
			if _, err := m.Close(); err != nil {
				b.Fatal(err)
			}
		}
		b.ReportMetric(float64(b.N)/b.Elapsed().Seconds(), "Mpoints/s")
	})
}

func BenchmarkRaster(b *testing.B) {
	one := decimal.FromInt(1)
	g, err := grid.New(grid.Spec{CellX: one, CellY: one, Cols: 4000, Rows: 4000})
	if err != nil {
		b.Fatal(err)
	}
	for i := range g.Values {
		g.Values[i] = 50 * math.Sin(float64(i%4000)/300) * math.Cos(float64(i/4000)/200)
	}
	b.Run("waves/n=1.6e7", func(b *testing.B) {
		for b.Loop() {
			if _, err := picture.WriteRaster(io.Discard, g, picture.RasterOptions{}); err != nil {
				b.Fatal(err)
			}
		}
		b.ReportMetric(16*float64(b.N)/b.Elapsed().Seconds(), "Mnodes/s")
	})
	b.Run("floor=blank-png/n=4e6", func(b *testing.B) { // the same number of pixels, all alike
		img := image.NewRGBA(image.Rect(0, 0, 2000, 2000))
		for b.Loop() {
			if err := png.Encode(io.Discard, img); err != nil {
				b.Fatal(err)
			}
		}
		b.ReportMetric(4*float64(b.N)/b.Elapsed().Seconds(), "Mpixels/s")
	})
}
