package triangulate

import (
	"fmt"
	"slices"
	"sort"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// selfCrossing finds the first vertex of a closed ring at whose edge, or at which,
// the ring crosses itself: two edges cross between their ends, or two passes
// through one place change sides. Touching is not crossing.
func selfCrossing(ring orb.Ring) *RingError {
	// Without repeats in a row every vertex has a way in and a way out.
	var vs []orb.Point
	var number []int
	for i, p := range ring[:len(ring)-1] {
		if len(vs) == 0 || p != vs[len(vs)-1] {
			vs, number = append(vs, p), append(number, i)
		}
	}
	for len(vs) > 1 && vs[len(vs)-1] == vs[0] {
		vs, number = vs[:len(vs)-1], number[:len(number)-1]
	}
	n := len(vs)
	segs := make([]Segment, n)
	for i := range segs {
		segs[i] = Segment{int32(i), int32((i + 1) % n)}
	}
	var first *RingError
	note := func(i, j int, at orb.Point) {
		i, j = min(number[i], number[j]), max(number[i], number[j])
		if first == nil || i < first.Vertex {
			first = &RingError{Vertex: i, At: at,
				Reason: fmt.Sprintf("the ring crosses itself there, between its edges from vertices %d and %d: expected one that does not", i+1, j+1)}
		}
	}
	f := newCrossingFinder(vs, segs)
	f.each(func(i, j int32) {
		at, _, _ := f.intersection(i, j)
		note(int(i), int(j), at)
	})
	for i, a := range vs { // passes through edges
		b := vs[(i+1)%n]
		for _, v := range f.pointsWithin(a, b) {
			if exact.Orient(a, b, vs[v]) == 0 && changesSides(vs[v], vs[(v+n-1)%n], vs[(v+1)%n], a, b) {
				note(i, v, vs[v])
			}
		}
	}
	at := map[orb.Point][]int{}
	for i, p := range vs { // passes through vertices
		for _, j := range at[p] {
			if changesSides(p, vs[(i+n-1)%n], vs[(i+1)%n], vs[(j+n-1)%n], vs[(j+1)%n]) {
				note(i, j, p)
			}
		}
		at[p] = append(at[p], i)
	}
	return first
}

// pointsWithin lists the points in the box of a and b, those two left out.
func (f *crossingFinder) pointsWithin(a, b orb.Point) []int {
	if f.byX == nil {
		f.byX = make([]int, len(f.pts))
		for i := range f.byX {
			f.byX[i] = i
		}
		slices.SortFunc(f.byX, func(i, j int) int { return exact.CompareXY(f.pts[i], f.pts[j]) })
	}
	xMin, xMax := min(a[0], b[0]), max(a[0], b[0])
	yMin, yMax := min(a[1], b[1]), max(a[1], b[1])
	var in []int
	k := sort.Search(len(f.byX), func(k int) bool { return f.pts[f.byX[k]][0] >= xMin })
	for ; k < len(f.byX); k++ {
		p := f.pts[f.byX[k]]
		if p[0] > xMax {
			break
		}
		if p[1] >= yMin && p[1] <= yMax && p != a && p != b {
			in = append(in, f.byX[k])
		}
	}
	return in
}

// changesSides tells whether of two ways through p, from a to b and from c to d,
// the second changes from one side of the first to the other. Ways that run
// along each other at p do not.
func changesSides(p, a, b, c, d orb.Point) bool {
	return sideOfWay(p, a, b, c)*sideOfWay(p, a, b, d) < 0
}

// sideOfWay is +1 if the direction from p to q lies left of the way from a
// through p to b, -1 if right, 0 on it.
func sideOfWay(p, a, b, q orb.Point) int {
	toA, toB, turn := exact.Orient(p, a, q), exact.Orient(p, b, q), exact.Orient(p, b, a)
	same := func(u orb.Point) bool { return exact.CompareXY(p, u) == exact.CompareXY(p, q) }
	if toA == 0 && same(a) || toB == 0 && same(b) {
		return 0
	}
	// Left of the way is the sector counter-clockwise from b to a.
	var left bool
	switch {
	case turn > 0:
		left = toB > 0 && toA < 0
	case turn < 0:
		left = toB > 0 || toA < 0
	case exact.CompareXY(p, a) == exact.CompareXY(p, b):
		return 0 // there and back: no sides
	default:
		left = toB > 0
	}
	if left {
		return 1
	}
	return -1
}
