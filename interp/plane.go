package interp

import (
	"math"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Plane is one triangle of a surface made ready for many values. Its results are
// those of Surface.Value for places strictly inside the triangle, bit for bit.
//
// With i the corner that is smallest in (x, y) order, j and k the following ones
// counter-clockwise, and D twice the area of the triangle,
//
//	     k
//	    /|\         Wj = twice the area of (p, k, i)
//	   / | \        Wk = twice the area of (p, i, j)
//	  /  p  \
//	 / .   . \      z(p) = zi + Wj (zj-zi)/D + Wk (zk-zi)/D
//	i---------j
//
// where Wj/D and Wk/D are the weights of j and k. The areas are taken relative to
// p, by a method whose relative error is bounded however thin they are; products
// with the area far from the origin would lose all digits there.
//
// Error. Let e = 2^-53 and first order. An area relative to p is off by at most 2e
// of itself where differences are exact (near below) and 3e elsewhere; the quotients
// (zj-zi)/D are prepared in twice the precision and then rounded, e. So each of the
// two terms is off by at most 3e (near) or 4e of itself. The terms together are a
// weighted mean of zj-zi, zk-zi and 0, so that their sizes add up to at most the
// range R of the three heights. The two fused multiply-adds round to e of a number
// within the range of the heights. A value is off by at most
//
//	2e Z + 3e R (near)   2e Z + 4e R (elsewhere)
//
// with Z the largest |z|; and e Z <= ulp(Z).
type Plane struct {
	xi, yi, xj, yj, xk, yk float64
	zi, gj, gk             float64 // zi, (zj-zi)/D, (zk-zi)/D
	zLow, zHigh            float64 // the range of the heights
	// near: on each axis the corners have one sign and lie within a factor of two.
	// Then every place in the triangle does, and all differences are exact
	// (Sterbenz). It only saves looking: the general way gives the same bits.
	near bool
}

// Plane prepares triangle t, which takes as long as some ten values.
func (s *Surface) Plane(t triangulate.Triangle) Plane {
	var p Plane
	s.PlaneInto(&p, t)
	return p
}

// PlaneInto is Plane for many triangles in turn, without copying.
func (s *Surface) PlaneInto(p *Plane, t triangulate.Triangle) {
	i, j, k := s.canonical(t)
	s.planeThrough(p, i, j, k)
}

// planeThrough prepares the triangle of three vertices, counter-clockwise, the smallest
// in (x, y) order first.
func (s *Surface) planeThrough(p *Plane, i, j, k triangulate.Vertex) {
	pi, pj, pk := &s.pos[i], &s.pos[j], &s.pos[k]
	xi, yi, xj, yj, xk, yk := pi[0], pi[1], pj[0], pj[1], pk[0], pk[1]
	zi, zj, zk := s.z[i], s.z[j], s.z[k]
	d, rest := exact.Area2Parts(xi, yi, xj, yj, xk, yk)
	inverse := 1 / d
	p.xi, p.yi, p.xj, p.yj, p.xk, p.yk = xi, yi, xj, yj, xk, yk
	p.zi = zi
	p.gj = quotient(zj, zi, d, rest, inverse)
	p.gk = quotient(zk, zi, d, rest, inverse)
	p.zLow = min(zi, zj, zk)
	p.zHigh = max(zi, zj, zk)
	p.near = withinTwo(xi, xj, xk) && withinTwo(yi, yj, yk)
}

// quotient returns (a-b)/(d+rest), off by e of itself: a first quotient and its
// rest divided once more. inverse is 1/d rounded.
func quotient(a, b, d, rest, inverse float64) float64 {
	h, hl := twoDiff(a, b)
	q := float64(h * inverse)
	r := math.FMA(-q, d, h) + (hl - float64(q*rest))
	return math.FMA(r, inverse, q)
}

// withinTwo reports, on the safe side, whether the numbers have one sign and lie
// within a factor of two: from 3/4 to 5/4 of the first.
func withinTwo(a, b, c float64) bool {
	q := math.Abs(a) / 4
	return math.Abs(b-a) <= q && math.Abs(c-a) <= q
}

// At returns the value at (x, y), which must lie in the triangle.
func (p *Plane) At(x, y float64) float64 {
	var wj, wk float64
	if p.near {
		ax, ay := p.xi-x, p.yi-y
		wj = differenceOfProducts(p.xk-x, ay, p.yk-y, ax)
		wk = differenceOfProducts(ax, p.yj-y, ay, p.xj-x)
	} else {
		wj = exact.Area2(x, y, p.xk, p.yk, p.xi, p.yi)
		wk = exact.Area2(x, y, p.xi, p.yi, p.xj, p.yj)
	}
	return p.blend(wj, wk)
}

// Span stores At(xs[n], y) in dst[n] for places along one row; dst is at least as
// long as xs. It is faster than as many calls of At.
func (p *Plane) Span(dst, xs []float64, y float64) {
	dst = dst[:len(xs)]
	if !p.near {
		for n, x := range xs {
			dst[n] = p.At(x, y)
		}
		return
	}
	// Writing to dst could change *p for all the compiler knows: keep copies.
	xi, xj, xk := p.xi, p.xj, p.xk
	ay, by, cy := p.yi-y, p.yj-y, p.yk-y
	zi, gj, gk, low, high := p.zi, p.gj, p.gk, p.zLow, p.zHigh
	for n, x := range xs {
		ax := xi - x
		wj := differenceOfProducts(xk-x, ay, cy, ax)
		wk := differenceOfProducts(ax, by, ay, xj-x)
		z := math.FMA(wk, gk, math.FMA(wj, gj, zi))
		if z < low {
			z = low
		}
		if z > high {
			z = high
		}
		dst[n] = z
	}
}

// blend adds the parts of j and k to the value of i and keeps the sum, whose
// rounding may lead out, within the range of the three.
func (p *Plane) blend(wj, wk float64) float64 {
	z := math.FMA(wk, p.gk, math.FMA(wj, p.gj, p.zi))
	if z < p.zLow {
		return p.zLow
	}
	if z > p.zHigh {
		return p.zHigh
	}
	return z
}

// differenceOfProducts returns ab - cd with a relative error below 2^-52 (Kahan;
// bound by Jeannerod, Louvet and Muller 2013). exact.Area2 does the same.
func differenceOfProducts(a, b, c, d float64) float64 {
	p := float64(c * d)
	e := math.FMA(-c, d, p)
	return math.FMA(a, b, -p) + e
}
