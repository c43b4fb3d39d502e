// Package flow works out where groundwater goes: gradients of heads with their
// uncertainty, from a plane through all wells and from every three, and lines of
// steepest descent over the planes of a surface.
//
// In go places and heads, or a surface through them (package interp), and the
// standard uncertainty of a head; out come gradients, directions, verdicts on
// whether they mean anything, and flow lines.
//
//	plane, err := flow.Fit(wells, heads, 0.01)
//	plane.Gradient.Size()         // head lost per length
//	plane.Gradient.Azimuth()      // where water goes, degrees clockwise from north
//	plane.Gradient.AzimuthSigma() // its standard uncertainty
//	line, ok := flow.NewTracer(s).Trace(orb.Point{120, 80})
//
// Conventions: x east, y north, heads in the unit of x and y for gradients without
// a unit; azimuths are grid azimuths. A gradient points uphill, water goes the other
// way. What is not known is NaN.
//
// # How a flow line runs
//
// It follows the steepest descent of each plane. Which way it goes where planes meet
// is decided by exact signs:
//
//	inside a triangle    straight down its plane; in a level one it ends (flat)
//	over an edge         on, if the plane beyond leads away from the edge
//	along an edge        down it, if the planes on both sides lead into it or along
//	                     it; if it is level the line ends (flat)
//	begun on a crest     down the steeper of the two planes
//	at a vertex          the steepest of all ways down: into a triangle whose plane
//	                     leads away from the vertex, or along an edge that both
//	                     sides drain into; without one it ends (pit, or flat where a
//	                     neighbour is as low)
//	at the outline       it ends where the plane leads out; along the outline it goes
//	                     only where the plane runs exactly so
//
// Of equally steep ways the one first clockwise from north is taken. Heights along a
// line never rise.
//
// # What is guaranteed
//
// The result depends on positions and heads alone: not on the order of input, the
// number of goroutines, or the processor. On one plane a line is straight to the
// rounding of places. On a triangulated smooth surface the planes lead in the right
// direction to within an angle in proportion to the edges, and so do the lines.
//
// Not checked: whether the aquifer conducts equally in all directions, which lines of
// steepest descent take for granted, and whether heads were measured at one time in
// one aquifer.
//
// # Why least squares by hand
//
// The normal equations of a plane are two by two. Their sums are accumulated exactly
// (exact.Sum) about the mean place, so that the order of wells does not matter, and
// solved with pinned products, so that the processor does not. A general solver
// promises neither; tests compare with gonum's QR decomposition.
//
// # Cost
//
// A fit takes some 100 ns a well. A flow line takes some 200 ns a triangle; a
// Tracer makes no index but that of a Locator.
//
// # Sources
//
// R. C. Heath, Basic Ground-Water Hydrology, USGS Water-Supply Paper 2220, 1983 (three
// wells; from memory). J. F. Devlin, Ground Water 41, 2003 (planes through many wells;
// from memory). The law of propagation of uncertainty: JCGM 100:2008, 5.
package flow
