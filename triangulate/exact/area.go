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
	k, _ = areaExpansion(ax, ay, bx, by, cx, cy)
	return k
}

// Views2 returns twice the signed areas of a triangle in space as it is seen in
// (z, y), in (x, z) and in (x, y): the bits that Area2 gives of each, in less time,
// as the three share their differences.
func Views2(ax, ay, az, bx, by, bz, cx, cy, cz float64) (zy, xz, xy float64) {
	ux, uy, uz := bx-ax, by-ay, bz-az
	vx, vy, vz := cx-ax, cy-ay, cz-az
	if diffTail(bx, ax, ux) != 0 || diffTail(by, ay, uy) != 0 || diffTail(bz, az, uz) != 0 ||
		diffTail(cx, ax, vx) != 0 || diffTail(cy, ay, vy) != 0 || diffTail(cz, az, vz) != 0 {
		return Area2(az, ay, bz, by, cz, cy), Area2(ax, az, bx, bz, cx, cz), Area2(ax, ay, bx, by, cx, cy)
	}
	// Without tails Area2 stops here.
	return differenceOfProducts(uz, vy, uy, vz), differenceOfProducts(ux, vz, uz, vx), differenceOfProducts(ux, vy, uy, vx)
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

// Area2Parts returns twice the signed area in two parts, the rounded area and what
// is missing: their exact sum has a relative error below 2^-58. It takes about
// twice the time of Area2.
func Area2Parts(ax, ay, bx, by, cx, cy float64) (area, rest float64) {
	ux, uy := bx-ax, by-ay
	vx, vy := cx-ax, cy-ay
	// Exact products in two parts each. Where they cancel, p - q and p0 - q0 are
	// exact; where they do not, what is rounded below is 2^-104 of the result.
	p, p0 := twoProduct(ux, vy)
	q, q0 := twoProduct(uy, vx)
	s, e := twoSum(p, -q)
	t, f := twoSum(p0, -q0)
	s, g := twoSum(s, t)
	rest = (e + g) + f
	tux, tuy := diffTail(bx, ax, ux), diffTail(by, ay, uy)
	tvx, tvy := diffTail(cx, ax, vx), diffTail(cy, ay, vy)
	if tux != 0 || tuy != 0 || tvx != 0 || tvy != 0 {
		// As in Area2, with the same bound.
		rest += (float64(ux*tvy) - float64(uy*tvx)) + (float64(tux*vy) - float64(tuy*vx))
		if math.Abs(s+rest) < 0x1p-40*(math.Abs(p)+math.Abs(q)) {
			return areaExpansion(ax, ay, bx, by, cx, cy)
		}
	}
	return twoSum(s, rest)
}

// areaExpansion adds the exact terms from the largest down, which fills the area;
// the first term that no longer goes in opens the rest.
//
//go:noinline
func areaExpansion(ax, ay, bx, by, cx, cy float64) (area, rest float64) {
	var det [12]float64
	i := orientTerms(&det, ax, ay, bx, by, cx, cy) - 1
	area = det[i]
	for i--; i >= 0 && rest == 0; i-- {
		area, rest = fastTwoSum(area, det[i])
	}
	for ; i >= 0; i-- {
		rest += det[i]
	}
	return fastTwoSum(area, rest)
}
