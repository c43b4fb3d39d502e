package rule

import (
	"errors"
	"fmt"
	"math"

	"isofacet/triangulate/exact"
)

// ErrSections is the error of stations and areas that no rule can be applied to.
var ErrSections = errors.New("not a row of sections")

func check(at, areas []float64) error {
	if len(at) != len(areas) {
		return fmt.Errorf("%d stations and %d areas: expected as many of the one as of the other: %w", len(at), len(areas), ErrSections)
	}
	for i, a := range areas {
		if !(a >= 0) || math.IsInf(a, 0) {
			return fmt.Errorf("area %d is %v: expected 0 or more: %w", i+1, a, ErrSections)
		}
		if i > 0 && !(at[i] > at[i-1]) {
			return fmt.Errorf("station %d, %v, after %v: expected stations that rise: %w", i+1, at[i], at[i-1], ErrSections)
		}
	}
	return nil
}

// AverageEndArea returns the sum over the reaches between neighbouring sections of
// their distance times the mean of their areas. It is exact where the area changes
// linearly, and too large between similar figures: half as much again for a pyramid.
//
// It returns an error wrapping ErrSections for stations that do not rise, or an area
// below 0.
func AverageEndArea(at, areas []float64) (float64, error) {
	if err := check(at, areas); err != nil {
		return 0, err
	}
	var sum exact.Sum
	for i := 1; i < len(at); i++ {
		d := at[i] - at[i-1]
		sum.AddProduct(d, areas[i-1])
		sum.AddProduct(d, areas[i])
	}
	return sum.Mean(2), nil
}

// Prismoidal returns the sum over pairs of reaches of length h each of
// h/3 (A0 + 4 A1 + A2), Simpson's rule: exact where the area is a polynomial of third
// degree or less. Where the number of reaches is odd, or the two of a pair have unlike
// lengths (by more than a millionth), the reach left over, or the first of the two, is
// taken by average end area; averaged tells how many.
func Prismoidal(at, areas []float64) (volume float64, averaged int, err error) {
	if err := check(at, areas); err != nil {
		return 0, 0, err
	}
	var sixth exact.Sum // six times the volume
	for i := 1; i < len(at); {
		d := at[i] - at[i-1]
		if i+1 < len(at) && math.Abs((at[i+1]-at[i])-d) <= 1e-6*d {
			d = at[i+1] - at[i-1] // two reaches: d/6 (A0 + 4 A1 + A2)
			sixth.AddProduct(d, areas[i-1])
			sixth.AddProduct(4*d, areas[i])
			sixth.AddProduct(d, areas[i+1])
			i += 2
			continue
		}
		sixth.AddProduct(3*d, areas[i-1])
		sixth.AddProduct(3*d, areas[i])
		averaged++
		i++
	}
	return sixth.Mean(6), averaged, nil
}

// Conic returns the sum over the reaches of h/3 (A1 + A2 + sqrt(A1 A2)), the volume
// between similar figures: exact for cones, pyramids and what is cut off them. It is
// common for reservoirs, with the areas of contours.
func Conic(at, areas []float64) (float64, error) {
	if err := check(at, areas); err != nil {
		return 0, err
	}
	var sum exact.Sum
	for i := 1; i < len(at); i++ {
		d := at[i] - at[i-1]
		sum.AddProduct(d, areas[i-1])
		sum.AddProduct(d, areas[i])
		sum.AddProduct(d, math.Sqrt(areas[i-1])*math.Sqrt(areas[i]))
	}
	return sum.Mean(3), nil
}

// FourCorners returns the sum over the cells of a lattice of their plan area times the
// mean of the depths at their four corners: borrow pits by hand. rows is a row of
// depths each, all of one length, cell the area of one cell. A cell's volume by planes
// over triangles is larger or smaller by the way its diagonal runs; this is the mean
// of both ways.
func FourCorners(rows [][]float64, cell float64) (float64, error) {
	if len(rows) < 2 || len(rows[0]) < 2 || !(cell > 0) {
		return 0, fmt.Errorf("a lattice of %d rows with cells of %v: expected at least two rows of two depths, and an area above 0: %w", len(rows), cell, ErrSections)
	}
	var sum exact.Sum
	for i, row := range rows {
		if len(row) != len(rows[0]) {
			return 0, fmt.Errorf("row %d has %d depths, the first %d: expected as many: %w", i+1, len(row), len(rows[0]), ErrSections)
		}
		if i == 0 {
			continue
		}
		for j := 1; j < len(row); j++ {
			for _, d := range []float64{row[j-1], row[j], rows[i-1][j-1], rows[i-1][j]} {
				sum.AddProduct(cell, d)
			}
		}
	}
	return sum.Mean(4), nil
}
