package contour

import (
	"runtime"

	"github.com/paulmach/orb"
)

// Options says what to leave out and how to work.
type Options struct {
	// Shortest leaves out lines shorter than this, in the unit of the coordinates, and lists them in the Report;
	// 0 keeps all. Bands take no notice of it.
	Shortest float64
	// PiecesMost refuses, before any work is done, lines with more pieces than this, a piece being a line's way
	// through one triangle or cell; 0 sets no limit. Lines have one point a piece and one more each,
	// 16 bytes a point.
	PiecesMost int64
	// Workers is the largest number of goroutines; 0 means one per CPU. It never changes a bit of the result.
	Workers int
	// Progress, when not nil, is told now and then, from one goroutine at a time, how many pieces are done.
	Progress func(done, total int64)

	unitPieces int64 // for tests: pieces to a unit of work; 0 means as many as are worth it
}

func (o Options) workers() int {
	if o.Workers > 0 {
		return o.Workers
	}
	return runtime.GOMAXPROCS(0)
}

// Report counts what came out, and tells what was left out.
type Report struct {
	Pieces int64 // triangles or cells that levels cross, one for each level
	Lines  int64
	Points int64 // of the lines
	// WithoutLength counts lines that shrank to nothing in coordinates: about a summit that just reaches the level, or
	// along a ridge at the level that is nowhere wide.
	WithoutLength int64
	// TooShort lists the lines that Options.Shortest left out, in output order.
	TooShort []Short
}

// Short is a line that was left out for being short.
type Short struct {
	Level  Level
	Length float64
	Closed bool
	Start  orb.Point // the line's first point
}
