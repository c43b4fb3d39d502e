package readings

import (
	"slices"
	"sort"

	"github.com/paulmach/orb"
)

// collected is a Set in the making. The numbers are put together first, since
// repeated places are looked for among all of them; texts stay in their blocks
// until it is known which readings remain, and are then copied once.
type collected struct {
	*Set
	blocks  []*Block
	start   []int // first reading of each block, and how many there are
	o       *Options
	sources []Source
}

// joinNumbers puts points, values, lines and what was left out together.
func (c *collected) joinNumbers() {
	n, left := 0, 0
	c.fileStart = make([]int, len(c.sources))
	file := 0
	for _, b := range c.blocks {
		for ; file <= b.File; file++ {
			c.fileStart[file] = n
		}
		c.start = append(c.start, n)
		n += b.Len()
		left += len(b.LeftOut)
		c.DecimalsXY = max(c.DecimalsXY, b.DecimalsXY)
		c.DecimalsZ = max(c.DecimalsZ, b.DecimalsZ)
	}
	for ; file < len(c.sources); file++ {
		c.fileStart[file] = n
	}
	c.start = append(c.start, n)
	if c.o.Account {
		c.work = make([]any, n)
		for k, b := range c.blocks {
			copy(c.work[c.start[k]:], b.work)
			b.work = nil
		}
	}
	c.Points = make([]orb.Point, n)
	c.Z = make([]float64, n)
	c.Lines = make([]uint32, n)
	c.LeftOut = make([]LeftOut, 0, left)
	for _, b := range c.blocks {
		c.LeftOut = append(c.LeftOut, b.LeftOut...)
		b.LeftOut = nil
	}
	c.eachBlock(func(k int) {
		b, at := c.blocks[k], c.start[k]
		copy(c.Points[at:], b.Points)
		copy(c.Z[at:], b.Z)
		copy(c.Lines[at:], b.Lines)
		b.Points, b.Z, b.Lines = nil, nil, nil
	})
}

// eachBlock calls f for every block, for several at a time if that pays.
func (c *collected) eachBlock(f func(k int)) {
	parts := min(c.o.Workers, len(c.blocks)/blocksLeast+1)
	inParts(len(c.blocks), parts, func(_, from, to int) {
		for k := from; k < to; k++ {
			f(k)
		}
	})
}

// blocksLeast is how many blocks are worth a goroutine.
const blocksLeast = 8

// text returns the text of a slot that reading i has, from its block.
func (c *collected) text(slot int, i int32) string {
	k := sort.SearchInts(c.start, int(i)+1) - 1
	t := &c.blocks[k].texts[slot]
	if t.len() == 0 {
		return ""
	}
	return t.at(int(i) - c.start[k])
}

// remove takes readings out, given in rising order, texts included.
func (c *collected) remove(gone []int32) {
	c.eachBlock(func(k int) {
		from, _ := slices.BinarySearch(gone, int32(c.start[k]))
		to, _ := slices.BinarySearch(gone, int32(c.start[k+1]))
		if from == to {
			return
		}
		for slot := range c.blocks[k].texts {
			c.blocks[k].texts[slot].remove(gone[from:to], c.start[k])
		}
	})
	c.Points = removeFrom(c.Points, gone)
	c.Z = removeFrom(c.Z, gone)
	c.Lines = removeFrom(c.Lines, gone)
	if c.work != nil {
		c.work = removeFrom(c.work, gone)
	}
	for _, starts := range [][]int{c.start, c.fileStart} {
		for k, at := range starts {
			before, _ := slices.BinarySearch(gone, int32(at))
			starts[k] -= before
		}
	}
}

// removeFrom closes the gaps that the gone elements leave.
func removeFrom[T any](list []T, gone []int32) []T {
	n := int(gone[0])
	for k, i := range gone {
		next := len(list)
		if k+1 < len(gone) {
			next = int(gone[k+1])
		}
		n += copy(list[n:], list[i+1:next])
	}
	return list[:n]
}

// joinTexts puts the texts of the blocks together, and lets go of the blocks.
func (c *collected) joinTexts() {
	for slot := range textSlots {
		list := make([]*texts, len(c.blocks))
		some := false
		for k, b := range c.blocks {
			list[k] = &b.texts[slot]
			some = some || b.texts[slot].len() > 0
		}
		if some {
			c.texts[slot].join(list, c.start, c.eachBlock)
		}
	}
	c.blocks = nil
}
