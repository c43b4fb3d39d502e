package reference

import (
	"encoding/json"
	"math"
	"testing"

	"github.com/paulmach/orb"
)

// band is a filled band as the program writes it: lower and upper are its levels,
// infinite where it is open.
type band struct{ lower, upper, area float64 }

func bands(t *testing.T, args ...string) []band {
	t.Helper()
	text := isofacet(t, append([]string{"contour", "--bands", "--format", "geojson", "--decimals", "full"}, args...)...)
	var written struct {
		Features []struct {
			Properties struct{ Lower, Upper *float64 }
			Geometry   struct {
				Type        string
				Coordinates json.RawMessage
			}
		}
	}
	if err := json.Unmarshal([]byte(text), &written); err != nil {
		t.Fatalf("contour --bands: %v", err)
	}
	var out []band
	for _, f := range written.Features {
		polygons := make([]orb.Polygon, 1)
		var into any = &polygons[0]
		switch f.Geometry.Type {
		case "Polygon":
		case "MultiPolygon":
			into = &polygons
		default:
			t.Fatalf("a band is a %s", f.Geometry.Type)
		}
		if err := json.Unmarshal(f.Geometry.Coordinates, into); err != nil {
			t.Fatalf("coordinates of a band: %v", err)
		}
		b := band{lower: math.Inf(-1), upper: math.Inf(1)}
		if f.Properties.Lower != nil {
			b.lower = *f.Properties.Lower
		}
		if f.Properties.Upper != nil {
			b.upper = *f.Properties.Upper
		}
		for _, p := range polygons {
			for k, ring := range p {
				a := ringArea(ring)
				if (a > 0) != (k == 0) {
					t.Errorf("ring %d of a band from %v to %v has area %v: outer rings turn left, holes right", k, b.lower, b.upper, a)
				}
				b.area += a
			}
		}
		out = append(out, b)
	}
	return out
}

// ringArea is the area of a closed ring, positive if it turns counter-clockwise.
func ringArea(ring orb.Ring) float64 {
	twice := 0.0
	for i := 1; i < len(ring); i++ {
		twice += cross(ring[0], ring[i-1], ring[i])
	}
	return twice / 2
}

// TestBandAreas compares the plan areas above and below levels with those of the
// bands on either side. Source: computed for this project. An area may be off by
// 1e-9 of itself.
func TestBandAreas(t *testing.T) {
	each(t, func(t *testing.T, d dataset) {
		all := table(t, "datasets/"+d.name+"_isolines.csv")
		list := bands(t, append(d.readings(t), "--levels", levels(t, all, "level"))...)
		area := compare(t, "area of bands")
		for _, r := range all {
			level, above, below := r.number(t, "level"), 0.0, 0.0
			for _, b := range list {
				switch {
				case b.lower >= level:
					above += b.area
				case b.upper <= level:
					below += b.area
				default:
					t.Errorf("%s: the band from %v to %v lies on both sides of %v", r.name, b.lower, b.upper, level)
				}
			}
			area.part(r.name+": above", above, r.number(t, "plan_area_above_unit2"), 1e-9)
			area.part(r.name+": below", below, r.number(t, "plan_area_below_unit2"), 1e-9)
		}
	})
}
