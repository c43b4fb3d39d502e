package triangulate

import "slices"

// Ordering the points along a kd-tree of alternating cuts (Dwyer 1987): every
// range is cut at the median, by (x, y) on one level and by (y, -x), which is
// the plane turned a quarter clockwise, on the next. Only sets of points are
// moved to the two sides of a cut and the smallest sets are sorted, so the
// order that comes out does not depend on the order that went in.

// record is a point on its way through the kd-ordering. A record whose id is
// negative stands for a repeated place: id is then ^(input index), and x the
// input index of the record that represents the place.
type record struct {
	x, y float64
	id   int32
}

// before is the order of a cut along axis: (x, y) for 0, (y, -x) for 1.
func before(a, b *record, axis int) bool {
	if axis == 0 {
		return a.x < b.x || a.x == b.x && a.y < b.y
	}
	return a.y < b.y || a.y == b.y && a.x > b.x
}

// samePlace is true for equal coordinates; 0 and -0 are one place.
func samePlace(a, b *record) bool { return a.x == b.x && a.y == b.y }

// insertionSort orders a few records.
func insertionSort(r []record, axis int) {
	for i := 1; i < len(r); i++ {
		c := r[i]
		j := i
		for ; j > 0 && before(&c, &r[j-1], axis); j-- {
			r[j] = r[j-1]
		}
		r[j] = c
	}
}

// fewRecords is the length below which sorting beats selecting: measured on
// 1e6 uniform points, flat between 16 and 48.
const fewRecords = 24

// cut moves the records so that all before the returned index come before all
// from it on, in the order of axis, with equal places kept on one side. The
// index is the middle, or the nearest end of the run of equal places there; 0
// or len(r) only if all records are at one place.
func cut(r []record, axis int) int {
	mid := len(r) / 2
	lo, hi := selectAround(r, mid, axis)
	// Equal places of r[mid] all lie in r[lo:hi], which is sorted.
	a, b := mid, mid+1
	for a > lo && samePlace(&r[a-1], &r[mid]) {
		a--
	}
	if a == mid {
		return mid
	}
	for b < hi && samePlace(&r[b], &r[mid]) {
		b++
	}
	if a == 0 || b < len(r) && b-mid < mid-a {
		return b
	}
	return a
}

// selectAround narrows r to a sorted range lo..hi that holds position k and
// every record at the place of the k-th smallest.
//
// Each turn takes a sorted sample and partitions by two of its members that
// most likely enclose the k-th smallest, after Floyd & Rivest 1975: about one
// and a half passes over the records in all. Partitioning puts what is strictly
// before the pivot to the left, so equal places never part company.
//
// Whoever knows where the sample is taken can write a file on which every turn
// narrows the range by a few records only. After twice as many turns as halving
// would take the rest is sorted instead, so that no input costs more than that.
func selectAround(r []record, k, axis int) (lo, hi int) {
	lo, hi = 0, len(r)
	turnsLeft := 0
	for n := len(r); n > 0; n /= 2 {
		turnsLeft += 2
	}
	for ; hi-lo > fewRecords; turnsLeft-- {
		if turnsLeft == 0 {
			sortRecords(r[lo:hi], axis)
			return lo, hi
		}
		n := hi - lo
		pivotLow, pivotHigh := pivots(r[lo:hi], k-lo, axis)
		i := lo + partition(r[lo:hi], pivotLow, axis)
		j := i + partition(r[i:hi], pivotHigh, axis)
		switch {
		case k < i:
			hi = i
		case k >= j:
			lo = j
		default:
			lo, hi = i, j
		}
		if hi-lo <= n-n/8 {
			continue
		}
		// The sample told little (runs of equal places, an unlucky pattern):
		// take r[k]'s own place out as a block, so that every turn ends.
		p := r[k]
		i = lo + partition(r[lo:hi], p, axis)
		j = i + partitionEqual(r[i:hi], p)
		switch {
		case k < i:
			hi = i
		case k >= j:
			lo = j
		default:
			return i, j
		}
	}
	insertionSort(r[lo:hi], axis)
	return lo, hi
}

// sortRecords orders many records, in time O(n log n) whatever their order.
func sortRecords(r []record, axis int) {
	slices.SortFunc(r, func(a, b record) int {
		switch {
		case before(&a, &b, axis):
			return -1
		case before(&b, &a, axis):
			return 1
		}
		return 0
	})
}

// pivots picks two records of r that most likely enclose the k-th smallest.
func pivots(r []record, k, axis int) (low, high record) {
	var sample [79]record
	n := len(r)
	size := 9
	for 2*size+1 <= len(sample) && size*size*2 < n {
		size = 2*size + 1
	}
	s := sample[:size]
	// Odd strides through the middle: neighbours in the input are often
	// neighbours in space, so the sample spreads over the whole range.
	for i := range s {
		s[i] = r[(2*i+1)*n/(2*size)]
	}
	insertionSort(s, axis)
	at := k * size / n
	margin := 1
	for margin*margin*2 < size {
		margin++
	}
	return s[max(at-margin, 0)], s[min(at+margin, size-1)]
}

// partition moves the records strictly before p to the front and returns how
// many there are. It has no branch on the data: a mispredicted one costs more
// than the two moves.
func partition(r []record, p record, axis int) int {
	px, py := p.x, p.y
	i := 0
	if axis == 0 {
		for j := range r {
			c := r[j]
			less := toInt(c.x < px) | toInt(c.x == px)&toInt(c.y < py)
			r[j] = r[i]
			r[i] = c
			i += less
		}
		return i
	}
	for j := range r {
		c := r[j]
		less := toInt(c.y < py) | toInt(c.y == py)&toInt(c.x > px)
		r[j] = r[i]
		r[i] = c
		i += less
	}
	return i
}

// partitionEqual moves the records at the place of p to the front and returns
// how many there are.
func partitionEqual(r []record, p record) int {
	i := 0
	for j := range r {
		if samePlace(&r[j], &p) {
			r[i], r[j] = r[j], r[i]
			i++
		}
	}
	return i
}

// toInt is 1 for true; the compiler makes it one instruction.
func toInt(b bool) int {
	if b {
		return 1
	}
	return 0
}
