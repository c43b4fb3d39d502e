// Package wells turns depths to water into heads.
//
// In go a table of wells and rows of depths, out come readings: the head at each
// well with its arithmetic, or the reason why there is none. A Reducer is given to
// readings.Read, which does everything else as for any other reading.
//
//	table, err := wells.ReadTable(src, readings.Declared{})
//	if err != nil {
//		return err
//	}
//	set, err := readings.Read(ctx, gauging, readings.Options{Reduce: &wells.Reducer{Table: table, Statuses: wells.Usual()}})
//
// # The arithmetic
//
//	head = measuring point - depth to water + thickness of product x its specific gravity
//
// in decimal numbers, exactly, and then rounded once to a double. The thickness is a
// column of its own, or the depth to water less the depth to product: what floats on
// the water presses it down by its weight, and the head is what the water would
// stand at without it (San Joaquin County, Environmental Health Department, public
// monitoring files: 0.32 ft x 0.83 = 0.27 ft).
//
// # The table of wells
//
// A row a well, by its id, with any of the roles x, y, measuring-point, ground,
// screen-top, screen-bottom, zone, specific-gravity; all heights are elevations in the
// unit and datum of the measuring point. A well may have several rows with unlike
// dates in the role valid-from, since casings are cut, extended and surveyed anew:
// the row with the latest date not after the reading counts, a row without a date
// from the beginning of time. What that row leaves empty, but the measuring point,
// is taken from the row before it, or else from the first that has it.
//
// # What is no level
//
// Words of the status, or in the place of a depth, say why a well has no level: see
// Meaning and Usual. A dry well, a depth such as >25.0 and a level below the screen's
// bottom say that the head lies below some elevation: a readings.Check, which is
// compared with the surface and never becomes a part of it. An unknown status is an
// error: whether a level counts is not guessed.
//
// Dates are 2024-03-12, 2024-03-12T08:10 (or with a blank), with seconds and an offset
// from Greenwich if need be, or 12.03.2024; 03/12/2024 could be two dates and is an
// error. A date alone is the beginning of its day; times without an offset are
// compared as they are written.
//
// # Cost
//
// Some microseconds a row, for the rational arithmetic. Memory: the table.
package wells
