package picture_test

import (
	"bytes"
	"crypto/sha256"
	"flag"
	"fmt"
	"image"
	"image/png"
	"os"
	"testing"

	"isofacet/grid"
	"isofacet/io/picture"
)

var update = flag.Bool("update", false, "write testdata anew")

// The same bytes of a map and the same pixels of a raster on every processor: built for others (GOAMD64=v3), the test holds
// them against the same sums.
func TestSameOnEveryProcessor(t *testing.T) {
	s := pit(t)
	labels := grid.Labels{XYUnit: "m", ZUnit: "m", CRS: "EPSG:25832"}
	svg, _ := s.draw(t, s.levels(t, "1", 5), picture.MapOptions{Title: "Pit", Interval: "1", IndexEvery: 5, Labels: labels}, true, true)
	text, _ := drawRaster(t, s.raster(t, "2", labels), picture.RasterOptions{Title: "Pit"})
	img, err := png.Decode(bytes.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	pixels, ok := img.(*image.RGBA)
	if !ok {
		t.Fatalf("a picture of type %T", img)
	}
	got := fmt.Sprintf("map %x\nraster %x\n", sha256.Sum256(svg), sha256.Sum256(pixels.Pix))
	const file = "testdata/sums.txt"
	if *update {
		if err := os.MkdirAll("testdata", 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(file, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if got != string(want) {
		keep(t, "pit.svg", svg)
		keep(t, "pit.png", text)
		t.Errorf("got\n%swant\n%slook at both pictures, then -update", got, want)
	}
}
