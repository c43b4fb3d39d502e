package picture_test

import (
	"bytes"
	"image/png"
	"testing"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/io/picture"
)

// A raster of shades is grey, dark at 0 and light at 1 whatever its own range is, and not shaded once more.
func TestShadesAreGrey(t *testing.T) {
	one := decimal.FromInt(1)
	g, err := grid.New(grid.Spec{CellX: one, CellY: one, Cols: 2, Rows: 1})
	if err != nil {
		t.Fatal(err)
	}
	copy(g.Values, []float64{0.25, 0.75})
	g.Labels.Show = grid.Shade.String()
	text, report := drawRaster(t, g, picture.RasterOptions{})
	if report.Shaded {
		t.Error("shaded twice")
	}
	img, err := png.Decode(bytes.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	// Along the middle of the map from its left half to its right one.
	var light []uint32
	y := img.Bounds().Dy() / 4
	for _, x := range []int{img.Bounds().Dx() / 5, img.Bounds().Dx() * 4 / 5} {
		r, g, b, _ := img.At(x, y).RGBA()
		r, g, b = r>>8, g>>8, b>>8
		if max(r, g, b)-min(r, g, b) > 8 {
			t.Errorf("colour %d, %d, %d at (%d, %d), want grey", r, g, b, x, y)
		}
		light = append(light, g)
	}
	if !(20 < light[0] && light[0]+40 < light[1] && light[1] < 245) {
		t.Errorf("lightness %d and %d, want the first darker, neither at an end", light[0], light[1])
	}
}
