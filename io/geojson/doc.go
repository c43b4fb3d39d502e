// Package geojson writes and reads GeoJSON (RFC 7946) as a stream of features: points, lines and polygons with their heights
// and properties.
//
// In and out: Features, each a shape of package orb, a height for each of its positions if it has heights, and properties in
// a fixed order.
//
//	w := geojson.NewWriter(out, geojson.Options{XYDecimals: 2, ZDecimals: 2, CoordinatesIn: "EPSG:25832"})
//	err := w.Write(&geojson.Feature{
//		Geometry:   geojson.Geometry{Shape: orb.LineString{{430000, 5600000}, {430010.5, 5600002}}, Z: []float64{431.5}},
//		Properties: []geojson.Property{{"level", geojson.Number(431.5)}, {"closed", geojson.Bool(false)}},
//	})
//	...
//	err = w.Close()
//	for _, warning := range w.Warnings() { ... } // the file says EPSG:25832, which the format does not know
//
//	r := geojson.NewReader(in, geojson.ReadOptions{File: "breaks.geojson"})
//	for f, err := r.Next(); err != io.EOF; f, err = r.Next() { ... }
//
// # Conventions
//
// Heights stand beside the shape: Geometry.Z has one a position in the order of the shape, or a single one for all of them;
// nil is none, NaN is none at this position. A property that is NaN is written as null. Rings are closed: the last position repeats the first.
//
// RFC 7946 knows one kind of coordinates, longitude and latitude of WGS 84. Others are written as they are; a member
// coordinates_in of the collection then names their system, and a Warning says so. A Reader reports that member, and the crs
// member of GeoJSON before 2016, and converts nothing.
//
// # What is written
//
// One line of text a feature, members always in the same order, UTF-8. Outer rings go counter-clockwise and holes clockwise, whatever way they
// come in: decided by the exact sign of the area of the coordinates as written, since rounding can turn a sliver over. Lines and
// rings that rounding leaves without length or area are written and counted in a Warning. Coordinates have the decimals asked for,
// zeros at the end included. Zero has no sign.
//
// # What is read
//
// A FeatureCollection, a Feature or a bare geometry, its members in any order. Positions have two or three numbers, mixed or not; more
// are counted in a Warning and left out. Coordinates are 0 or from 1e-60 to 1e60 in size. Properties keep
// their order; whole numbers stay whole, and objects, lists and integers beyond int64 stay text. Rings keep their direction. Shapes without
// a position, which RFC 7946 lets readers take as no geometry, become nil.
//
// Refused, with file, feature, line, column, what was read and what was expected: what is not JSON (NaN among it), types
// that RFC 7946 does not have, members in the wrong place or given twice, open rings, lines of one position, texts
// that are not UTF-8, and anything behind the object.
//
// # Guarantees
//
// The bytes written depend on the features and the Options alone, not on the number of workers or on batches. With
// shortest decimals, what is written reads back as the same features to the last bit, but for the sign of zero and the direction
// of rings. A Reader holds one buffer and one feature; limits in ReadOptions bound the latter. No content makes
// it panic, hang or take memory beyond them. Not checked: whether rings cross, and whether labels are true.
//
// # Cost
//
// Writing takes some 50 ns a vertex with three coordinates and three decimals, 160 with the shortest text, on one core; WriteBatch uses all of them.
// A Writer holds one feature as text, or two blocks a worker. Reading takes
// some 170 ns a vertex of long lines, and 400 where each feature has few vertices.
//
// Source: RFC 7946 (Butler, Daly, Doyle, Gillies, Hagen, Schaub 2016); RFC 8259 for JSON.
package geojson
