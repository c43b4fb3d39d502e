package readings

import (
	"sort"

	"github.com/paulmach/orb"
)

// A Set is what Read returns: the readings to be used, in columns, in the order of
// the input, and an account of every other.
//
// Used + merged + left out + refused = read.
type Set struct {
	// Points and Z are the places and values of the used readings; Lines the line
	// numbers they were read from. Under SpotMean a value is the mean of its place,
	// and id, code and line are those of the place's smallest reading by (x, y, z,
	// id, code, ...).
	Points []orb.Point
	Z      []float64
	Lines  []uint32

	Counts  Counts
	Merged  []Merged
	LeftOut []LeftOut
	// Refused are the bad lines of lenient reading.
	Refused []*PositionError

	// SpotCount is at how many places several readings were merged, SpotSpread the
	// largest spread of z among them.
	SpotCount  int
	SpotSpread float64

	// DecimalsXY and DecimalsZ are the most decimals that a used or merged reading
	// writes.
	DecimalsXY, DecimalsZ int

	// Layouts tell how each source was read.
	Layouts  []Layout
	Warnings []Warning

	fileStart []int // first used reading of each source
	texts     [textSlots]texts
	work      []any
}

// Counts account for lines.
type Counts struct {
	Read, Used, Merged, LeftOut, Refused int

	// Lines that hold no reading: Headers, lines that begin with the comment mark,
	// lines without anything (or delimiters alone), and rows skipped at the top.
	Headers, Comments, BlankLines, Skipped int
}

func (c *Counts) add(o *Counts) {
	c.Read += o.Read
	c.Used += o.Used
	c.Merged += o.Merged
	c.LeftOut += o.LeftOut
	c.Refused += o.Refused
	c.Headers += o.Headers
	c.Comments += o.Comments
	c.BlankLines += o.BlankLines
	c.Skipped += o.Skipped
}

// A Merged reading gave its place to another.
type Merged struct {
	File  int32 // number of the source, from 0
	Line  uint32
	Into  int // the used reading that stands for it
	Point orb.Point
	Z     float64
	ID    string
	// Code and LineName are its texts in the roles code and line: a line through it
	// runs through the reading that stands for it.
	Code, LineName string
	// Row is the rest of it, if Options.Account is set.
	Row *KeptRow
}

// A LeftOut reading is readable but not used.
type LeftOut struct {
	File   int32
	Line   uint32
	ID     string
	Reason string
	Check  *Check   // what it says of the surface all the same, if anything
	Row    *KeptRow // if Options.Account is set
}

// A Warning is something that a person should know and that stopped nothing.
type Warning struct {
	File string
	Line int // 0: the whole file
	Text string
}

func (w Warning) String() string {
	e := PositionError{File: w.File, Line: w.Line, What: w.Text}
	return e.Error()
}

// Len returns how many readings are used.
func (s *Set) Len() int { return len(s.Points) }

// Has reports whether any source has a column with a text role.
func (s *Set) Has(r Role) bool { return r.Kept() && s.texts[textSlot[r]].len() > 0 }

// Text returns the text that used reading i has in a kept role; empty where its
// source has no such column.
func (s *Set) Text(r Role, i int) string {
	if !s.Has(r) {
		return ""
	}
	return s.texts[textSlot[r]].at(i)
}

// Work returns the work of the Reducer that made used reading i; nil without one, or
// without Options.Account.
func (s *Set) Work(i int) any {
	if s.work == nil {
		return nil
	}
	return s.work[i]
}

// ID returns the name of used reading i, empty if it has none.
func (s *Set) ID(i int) string { return s.Text(ID, i) }

// Source returns the number of the source that used reading i came from.
func (s *Set) Source(i int) int {
	return sort.SearchInts(s.fileStart, i+1) - 1
}

// Heads reports whether the values of any source are heads.
func (s *Set) Heads() bool {
	for i := range s.Layouts {
		if s.Layouts[i].Heads {
			return true
		}
	}
	return false
}
