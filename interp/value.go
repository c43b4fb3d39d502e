package interp

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Value returns the height of s at p, whose location in the mesh is loc (from a
// Locator, or known otherwise): NaN outside.
//
// At a vertex it is the vertex's value bit for bit; on an edge it depends on the two
// ends only (ValueOnEdge), inside a triangle on its three corners (Plane). The
// error is at most 0.51 ulp of the largest |z| on an edge; inside, see Plane.
func (s *Surface) Value(loc triangulate.Location, p orb.Point) float64 {
	switch loc.Place {
	case triangulate.Inside:
		plane := s.Plane(loc.Triangle)
		return plane.At(p[0], p[1])
	case triangulate.OnEdge:
		return s.ValueOnEdge(s.mesh.Origin(loc.Edge), s.mesh.Dest(loc.Edge), p)
	case triangulate.OnVertex:
		return s.z[loc.Vertex]
	}
	return math.NaN()
}

// ValueOnEdge returns the height at p, a place exactly on the edge between the
// vertices a and b, in either order:
//
//	z_a + t (z_b - z_a)
//
// with a the end that is smaller in (x, y) order and t the fraction of the way
// along the axis on which the ends are further apart (x if equally far).
//
// The fraction and its product with the difference are carried in twice the
// precision, so that the last addition is the only rounding that counts: the
// error is at most half an ulp of the result and 2^-100 of the largest |z|. The
// value is kept within the range of the two ends.
func (s *Surface) ValueOnEdge(a, b triangulate.Vertex, p orb.Point) float64 {
	if before(&s.pos[b], &s.pos[a]) {
		a, b = b, a
	}
	return alongEdge(&s.pos[a], &s.pos[b], s.z[a], s.z[b], &p)
}

// alongEdge is ValueOnEdge for ends in order.
//
// With e = 2^-53: n, d and dz come with their exact tails. t is rounded, its rest
// r = n - t d exact by FMA, and t + tl is right to some 4e² of itself. The product
// t dz is exact in two parts; what is left out or rounded beside it, tails of
// tails, is some 10e² of dz. Then za + t dz is one exact sum of two parts, and
// their tails are added before the one rounding to the result.
func alongEdge(pa, pb *orb.Point, za, zb float64, p *orb.Point) float64 {
	axis := edgeAxis(*pa, *pb)
	d, dl := twoDiff(pb[axis], pa[axis])
	n, nl := twoDiff(p[axis], pa[axis])
	dz, dzl := twoDiff(zb, za)
	t := n / d
	tl := (math.FMA(-t, d, n) + (nl - float64(t*dl))) / d
	v := float64(t * dz)
	vl := math.FMA(t, dz, -v) + (float64(t*dzl) + float64(tl*dz))
	z, zl := twoDiff(za, -v)
	z += zl + vl
	return min(max(z, min(za, zb)), max(za, zb))
}

// edgeAxis is the axis along which a place on the edge is measured.
func edgeAxis(a, b orb.Point) int {
	if math.Abs(b[1]-a[1]) > math.Abs(b[0]-a[0]) {
		return 1
	}
	return 0
}

// twoDiff returns a-b rounded, and what rounding left out (Knuth).
func twoDiff(a, b float64) (d, tail float64) {
	d = a - b
	bv := a - d
	return d, (a - (d + bv)) + (bv - b)
}

// Weights returns the corners of the triangle that owns p, counter-clockwise with
// the smallest in (x, y) order first, and the share of each in the value at p: its
// shape function, 1 at the corner and 0 on the opposite edge. Shares are from 0 to
// 1 and add up to 1 within a few units in the last place; each is right to 2^-49 of
// itself inside, to 2^-51 on an edge, exact at a vertex.
//
// Where there is no triangle the corners are NoVertex and the weights NaN.
func (s *Surface) Weights(loc triangulate.Location, p orb.Point) (corners [3]triangulate.Vertex, w [3]float64) {
	if loc.Triangle == triangulate.NoTriangle {
		none, nan := triangulate.NoVertex, math.NaN()
		return [3]triangulate.Vertex{none, none, none}, [3]float64{nan, nan, nan}
	}
	i, j, k := s.canonical(loc.Triangle)
	corners = [3]triangulate.Vertex{i, j, k}
	switch loc.Place {
	case triangulate.OnVertex:
		for n, v := range corners {
			if v == loc.Vertex {
				w[n] = 1
			}
		}
	case triangulate.OnEdge:
		a, b := s.mesh.Origin(loc.Edge), s.mesh.Dest(loc.Edge)
		for n, v := range corners {
			switch v {
			case a:
				w[n] = fraction(s.pos[b], s.pos[a], p)
			case b:
				w[n] = fraction(s.pos[a], s.pos[b], p)
			}
		}
	default:
		d := s.area2(i, j, k)
		for n := range corners {
			q, r := s.pos[corners[(n+1)%3]], s.pos[corners[(n+2)%3]]
			w[n] = min(exact.Area2(p[0], p[1], q[0], q[1], r[0], r[1])/d, 1)
		}
	}
	return corners, w
}

// fraction returns how much of the way from a to b lies before p, a place on the
// edge. Rounding is monotone, so that it is from 0 to 1.
func fraction(a, b, p orb.Point) float64 {
	axis := edgeAxis(a, b)
	return (p[axis] - a[axis]) / (b[axis] - a[axis])
}
