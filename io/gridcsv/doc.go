// Package gridcsv writes rasters as comma-separated text and reads them back.
//
// In and out: a grid.Grid, in one of two layouts. Matrix has the x of each column in its first row, and then
// a row of the raster a line, y first, the northern row on top:
//
//	y\x,100.5,101.5,102.5
//	51.5,12.25,12.5,
//	50.5,12,12.125,12.25
//
// List has a node a line, west to east, north to south, and leaves nodes without a value out:
//
//	x,y,z
//	100.5,51.5,12.25
//	101.5,51.5,12.5
//	100.5,50.5,12
//	101.5,50.5,12.125
//	102.5,50.5,12.25
//
//	f, err := outfile.Create("surface.csv", outfile.Options{})
//	...
//	err = gridcsv.Write(f, g, gridcsv.Options{Layout: gridcsv.List, CoordinateDecimals: 1, ValueDecimals: 3})
//	...
//	back, err := gridcsv.Read(file, gridcsv.ReadOptions{Name: "surface.csv"})
//
// # Conventions
//
// Lines end with a line feed; a reader takes CR LF, a byte order mark and blank lines as well. Numbers have a decimal point. Coordinates
// and values have their own number of decimals, or as many as it takes to read back the same doubles. In a
// matrix a node without a value is an empty field, or the number of Options.NoData. There are no quotes, units or labels in
// these files.
//
// # Reading a lattice back
//
// The places of nodes are read as decimals, so that the lattice comes back exactly if its places were written in full. They
// must be evenly spaced: each step in a matrix is the same; in a list the smallest step along an axis is the cell and every other
// is a whole number of them. Columns and rows that a list does not mention at all do not come back; ones between others come
// back as no data. A file does not say where in its cell a value stands: nodes on whole multiples of the cell are taken
// for corners, others for centres. A single column or row has no step: its cell is that of the other
// axis, unless told in ReadOptions.
//
// # Guarantees
//
// The bytes written do not depend on the number of workers. With all decimals, writing and reading back gives the same
// grid to the last bit (a negative zero loses its sign). Refused, with a *WriteError: a value that reads like NoData, an
// infinite value, and so few decimals that neighbouring nodes would have one place. A reader refuses, with file, line, column, what was read and
// what was expected: text that is no number, rows of unlike length, uneven steps, a node named twice, and
// lattices beyond the limit in bytes. No content makes it panic or take memory beyond that limit and a few
// times the size of the file.
//
// # Cost
//
// Writing with decimals takes some 20 ns a node on one core, in full 80; reading a matrix 40 to 80, a list 80 to 130. Both run on all
// cores. A reader holds the whole text.
package gridcsv
