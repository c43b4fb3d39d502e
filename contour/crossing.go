package contour

import (
	"math"

	"github.com/paulmach/orb"
)

// Crossing returns the place on the edge from a to b, with values za and zb at its ends, where the value is
// level. One of za, zb must be at or above the level and the other below it.
//
// It is the one way in which the program computes such a place: the ends are taken in (x, y) order, so that the result
// depends on the edge alone, bit for bit, whichever triangle, cell or tile asks. An end whose value equals the
// level is the crossing itself.
//
// With l the smaller end and u the larger,
//
//	t = (level - zl) / (zu - zl),   p = l + t (u - l)
//
// the second fused and rounded once, and kept within the edge's box. Along one edge the place moves monotonically with
// the level, in x and in y. With e = 2^-53: t carries three roundings, u - l one, so p is off by at most
// half a unit in its last place and 4e |u - l|, in x and in y.
func Crossing(a orb.Point, za float64, b orb.Point, zb float64, level float64) orb.Point {
	if b[0] < a[0] || b[0] == a[0] && b[1] < a[1] {
		return crossing(b[0], b[1], zb, a[0], a[1], za, level)
	}
	return crossing(a[0], a[1], za, b[0], b[1], zb, level)
}

// crossing is Crossing for ends in (x, y) order.
func crossing(lx, ly, lz, ux, uy, uz, level float64) orb.Point {
	if lz == level {
		return orb.Point{lx, ly}
	}
	if uz == level {
		return orb.Point{ux, uy}
	}
	t := (level - lz) / (uz - lz)
	x := math.FMA(t, ux-lx, lx)
	y := math.FMA(t, uy-ly, ly)
	// Rounding may overshoot the larger end, never the smaller, where it starts from.
	if x > ux {
		x = ux
	}
	if ly <= uy && y > uy || ly >= uy && y < uy {
		y = uy
	}
	return orb.Point{x, y}
}
