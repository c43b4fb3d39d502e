package profile

import (
	"cmp"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

func bound(s *Section) orb.Bound { return orb.LineString(s.Line.points).Bound() }

// byLeft returns the numbers of sections in the order of their smallest x.
func byLeft(sections []Section) []int {
	order := make([]int, len(sections))
	for i := range order {
		order[i] = i
	}
	slices.SortFunc(order, func(a, b int) int {
		return cmp.Or(cmp.Compare(bound(&sections[a]).Min[0], bound(&sections[b]).Min[0]), a-b)
	})
	return order
}

func sortOverlaps(all []Overlap) []Overlap {
	slices.SortFunc(all, func(a, b Overlap) int { return cmp.Or(a.First-b.First, a.Second-b.Second) })
	return all
}

// meet tells whether two sections have a place in common.
func meet(s, t *Section) bool {
	a, b := s.Line.points[0], s.Line.points[1]
	c, d := t.Line.points[0], t.Line.points[1]
	if !bound(s).Intersects(bound(t)) {
		return false
	}
	return exact.Orient(a, b, c)*exact.Orient(a, b, d) <= 0 && exact.Orient(c, d, a)*exact.Orient(c, d, b) <= 0
}
