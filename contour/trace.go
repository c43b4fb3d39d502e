package contour

import (
	"sync/atomic"

	"github.com/paulmach/orb"
)

// A line passes from triangle to triangle (or cell to cell; "cell" stands for both here) through the sides that the
// level crosses. With a value equal to the level counted as above it, every end of a side is above or below, and
//
//	 a is above, b below: the line enters         b
//	 the cell through a→b (cell on the left)     / \
//	 and leaves through the next or another     / . \   <- higher ground on the left
//	 side that runs from below to above.       a-----c
//
// A triangle is passed once or not at all, a cell with four sides twice at most; the side through which a line leaves
// is, seen from the neighbour, one through which it enters. So each side is passed by at most one line of a level,
// and following the twins never branches: it comes to the outline or back to where it began.
//
// A passage names a side through which a line enters a cell. Lines are followed in fragments, each from some passage
// forward, claiming the passages on the way, until the outline or a passage that is claimed already. As every
// fragment runs forward, that one can only be the first of a fragment: of this one, if the line is closed and
// nobody else works on it, or of one that another goroutine (or an earlier round) began further on. So fragments join end
// to start, however the work was divided.

// passage names a side, as seen from the cell that a line enters through it.
type passage int64

// noPassage: on the outline, where the line ends.
const noPassage passage = -1

// fragment is a part of a line from one passage to before another.
type fragment struct {
	first, after passage
	points       []orb.Point // where it enters each of its cells, and where it leaves the last one if after is noPassage
}

// marks holds one bit for every passage that can be claimed.
type marks struct {
	bits   []uint64
	shared bool // among goroutines
}

func newMarks(slots int64, shared bool) marks {
	return marks{make([]uint64, (slots+63)/64), shared}
}

// claim marks a slot and reports whether it was free.
func (m *marks) claim(slot int64) bool {
	word, bit := &m.bits[slot>>6], uint64(1)<<(slot&63)
	if m.shared {
		return atomic.OrUint64(word, bit)&bit == 0
	}
	if *word&bit != 0 {
		return false
	}
	*word |= bit
	return true
}

// free clears the word that slot is in.
func (m *marks) free(slot int64) { m.bits[slot>>6] = 0 }

// arena hands out room for the points of lines, one line at a time, many lines to an allocation.
type arena struct {
	room []orb.Point // free, of length 0
}

// arenaPoints is how many points are allocated at a time.
const arenaPoints = 1 << 14

// begin returns an empty slice to append to.
func (a *arena) begin() []orb.Point {
	if cap(a.room) < 64 {
		a.room = make([]orb.Point, 0, arenaPoints)
	}
	return a.room
}

// keep takes what begin gave, with points appended, out of the free room and returns it.
func (a *arena) keep(points []orb.Point) []orb.Point {
	n := len(points)
	// The points may have grown out of the room: then what the growth left over is room as well.
	if rest := points[n:]; cap(rest) > 64 || cap(points) == cap(a.room) {
		a.room = rest
	}
	return points[:n:n]
}

// span is the levels that cross a cell or a side: the numbers lo <= k < hi.
type span struct{ lo, hi int32 }

// source is what lines are followed through: the triangles of a surface or the cells of a raster.
type source interface {
	// cells returns the number of cells, slots that of bits to claim passages with.
	cells() int
	slots() int64
	// rank tells, with the levels' values rising, which of them every vertex or node is above.
	rank(zs []float64, workers int)
	// spans stores the spans of the cells from number first on, and appends to outline the passages on the outline at
	// which some level's line begins.
	spans(dst []span, first int, outline *[]passage)
	// side returns the levels whose lines enter at p.
	side(p passage) span
	// begins reports whether p lies on the outline.
	begins(p passage) bool
	// follow follows the lines of level k, with value z, from the passages in starts and from those of the cells in seeds,
	// as far as they are not claimed yet, and gives each fragment to use.
	follow(k int, z float64, starts []passage, seeds []int32, m *marks, points *arena, use func(fragment))
	// outline calls use for every side of the outline, from a to b with the surface on its left, with the ranks of its ends
	// and the place where level k crosses it.
	outline(zs []float64, use func(a, b orb.Point, ra, rb int, at func(k int) orb.Point) error) error
	// near returns the numbers of the vertices or nodes to which a line or the rim may come within some distance, after rank.
	near(within float64, zs []float64, workers int) []int32
	// reading returns the place and the value of one of them.
	reading(v int32) (orb.Point, float64)
	// release frees the marks that following through seeds left.
	release(seeds []int32, m *marks)
}
