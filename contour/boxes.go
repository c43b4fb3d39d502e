package contour

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// boxes is a tree of bounding boxes over the segments of a net. A leaf is a run of neighbouring segments of one path;
// the leaves are halved by the middles of their boxes, along the longer side, again and again.
type boxes struct {
	net    *net
	leaves []run
	nodes  []box // the root is the last one
}

// run is segments first..last-1 of one path; segment i goes from points[i] to points[i+1].
type run struct {
	first, last int32
	bound       orb.Bound
	fresh       bool // holds a segment that has not been compared with the others
}

// runSegments is the length of runs: long enough that the tree is small, short enough that few pairs in touching
// boxes are far apart.
const runSegments = 8

// box is a node of the tree: two boxes below it, or a leaf.
type box struct {
	bound orb.Bound
	below [2]int32 // numbers of nodes; below[1] < 0: leaf number below[0]
	fresh bool
}

// newBoxes makes the tree. fresh tells of a path whether its segments are to be compared; nil means of all.
func newBoxes(n *net, fresh func(path int) bool) *boxes {
	b := &boxes{net: n}
	for i, p := range n.paths {
		for s := p.first; s < p.last; s += runSegments {
			last := min(s+runSegments, p.last)
			r := run{first: s, last: last, bound: orb.Bound{Min: n.points[s], Max: n.points[s]}, fresh: fresh == nil || fresh(i)}
			for _, q := range n.points[s+1 : last+1] {
				r.bound = extend(r.bound, orb.Bound{Min: q, Max: q})
			}
			b.leaves = append(b.leaves, r)
		}
	}
	if len(b.leaves) > 0 {
		order := make([]int32, len(b.leaves))
		for i := range order {
			order[i] = int32(i)
		}
		b.nodes = make([]box, 0, 2*len(b.leaves))
		b.build(order)
	}
	return b
}

// build makes the tree over some leaves and returns its root.
func (b *boxes) build(leaves []int32) int32 {
	if len(leaves) == 1 {
		l := &b.leaves[leaves[0]]
		b.nodes = append(b.nodes, box{bound: l.bound, below: [2]int32{leaves[0], -1}, fresh: l.fresh})
		return int32(len(b.nodes) - 1)
	}
	bound := b.leaves[leaves[0]].bound
	for _, l := range leaves[1:] {
		bound = extend(bound, b.leaves[l].bound)
	}
	axis := 0
	if bound.Max[1]-bound.Min[1] > bound.Max[0]-bound.Min[0] {
		axis = 1
	}
	half := len(leaves) / 2
	b.split(leaves, half, axis)
	left := b.build(leaves[:half])
	right := b.build(leaves[half:])
	b.nodes = append(b.nodes, box{bound, [2]int32{left, right}, b.nodes[left].fresh || b.nodes[right].fresh})
	return int32(len(b.nodes) - 1)
}

// split moves the leaves with the k smallest middles along axis to the front (Hoare's selection).
func (b *boxes) split(leaves []int32, k, axis int) {
	key := func(l int32) float64 {
		r := &b.leaves[l]
		return r.bound.Min[axis] + r.bound.Max[axis]
	}
	for lo, hi := 0, len(leaves)-1; lo < hi; {
		pivot := key(leaves[lo+(hi-lo)/2])
		i, j := lo, hi
		for i <= j {
			for key(leaves[i]) < pivot {
				i++
			}
			for key(leaves[j]) > pivot {
				j--
			}
			if i <= j {
				leaves[i], leaves[j] = leaves[j], leaves[i]
				i++
				j--
			}
		}
		switch {
		case k <= j:
			hi = j
		case k >= i:
			lo = i
		default:
			return
		}
	}
}

func extend(a, b orb.Bound) orb.Bound {
	return orb.Bound{
		Min: orb.Point{math.Min(a.Min[0], b.Min[0]), math.Min(a.Min[1], b.Min[1])},
		Max: orb.Point{math.Max(a.Max[0], b.Max[0]), math.Max(a.Max[1], b.Max[1])},
	}
}

// meet reports whether two boxes have a point in common.
func meet(a, b *orb.Bound) bool {
	return a.Min[0] <= b.Max[0] && b.Min[0] <= a.Max[0] && a.Min[1] <= b.Max[1] && b.Min[1] <= a.Max[1]
}

