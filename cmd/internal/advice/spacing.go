package advice

import (
	"math"
	"slices"
	"sync"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Spacing returns the median length of the edges of m, the lower one of two; NaN
// if there are no triangles.
//
// Lengths are not kept: a first pass counts them by their leading bits, a second
// one takes out those that share them with the median. Bits of doubles that are not
// negative rise with their values, and counts can be added up in any order. Every
// edge is counted twice, an outline edge for itself and an inner one from both its
// triangles: asking which of two halves counts would be a guess for the processor.
func Spacing(m *triangulate.Mesh, workers int) float64 {
	counts := make([][]int, workers)
	inParts(m.NumTriangles(), workers, func(w, from, to int) {
		count := make([]int, 1<<leadingBits)
		eachLength(m, from, to, func(square float64) { count[leading(square)]++ })
		counts[w] = count
	})
	edges := 0 // twice
	sum := make([]int, 1<<leadingBits)
	for _, part := range counts {
		for b, n := range part {
			sum[b] += n
			edges += n
		}
	}
	if edges == 0 {
		return math.NaN()
	}
	k, bucket := (edges-1)/2, 0
	for ; k >= sum[bucket]; bucket++ {
		k -= sum[bucket]
	}
	found := make([][]float64, workers)
	inParts(m.NumTriangles(), workers, func(w, from, to int) {
		list := make([]float64, 0, sum[bucket]/workers)
		eachLength(m, from, to, func(square float64) {
			if leading(square) == bucket {
				list = append(list, square)
			}
		})
		found[w] = list
	})
	return math.Sqrt(selectKth(slices.Concat(found...), k))
}

// leadingBits is how many bits lengths are counted by: the sign, the exponent and
// four of the fraction, so that a bucket spans a sixteenth of a power of two.
const leadingBits = 16

func leading(v float64) int { return int(math.Float64bits(v) >> (64 - leadingBits)) }

// eachLength calls do with the squared lengths of the sides of triangles from or
// later and before to, twice for a side on the outline.
func eachLength(m *triangulate.Mesh, from, to int, do func(square float64)) {
	for t := triangulate.Triangle(from); t < triangulate.Triangle(to); t++ {
		v := m.Corners(t)
		a, b, c := m.Position(v[0]), m.Position(v[1]), m.Position(v[2])
		for i, square := range [3]float64{squaredDistance(a, b), squaredDistance(b, c), squaredDistance(c, a)} {
			do(square)
			if m.Twin(t.HalfEdge(i)) == triangulate.NoHalfEdge {
				do(square)
			}
		}
	}
}

// inParts cuts 0..n into one part a worker and waits for all.
func inParts(n, workers int, do func(w, from, to int)) {
	var wg sync.WaitGroup
	for w := range workers {
		wg.Go(func() { do(w, w*n/workers, (w+1)*n/workers) })
	}
	wg.Wait()
}

// squaredDistance is the same for an edge from either of its ends: the differences
// only change sign.
func squaredDistance(a, b orb.Point) float64 {
	dx, dy := b[0]-a[0], b[1]-a[1]
	return float64(dx*dx) + float64(dy*dy)
}

// LongOutline returns which part of the area of m lies in triangles that have an
// edge longer than limit and reach the outside through such triangles: what an
// edge limit would take away. 0 if there are no triangles.
func LongOutline(m *triangulate.Mesh, limit float64) float64 {
	square := float64(limit * limit)
	isLong := func(t triangulate.Triangle) bool {
		v := m.Corners(t)
		a, b, c := m.Position(v[0]), m.Position(v[1]), m.Position(v[2])
		return squaredDistance(a, b) > square || squaredDistance(b, c) > square || squaredDistance(c, a) > square
	}
	// Twice the areas, summed without rounding. That of all triangles is the sum
	// along the outline alone, since inner edges run both ways.
	var taken, whole exact.Sum
	gone := make([]bool, m.NumTriangles())
	var stack []triangulate.Triangle
	reach := func(t triangulate.Triangle) {
		if gone[t] || !isLong(t) {
			return
		}
		gone[t] = true
		stack = append(stack, t)
		for i := range 3 {
			addEdge(&taken, m, t.HalfEdge(i))
		}
	}
	hull := m.Hull()
	for i, v := range hull {
		a, b := m.Position(v), m.Position(hull[(i+1)%len(hull)])
		addTerm(&whole, a, b)
	}
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if m.Twin(h) == triangulate.NoHalfEdge {
			reach(h.Triangle())
		}
	}
	for len(stack) > 0 {
		t := stack[len(stack)-1]
		stack = stack[:len(stack)-1]
		for i := range 3 {
			if twin := m.Twin(t.HalfEdge(i)); twin != triangulate.NoHalfEdge {
				reach(twin.Triangle())
			}
		}
	}
	if whole.Value() == 0 {
		return 0
	}
	return taken.Value() / whole.Value()
}

// addEdge adds the edge's term of the surveyor's area formula.
func addEdge(sum *exact.Sum, m *triangulate.Mesh, h triangulate.HalfEdge) {
	addTerm(sum, m.Position(m.Origin(h)), m.Position(m.Dest(h)))
}

func addTerm(sum *exact.Sum, a, b orb.Point) {
	sum.AddProduct(a[0], b[1])
	sum.AddProduct(-a[1], b[0])
}

// selectKth returns the k-th smallest of values, from 0, and reorders them: Hoare's
// selection, with three parts so that many equal values (the edges of a lattice)
// end it at once.
func selectKth(values []float64, k int) float64 {
	for len(values) > 1 {
		pivot := median3(values[0], values[len(values)/2], values[len(values)-1])
		below, equal, above := 0, 0, len(values)
		for equal < above {
			switch v := values[equal]; {
			case v < pivot:
				values[equal], values[below] = values[below], v
				below++
				equal++
			case v > pivot:
				above--
				values[equal], values[above] = values[above], v
			default:
				equal++
			}
		}
		switch {
		case k < below:
			values = values[:below]
		case k >= above:
			values, k = values[above:], k-above
		default:
			return pivot
		}
	}
	return values[0]
}

func median3(a, b, c float64) float64 {
	return max(min(a, b), min(max(a, b), c))
}
