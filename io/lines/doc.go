// Package lines turns files into the edges that people draw: breaklines with heights, and
// the rings of boundaries and voids. It strings readings into lines as well, by the
// names that they carry or by their codes.
//
// In go rows of text (line, x, y and perhaps z), GeoJSON, or a set of readings;
// out comes a Set of Lines, each a chain of points with heights, that knows where
// every point was read, with warnings and counts.
//
//	breaks := []readings.Source{{Name: "breaks.csv", Open: open}}
//	set, err := lines.Breaklines(ctx, breaks, lines.Options{})
//	if err != nil {
//		return err // breaks.csv:2: line "toe" has no heights: expected ...
//	}
//	limit, err := lines.Rings(ctx, boundary, lines.Options{})
//	if err != nil {
//		return err // boundary.csv:16: ring "site" is not closed: gap 4.1 to its beginning, row 2: ...
//	}
//	region, err := triangulate.NewRegion(limit.Rings(), nil)
//
// # What is read
//
// A source is GeoJSON if its first character is a brace, and text otherwise.
//
// Text is read as package readings reads it: delimiter, decimal mark and header are
// detected, and the header's words are looked up. Rows with one name in the column
// line make one line, in the order of the file, whatever rows stand between them. A text
// with nothing but x, y, z and names of points is one line, named by the file.
// Without a header, four fields are line, x, y and z, three are line, x and y unless
// all are numbers; two numbers between blanks are x and y, three x, y and z.
//
// Of GeoJSON, every line and every ring of a polygon is a line, those of collections
// too; the rings of a polygon are closed lines when they serve as breaklines, and a line
// that serves as a boundary has to be closed. It is called by its property line, name or
// id, or by the feature's id. Points that have a property line are strung by it.
//
// Strung makes lines of readings, and a CodeTable says what their codes mean.
//
// # Conventions
//
// Vertices that repeat the position before are dropped and counted. A line is
// Closed if its last point repeats its first and it has three places. Rings keep their
// direction, and holes are rings like any other: what is inside is told by how
// many rings surround a place. Coordinates and heights are the doubles nearest to what is
// written, 0 or from 1e-60 to 1e60 in size.
//
// # Guarantees
//
// A breakline has a height at every vertex, and not all of them zero unless that is
// meant; a ring has heights everywhere or nowhere, is closed, and has three
// distinct places; a line has two. Anything else is refused with the file, the row
// or feature, what was seen and what was expected, the first few of all faults at a time. Warned of
// are zeros among heights, and a segment out of proportion to its line
// (LongFactor). The result does not depend on the number of workers, and no content
// of a file makes the package panic or hang; a source has at most a gibibyte.
//
// Not checked: whether lines cross each other or themselves, whether two lines
// have one height where they meet (package triangulate and its callers do), and whether they lie
// near the readings.
//
// # Cost
//
// Linear, but for sorting the lengths of a line that has a long segment. Text costs
// about as much again as parsing its rows; without heights at every row it is
// parsed twice. Memory: the source, and 28 bytes a vertex; 44 with names of points.
package lines
