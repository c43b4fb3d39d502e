// Package contour draws isolines through triangles and through rasters, and makes filled bands between them.
//
// In go a surface (package interp) or a raster (package grid), and levels; out come lines, or polygons, as plane shapes
// of orb.
//
//	zs := s.Z()
//	levels, err := contour.Every(decimal.MustParse("0.5"), decimal.Number{}, 5, slices.Min(zs), slices.Max(zs))
//	if err != nil {
//		return err // no multiple of 0.5 in the range, or far too many
//	}
//	lines, report, err := contour.Lines(ctx, s, levels, contour.Options{Shortest: 2})
//	for _, l := range lines {
//		fmt.Println(l.Level.Number, l.Level.Rank, l.Closed, l.Depression, l.Length(), l.Points)
//	}
//	bands, narrow, err := contour.Bands(ctx, s, levels, contour.Options{})
//
// # Conventions
//
// A value equal to a level counts as above it, as if the level were lower by an infinitesimal. Higher ground is on the
// left of a line: a closed line runs counter-clockwise round a hill, clockwise round a hollow (a depression). Closed
// lines start at their smallest point in (x, y) order and repeat it at the end. Lines come in order of level, then
// of their first and second point. Outer rings of polygons run counter-clockwise, holes clockwise. Coordinates are in the
// unit of the surface, levels in that of its values.
//
// A line along which the surface lies at the level over some width (a bench, a plateau) runs along its lower edge; along
// the outline it is drawn only if there is lower ground beside it.
//
// Levels are decimals: the k-th is computed in integers and rounded once (see Every and List, which also say which
// ones are index levels).
//
// In a raster, lines run through the squares between four nodes with values, with linear interpolation along their sides. A
// square with two opposite corners above and two below is a saddle: the corners above are joined if the mean of
// the four is at or above the level, decided exactly. Lines end at squares without data.
//
// # What is guaranteed
//
// Lines, with every sign taken of numbers as they are:
//
//   - By the sides that they pass, lines never cross, branch, or end inside the surface. Each side with one end above and
//     one below is passed once, in no other way.
//   - A point is the Crossing of a side, computed from its two ends in (x, y) order, bit for bit, whatever triangle,
//     worker or tile asks.
//   - There are no pieces without length and no spikes (there and back). A line of which nothing is left is
//     counted in the Report; one that was too short is listed there.
//   - The result is a function of the set of positions and values: neither the order of readings nor the number of
//     workers shows.
//
// In coordinates, lines touch where readings equal the level or rounding makes points equal, and may even cross by
// rounding. With M the largest coordinate, E the longest side of a triangle and e = 2^-53, a point is off by at
// most d = sqrt(2) (ulp(M)/2 + 4e E), and lines that are apart when exact can only cross when rounded if an end of one
// of the crossing segments lies within 2d of the other. (Moving the points from where they belong to where they are
// rounded, the first contact of two segments is at an end of one.) TestCrossingsAreRounding counts such cases.
//
// Bands: valid polygons by OGC simple features whose rings do not touch themselves; neighbours have the very same points on
// their common border; together they are the surface, without overlap or gap, their areas adding up to within
// (1e-12 x area) + (perimeter x ulp of the largest coordinate). Where lines cross by rounding, one of them is led through
// an end of the other (nodes.go). Surfaces with several rims (voids, trimmed edges) are no exception to any of this.
//
// With d as above but for E the width and height of the surface together, and what lines were led aside, borders are off by
// BandReport.Off, which has never been seen above 3d. A place further than that from the exact border of its band
// lies in a polygon of the band, and where a polygon is, its band is no further away than that (narrow.go says why). So a
// band, or a part of one, that is nowhere wider than 2 Off may have no polygon. A reading lies in or on a polygon of its
// band (for a value equal to a level, perhaps only of the one below), or it is listed in the BandReport: each is looked
// for, by exact signs. Where a border came out on the wrong side of a reading, it is led through the reading if that
// helps.
//
// Not checked: that values of a Surface or grid are what they are said to be.
//
// # Cost
//
// Lines: time O(vertices + triangles + pieces), a piece being a line's way through one triangle; a level visits
// only the triangles that it crosses. 4 bytes a vertex, 12 a crossed triangle and 4 a piece while working; 16 bytes a point of
// the result, of which EachLine needs only some millions at a time. On one core some 20 ns a triangle, to find what
// levels cross it, and 100 ns a piece; levels, and parts of large ones, are followed at the same time.
//
// Bands: O(n log n) for n points of lines and outline, some 0.5 microseconds a point where lines lie side by side as contours
// of ground do, 3 where every reading has a ring of its own, and 150 bytes a point.
//
// # Sources
//
// Equal counts as above is simulation of simplicity: H. Edelsbrunner and E. P. Mücke, ACM Trans. Graph. 9, 1990. Lists of
// what each level crosses stand in place of the interval tree of M. van Kreveld, Efficient methods for
// isoline extraction from a TIN, Int. J. Geogr. Inf. Syst. 10, 1996 (from memory). Squares: W. E. Lorensen and H. E. Cline,
// Marching cubes, SIGGRAPH 1987, in the plane. That rounded segments can be made to meet only at ends without losing
// their order: L. J. Guibas and D. H. Marimont, Rounding arrangements dynamically, Int. J. Comput. Geom. Appl. 8,
// 1998, whose rounding to a grid is not used, since points must stay what they are.
package contour
