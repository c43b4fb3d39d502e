package exact_test

import (
	"fmt"

	"isofacet/triangulate/exact"
)

// A square of a quarter-metre lattice in map coordinates: the tie is settled by the
// coordinates alone.
func Example() {
	sw, se := [2]float64{430000.25, 5600000.25}, [2]float64{430000.5, 5600000.25}
	ne, nw := [2]float64{430000.5, 5600000.5}, [2]float64{430000.25, 5600000.5}
	fmt.Println(exact.Orient(sw, se, ne))
	fmt.Println(exact.InCircle(sw, se, ne, nw))
	fmt.Println(exact.InCircleTied(sw, se, ne, nw), exact.InCircleTied(sw, se, nw, ne))
	// Output:
	// 1
	// 0
	// 1 -1
}

func ExampleSum() {
	var s exact.Sum
	for _, x := range []float64{1e100, 1, -1e100} {
		s.Add(x)
	}
	s.AddProduct(0x1p-600, 0x1p-600) // far below the smallest float64
	s.AddProduct(-0x1p-600, 0x1p-600)
	fmt.Println(s.Value(), s.Mean(3))
	// Output: 1 0.3333333333333333
}
