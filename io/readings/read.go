package readings

import (
	"context"
	"math"
)

// Read reads all sources into memory: the readings to use, and where every other
// went. See Scan for how lines are read, Spots for readings at one place.
//
// The set of used places and values, with their ids and codes, depends on the set
// of lines, not on their order or on the number of workers, except under SpotFirst
// and SpotLast. If lines are equal in every kept column, it is open which of their
// line numbers is reported as used.
//
// Errors: *PositionError for a file that cannot be read, *BadLines for lines that
// cannot (unless Options.Lenient), *SpotError for readings at one place that may
// not be merged, *MixedError, *OptionError, ctx.Err(). No Set comes with an error.
//
// Cost: see the package comment. Memory: 28 bytes a reading and its texts with four
// bytes each, twice that while the columns are put together.
func Read(ctx context.Context, sources []Source, o Options) (*Set, error) {
	var blocks []*Block
	var refused []*PositionError
	bad, total := false, 0
	s, err := newScanner(ctx, sources, &o, needValue, func(b *Block) error {
		if total += b.Len(); total > math.MaxInt32 {
			return &PositionError{File: b.Layout.File, Kind: TooMany, What: "input", Expected: "at most 2,147,483,647 readings"}
		}
		bad = bad || len(b.Refused) > 0
		if bad && !o.Lenient {
			blocks = nil // only the bad lines will be told
			return nil
		}
		refused = append(refused, b.Refused...)
		blocks = append(blocks, b)
		return nil
	})
	if err != nil {
		return nil, err
	}
	summary, err := s.run(sources)
	if err != nil {
		return nil, err
	}
	set := &Set{Counts: summary.Counts, Layouts: summary.Layouts, Warnings: summary.Warnings, Refused: refused}
	c := collected{Set: set, blocks: blocks, o: &o, sources: sources}
	if err := c.mixed(); err != nil {
		return nil, err
	}
	c.joinNumbers()
	if err := c.mergeSpots(ctx); err != nil {
		return nil, err
	}
	c.joinTexts()
	return set, nil
}
