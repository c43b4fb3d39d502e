package lines

import (
	"fmt"
	"slices"
)

// A string that jumps across the site was usually numbered or coded wrong in the
// field: two lines run under one name. Its jump shows as a segment out of
// proportion.

// A segment is long if it has more than LongFactor times the median length of its
// line's segments, of which there are at least LongLeast: fewer say nothing about
// what is usual. Common practice; a long straight between short chords of a
// curve is told as well.
const (
	LongFactor = 5
	LongLeast  = 4
)

// warnOfLong warns of the longest segment of a line if it is long.
func (c *checker) warnOfLong(l *Line) {
	n := len(l.Points) - 1
	if n < LongLeast {
		return
	}
	lengths := make([]float64, n)
	longest := 0
	for k := range lengths {
		lengths[k] = distance(l.Points[k], l.Points[k+1])
		if lengths[k] > lengths[longest] {
			longest = k
		}
	}
	length := lengths[longest]
	if length <= float64(LongFactor*slices.Min(lengths)) {
		return // as usual, and there is no need to sort
	}
	slices.Sort(lengths)
	median := lengths[n/2]
	if n%2 == 0 {
		median = (lengths[n/2-1] + lengths[n/2]) / 2
	}
	limit := float64(LongFactor * median)
	if length <= limit {
		return
	}
	more := ""
	if k := n - upper(lengths, limit) - 1; k > 0 {
		more = fmt.Sprintf("; %d more are longer than %d times that", k, LongFactor)
	}
	c.warn(l, longest, fmt.Sprintf("has a segment of %s from %s to %s, %s times the median of its %d segments, %s%s",
		rough(length), l.spot(longest), l.spot(longest+1), rough(length/median), n, rough(median), more))
}

// upper returns how many of the sorted values are at most limit.
func upper(sorted []float64, limit float64) int {
	k, _ := slices.BinarySearchFunc(sorted, limit, func(v, limit float64) int {
		if v <= limit {
			return -1
		}
		return 1
	})
	return k
}
