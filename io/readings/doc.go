// Package readings turns field text into readings: places, values, names and codes,
// with an account of every line that did not become one.
//
// In go files or streams of delimited text, out comes a Set: the places and values
// in columns that triangulate and interp take as they are, and beside them ids,
// codes and line numbers, what was merged, left out and refused, and how each file
// was read.
//
//	f := readings.Source{Name: "pit.csv", Open: func() (io.ReadCloser, error) { return os.Open("pit.csv") }}
//	set, err := readings.Read(ctx, []readings.Source{f}, readings.Options{})
//	if err != nil {
//		return err // pit.csv:1208:14: z "12,4": expected a number such as 12.4
//	}
//	mesh, err := triangulate.Delaunay(ctx, set.Points, triangulate.Options{})
//	if err != nil {
//		return err
//	}
//	surface, err := interp.FromInputs(mesh, set.Z)
//
// Scan hands the same readings out in blocks, for input that does not fit into
// memory. ReadPositions reads places to be asked about, ReadExclusions the readings
// to leave out and why.
//
// # What is read
//
// Lines of fields between commas, semicolons, tabs, bars, blanks or another
// character, ended by LF, CRLF or CR; UTF-8, UTF-16 with a byte order mark, and
// lines that are not UTF-8 as Windows-1252, with a warning. Quotes as in RFC 4180,
// line ends inside them included. Numbers with a decimal point or comma and perhaps
// an exponent. Delimiter, decimal mark, comment mark and header are detected in
// each file unless they are declared, and told in its Layout.
//
// Which column is what comes from a list (ParseColumns) or from the header, whose
// names are looked up in a table of trade words ("Northing (m)", "elev_ft",
// "PointID"; see words.go). Without a header, lines of three numbers between blanks
// are x y z; anything else has to be declared. A water level is asked about: it may
// be a depth or an elevation. A declared role that is not used here is an error.
//
// Rows that hold a depth and no value, or no place, become readings by way of a
// Reducer (see package wells), or of DepthFrom. A Transform leads places and values
// to another unit or grid. OneOf refuses readings of several rounds, or heads of
// several zones, at once. Account keeps what was read of every row that is not used.
// ReadRoles and ReadWords read the small tables that stand beside the readings.
//
// # Conventions
//
// x is east, y north, z up. Coordinates and values are 0 or from 1e-60 to 1e60 in
// size; minus zero is read as zero; nothing is shifted or rounded beyond the one
// rounding from decimal to double. Lines and columns count from 1, columns in
// characters. A record of several lines has the number of its first.
//
// Lines without anything, or with delimiters alone, are no readings.
//
// # Guarantees
//
// Every number is the double nearest to what is written. Used + merged + left out +
// refused = read. The set of used readings is free of the order of lines and the
// number of workers, but for the rules first and last. Readings of one place are
// averaged exactly and rounded once. No input makes the package panic or hang:
// lines have less than a mebibyte, quoted fields 64 kibibytes, kept texts 1,024
// bytes.
//
// Not checked: whether x and y are exchanged, or degrees; whether values are plausible.
//
// # Cost
//
// About a hundred nanoseconds a line, shared among the workers until reading the
// bytes is what takes the time (see the benchmarks, which show that floor). Lines
// with quotes, exponents or missing marks take some times as long. Repeated places
// are found in a fraction of that; with Spots.Within it takes a triangulation.
// Memory: 28 bytes a reading, its texts, and four bytes a text.
//
// # Papers
//
// W. D. Clinger, How to read floating point numbers accurately, PLDI 1990: the
// exact short way. F. P. Preparata and M. I. Shamos, Computational geometry,
// Springer 1985: the shortest tree is part of the Delaunay triangulation.
package readings
