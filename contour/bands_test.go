package contour

import (
	"context"
	"testing"

	"pgregory.net/rapid"

	"isofacet/interp"
)

// TestBandsTileTheSurfaceP6 checks bands of hard surfaces: validity of every polygon, common borders, areas, readings.
func TestBandsTileTheSurfaceP6(t *testing.T) {
	eachSample(t, func(t *rapid.T, s *interp.Surface, levels Levels) {
		bands, err := Bands(context.Background(), s, levels, Options{})
		if err != nil {
			t.Fatal(err)
		}
		if err := checkBands(s, levels, bands); err != nil {
			t.Fatal(err)
		}
	})
}
