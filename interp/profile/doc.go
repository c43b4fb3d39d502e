// Package profile reads a surface along lines: heights and grades at every place
// where a line meets an edge, a vertex, a rim or a void.
//
// In go a surface (package interp), a region that limits it if there is one, and
// alignments: lines in the plane with stations, the distance along them. Out come
// points in the order of the line, which describe the profile completely: between
// two of them the surface is straight, or missing.
//
//	line, err := profile.NewAlignment([]orb.Point{{0, 0}, {300, 0}}, 0)
//	p := profile.NewTracer(s, nil).Trace(line)
//	for _, gap := range p.Gaps() {
//		fmt.Println(gap.From, gap.To) // stations without surface
//	}
//	for _, x := range line.Sections([]float64{0, 25, 50}, 10, 10) {
//		fmt.Println(x.Station, x.Line.Points())
//	}
//
// Conventions: stations rise along the line. Offsets are distances square to the
// line, to the right of it positive, to the left negative. A grade is rise over run
// in the direction of the line. Where there is no surface the height is NaN.
//
// # What is guaranteed
//
// Which edges and vertices a line meets, and in what order, is decided by exact
// signs. At a vertex the height is the vertex's own, at an end or bend of the line
// it is that of a query, bit for bit. Where the line crosses an edge the place is
// triangulate.Intersection of edge and line, the exact place rounded once, and the
// height interp.ValueOnEdge there; both are the same from either side and for either
// direction of the line. A place of the profile between its points differs from a
// query at the rounded place by the slope times an ulp of the coordinates. Stations
// never fall along the line.
//
// A rim belongs to the surface: a line along the edge of a boundary or of a void has
// heights. Pieces without length are left out where two points round to one.
//
// # Cost
//
// Some 300 ns a crossing on one core where memory is near, most of it the exact
// place; 56 bytes a point. A region costs a glance at each of its edges a leg.
package profile
