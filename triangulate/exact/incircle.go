package exact

import "math"

// inCircleBound times the permanent bounds the error of the determinant.
//
// With e = epsilon and first-order terms: the cross p-q of two products of
// differences is off by at most 4e(|p|+|q|) (three roundings in each product, one
// in the subtraction), a lift x²+y² by 4e of itself (two differences, product,
// sum), their product by 9e lift(|p|+|q|), and adding three such terms makes it
// 10e of the permanent, the sum of the three lift(|p|+|q|). Carrying the
// second-order terms through the same steps, the rounding of the permanent itself
// (four operations) and that of its product with the bound gives 123e²;
// 10e+160e² leaves room and is itself a float64. (Shewchuk 1997, section 4.4,
// arrives at 10e+96e² by a finer count.)
const inCircleBound = (10 + 160*epsilon) * epsilon

// InCircle reports where d lies with respect to the circle through a, b, c, which
// must be in counter-clockwise order: +1 inside, -1 outside, 0 exactly on it. For
// a, b, c clockwise the signs are reversed.
//
// It is the sign of the determinant
//
//	| ax-dx  ay-dy  (ax-dx)²+(ay-dy)² |
//	| bx-dx  by-dy  (bx-dx)²+(by-dy)² |
//	| cx-dx  cy-dy  (cx-dx)²+(cy-dy)² |
//
// for any four points, and exact for accepted coordinates. Some ten nanoseconds
// when the filter decides, some thirty on lattices, up to a few microseconds when
// coordinates of very different size meet.
//
// Source: Shewchuk 1997 for the filter and the expansions; the integer stage in
// between is our own.
func InCircle(a, b, c, d [2]float64) int {
	return InCircleXY(a[0], a[1], b[0], b[1], c[0], c[1], d[0], d[1])
}

// InCircleXY is InCircle on loose coordinates, which travel in registers.
func InCircleXY(ax, ay, bx, by, cx, cy, dx, dy float64) int {
	adx, ady := ax-dx, ay-dy
	bdx, bdy := bx-dx, by-dy
	cdx, cdy := cx-dx, cy-dy

	bc, cb := float64(bdx*cdy), float64(cdx*bdy)
	ca, ac := float64(cdx*ady), float64(adx*cdy)
	ab, ba := float64(adx*bdy), float64(bdx*ady)
	al := float64(adx*adx) + float64(ady*ady)
	bl := float64(bdx*bdx) + float64(bdy*bdy)
	cl := float64(cdx*cdx) + float64(cdy*cdy)

	det := float64(al*(bc-cb)) + float64(bl*(ca-ac)) + float64(cl*(ab-ba))
	permanent := float64(al*(math.Abs(bc)+math.Abs(cb))) +
		float64(bl*(math.Abs(ca)+math.Abs(ac))) +
		float64(cl*(math.Abs(ab)+math.Abs(ba)))
	bound := inCircleBound * permanent
	if det > bound {
		return 1
	}
	if -det > bound {
		return -1
	}
	return inCircleSlow(ax, ay, bx, by, cx, cy, dx, dy)
}

// inCircleSlow decides what the filter left open.
//
//go:noinline
func inCircleSlow(ax, ay, bx, by, cx, cy, dx, dy float64) int {
	adx, ady := ax-dx, ay-dy
	bdx, bdy := bx-dx, by-dy
	cdx, cdy := cx-dx, cy-dy
	if exactDiff(ax, dx, adx) && exactDiff(ay, dy, ady) &&
		exactDiff(bx, dx, bdx) && exactDiff(by, dy, bdy) &&
		exactDiff(cx, dx, cdx) && exactDiff(cy, dy, cdy) {
		if sign, ok := inCircleInteger(adx, ady, bdx, bdy, cdx, cdy); ok {
			return sign
		}
		return inCircleDifferences(adx, ady, bdx, bdy, cdx, cdy)
	}
	return inCircleExpansion(ax, ay, bx, by, cx, cy, dx, dy)
}

// inCircleDifferences is the determinant of exact differences as an expansion of
// at most 3 x 32 = 96 terms.
//
//go:noinline
func inCircleDifferences(adx, ady, bdx, bdy, cdx, cdy float64) int {
	var bc, ca, ab [4]float64
	crossProduct(&bc, bdx, bdy, cdx, cdy)
	crossProduct(&ca, cdx, cdy, adx, ady)
	crossProduct(&ab, adx, ady, bdx, bdy)
	var a, b, c [32]float64
	na := liftTimes(a[:], bc[:], adx, ady)
	nb := liftTimes(b[:], ca[:], bdx, bdy)
	nc := liftTimes(c[:], ab[:], cdx, cdy)
	var s [64]float64
	var det [96]float64
	n := addExpansions(s[:], a[:na], b[:nb])
	n = addExpansions(det[:], s[:n], c[:nc])
	return signOf(det[n-1])
}

// inCircleExpansion is the determinant of the raw coordinates, expanded along the
// lifts of its four rows (a, b, c, d with a column of ones):
//
//	lift(a) [bcd] - lift(b) [cda] + lift(c) [dab] - lift(d) [abc]
//
// where [pqr] = pq + qr + rp, pq = px qy - py qx, is twice the area of p, q, r. An
// expansion of at most 4 x 96 = 384 terms.
//
//go:noinline
func inCircleExpansion(ax, ay, bx, by, cx, cy, dx, dy float64) int {
	var ab, bc, cd, da, ac, bd, ca, db [4]float64
	crossProduct(&ab, ax, ay, bx, by)
	crossProduct(&bc, bx, by, cx, cy)
	crossProduct(&cd, cx, cy, dx, dy)
	crossProduct(&da, dx, dy, ax, ay)
	crossProduct(&ac, ax, ay, cx, cy)
	crossProduct(&bd, bx, by, dx, dy)
	for i := range ac {
		ca[i], db[i] = -ac[i], -bd[i]
	}
	var t [12]float64
	var a, b, c, d [96]float64
	n := addThree(&t, &bc, &cd, &db)
	na := liftTimes(a[:], t[:n], ax, ay)
	n = addThree(&t, &cd, &da, &ac)
	nb := liftTimes(b[:], t[:n], bx, by)
	n = addThree(&t, &da, &ab, &bd)
	nc := liftTimes(c[:], t[:n], cx, cy)
	n = addThree(&t, &ab, &bc, &ca)
	nd := liftTimes(d[:], t[:n], dx, dy)
	negate(b[:nb])
	negate(d[:nd])
	var s, u [192]float64
	var det [384]float64
	ns := addExpansions(s[:], a[:na], b[:nb])
	nu := addExpansions(u[:], c[:nc], d[:nd])
	n = addExpansions(det[:], s[:ns], u[:nu])
	return signOf(det[n-1])
}

// addThree stores p+q+r.
func addThree(dst *[12]float64, p, q, r *[4]float64) int {
	var s [8]float64
	n := addExpansions(s[:], p[:], q[:])
	return addExpansions(dst[:], s[:n], r[:])
}

// liftTimes stores (x²+y²) e for an expansion e of at most 12 terms: 8 len(e)
// terms at most.
func liftTimes(dst, e []float64, x, y float64) int {
	var t [24]float64
	var ex, ey [48]float64
	n := scaleExpansion(t[:], e, x)
	nx := scaleExpansion(ex[:], t[:n], x)
	n = scaleExpansion(t[:], e, y)
	ny := scaleExpansion(ey[:], t[:n], y)
	return addExpansions(dst, ex[:nx], ey[:ny])
}

func negate(e []float64) {
	for i := range e {
		e[i] = -e[i]
	}
}
