// Package gen makes the sample data and its known answers.
//
// In: nothing. Out: Files, a map from file name to content. The same bytes
// come out on every processor: the random numbers are our own, every product
// that feeds a sum is pinned by a conversion, and of package math only
// functions that round alike everywhere decide a number of a file (Atan2 is
// used once, for azimuths rounded to six decimals).
//
// How the gravel pit is made: its ground is an expression of planes, joined
// by "the lower of" and "the higher of" (surface.go), which is evaluated at
// any place and can be taken apart into its flat pieces (pieces.go). The
// pieces give exact volumes, areas and the lines where they meet (lines.go).
// The stockpile is a truncated cone with closed formulas (pit.go). Shots are
// taken on that surface, with noise, and spoiled in stated ways (shots.go).
//
// How the landfill is made: heads are a plane per round, under the waste with
// a mound on top, read in wells to a hundredth of a foot (landfill.go).
//
// Conventions: inside this package u is east and v north in metres from the
// corner of the site; files carry the full coordinates. Counter-clockwise is
// positive. Cost: some milliseconds.
package gen
