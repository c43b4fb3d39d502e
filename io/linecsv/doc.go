// Package linecsv writes isolines, bands and triangles as comma-separated text, a vertex or a triangle a row.
//
// In: lines, polygons, vertices or triangles, one by one or in batches. Out: a table for a spreadsheet or a script.
//
//	w := linecsv.NewLines(out, linecsv.Options{XYDecimals: 2})
//	err := w.Write(&linecsv.Line{Level: 431.5, Rank: "index", Points: orb.LineString{{10, 20}, {12.5, 21}}})
//	...
//	err = w.Close()
//
// # The tables
//
// Each begins with a row of names. Isolines, a vertex a row; a closed line repeats its first vertex:
//
//	line,level,rank,closed,x,y
//	1,431.5,index,false,10.00,20.00
//	1,431.5,index,false,12.50,21.00
//
// Bands, a vertex a row; ring 1 of a polygon is its outer ring, higher ones are holes, and each repeats its first vertex. lower or upper is
// empty where the band is open:
//
//	polygon,ring,lower,upper,x,y
//	1,1,430,,10.00,20.00
//
// Vertices of the surface, with the reading that each came from, and triangles by their corners, counter-clockwise. The azimuth
// in which water would run is empty on a flat:
//
//	vertex,reading,x,y,z                triangle,vertex_1,vertex_2,vertex_3,slope,downhill_azimuth
//	1,P17,10.00,20.00,431.250           1,1,2,3,0.05,270
//
// # Conventions
//
// Lines, polygons, vertices and triangles are numbered from 1 in the order in which they come. Lines of text end with a line feed; a field with a comma, a quote or
// a line break is put into quotes (RFC 4180). Numbers have a decimal point; coordinates, heights, slopes and azimuths have the
// decimals asked for, levels the shortest text. Zero has no sign. There are no units or labels in these files.
//
// # Guarantees
//
// The bytes depend on what is written and on the Options alone, not on the number of workers or on batches. With shortest
// decimals every number reads back to the same double. A value that is not finite is refused with a *WriteError,
// never written. Nothing is turned round, rounded twice or left out. Not checked: whether rings cross, and that triangles name
// vertices that exist.
//
// # Cost
//
// Some 40 ns a row with decimals and 130 with the shortest text, on one core; WriteBatch uses all of them. A Writer holds
// one line or polygon as text, or two blocks a worker.
package linecsv
