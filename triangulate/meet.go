package triangulate

import (
	"math"

	"github.com/paulmach/orb"
)

// Where two lines cross, in numbers of twice the precision: with
//
//	d = q-p, e = s-r, w = r-p,  t = (w x e) / (d x e)
//
// the place is p + t d. A number a is held as a sum h + l of doubles, h being a
// rounded. Differences and products of doubles come out exactly in two parts
// (Knuth; fused multiply-add), so that what is lost are products of tails and the
// tails of tails.
//
// Error, with e = 2^-53. Each operation on two parts is off by at most 2^-100 of
// its result, generously: the best known bounds for the sums and products below lie
// between 3e² and 10e² (Joldes, Muller and Popescu 2017), 2^-103 to 2^-102. A cross
// product is a difference of two such products, so it is off by 2^-99 of the sum
// of their sizes; t carries the relative errors of both cross products and one of
// its own, and the place those of t and two more. If all numbers within that error
// of the sum round to one double, it is the exact place's; else, and where a
// cross product is too close to 0 to tell anything, the caller asks rationals.

// meet returns Intersection if twice the precision decides it.
func meet(p, q, r, s orb.Point) (at orb.Point, ok bool) {
	dx, dy := sub(q[0], p[0]), sub(q[1], p[1])
	ex, ey := sub(s[0], r[0]), sub(s[1], r[1])
	wx, wy := sub(r[0], p[0]), sub(r[1], p[1])
	det, detSize := crossTwo(dx, dy, ex, ey)
	num, numSize := crossTwo(wx, wy, ex, ey)
	detError := float64(0x1p-99 * detSize)
	if !(math.Abs(det.h) > float64(4*detError)) {
		return at, false
	}
	t := div(num, det)
	// The error of t, absolute: |t| err(det)/|det| + err(num)/|det| + |t| 2^-100,
	// each doubled for what the first order leaves out.
	tError := float64(2 * (float64(math.Abs(t.h)*(detError/math.Abs(det.h)+0x1p-100)) + float64(0x1p-99*numSize)/math.Abs(det.h)))
	var okX, okY bool
	at[0], okX = along(p[0], t, tError, dx)
	at[1], okY = along(p[1], t, tError, dy)
	return at, okX && okY
}

// along returns from + t d rounded once, if the error of t allows.
func along(from float64, t two, tError float64, d two) (float64, bool) {
	v := mul(t, d)
	h := from + v.h
	bv := h - from
	l := (from - (h - bv)) + (v.h - bv) // what rounding left out
	l += v.l
	size := math.Abs(v.h)
	off := float64(2*float64(tError*math.Abs(d.h))) + float64(0x1p-98*size) + float64(0x1p-51*math.Abs(l)) + float64(0x1p-104*math.Abs(h))
	if h == 0 || math.Abs(h) < 0x1p-900 {
		// Exactly 0, or nothing but error.
		return 0, v.h == 0 && from == 0
	}
	low, high := h+(l-off), h+(l+off)
	return low + 0, low == high
}

// two is a number in two parts.
type two struct{ h, l float64 }

// sub returns a-b exactly.
func sub(a, b float64) two {
	h := a - b
	bv := a - h
	return two{h, (a - (h + bv)) + (bv - b)}
}

// mul returns a b.
func mul(a, b two) two {
	h := float64(a.h * b.h)
	l := math.FMA(a.h, b.h, -h) + (float64(a.h*b.l) + float64(a.l*b.h))
	s := h + l
	return two{s, l - (s - h)}
}

// crossTwo returns a x b, and the sum of the sizes of its two products.
func crossTwo(ax, ay, bx, by two) (two, float64) {
	u, v := mul(ax, by), mul(ay, bx)
	h := u.h - v.h
	bv := u.h - h
	l := (u.h - (h + bv)) + (bv - v.h)
	l += u.l - v.l
	s := h + l
	return two{s, l - (s - h)}, math.Abs(u.h) + math.Abs(v.h)
}

// div returns a/b.
func div(a, b two) two {
	q := a.h / b.h
	// a - q b, the leading part exact.
	p := float64(q * b.h)
	e := math.FMA(q, b.h, -p)
	r := ((a.h - p) - e) + (a.l - float64(q*b.l))
	r /= b.h
	s := q + r
	return two{s, r - (s - q)}
}
