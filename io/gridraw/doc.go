// Package gridraw writes rasters as plain binary numbers with a description beside them, and reads them back.
//
// In and out: a grid.Grid. The data file NAME holds one little-endian float32 or float64 a node, row by row from the
// north-western node on, and nothing else: any program that can read an array reads it. NAME.json says
// what the numbers are:
//
//	{
//	  "kind": "raw raster",
//	  "version": 1,
//	  "data": "surface.raw",
//	  "data_bytes": 48,
//	  "data_crc32c": "7d5c8e02",
//	  "type": "float64",
//	  "byte_order": "little-endian",
//	  "shape": [2, 3],
//	  "row_order": "north first",
//	  "origin": {"west": "100", "south": "50"},
//	  "cell": {"x": "1", "y": "1"},
//	  "values_at": "centres",
//	  "first_node": {"x": "100.5", "y": "51.5"},
//	  "no_data": "nan",
//	  "xy_unit": "m",
//	  "z_unit": "m",
//	  "crs": "EPSG:25832",
//	  "horizontal_datum": null,
//	  "vertical_datum": null,
//	  "show": "value"
//	}
//
//	var set outfile.Set
//	defer set.Abort()
//	info, err := gridraw.Write(&set, "surface.raw", outfile.Options{}, g, gridraw.Options{})
//	...
//	err = set.Commit()
//	...
//	back, err := gridraw.Read("surface.raw", gridraw.ReadOptions{})
//
// # Keys
//
// Every key is always there. Places are decimal text, so that no reader rounds them. shape is rows, columns. origin is the
// south-western corner: of the cells where values_at is "centres", of the nodes where it is "corners". first_node, the
// place of the first value in the data, follows from the others and is there for programs that need only it. no_data is "nan" or the
// number, exact in the type, that stands in the data for nodes without a value. Labels that were not stated are null. show says
// what the values are: "value", "slope" (a ratio), "downhill-azimuth" (degrees). data is the data file's name without folders; data_crc32c is its
// CRC-32C (Castagnoli) in eight hexadecimal digits. Later versions have a higher number in version, and readers refuse one that they do not know.
//
// # Guarantees
//
// The data file appears after its description (outfile.Options.RenameLast), and a reader refuses one without the other, a data
// file of another size, and a pair whose checksum differs: that is what a run that was cut short between the two leaves
// of an earlier pair. Bytes do not depend on the number of workers; NaN has one pattern (0x7ff8000000000000). Float64
// reads back bit for bit. Float32 rounds each value once, to nearest; Info says the largest loss and how many values lose more than
// Options.LossMax. Refused: a value beyond float32, an infinite one, a value that is stored as the no-data number. A
// reader refuses descriptions with unknown, missing or repeated keys; it takes no more memory than the data and ReadOptions.LimitBytes.
//
// # Cost
//
// Writing and reading are near the speed of copying memory; the checksum runs at some 10 GB/s.
package gridraw
