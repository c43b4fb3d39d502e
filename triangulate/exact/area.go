package exact

import "math"

// Area2 returns twice the signed area of the triangle a, b, c, positive when the
// corners are counter-clockwise:
//
//	(bx-ax)(cy-ay) - (by-ay)(cx-ax)
//
// rounded so well that its relative error is below 2^-51 for any accepted
// coordinates, the thinnest slivers included; its sign is that of Orient and it is
// zero only when the exact value is. (Orient is faster for the sign alone.)
//
// With exact differences it takes a few nanoseconds, with inexact ones (corners
// on both sides of an axis, or of very different size) twice that; slivers among
// the latter are summed as an expansion.
//
// Source: Kahan's difference of products, whose relative error is below 2^-52 by
// C.-P. Jeannerod, N. Louvet and J.-M. Muller, Further analysis of Kahan's
// algorithm for the accurate computation of 2 x 2 determinants, Math. Comp. 82,
// 2013. What rounding the differences left out comes back to first order.
func Area2(ax, ay, bx, by, cx, cy float64) float64 {
	ux, uy := bx-ax, by-ay
	vx, vy := cx-ax, cy-ay
	k := differenceOfProducts(ux, vy, uy, vx)
	tux, tuy := diffTail(bx, ax, ux), diffTail(by, ay, uy)
	tvx, tvy := diffTail(cx, ax, vx), diffTail(cy, ay, vy)
	if tux == 0 && tuy == 0 && tvx == 0 && tvy == 0 {
		return k
	}
	// With e = 2^-53 and m = |ux vy| + |uy vx|: tails are below e times their
	// difference, so the four products below come to 2e m and carry a rounding
	// error of some 8e² m; the products of two tails, left out, are below e² m. If
	// the result is above 2^-40 m, that is 2^-62 of it, nothing beside the errors
	// of k (2e) and of the addition (e).
	k += (float64(ux*tvy) - float64(uy*tvx)) + (float64(tux*vy) - float64(tuy*vx))
	if math.Abs(k) >= 0x1p-40*(math.Abs(float64(ux*vy))+math.Abs(float64(uy*vx))) {
		return k
	}
	return areaExpansion(ax, ay, bx, by, cx, cy)
}

// differenceOfProducts returns ab - cd with a relative error below 2^-52 (Kahan).
func differenceOfProducts(a, b, c, d float64) float64 {
	p := float64(c * d)
	e := math.FMA(-c, d, p)
	return math.FMA(a, b, -p) + e
}

// diffTail returns a-b-d for d = fl(a-b), exactly.
func diffTail(a, b, d float64) float64 {
	bv := a - d
	return (a - (d + bv)) + (bv - b)
}

// areaExpansion adds the exact terms from the smallest to the largest. They do
// not overlap, so that all but the last two or three vanish beside the result.
//
//go:noinline
func areaExpansion(ax, ay, bx, by, cx, cy float64) float64 {
	var det [12]float64
	n := orientTerms(&det, ax, ay, bx, by, cx, cy)
	area := 0.0
	for _, t := range det[:n] {
		area += t
	}
	return area
}
