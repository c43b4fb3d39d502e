// Package interp reads values off a surface of planes over a triangulation.
//
// In go a mesh (package triangulate) and one value per vertex, or per input
// point; out come values at places, weights, gradients, areas and volumes. One
// mesh can carry many sets of values: a Surface only refers to it.
//
//	m, err := triangulate.Delaunay(ctx, points, triangulate.Options{})
//	s, err := interp.FromInputs(m, heights)
//	sample := s.Sampler().At(orb.Point{430010, 5600020})
//	sample.Z                         // NaN outside
//	sample.Location.Place            // Inside, OnEdge, OnVertex or Outside
//	samples, err := s.Query(ctx, places, 0)
//	gx, gy := s.Gradient(sample.Location.Triangle)
//	interp.Slope(gx, gy)             // rise over run
//	interp.DownhillAzimuth(gx, gy)   // degrees clockwise from north
//	s.VolumeAbove(105)
//
//	left, err := s.LeaveOneOut(ctx, 0)
//	left.Residual(v)                 // how far v lies above what the others expect
//
// Conventions: x east, y north, z up; heights in their own unit, areas in that of
// x times y, volumes in that of x times y times z. Outside the outline there is no
// value: NaN. A corner whose value equals a level counts as above it.
//
// # Which method when
//
//	method   continuity                 at the readings  outside     cost of a value
//	planar   continuous, bends at edges exact, bit for   no value    one location and
//	                                    bit                          some ten operations
//
// The planar method never leaves the range of the three readings around a place,
// needs no choice of parameters, and its volumes are exact integrals.
//
// # What is guaranteed
//
// At a vertex the value is the vertex's own, bit for bit. On an edge only its two
// ends matter. Inside a triangle the value lies in the range of its corners. Which
// case holds is decided by exact signs. All depend on positions and values alone:
// not on the order of input, nor on the number of goroutines.
//
// With Z the largest |z| of the corners concerned, R their range and e = 2^-53,
// a value is off by at most
//
//	on an edge   0.51 ulp of Z
//	inside       2e Z + 4e R: 2.4 ulp of Z where R is at most a tenth of Z, 10 ulp in
//	             the worst case (heights of opposite sign); 4.7e Z in gentle triangles,
//	             which are neither slivers nor steep for their height
//
// (derivations in value.go and plane.go). Measured over a million cases each, with
// slivers and millimetres at 5e6 among the triangles (TestErrorOnEdge,
// TestErrorInside with -long): 0.5 ulp on edges; inside 1.0 ulp for heights of
// ground and in gentle triangles, 6.5 ulp for the worst kind of heights, some 2 and some -2.
//
// Each component of a gradient has a relative error below 2^-49. Areas and volumes
// are sums of terms of a triangle each, accumulated exactly and rounded once; the
// plan area is the exact one, rounded.
//
// Accepted are values of 0 or from 1e-60 to 1e60 in size, as for coordinates.
//
// # Cost
//
// A Surface takes 8 bytes a vertex (the values, not copied). A Sampler finds a place
// in constant time where vertices are evenly spread, but in random order each place
// waits for memory. Query visits places along a curve instead, walking from each to
// the next, which is several times faster. A Plane gives a value every few
// nanoseconds. Areas and volumes take some fifty nanoseconds a triangle on one core
// and use all cores.
package interp
