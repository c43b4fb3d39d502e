package readings

import (
	"context"
	"math"

	"github.com/paulmach/orb"
)

// Read reads all sources into memory: the readings to use, and where every
// other went. See Scan for how lines are read, Spots for readings at one place.
//
// The set of used places and values, with their ids and codes, depends on the
// set of lines, not on their order or on the number of workers, except under
// SpotFirst and SpotLast. If lines are equal in every kept column, it is open which of
// their line numbers is reported as used.
//
// Errors: *PositionError for a file that cannot be read, *BadLines for lines
// that cannot (unless Options.Lenient), *SpotError for readings at one place that
// may not be merged, *OptionError, ctx.Err(). No Set comes with an error.
//
// Cost: see the package comment. Memory: 28 bytes a reading and its texts with
// four bytes each, twice that while the columns are put together.
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
	set.join(blocks, len(sources))
	if err := set.mergeSpots(ctx, &o, sources); err != nil {
		return nil, err
	}
	return set, nil
}

// join puts the columns of the blocks together, and lets go of each block.
func (s *Set) join(blocks []*Block, sources int) {
	n, left := 0, 0
	var bytes, count [textSlots]int
	for _, b := range blocks {
		n += b.Len()
		left += len(b.LeftOut)
		for i := range b.texts {
			bytes[i] += len(b.texts[i].data)
			count[i] += b.texts[i].len()
		}
	}
	s.Points = make([]orb.Point, 0, n)
	s.Z = make([]float64, 0, n)
	s.Lines = make([]uint32, 0, n)
	s.LeftOut = make([]LeftOut, 0, left)
	for i := range s.texts {
		if count[i] > 0 {
			s.texts[i].grow(n, bytes[i])
		}
	}
	s.fileStart = make([]int, sources)
	file := 0
	for k, b := range blocks {
		for ; file <= b.File; file++ {
			s.fileStart[file] = len(s.Points)
		}
		s.Points = append(s.Points, b.Points...)
		s.Z = append(s.Z, b.Z...)
		s.Lines = append(s.Lines, b.Lines...)
		s.LeftOut = append(s.LeftOut, b.LeftOut...)
		s.DecimalsXY = max(s.DecimalsXY, b.DecimalsXY)
		s.DecimalsZ = max(s.DecimalsZ, b.DecimalsZ)
		for i := range s.texts {
			if count[i] > 0 {
				s.texts[i].pushBlock(&b.texts[i], b.Len())
			}
		}
		blocks[k] = nil
	}
	for ; file < sources; file++ {
		s.fileStart[file] = len(s.Points)
	}
}

// keep compacts the columns to the readings for which kept is true.
func (s *Set) keep(kept []bool, left int) {
	start := s.fileStart
	s.fileStart = make([]int, len(start))
	var texts [textSlots]texts
	for i := range texts {
		if s.texts[i].len() > 0 {
			texts[i].grow(left, len(s.texts[i].data))
		}
	}
	n, file := 0, 0
	for i, k := range kept {
		for file < len(start) && start[file] == i {
			s.fileStart[file] = n
			file++
		}
		if !k {
			continue
		}
		s.Points[n], s.Z[n], s.Lines[n] = s.Points[i], s.Z[i], s.Lines[i]
		for t := range texts {
			if s.texts[t].len() > 0 {
				texts[t].push(s.texts[t].at(i))
			}
		}
		n++
	}
	for ; file < len(start); file++ {
		s.fileStart[file] = n
	}
	s.Points, s.Z, s.Lines, s.texts = s.Points[:n], s.Z[:n], s.Lines[:n], texts
}
