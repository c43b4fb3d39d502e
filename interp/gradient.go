package interp

import (
	"math"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Gradient returns the change of height per unit of x and of y on triangle t. Both
// are 0 exactly on a level triangle.
//
// They are ratios of areas: of the triangle as seen along y in (z, y), along x in
// (x, z), and from above. Each component has a relative error below 2^-49, also
// where its terms nearly cancel. Some 30 ns.
func (s *Surface) Gradient(t triangulate.Triangle) (dzdx, dzdy float64) {
	i, j, k := s.canonical(t)
	ax, ay, d := s.projections(i, j, k)
	return ax / d, ay / d
}

// projections returns twice the areas of the triangle in (z, y), (x, z) and (x, y).
func (s *Surface) projections(i, j, k triangulate.Vertex) (zy, xz, xy float64) {
	pi, pj, pk := &s.pos[i], &s.pos[j], &s.pos[k]
	return exact.Views2(pi[0], pi[1], s.z[i], pj[0], pj[1], s.z[j], pk[0], pk[1], s.z[k])
}

// Slope returns the rise over run of a plane with the gradient (dzdx, dzdy). It
// does not overflow before the gradient does: slivers can be steep beyond 1e154.
func Slope(dzdx, dzdy float64) float64 {
	if size := max(math.Abs(dzdx), math.Abs(dzdy)); size > 1e150 && !math.IsInf(size, 0) {
		dzdx, dzdy = dzdx/size, dzdy/size
		return size * math.Sqrt(float64(dzdx*dzdx)+float64(dzdy*dzdy))
	}
	return math.Sqrt(float64(dzdx*dzdx) + float64(dzdy*dzdy))
}

// DownhillAzimuth returns the direction in which water would run on a plane with
// the gradient (dzdx, dzdy): degrees clockwise from north (+y), from 0 to below
// 360, right to 1e-13 degrees. It is NaN where the plane is level, and for NaN.
// Multiples of 45 degrees come out exactly.
func DownhillAzimuth(dzdx, dzdy float64) float64 {
	east, north := -dzdx, -dzdy
	e, n := math.Abs(east), math.Abs(north)
	q := min(e, n) / max(e, n)
	if math.IsNaN(q) { // 0/0 on a level plane
		return q
	}
	a := arctanDegrees(q) // from the nearer axis to (e, n)
	if e > n {
		a = 90 - a
	}
	if north < 0 {
		a = 180 - a
	}
	if east < 0 {
		a = 360 - a
	}
	if a == 360 { // due north within rounding
		return 0
	}
	return a
}

// arctanDegrees returns the arctangent of q, 0 <= q <= 1, in degrees. The library's
// is assembled differently on each processor; this one has the same bits on all.
//
// With c the multiple of 1/16 nearest to q,
//
//	atan q = atan c + atan r,  r = (q-c)/(1+qc),  |r| <= 1/32
//
// and the series r - r³/3 + r⁵/5 - ... is cut after r¹¹, below 1e-18 degrees.
func arctanDegrees(q float64) float64 {
	k := int(float64(q*16) + 0.5)
	c := float64(float64(k) / 16) // pinned: a division by a power of two is a product
	r := (q - c) / (1 + float64(q*c))
	s := float64(r * r)
	p := -1.0 / 11
	for _, t := range [...]float64{1.0 / 9, -1.0 / 7, 1.0 / 5, -1.0 / 3} {
		p = t + float64(s*p)
	}
	rad := r + float64(r*float64(s*p))
	return arctanTable[k] + float64(rad*degreesPerRadian)
}

const degreesPerRadian = 180 / math.Pi

// arctanTable holds atan(k/16) in degrees, rounded from 40 digits (TestArctanTable
// computes it again).
var arctanTable = [17]float64{
	0,
	3.576334374997351,
	7.125016348901798,
	10.619655276155134,
	14.036243467926479,
	17.35402463626132,
	20.556045219583464,
	23.629377730656817,
	26.56505117707799,
	29.357753542791272,
	32.005383208083494,
	34.5085229876684,
	36.86989764584402,
	39.0938588862295,
	41.18592516570965,
	43.1523897340054,
	45,
}
