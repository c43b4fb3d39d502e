// Package advice looks at a triangulated set of readings and suggests settings: a
// cell for rasters, an interval for isolines, a limit for the length of edges, how near
// to a line a place counts as on it.
//
//	spacing := advice.Spacing(mesh, workers)         // 4.31
//	cell := advice.Cell(spacing)                     // 2, "..."
//	interval := advice.Interval(surface.Z())         // 0.5, "..."
//	edge := advice.MaxEdge(spacing)                  // 10, "..."
//	touch := advice.TouchWithin(points, segments, 3) // 0.0005, "..."
//	share := advice.LongOutline(mesh, edge.Value.Float64()) // 0.07
//
// # Conventions
//
// The spacing is the median length of the edges of the triangulation: on a square
// lattice its step, elsewhere the distance to a usual neighbour. Long edges round
// a concave outline, or between two dense parts, do not move it.
//
// Suggestions are 1, 2 or 5 times a power of ten. They are suggestions: nothing
// uses one unless the user asks for it.
//
// # Guarantees
//
// Every number is a function of the set of positions and values: neither the order
// of the readings nor the number of threads changes a bit of it.
//
// # Cost
//
// Spacing passes over the triangles twice, LongOutline over the half-edges once and over
// the triangles that it takes away; BenchmarkSpacing measures both. Neither keeps
// more than a byte a triangle.
//
// The rules of thumb (a cell of a half to a third of the spacing, five to ten
// isolines across a site, edges of at most two to five times the spacing) are
// common practice.
package advice
