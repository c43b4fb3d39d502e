package interp

import (
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// What cut adds up: six times volumes, twice areas.
const (
	sumAbove = iota
	sumBelow
	sumAreaAbove
	sumAreaBelow
)

// cut adds to sums what the level cuts off the triangle i, j, k.
//
// Let h be heights over the level and D twice the area. A triangle on one side
// contributes D (hi+hj+hk) to six times the volume. In a triangle that the level
// crosses, one corner, a, is alone on its side:
//
//	      a                P at s = |ha|/(|ha|+|hb|) of the way from a to b,
//	     / \               Q at u = |ha|/(|ha|+|hc|) from a to c.
//	----P---Q----  level
//	   /  .  \             a P Q has s u of the area and mean height ha/3;
//	  b-------c            Q b c has 1-u and (hb+hc)/3, Q P b has (1-s) u and hb/3.
//
// Written with 1-s = |hb|/(|ha|+|hb|) and 1-u = |hc|/(|ha|+|hc|), every term is a
// product of numbers of one sign: nothing cancels, and each part has a small
// relative error however little the level cuts off.
func (s *Surface) cut(level float64, i, j, k triangulate.Vertex, sums []exact.Sum) {
	d := s.area2(i, j, k)
	hi, hj, hk := s.z[i]-level, s.z[j]-level, s.z[k]-level
	if below := hi < 0; below == (hj < 0) && below == (hk < 0) {
		volume, area, sign := sumAbove, sumAreaAbove, 1.0
		if below {
			volume, area, sign = sumBelow, sumAreaBelow, -1.0
		}
		sums[area].Add(d)
		sums[volume].AddProduct(d, sign*hi)
		sums[volume].AddProduct(d, sign*hj)
		sums[volume].AddProduct(d, sign*hk)
		return
	}
	// Turn the corner that is alone to the front; b and c keep their turn.
	a, b, c := hi, hj, hk
	switch {
	case (hj < 0) != (hi < 0) && (hj < 0) != (hk < 0):
		a, b, c = hj, hk, hi
	case (hk < 0) != (hi < 0) && (hk < 0) != (hj < 0):
		a, b, c = hk, hi, hj
	}
	alone, aloneArea, other, otherArea := sumAbove, sumAreaAbove, sumBelow, sumAreaBelow
	if a < 0 {
		alone, aloneArea, other, otherArea = other, otherArea, alone, aloneArea
		a = -a
	} else {
		b, c = -b, -c
	}
	// From here on a, b, c are sizes.
	ab, ac := a+b, a+c
	s1, u := b/ab, a/ac // 1-s, u
	su := float64(a / ab * u)
	q := float64(s1 * u)
	r := c / ac // 1-u
	sums[aloneArea].Add(d * su)
	sums[alone].Add(d * float64(su*a))
	sums[otherArea].Add(d * r)
	sums[otherArea].Add(d * q)
	sums[other].Add(d * float64(r*(b+c)))
	sums[other].Add(d * float64(q*b))
}

// difference returns a sixth of the difference of two sums, rounded once.
func difference(a, b *exact.Sum) float64 {
	var net exact.Sum
	net.Merge(a)
	net.Subtract(b)
	return net.Mean(6)
}
