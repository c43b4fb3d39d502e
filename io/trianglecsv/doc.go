// Package trianglecsv writes a triangulated surface as two comma-separated tables:
// its vertices, and its triangles by the numbers of their corners.
//
// In: vertices and triangles, one by one in the order of the output. Out:
//
//	vertex,id,x,y,z
//	1,P7,430000.00,5600000.00,101.250
//	2,P2,430000.00,5600010.00,103.500
//	3,"P4, old",430012.50,5600004.00,99.875
//
//	triangle,vertex_1,vertex_2,vertex_3,id_1,id_2,id_3,slope,downhill_azimuth
//	1,1,3,2,P7,"P4, old",P2,0.330605,103.241
//
//	err := trianglecsv.WriteVertices(w, len(order), func(i int) trianglecsv.Vertex {
//		v := order[i]
//		return trianglecsv.Vertex{ID: set.ID(int(inputs[v])), At: mesh.Position(v), Z: z[v]}
//	}, trianglecsv.Options{XYDecimals: 2, ZDecimals: 3})
//
// # Conventions
//
// Vertices and triangles are numbered from 1 in the order of their rows. Corners
// run counter-clockwise. Lines end with a line feed; a text that holds a comma, a
// quote or a line end stands between quotes, as in RFC 4180. A value that is not
// finite (the azimuth of a level triangle is NaN) is an empty field.
//
// # Guarantees
//
// The bytes do not depend on the number of workers. Not checked: whether numbers of
// corners are those of rows.
//
// # Cost
//
// Some 100 ns a row on one core with a few decimals; all cores are used. Two blocks
// of text a worker are held, nothing is allocated by row.
package trianglecsv
