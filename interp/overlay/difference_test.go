package overlay

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"isofacet/interp"
)

// What the surface of the difference holds above and below 0 is what Between finds.
func TestDifference(t *testing.T) {
	r := rand.New(rand.NewPCG(6, 6))
	for i := range 80 {
		name, a, b := pair(t, r, i)
		f := figures(t, a, b, 0)
		d, err := Difference(context.Background(), a, b, Options{})
		if err != nil {
			t.Fatalf("pair %d, %s: %v", i, name, err)
		}
		v := d.Volumes(0)
		// Crossings are rounded to coordinates: at 5.6e6 by 1e-9.
		size := 1e-11 * (f.Cut.Volume + f.Fill.Volume)
		if i%8 == 1 {
			size *= 1000
		}
		near(t, name+": fill", v.Above, f.Fill.Volume, size)
		near(t, name+": cut", v.Below, f.Cut.Volume, size)
		near(t, name+": area", d.Area(), f.Covered, 1e-8*f.Covered)
		back, err := Difference(context.Background(), b, a, Options{})
		if err != nil {
			t.Fatal(err)
		}
		values := map[[2]float64]float64{}
		eachCorner(d, func(x, y, z float64) { values[[2]float64{x, y}] = z })
		eachCorner(back, func(x, y, z float64) {
			if w, ok := values[[2]float64{x, y}]; !ok || math.Abs(w+z) > 1e-12*(1+math.Abs(w)) {
				t.Errorf("%s: at (%v, %v) %v, the other way round %v", name, x, y, w, z)
			}
		})
	}
}

func eachCorner(s *interp.Surface, use func(x, y, z float64)) {
	m := s.Mesh()
	for tri := range m.Triangles() {
		for _, v := range m.Corners(tri) {
			use(m.Position(v)[0], m.Position(v)[1], s.Z()[v])
		}
	}
}
