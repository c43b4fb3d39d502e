package contour_test

import (
	"context"
	"fmt"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/contour"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/triangulate"
)

// A hill of one reading on level ground: two levels, each a ring, and three bands.
func Example() {
	ctx := context.Background()
	points := []orb.Point{{0, 0}, {20, 0}, {20, 20}, {0, 20}, {10, 10}}
	heights := []float64{100, 100, 100, 100, 106}
	m, err := triangulate.Delaunay(ctx, points, triangulate.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	s, err := interp.FromInputs(m, heights)
	if err != nil {
		fmt.Println(err)
		return
	}
	levels, err := contour.Every(decimal.MustParse("2.5"), decimal.Number{}, 2, slices.Min(heights), slices.Max(heights))
	if err != nil {
		fmt.Println(err)
		return
	}
	lines, _, err := contour.Lines(ctx, s, levels, contour.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, l := range lines {
		fmt.Printf("%v %v closed %v length %.3f\n", l.Level.Number, l.Level.Rank, l.Closed, l.Length())
	}
	bands, _, err := contour.Bands(ctx, s, levels, contour.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, b := range bands {
		from, to := "below", "above"
		if b.Lower != nil {
			from = b.Lower.Number.String()
		}
		if b.Upper != nil {
			to = b.Upper.Number.String()
		}
		fmt.Printf("%s to %s: %d rings\n", from, to, len(b.Polygon))
	}
	// Output:
	// 102.5 intermediate closed true length 46.667
	// 105 index closed true length 13.333
	// below to 102.5: 2 rings
	// 102.5 to 105: 2 rings
	// 105 to above: 1 rings
}

// The third multiple of a tenth is 0.3, and a range without a multiple says so.
func ExampleEvery() {
	levels, err := contour.Every(decimal.MustParse("0.1"), decimal.Number{}, 5, 0.15, 0.55)
	for _, l := range levels {
		fmt.Print(l.Number, " ", l.Rank, "; ")
	}
	fmt.Println(err)
	_, err = contour.Every(decimal.MustParse("5"), decimal.Number{}, 5, 101.2, 101.9)
	fmt.Println(err)
	// Output:
	// 0.2 intermediate; 0.3 intermediate; 0.4 intermediate; 0.5 index; <nil>
	// range 101.2 to 101.9 holds no multiple of 5: no lines
}
