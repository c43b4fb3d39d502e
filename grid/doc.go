// Package grid holds rasters: a lattice of nodes in exact decimal places, and one value a node.
//
// In: a cell as a decimal number, an extent (of readings, or given), where in its cell a value stands; and a
// surface, to fill the lattice from. Out: a Grid of doubles with the northern row first, and its statistics.
//
//	cell := decimal.MustParse("0.5")
//	spec, err := grid.SpecFor(orb.Bound{Min: orb.Point{100.2, 50}, Max: orb.Point{180.7, 90}}, cell, cell, grid.Centres)
//	if err != nil {
//		return err
//	}
//	if err := spec.Check(2 << 30); err != nil {
//		return err // more than 2 GiB: the error holds a cell that fits
//	}
//	fmt.Println(spec.Cols, spec.Rows, spec.X(0), spec.Y(0)) // 162 80 100.25 89.75
//
// # Conventions
//
// x is east and y north. Row 0 is the northern row, in memory and in files; node (row, col) is value row*Cols + col. No-data is NaN.
// Edges of cells (Centres, the default) or nodes (Corners) lie on whole multiples of the cell, so that rasters of
// neighbouring jobs with one cell fit together.
//
// # Guarantees
//
// A node's coordinate is the double nearest to its exact decimal place, computed from integers with one rounding,
// so that it does not depend on the extent, the tile or the order in which nodes are visited. Coordinates rise strictly along
// a row and fall strictly down a column. Statistics do not depend on the number of workers. Not checked:
// whether labels are true.
//
// # Cost
//
// 8 bytes a node. Xs and Ys take a few nanoseconds a column or row; X and Y set up the arithmetic anew at each call (some 30 ns).
package grid
