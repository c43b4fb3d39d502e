package advice

import (
	"fmt"
	"math"
	"slices"
	"strconv"

	"isofacet/grid/decimal"
)

// A Suggestion is a value and where it comes from. Without a value (OK false) the
// reason says why there is none.
type Suggestion struct {
	Value  decimal.Number
	OK     bool
	Reason string
}

const noTriangles = "no triangles: fewer than three readings that are not in line"

// Cell suggests the size of a raster's cell: between a half and a third of the
// spacing, so that no reading's neighbourhood is skipped and none is drawn out
// over many cells.
func Cell(spacing float64) Suggestion {
	if math.IsNaN(spacing) {
		return Suggestion{Reason: noTriangles}
	}
	return round(spacing/2.45, fmt.Sprintf("a half to a third of the spacing, %s", short(spacing)))
}

// MaxEdge suggests the longest edge to trust: two to five times the spacing. A
// window from 2 to 5 round its middle, the square root of 10, always holds one
// round number.
func MaxEdge(spacing float64) Suggestion {
	if math.IsNaN(spacing) {
		return Suggestion{Reason: noTriangles}
	}
	return round(spacing*3.1623, fmt.Sprintf("two to five times the spacing, %s", short(spacing)))
}

// Interval suggests the step between isolines: five to ten lines over the middle
// 98 percent of the values, so that a few blunders do not widen it.
func Interval(values []float64) Suggestion {
	if len(values) == 0 {
		return Suggestion{Reason: "no values"}
	}
	last := len(values) - 1
	tail := last / 100
	z := slices.Clone(values)
	low := selectKth(z, tail)
	high := selectKth(z, last-tail)
	if !(high > low) {
		return Suggestion{Reason: fmt.Sprintf("all values are near %s", short(low))}
	}
	return round((high-low)/7, fmt.Sprintf("five to ten lines from %s to %s, the middle 98 %% of the values", short(low), short(high)))
}

// round takes the number of the series 1, 2, 5, 10, ... that is nearest to v by
// ratio.
func round(v float64, reason string) Suggestion {
	n, err := nearestOfSeries(v)
	if err != nil {
		return Suggestion{Reason: reason + ", beyond what can be written"}
	}
	return Suggestion{n, true, reason}
}

// nearestOfSeries reads the digits and the exponent off the decimal text of v,
// which is exact, where a logarithm would differ between processors. The limits
// are the geometric means of neighbours in the series.
func nearestOfSeries(v float64) (decimal.Number, error) {
	text := strconv.FormatFloat(v, 'e', 17, 64)
	digits, err1 := strconv.ParseFloat(text[:19], 64)
	exponent, err2 := strconv.Atoi(text[20:])
	if err1 != nil || err2 != nil {
		return decimal.Number{}, fmt.Errorf("%v is not a positive number", v)
	}
	head := int64(10)
	switch {
	case digits < math.Sqrt2:
		head = 1
	case digits < math.Sqrt2*2.23606797749979:
		head = 2
	case digits < 5*math.Sqrt2:
		head = 5
	}
	return decimal.New(head, -exponent)
}

// short writes a number with four significant digits for a reason.
func short(v float64) string { return strconv.FormatFloat(v, 'g', 4, 64) }
