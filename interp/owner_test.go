package interp_test

import (
	"context"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// A pond in the plane z = x, its shore a breakline at height 2: on the shore, slopes are
// those of the land, whichever side (e, e²) points to; values are the shore's.
func TestKeptOwnsRims(t *testing.T) {
	pts := []orb.Point{{0, 0}, {10, 0}, {10, 10}, {0, 10}, {5, 5}}
	z := []float64{0, 10, 10, 0, 5}
	shore := orb.Ring{{4, 4}, {6, 4}, {6, 6}, {4, 6}, {4, 4}}
	s, _, err := interp.WithBreaklines(context.Background(), pts, z, []interp.Breakline{{Name: "shore", Points: shore, Z: []float64{2, 2, 2, 2, 2}}}, interp.BreaklineOptions{})
	if err != nil {
		t.Fatal(err)
	}
	for name, rings := range map[string][2][]orb.Ring{"void": {nil, {shore}}, "boundary": {{shore}, nil}} {
		r, err := triangulate.NewRegion(rings[0], rings[1])
		if err != nil {
			t.Fatal(err)
		}
		c, err := s.Clip(context.Background(), r, triangulate.Options{})
		if err != nil {
			t.Fatal(err)
		}
		tracer, whole := c.Tracer(), s.Mesh().Locator()
		kept := func(p orb.Point) bool { // strictly inside the ring or outside it
			in := p[0] > 4 && p[0] < 6 && p[1] > 4 && p[1] < 6
			return in == (name == "boundary")
		}
		moved := 0
		for k := range 4 {
			for _, part := range []float64{0, 0.25, 0.5, 0.75} {
				a, b := shore[k], shore[k+1]
				p := orb.Point{a[0] + part*(b[0]-a[0]), a[1] + part*(b[1]-a[1])}
				if place := r.Place(p); place != triangulate.OnEdge {
					t.Errorf("%s: %v is %v, want edge", name, p, place)
				}
				at := whole.Locate(p)
				own := tracer.Kept(p, at)
				if own.Place != at.Place || own.Vertex != at.Vertex || s.Value(own, p) != s.Value(at, p) || s.Value(own, p) != 2 {
					t.Errorf("%s: at %v: %+v of %+v, value %v", name, p, own, at, s.Value(own, p))
				}
				if own.Edge.Triangle() != own.Triangle {
					t.Errorf("%s: at %v: the half-edge is not of the owner", name, p)
				}
				var middle orb.Point
				for _, v := range s.Mesh().Corners(own.Triangle) {
					middle[0] += s.Mesh().Position(v)[0] / 3
					middle[1] += s.Mesh().Position(v)[1] / 3
				}
				if !kept(middle) {
					t.Errorf("%s: %v is owned by a triangle that is left out", name, p)
				}
				if own != at {
					moved++
				}
				// An owner that is kept stays.
				if again := tracer.Kept(p, own); again != own {
					t.Errorf("%s: at %v: %+v, then %+v", name, p, own, again)
				}
			}
		}
		if moved == 0 {
			t.Errorf("%s: no place had an owner that is left out", name)
		}
	}
}
