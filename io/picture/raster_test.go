package picture_test

import (
	"bytes"
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
	labels := grid.Labels{XYUnit: "m", ZUnit: "m", CRS: "EPSG:25832", VerticalDatum: "DHHN2016"}
	for _, c := range []struct{ name, cell string }{{"pit-1m", "1"}, {"pit-10m", "10"}, {"pit-0.1m", "0.1"}} {
		text, report := drawRaster(t, s.raster(t, c.cell, labels), picture.RasterOptions{Title: "Gravel pit"})
		keep(t, c.name+".png", text)
		t.Logf("%+v %d bytes", report, len(text))
	}
	g := s.raster(t, "2", grid.Labels{Show: "downhill-azimuth"})
	for i := range g.Values {
		if g.Values[i] == g.Values[i] {
			g.Values[i] = math.Mod(float64(i%215)*2, 360)
		}
	}
	text, _ := drawRaster(t, g, picture.RasterOptions{})
	keep(t, "azimuth.png", text)
}
