package readings

import "github.com/paulmach/orb"

// A Block is some consecutive lines of a source: what Scan hands out.
type Block struct {
	File   int     // number of the source, from 0
	Layout *Layout // of the source

	// Points, Z and Lines are the readings that may be used, in the order of the
	// source, with the line each begins on.
	Points []orb.Point
	Z      []float64
	Lines  []uint32

	LeftOut []LeftOut
	// Refused are the bad lines. Reading that is not lenient keeps the first few of
	// each block; Counts.Refused is how many there are.
	Refused []*PositionError
	Counts  Counts // Used counts Points

	// DecimalsXY and DecimalsZ are the most decimals that a reading of the block
	// writes.
	DecimalsXY, DecimalsZ int

	texts [textSlots]texts
	raw   texts // whole records, for positions
	work  []any // of a reducer, as many as Points if it is kept

	// Under Options.part: the part of each of LeftOut and Refused, nil where it is not known.
	leftParts, refusedParts []*string
	decimals                [][2]uint8 // of each reading: coordinates, value

	warnings  []Warning // lines from 0 in the block
	lines     int       // line ends in the block
	fatal     *PositionError
	converted int // lines taken as Windows-1252
	first     int // the first of them, from 0 in the block
}

// Len returns how many readings the block has.
func (b *Block) Len() int { return len(b.Points) }

// Text returns the text that reading i of the block has in a kept role, empty if
// its source has no such column.
func (b *Block) Text(r Role, i int) string {
	if !r.Kept() || b.texts[textSlot[r]].len() == 0 {
		return ""
	}
	return b.texts[textSlot[r]].at(i)
}
