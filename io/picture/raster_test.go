package picture_test

import (
	"bytes"
	"image/png"
	"math"
	"testing"

	"isofacet/grid"
	"isofacet/io/picture"
)

func drawRaster(t testing.TB, g *grid.Grid, opt picture.RasterOptions) ([]byte, picture.RasterReport) {
	t.Helper()
	var b bytes.Buffer
	report, err := picture.WriteRaster(&b, g, opt)
	if err != nil {
		t.Fatal(err)
	}
	return b.Bytes(), report
}

func TestRasterOfThePit(t *testing.T) {
	s := pit(t)
	g := s.raster(t, "2", grid.Labels{XYUnit: "m", ZUnit: "m", CRS: "EPSG:25832", VerticalDatum: "DHHN2016"})
	text, report := drawRaster(t, g, picture.RasterOptions{Title: "Gravel pit"})
	keep(t, "pit.png", text)
	img, err := png.Decode(bytes.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	if r := img.Bounds(); r.Dx() != report.Width || r.Dy() != report.Height || report.MapWidth != 4*g.Spec.Cols || report.MapHeight != 4*g.Spec.Rows {
		t.Errorf("%v, %+v", r, report)
	}
	if !report.Shaded || report.Exaggeration != 2 || report.Missing == 0 || report.Low < s.low || report.High > s.high {
		t.Errorf("%+v", report)
	}
	if again, _ := drawRaster(t, g, picture.RasterOptions{Title: "Gravel pit"}); !bytes.Equal(again, text) {
		t.Error("a second picture has other bytes")
	}
	g.Labels.Show = "slope"
	if _, report := drawRaster(t, g, picture.RasterOptions{PixelsMost: 100}); report.Shaded || max(report.MapWidth, report.MapHeight) > 100 {
		t.Errorf("slopes: %+v", report)
	}
}

// Every shape of raster makes a picture that decodes.
func TestOddRasters(t *testing.T) {
	for _, c := range []struct {
		name       string
		cols, rows int
		value      func(i int) float64
	}{
		{"flat", 30, 20, func(int) float64 { return 7 }}, {"empty", 30, 20, func(int) float64 { return math.NaN() }},
		{"row", 3000, 1, func(i int) float64 { return float64(i % 300) }}, {"column", 1, 500, func(i int) float64 { return float64(i) * 1e-9 }},
		{"node", 1, 1, func(int) float64 { return -1e15 }}, {"huge", 20, 20, func(i int) float64 { return float64(i%2*2-1) * 1.5e308 }},
	} {
		spec := pit(t).raster(t, "20", grid.Labels{}).Spec
		spec.Cols, spec.Rows, spec.ValuesAt = c.cols, c.rows, grid.Corners
		g, err := grid.New(spec)
		if err != nil {
			t.Fatal(err)
		}
		for i := range g.Values {
			g.Values[i] = c.value(i)
		}
		text, report := drawRaster(t, g, picture.RasterOptions{})
		keep(t, c.name+".png", text)
		if img, err := png.Decode(bytes.NewReader(text)); err != nil || img.Bounds().Dx() != report.Width {
			t.Errorf("%s: %v, %+v", c.name, err, report)
		}
	}
}
