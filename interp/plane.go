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
//
// Gentle triangles, nearly all of those over ground, need less work for the same
// accuracy. The gradient (gx, gy) gives z(p) = zi + gy (y-yi) + gx (x-xi). Let w and
// h be the triangle's extent in x and y, and s = w h / D: 1 for half of its box,
// large for slivers. If it is near, differences of coordinates are exact. A product
// (zj-zi)(yk-yi) is at most R h and off by 2e of that, their difference by e more; D
// by 2e, its reciprocal and the product with it by e each. So gx (x-xi), at most s R,
// is off by 10e s R with its own rounding, and gy (y-yi) likewise; the sums are
// rounded at sizes of at most Z + s R and Z. A value is off by at most
//
//	2e Z + 21e s R
//
// and a triangle is gentle if it is near and 8 s R <= Z, so that this is below 4.7e Z.
// Which way a triangle is done depends on its three readings only.
type Plane struct {
	xi, yi, xj, yj, xk, yk float64
	zi, gj, gk             float64 // zi, (zj-zi)/D, (zk-zi)/D
	gx, gy                 float64 // the gradient, of gentle ones
	zLow, zHigh            float64 // the range of the heights
	// near: on each axis the corners have one sign and lie within a factor of two.
	// Then every place in the triangle does, and all differences are exact
	// (Sterbenz). It only saves looking: the general way gives the same bits.
	near   bool
	gentle bool
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
	p.xi, p.yi, p.xj, p.yj, p.xk, p.yk = xi, yi, xj, yj, xk, yk
	p.zi = zi
	p.zLow = min(zi, zj, zk)
	p.zHigh = max(zi, zj, zk)
	p.near = withinTwo(xi, xj, xk) && withinTwo(yi, yj, yk)
	if p.gentle = p.near && p.gradient(zj, zk); p.gentle {
		return
	}
	d, rest := exact.Area2Parts(xi, yi, xj, yj, xk, yk)
	inverse := 1 / d
	p.gj = quotient(zj, zi, d, rest, inverse)
	p.gk = quotient(zk, zi, d, rest, inverse)
}

// gradient prepares a triangle that is near, and reports whether it is gentle.
func (p *Plane) gradient(zj, zk float64) bool {
	xj, yj, xk, yk := p.xj-p.xi, p.yj-p.yi, p.xk-p.xi, p.yk-p.yi
	d := differenceOfProducts(xj, yk, yj, xk)
	w := max(xj, xk) // i has the smallest x
	h := max(yj, yk, 0) - min(yj, yk, 0)
	if !(float64(8*float64(w*h))*(p.zHigh-p.zLow) <= float64(max(math.Abs(p.zLow), math.Abs(p.zHigh))*d)) {
		return false
	}
	hj, hk := zj-p.zi, zk-p.zi
	inverse := 1 / d
	p.gx = float64((float64(hj*yk) - float64(hk*yj)) * inverse)
	p.gy = float64((float64(hk*xj) - float64(hj*xk)) * inverse)
	return true
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
	if p.gentle {
		return p.within(p.zi + float64(p.gy*(y-p.yi)) + float64(p.gx*(x-p.xi)))
	}
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

// Run is some places next to each other in a row of a lattice, and where their
// values go: columns Col to Col+N-1 of row Row, and from Into on.
type Run struct{ Row, Col, N, Into int32 }

// Runs stores At(xs[c], ys[row]) of every place of every run in dst; no run may be
// empty. It is faster than as many calls of At.
func (p *Plane) Runs(dst, xs, ys []float64, runs []Run) {
	if !p.gentle {
		for _, r := range runs {
			p.span(dst[r.Into:][:r.N], xs[r.Col:][:r.N], ys[r.Row])
		}
		return
	}
	// Writing to dst could change *p for all the compiler knows: keep copies.
	xi, yi, zi, gx, gy, low, high := p.xi, p.yi, p.zi, p.gx, p.gy, p.zLow, p.zHigh
	for _, r := range runs {
		row := zi + float64(gy*(ys[r.Row]-yi))
		dst, xs := dst[r.Into:][:r.N], xs[r.Col:][:r.N]
		// How many places a run has is anybody's guess, the processor's too, and a
		// wrong guess costs more than three places: write the first three whether
		// there are so many or not, the last one again instead of what is missing.
		last := len(dst) - 1
		i1, i2 := min(1, last), min(2, last)
		dst[0] = within(row+float64(gx*(xs[0]-xi)), low, high)
		dst[i1] = within(row+float64(gx*(xs[i1]-xi)), low, high)
		dst[i2] = within(row+float64(gx*(xs[i2]-xi)), low, high)
		for i := 3; i < len(dst); i++ {
			dst[i] = within(row+float64(gx*(xs[i]-xi)), low, high)
		}
	}
}

// span stores At(xs[n], y) in dst[n], for a triangle that is not gentle.
func (p *Plane) span(dst, xs []float64, y float64) {
	dst = dst[:len(xs)]
	if !p.near {
		for n, x := range xs {
			dst[n] = p.At(x, y)
		}
		return
	}
	xi, xj, xk := p.xi, p.xj, p.xk
	ay, by, cy := p.yi-y, p.yj-y, p.yk-y
	zi, gj, gk, low, high := p.zi, p.gj, p.gk, p.zLow, p.zHigh
	for n, x := range xs {
		ax := xi - x
		wj := differenceOfProducts(xk-x, ay, cy, ax)
		wk := differenceOfProducts(ax, by, ay, xj-x)
		dst[n] = within(math.FMA(wk, gk, math.FMA(wj, gj, zi)), low, high)
	}
}

// blend adds the parts of j and k to the value of i.
func (p *Plane) blend(wj, wk float64) float64 {
	return p.within(math.FMA(wk, p.gk, math.FMA(wj, p.gj, p.zi)))
}

// within keeps a value, whose rounding may lead out, within the range of the heights.
func (p *Plane) within(z float64) float64 { return within(z, p.zLow, p.zHigh) }

func within(z, low, high float64) float64 {
	if z < low {
		return low
	}
	if z > high {
		return high
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
