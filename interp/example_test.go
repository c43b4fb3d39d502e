package interp_test

import (
	"context"
	"fmt"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Three wells: the head between them, and where the water goes.
func Example() {
	wells := []orb.Point{{0, 0}, {100, 0}, {0, 200}}
	heads := []float64{100, 99, 99}
	m, err := triangulate.Delaunay(context.Background(), wells, triangulate.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	s, err := interp.FromInputs(m, heads)
	if err != nil {
		fmt.Println(err)
		return
	}
	sample := s.Sampler().At(orb.Point{25, 50})
	fmt.Println(sample.Z, sample.Location.Place)
	gx, gy := s.Gradient(sample.Location.Triangle)
	fmt.Printf("gradient %.7f towards %.2f degrees\n", interp.Slope(gx, gy), interp.DownhillAzimuth(gx, gy))
	// Output:
	// 99.5 inside
	// gradient 0.0111803 towards 63.43 degrees
}

// A heap of gravel, and what of it stands above 3 m.
func ExampleSurface_Volumes() {
	foot := []orb.Point{{0, 0}, {20, 0}, {20, 20}, {0, 20}, {10, 10}}
	m, err := triangulate.Delaunay(context.Background(), foot, triangulate.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	s, err := interp.FromInputs(m, []float64{0, 0, 0, 0, 6})
	if err != nil {
		fmt.Println(err)
		return
	}
	v := s.Volumes(3)
	fmt.Printf("%.0f above, over %.0f; %.0f missing below, over %.0f\n", v.Above, v.AreaAbove, v.Below, v.AreaBelow)
	// Output: 100 above, over 100; 500 missing below, over 300
}
