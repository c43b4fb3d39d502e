package advice

import (
	"fmt"

	"github.com/paulmach/orb"

	"isofacet/grid/decimal"
	"isofacet/triangulate"
)

// TouchWithin suggests how near to a line a place counts as on it: half a unit of
// the last decimal that coordinates carry, if any place lies that near to a segment
// and not on it. Rounding to decimals moves a place off a line by about as much, so
// such places were most likely measured on it.
//
// segs join pts by their numbers. Time: that of triangulate.Touch.
func TouchWithin(pts []orb.Point, segs []triangulate.Segment, decimals int) Suggestion {
	if len(segs) == 0 {
		return Suggestion{Reason: "no lines"}
	}
	within, err := decimal.New(5, decimals+1)
	if err != nil {
		return Suggestion{Reason: "coordinates carry all the digits of a number"}
	}
	_, _, touched := triangulate.Touch(pts, segs, within.Float64())
	if len(touched) == 0 {
		return Suggestion{Reason: fmt.Sprintf("no place lies within %v of a line and not on it", within)}
	}
	places, lie := "1 place", "lies"
	if n := len(touched); n > 1 {
		places, lie = fmt.Sprintf("%d places", n), "lie"
	}
	return Suggestion{within, true, fmt.Sprintf("%s %s within half a unit of the last decimal of a line and not on it", places, lie)}
}
