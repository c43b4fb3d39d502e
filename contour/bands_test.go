package contour

import (
	"context"
	"testing"

	"isofacet/interp"
)

// TestBandsTileTheSurfaceP6 checks bands of hard surfaces: validity of every polygon, common borders, areas, readings.
func TestBandsTileTheSurfaceP6(t *testing.T) {
	eachSample(t, func(s *interp.Surface, levels Levels) error {
		bands, err := Bands(context.Background(), s, levels, Options{})
		if err != nil {
			return err
		}
		return checkBands(s, levels, bands)
	})
}
