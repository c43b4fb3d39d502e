// Package triangulate tells which three readings own each place of a survey. It
// makes the Delaunay triangulation of scattered positions, with breaklines and
// without, and finds places and lines in it. It knows positions only: values come
// beside a mesh, one for each vertex, so that many sets of values share one.
//
// In go positions ([]orb.Point), for breaklines also pairs of their indices
// (Segment). Out comes a Mesh: vertices (distinct positions), triangles of three
// half-edges, and for each input point its vertex. A Locator finds the triangle
// at a place and follows straight lines.
//
//	pts := []orb.Point{{0, 0}, {10, 0}, {10, 10}, {0, 10}, {4, 3}}
//	m, err := triangulate.Delaunay(ctx, pts, triangulate.Options{})
//	if err != nil {
//		return err // a *PositionError names the point
//	}
//	for _, c := range m.CanonicalTriangles(m.Rank()) {
//		fmt.Println(m.Position(c[0]), m.Position(c[1]), m.Position(c[2]))
//	}
//	at := m.Locator().Locate(orb.Point{4, 1})
//	fmt.Println(at.Place, m.Corners(at.Triangle))
//
// # Conventions
//
// x is east, y north; counter-clockwise is positive. The corners of a triangle run
// counter-clockwise, a half-edge has its triangle on the left, the outer rim runs
// counter-clockwise and has no twin. Vertices, half-edges and triangles are numbers
// of their own types from 0; what does not exist is NoVertex, NoHalfEdge,
// NoTriangle. Their order is coherent in space, which keeps walks short, and is
// neither the order of the input nor that of files: for the latter take Ordered,
// Rank and CanonicalTriangles.
//
// A coordinate is 0 or from 1e-60 to 1e60 in size. Others are refused with a
// *PositionError; as questions to a Locator they are outside. -0 is read as 0.
// There is no unit and no tolerance anywhere.
//
// A place on an edge or at a vertex has one owner: the triangle that holds the
// place moved by (e, e²) for an infinitesimal e > 0; if there is no surface there,
// the first triangle met turning counter-clockwise about the place.
//
// # Ties
//
// Four or more positions on one circle, every cell of a lattice for example, have
// several Delaunay triangulations. Here they have one. Each position is lifted to
// x² + y² plus an infinitesimal that is larger the later the position comes in
// (x, y) order, each infinitely larger than the one before, and the triangulation
// is the lower hull of the lifted positions. So four cocircular positions are cut
// as if the last of them in (x, y) order, lifted highest, were just outside the
// circle of the other three. On a lattice every diagonal runs along (1, -1).
// exact.InCircleTied is this rule.
//
// # What is guaranteed
//
//   - Every decision is the sign of the exact value for the coordinates as given.
//     Positions come out as they went in.
//   - The triangulation is a function of the set of positions, and of the set of
//     segments: not of their order, nor of the number of workers, nor of the
//     processor. Points at one place become one vertex.
//   - Every input has an answer: no point; one; two; all on one line (vertices
//     without triangles); any number of repeats; lattices and circles; sizes from
//     1e-60 to 1e60 in one set. The hull is exactly the convex hull, with every
//     vertex that lies on it.
//   - A finished mesh is never changed. It can be shared; each goroutine takes its
//     own Locator.
//   - No input makes Delaunay take time quadratic in the number of points, or memory
//     out of proportion to it.
//
// Check proves a mesh: links, orientation, convexity, counts, and the in-circle
// test of every inner edge without constraint. Tests call it after every step.
//
// Not checked: a Vertex, HalfEdge or Triangle that is not one of the mesh's (the
// methods panic with an index out of range, or answer about another one), and
// slices that the mesh lends, such as Positions, being changed.
//
// # Cost
//
// Delaunay takes time O(n log n) and, while it works, 92 bytes a point (up to
// 135 if nearly all are on the hull); the mesh keeps 68 bytes a point. A Locator
// adds 2 bytes a vertex once for the mesh, Around and the like 4. Locate takes
// expected time O(1) for evenly spread vertices, nearly all of it waiting for
// memory: whoever asks for many places sorts them along a curve first. Cross takes
// O(1) for each crossing.
//
// # Method
//
// The points are ordered along a kd-tree of alternating cuts by selection; halves
// are triangulated, at the same time if there are workers, and merged upwards from
// their common tangent. Halves are kept closed with ghost triangles between the
// hull and a vertex at infinity, which makes merging a matter of links among
// triangles that are there already: see build.go. Places are found by walking from
// a triangle nearby, taken from a coarse raster.
//
// Names here and in the papers:
//
//	here                        there
//	half-edge                   directed edge (Guibas & Stolfi)
//	Origin, Dest                Org, Dest
//	Twin                        Sym; their quad-edge also joins the dual, which is not kept here
//	Next, Prev                  Lnext, Lprev
//	Twin of Prev                Onext, the next edge counter-clockwise about the origin
//	Next of Twin                Oprev
//	base, left and right (top)  basel, lcand, rcand
//	ghost, vertex at infinity   the plane closed to a sphere
//	cut                         cell or strip boundary (Dwyer)
//	selectAround                SELECT (Floyd & Rivest)
//	ties                        simulation of simplicity (Edelsbrunner & Mücke), there of all
//	                            coordinates; symbolic perturbation of the lift (Devillers & Teillaud)
//	walk                        remembering stochastic walk (Devillers, Pion & Teillaud)
//
// # Papers
//
//   - L. Guibas and J. Stolfi, Primitives for the manipulation of general
//     subdivisions and the computation of Voronoi diagrams, ACM Trans. Graphics 4,
//     1985: merging.
//   - R. A. Dwyer, A faster divide-and-conquer algorithm for constructing Delaunay
//     triangulations, Algorithmica 2, 1987: alternating cuts.
//   - R. W. Floyd and R. L. Rivest, Expected time bounds for selection, Comm. ACM
//     18, 1975: finding the cuts.
//   - J. R. Shewchuk, Adaptive precision floating-point arithmetic and fast robust
//     geometric predicates, Discrete Comput. Geom. 18, 1997: signs, in package exact.
//   - H. Edelsbrunner and E. P. Mücke, Simulation of simplicity, ACM Trans. Graphics
//     9, 1990, and O. Devillers and M. Teillaud, Perturbations for Delaunay and
//     weighted Delaunay 3D triangulations, Comput. Geom. 44, 2011: ties.
//   - O. Devillers, S. Pion and M. Teillaud, Walking in a triangulation, Int. J.
//     Found. Comput. Sci. 13, 2002: finding places.
//   - D. T. Lee and A. K. Lin, Generalized Delaunay triangulation for planar graphs,
//     Discrete Comput. Geom. 1, 1986, and L. P. Chew, Constrained Delaunay
//     triangulations, Algorithmica 4, 1989: segments.
package triangulate
