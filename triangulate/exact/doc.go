// Package exact answers the geometric questions of a triangulation with the
// sign of the exact value, and adds numbers without any rounding.
//
// In go coordinates as float64, out come signs: Orient tells on which side of a
// line a point lies, InCircle whether a point lies in a circle through three
// others, InCircleTied the same with cocircular ties settled by coordinates.
// Area2 is the area of a triangle, right to the last places for the thinnest
// sliver. Sum adds numbers and products exactly and rounds once.
//
//	a, b := [2]float64{430000.25, 5600000.25}, [2]float64{430000.5, 5600000.25}
//	c, d := [2]float64{430000.5, 5600000.5}, [2]float64{430000.25, 5600000.5}
//	exact.Orient(a, b, c)          // +1: a, b, c turn left
//	exact.InCircle(a, b, c, d)     // 0: the four are on one circle
//	exact.InCircleTied(a, b, c, d) // +1 or -1, the same for every caller
//
//	var s exact.Sum
//	s.Add(1e100)
//	s.Add(1)
//	s.Add(-1e100)
//	s.Value() // 1
//
// Conventions: x east, y north; counter-clockwise is positive.
//
// # What is accepted
//
// A coordinate is 0 or from 1e-60 to 1e60 in size. 1e-60 is above 2^-200, so
// every accepted coordinate is a multiple of 2^-252; so are all differences, and
// products of four of them are multiples of 2^-1008, above the smallest float64
// (2^-1074): no part of an expansion underflows. Products of four coordinates
// stay below 1e245: nothing overflows. Within that range every sign is exact.
// Outside it (NaN and infinities included) the functions return without a panic
// but promise nothing; callers check coordinates once, at the door.
//
// # How
//
// Every question is put in stages, each tried only if the one before it could not
// decide.
//
//  1. Filter: the determinant in plain floating point against a bound of its
//     rounding error that is computed along with it. It decides nearly always,
//     except on gridded, cocircular and collinear data, where the value is zero.
//  2. Exact differences. The coordinates of a survey lie close together compared
//     with their distance from the origin, so that differences of coordinates are
//     exact (for numbers within a factor of two of each other: Sterbenz). What is
//     left is a product of two (Orient), or a small integer determinant
//     (InCircle), both decided without a loop.
//  3. Expansions: sums of float64 that do not overlap, whose largest term gives
//     the sign. They hold any accepted input.
//
// Nothing allocates. Products that feed a sum are written float64(a*b), so that
// no processor fuses them; products that must be exact use math.FMA.
//
// # Cost
//
// Measured by the benchmarks of this package: a filter takes a few nanoseconds,
// the integer stage of InCircle some ten more, the expansions hundreds to
// thousands. Sum.Add takes a few nanoseconds.
//
// # Papers
//
// J. R. Shewchuk, Adaptive precision floating-point arithmetic and fast robust
// geometric predicates, Discrete Comput. Geom. 18, 1997 (filters, expansions).
// H. Edelsbrunner and E. P. Mücke, Simulation of simplicity, ACM Trans. Graphics
// 9, 1990, and O. Devillers and M. Teillaud, Perturbations for Delaunay and
// weighted Delaunay 3D triangulations, Comput. Geom. 44, 2011 (ties).
// R. M. Neal, Fast exact summation using small and large superaccumulators,
// arXiv:1505.05571, 2015, and U. Kulisch (sums).
package exact
