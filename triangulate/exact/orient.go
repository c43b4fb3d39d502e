package exact

import "math"

// epsilon bounds the relative error of one correctly rounded operation: 2^-53.
const epsilon = 1.0 / (1 << 53)

// orientBound times |l|+|r| bounds the error of the determinant l - r.
//
// With e = epsilon: each of the two differences in a product and the product
// itself carry one rounding, so the true product L satisfies |L-l| <= (3e+7e²)|l|.
// The final subtraction adds e|det|. The computed sign is right if
// |det|(1-e) > (3e+7e²)(|l|+|r|). Rounding in |l|+|r| and in its product with the
// bound costs less than 8e² more: 3e+16e² would do (Shewchuk 1997, section 4.2);
// 3e+32e² leaves room and is itself a float64.
const orientBound = (3 + 32*epsilon) * epsilon

// Orient reports on which side of the directed line a→b the point c lies:
// +1 left (a, b, c turn counter-clockwise), -1 right, 0 exactly on it or a = b.
//
// The sign is exact for accepted coordinates. Rotating the arguments keeps the
// sign, swapping two negates it. A few nanoseconds when the filter decides.
//
// Source: Shewchuk 1997, stages A and D; between them the case of exact
// differences, where the sign is a comparison of two exact products.
func Orient(a, b, c [2]float64) int {
	return OrientXY(a[0], a[1], b[0], b[1], c[0], c[1])
}

// OrientXY is Orient on loose coordinates, which travel in registers.
func OrientXY(ax, ay, bx, by, cx, cy float64) int {
	l := float64((ax - cx) * (by - cy))
	r := float64((ay - cy) * (bx - cx))
	det, bound := l-r, orientBound*(math.Abs(l)+math.Abs(r))
	if det > bound {
		return 1
	}
	if -det > bound {
		return -1
	}
	return orientSlow(ax, ay, bx, by, cx, cy)
}

// OrientEstimate is the filter of Orient alone, small enough to be inlined in a
// hot loop: det is the determinant in floating point. If |det| > bound its sign
// is the sign of the exact value, otherwise ask Orient.
func OrientEstimate(ax, ay, bx, by, cx, cy float64) (det, bound float64) {
	l := float64((ax - cx) * (by - cy))
	r := float64((ay - cy) * (bx - cx))
	return l - r, orientBound * (math.Abs(l) + math.Abs(r))
}

// orientSlow decides what the filter left open.
//
//go:noinline
func orientSlow(ax, ay, bx, by, cx, cy float64) int {
	acx, acy, bcx, bcy := ax-cx, ay-cy, bx-cx, by-cy
	if exactDiff(ax, cx, acx) && exactDiff(ay, cy, acy) && exactDiff(bx, cx, bcx) && exactDiff(by, cy, bcy) {
		return compareProducts(acx, bcy, acy, bcx)
	}
	return orientExpansion(ax, ay, bx, by, cx, cy)
}

// exactDiff reports whether d = fl(a-b) is a-b without error: the tail of the
// two-difference is zero (Knuth's sum, valid in any order of sizes).
func exactDiff(a, b, d float64) bool {
	bv := a - d
	return a-(d+bv) == 0 && bv-b == 0
}

// compareProducts returns the sign of ab - cd, exactly. Rounding is monotone, so
// rounded products that differ decide; equal ones leave the comparison to the
// errors of rounding, which FMA gives exactly.
func compareProducts(a, b, c, d float64) int {
	p, q := float64(a*b), float64(c*d)
	if p == q {
		p, q = math.FMA(a, b, -p), math.FMA(c, d, -q)
	}
	return compare(p, q)
}

// compare returns the sign of p - q.
func compare(p, q float64) int {
	if p > q {
		return 1
	}
	if p < q {
		return -1
	}
	return 0
}

// orientExpansion is the sign of the determinant as an expansion.
func orientExpansion(ax, ay, bx, by, cx, cy float64) int {
	var det [12]float64
	n := orientTerms(&det, ax, ay, bx, by, cx, cy)
	return signOf(det[n-1])
}

// orientTerms sums the six products of the expanded determinant
//
//	ax by - ay bx + bx cy - by cx + cx ay - cy ax
//
// as an expansion of at most twelve terms and returns their number.
func orientTerms(det *[12]float64, ax, ay, bx, by, cx, cy float64) int {
	var ab, bc, ca [4]float64
	var abc [8]float64
	crossProduct(&ab, ax, ay, bx, by)
	crossProduct(&bc, bx, by, cx, cy)
	crossProduct(&ca, cx, cy, ax, ay)
	n := addExpansions(abc[:], ab[:], bc[:])
	return addExpansions(det[:], abc[:n], ca[:])
}

// CompareXY orders points by x, then y: -1 if a comes before b, +1 if after, 0 if
// they are the same place (-0 and 0 are the same).
func CompareXY(a, b [2]float64) int {
	if a[0] != b[0] {
		return compare(a[0], b[0])
	}
	return compare(a[1], b[1])
}
