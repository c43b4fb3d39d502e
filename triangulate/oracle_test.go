package triangulate_test

import (
	"math/big"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// tiedDelaunay is the triangulation by its definition, in integers: the
// triangles whose plane through the lifted corners has every other lifted point
// above it. A point is lifted to x² + y² plus an infinitesimal that is larger the
// later the point comes in (x, y) order, each infinitely larger than the one
// before.
//
// The infinitesimals are numbers here. Doubles are integers times one power of
// two, so positions are scaled to integers first. Of n points the k-th, from 0,
// has its lift scaled by β^n and raised by β^k. The determinant is then
//
//	D β^n + (cofactor of the first) β^0 + ... + (cofactor of the last) β^(n-1)
//
// with integer D and cofactors, at most four of which are not zero. β above four
// times the largest cofactor makes the first term that is not zero, read from the
// left, decide the sign, which is what "infinitely larger" asks for.
//
// pts must be distinct and in (x, y) order. Time O(n⁴) at worst, so few points.
func tiedDelaunay(pts []orb.Point) [][3]orb.Point {
	x, y, size := scaledToIntegers(pts)
	n := uint(len(pts))
	// A cofactor is twice the area of a triangle, at most 4 size².
	beta := 2*size + 5
	lift := make([]*big.Int, n)
	for k := range lift {
		w := new(big.Int).Mul(x[k], x[k])
		w.Add(w, new(big.Int).Mul(y[k], y[k]))
		w.Lsh(w, beta*n)
		lift[k] = w.Add(w, new(big.Int).Lsh(big.NewInt(1), beta*uint(k)))
	}
	var out [][3]orb.Point
	for a := range pts {
		for b := range pts {
			for c := range pts {
				if b <= a || c <= a || c == b || exact.Orient(pts[a], pts[b], pts[c]) <= 0 {
					continue
				}
				empty := true
				for d := range pts {
					if d != a && d != b && d != c && below(x, y, lift, a, b, c, d) {
						empty = false
						break
					}
				}
				if empty {
					out = append(out, [3]orb.Point{pts[a], pts[b], pts[c]})
				}
			}
		}
	}
	slices.SortFunc(out, func(s, t [3]orb.Point) int {
		return slices.CompareFunc(s[:], t[:], byXY)
	})
	return out
}

// below tells whether the lifted d lies strictly below the plane through the
// lifted a, b, c, which are counter-clockwise: the determinant of the three
// rows (x, y, lift) relative to d is then positive.
func below(x, y, lift []*big.Int, a, b, c, d int) bool {
	sub := func(p, q *big.Int) *big.Int { return new(big.Int).Sub(p, q) }
	mul := func(p, q *big.Int) *big.Int { return new(big.Int).Mul(p, q) }
	ax, ay := sub(x[a], x[d]), sub(y[a], y[d])
	bx, by := sub(x[b], x[d]), sub(y[b], y[d])
	cx, cy := sub(x[c], x[d]), sub(y[c], y[d])
	det := mul(sub(lift[a], lift[d]), sub(mul(bx, cy), mul(by, cx)))
	det.Add(det, mul(sub(lift[b], lift[d]), sub(mul(cx, ay), mul(cy, ax))))
	det.Add(det, mul(sub(lift[c], lift[d]), sub(mul(ax, by), mul(ay, bx))))
	return det.Sign() > 0
}

// scaledToIntegers multiplies the coordinates, relative to the first point, by
// the power of two that makes all of them integers. None is longer than bits.
func scaledToIntegers(pts []orb.Point) (x, y []*big.Int, bits uint) {
	rel := make([][2]*big.Rat, len(pts))
	shift := uint(0)
	for i, p := range pts {
		for k := range p {
			r := new(big.Rat).SetFloat64(p[k])
			rel[i][k] = r.Sub(r, new(big.Rat).SetFloat64(pts[0][k]))
			shift = max(shift, uint(rel[i][k].Denom().BitLen())-1)
		}
	}
	whole := func(r *big.Rat) *big.Int {
		n := new(big.Int).Lsh(r.Num(), shift)
		n.Quo(n, r.Denom()) // a power of two, no longer than shift
		bits = max(bits, uint(n.BitLen()))
		return n
	}
	for _, r := range rel {
		x, y = append(x, whole(r[0])), append(y, whole(r[1]))
	}
	return x, y, bits
}