// pairs calls use for pairs of runs whose boxes meet, of which at least one is fresh, each pair once and each fresh run
// with itself; w tells the calls of one goroutine from those of others.
func (b *boxes) pairs(workers int, use func(w int, p, q *run)) {
	if len(b.nodes) == 0 {
		return
	}
	// Divide the work until there are some hundred tasks: within one box (twice the same), or between two.
	tasks := [][2]int32{{int32(len(b.nodes) - 1), int32(len(b.nodes) - 1)}}
	for workers > 1 && len(tasks) < 256 {
		var finer [][2]int32
		for _, t := range tasks {
			b.divide(t[0], t[1], func(i, j int32) { finer = append(finer, [2]int32{i, j}) })
		}
		if len(finer) <= len(tasks) {
			break // small
		}
		tasks = finer
	}
	_ = inTasks(len(tasks), workers, func(w, k int) error {
		b.pairsOf(tasks[k][0], tasks[k][1], func(p, q *run) { use(w, p, q) })
		return nil
	})
}

// pairsOf calls use for the pairs of runs within box i = j or between boxes i and j.
func (b *boxes) pairsOf(i, j int32, use func(p, q *run)) {
	m, n := &b.nodes[i], &b.nodes[j]
	if m.below[1] < 0 && n.below[1] < 0 {
		if (m.fresh || n.fresh) && meet(&m.bound, &n.bound) {
			use(&b.leaves[m.below[0]], &b.leaves[n.below[0]])
		}
		return
	}
	b.divide(i, j, func(i, j int32) { b.pairsOf(i, j, use) })
}

// divide gives use the boxes that have to be compared in place of i and j; i = j for within one box. What is a leaf on
// both sides stays.
func (b *boxes) divide(i, j int32, use func(i, j int32)) {
	m, n := &b.nodes[i], &b.nodes[j]
	leafM, leafN := m.below[1] < 0, n.below[1] < 0
	switch {
	case !m.fresh && !n.fresh || !meet(&m.bound, &n.bound):
	case leafM && leafN:
		use(i, j)
	case i == j:
		use(m.below[0], m.below[0])
		use(m.below[1], m.below[1])
		use(m.below[0], m.below[1])
	case leafN || !leafM && size(&m.bound) >= size(&n.bound):
		use(m.below[0], j)
		use(m.below[1], j)
	default:
		use(i, n.below[0])
		use(i, n.below[1])
	}
}

func size(b *orb.Bound) float64 { return b.Max[0] - b.Min[0] + b.Max[1] - b.Min[1] }

// westOf returns the segment that is met first on the way from p to the west, -1 if there is none. Segments for which alive
// is false do not count. The way starts an infinitesimal north of p: of a segment it meets the points from its lower
// end up to before its upper end, and level segments never. Segments must not cross.
func (b *boxes) westOf(p orb.Point, alive func(segment int32) bool) int32 {
	best := int32(-1)
	if len(b.nodes) > 0 {
		b.west(int32(len(b.nodes)-1), p, alive, &best)
	}
	return best
}

func (b *boxes) west(i int32, p orb.Point, alive func(int32) bool, best *int32) {
	n := &b.nodes[i]
	if n.bound.Min[1] > p[1] || n.bound.Max[1] <= p[1] || n.bound.Min[0] >= p[0] {
		return
	}
	if *best >= 0 && n.bound.Max[0] < min(b.net.points[*best][0], b.net.points[*best+1][0]) {
		return
	}
	if n.below[1] >= 0 {
		first, second := n.below[0], n.below[1]
		if b.nodes[first].bound.Max[0] < b.nodes[second].bound.Max[0] {
			first, second = second, first
		}
		b.west(first, p, alive, best)
		b.west(second, p, alive, best)
		return
	}
	r := &b.leaves[n.below[0]]
	for s := r.first; s < r.last; s++ {
		lo, hi := b.upward(s)
		if lo[1] > p[1] || hi[1] <= p[1] || exact.Orient(lo, hi, p) >= 0 || !alive(s) {
			continue
		}
		if *best < 0 || b.eastOf(s, *best) {
			*best = s
		}
	}
}

// upward returns the ends of a segment, the lower one first.
func (b *boxes) upward(s int32) (lo, hi orb.Point) {
	lo, hi = b.net.points[s], b.net.points[s+1]
	if hi[1] < lo[1] {
		lo, hi = hi, lo
	}
	return lo, hi
}

// eastOf reports whether segment s lies east of t. Both reach over some common height, and do not cross.
func (b *boxes) eastOf(s, t int32) bool {
	slo, shi := b.upward(s)
	tlo, thi := b.upward(t)
	// The later of the lower ends, or if the segments touch there, the earlier of the upper ends, tells.
	side := 0 // of s, seen from t: +1 west (left of the way up)
	if slo[1] >= tlo[1] {
		side = exact.Orient(tlo, thi, slo)
	} else {
		side = -exact.Orient(slo, shi, tlo)
	}
	if side == 0 {
		if shi[1] <= thi[1] {
			side = exact.Orient(tlo, thi, shi)
		} else {
			side = -exact.Orient(slo, shi, thi)
		}
	}
	return side < 0
}
