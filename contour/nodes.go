package contour

import (
	"cmp"
	"context"
	"fmt"
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Splitting. Two segments may share ends. If an end of one lies on the other, the other is split there. If they cross, one
// of them is led through an end of the other: the one that is nearest to it among those that lie in the disk
// over it,
//
//	      d
//	     /          a, b and c, d cross: a c b d is a convex quadrilateral, its angles add up to 360 degrees, so
//	a---/-----b     one is at least 90 degrees: c, say, which is the same as that c lies in the disk over a b.
//	   c            a-b becomes a-c-b.
//
// Then what was split is compared again, until nothing is left to split. No new points arise, and parts are shorter than
// the whole: so it ends. Paths cross through rounding only, so that some end is within a step or two between
// doubles of the other segment (see doc.go), and that is how far a path is moved; which way, and how often, paths wind about
// anything further away stays as it is.
//
// Splitting both at the place of crossing, rounded, would be the next thing to try: it does not end in any useful
// time, since between two segments that run side by side at the step between doubles every rounded place makes new
// crossings.

// roundsMost bounds the rounds of splitting. A handful is usual.
const roundsMost = 10_000

// split is a place to split a segment at.
type split struct {
	segment int32
	at      orb.Point
}

// splitAll splits segments until any two have at most ends in common or are the same; fresh tells of a path whether it has
// to be compared with the others, nil means that all have. It returns the boxes of the segments as they are then, and how many
// splits it took.
func (n *net) splitAll(ctx context.Context, workers int, fresh func(path int) bool) (tree *boxes, count int, err error) {
	var splits []split
	for range roundsMost {
		tree = newBoxes(n, fresh)
		splits = n.findSplits(tree, workers)
		if err := ctx.Err(); err != nil {
			return nil, count, err
		}
		if len(splits) == 0 {
			return tree, count, nil
		}
		count += len(splits)
		changed := n.insert(splits)
		fresh = func(path int) bool { return changed[path] }
	}
	at := splits[0].at
	return nil, count, fmt.Errorf("bands near (%v, %v): lines still cross after %d rounds", at[0], at[1], roundsMost)
}

// findSplits compares fresh segments with all. The splits come ordered by segment and along it, without repeats.
func (n *net) findSplits(tree *boxes, workers int) []split {
	parts := make([][]split, workers)
	tree.pairs(workers, func(w int, p, q *run) {
		found := parts[w]
		for i := p.first; i < p.last; i++ {
			j := q.first
			if p == q {
				j = i + 1
			}
			for ; j < q.last; j++ {
				found = n.compare(found, i, j)
			}
		}
		parts[w] = found
	})
	found := slices.Concat(parts...)
	slices.SortFunc(found, n.compareSplits)
	return slices.Compact(found)
}

// compareSplits orders splits by segment, and on one segment by how far they are along it from its smaller end; those
// equally far, by coordinates.
func (n *net) compareSplits(s, t split) int {
	if c := cmp.Compare(s.segment, t.segment); c != 0 {
		return c
	}
	a, b := n.points[s.segment], n.points[s.segment+1]
	turn := 1
	if exact.CompareXY(a, b) > 0 {
		a, b, turn = b, a, -1
	}
	along := func(p orb.Point) float64 {
		return float64((p[0]-a[0])*(b[0]-a[0])) + float64((p[1]-a[1])*(b[1]-a[1]))
	}
	if c := cmp.Compare(along(s.at), along(t.at)); c != 0 {
		return turn * c
	}
	return turn * exact.CompareXY(s.at, t.at)
}

// compare appends the splits that segments i and j give each other.
func (n *net) compare(found []split, i, j int32) []split {
	a, b, c, d := &n.points[i], &n.points[i+1], &n.points[j], &n.points[j+1]
	if max(a[0], b[0]) < min(c[0], d[0]) || max(c[0], d[0]) < min(a[0], b[0]) ||
		max(a[1], b[1]) < min(c[1], d[1]) || max(c[1], d[1]) < min(a[1], b[1]) {
		return found
	}
	// The sides of c and d of the line through a, b; the sides of a and b of the line through c, d.
	sc, sd := exact.Orient(*a, *b, *c), exact.Orient(*a, *b, *d)
	if sc*sd > 0 {
		return found
	}
	sa, sb := exact.Orient(*c, *d, *a), exact.Orient(*c, *d, *b)
	if sa*sb > 0 {
		return found
	}
	if sa*sb < 0 && sc*sd < 0 {
		return append(found, detour(i, j, *a, *b, *c, *d))
	}
	if sc == 0 && strictlyBetween(c, a, b) {
		found = append(found, split{i, *c})
	}
	if sd == 0 && strictlyBetween(d, a, b) {
		found = append(found, split{i, *d})
	}
	if sa == 0 && strictlyBetween(a, c, d) {
		found = append(found, split{j, *a})
	}
	if sb == 0 && strictlyBetween(b, c, d) {
		found = append(found, split{j, *b})
	}
	return found
}

// strictlyBetween reports whether p, on the line through a and b, lies between them and is neither.
func strictlyBetween(p, a, b *orb.Point) bool {
	return *p != *a && *p != *b &&
		min(a[0], b[0]) <= p[0] && p[0] <= max(a[0], b[0]) && min(a[1], b[1]) <= p[1] && p[1] <= max(a[1], b[1])
}

// detour returns which of two crossing segments, i from a to b and j from c to d, is to be led through which end of the
// other. It depends on the segments alone, not on their order or direction.
func detour(i, j int32, a, b, c, d orb.Point) split {
	best := split{i, c}
	bestOff, bestAngle := math.Inf(1), math.Inf(1)
	try := func(segment int32, p, q, r orb.Point) {
		ux, uy, vx, vy := p[0]-r[0], p[1]-r[1], q[0]-r[0], q[1]-r[1]
		angle := float64(ux*vx) + float64(uy*vy) // above zero outside the disk over p, q
		dx, dy := q[0]-p[0], q[1]-p[1]
		area := exact.Area2(p[0], p[1], q[0], q[1], r[0], r[1])
		off := area / math.Sqrt(float64(dx*dx)+float64(dy*dy)) // from the line
		if c := cmp.Or(cmp.Compare(max(angle, 0), max(bestAngle, 0)), cmp.Compare(math.Abs(off), bestOff), exact.CompareXY(r, best.at)); c < 0 {
			best, bestOff, bestAngle = split{segment, r}, math.Abs(off), angle
		}
	}
	try(i, a, b, c)
	try(i, a, b, d)
	try(j, c, d, a)
	try(j, c, d, b)
	return best
}

// shift tells how far at most a segment is from where its path ran before it was split.
type shift struct {
	segment int32
	by      float64
}

// insert puts the splits into the paths and tells which paths changed.
func (n *net) insert(splits []split) []bool {
	changed := make([]bool, len(n.paths))
	points := make([]orb.Point, 0, len(n.points)+len(splits))
	was := n.shifts
	n.shifts = nil
	for i := range n.paths {
		p := &n.paths[i]
		first := int32(len(points))
		for k := p.first; k <= p.last; k++ {
			part := len(points)
			points = append(points, n.points[k])
			by, off := 0.0, 0.0
			if len(was) > 0 && was[0].segment == k {
				by = was[0].by
				was = was[1:]
			}
			for len(splits) > 0 && splits[0].segment == k {
				points = append(points, splits[0].at)
				off = max(off, n.distance(splits[0]))
				splits = splits[1:]
				changed[i] = true
			}
			// Every part lies between two places no further than off from the segment.
			if by += off; by > 0 {
				for ; part < len(points); part++ {
					n.shifts = append(n.shifts, shift{int32(part), by})
				}
				n.moved = max(n.moved, by)
			}
		}
		p.first, p.last = first, int32(len(points)-1)
	}
	n.points = points
	return changed
}

// distance returns how far the place of a split is from the segment, above which it lies.
func (n *net) distance(s split) float64 {
	a, b := n.points[s.segment], n.points[s.segment+1]
	dx, dy := b[0]-a[0], b[1]-a[1]
	return math.Abs(exact.Area2(a[0], a[1], b[0], b[1], s.at[0], s.at[1])) / math.Sqrt(float64(dx*dx)+float64(dy*dy))
}
