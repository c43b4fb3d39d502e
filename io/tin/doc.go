// Package tin reads triangulated surfaces: the GeoJSON polygons or the two tables of
// text that isofacet triangles writes.
//
// In go bytes; out come points with heights, and triangles by three of them:
//
//	set, err := tin.ReadGeoJSON(ctx, r, "design.geojson")
//	if err != nil {
//		return err // design.geojson: feature 3: a polygon of 5 positions: expected ...
//	}
//	s, err := interp.FromTriangles(ctx, set.Points, set.Z, set.Triangles, triangulate.Options{})
//
// # What is read
//
// In GeoJSON every feature is a polygon of one ring with three corners, each with a
// height; corners at one place are one point and have one height. Properties are passed
// over. The labels coordinates_in, horizontal_datum and vertical_datum are kept.
//
// The tables are CSV as package linecsv writes them: vertices with the columns vertex,
// x, y and z, triangles with vertex_1, vertex_2 and vertex_3, in any order of columns,
// others passed over.
//
// # Guarantees
//
// Whatever is refused is an *Error with its place, before anything is made of it.
// Memory grows with what has been read. Not checked: whether triangles overlap; that
// shows when a surface is made of them.
package tin
