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
// Every edge is counted twice, an outline edge for itself and an inner one from both
// its triangles: asking which of two halves counts would be a guess for the processor.
// Lengths are not kept either, but those near the median of some triangles here and
// there; should the median of all lie elsewhere, more are kept until it does not.
func Spacing(m *triangulate.Mesh, workers int) float64 {
	const looked = 10_000
	n := m.NumTriangles()
	if n == 0 {
		return math.NaN()
	}
	guess := lengths{low: math.Inf(-1), high: math.Inf(1)}
	for i := range looked {
		guess.add(m, i*n/looked, i*n/looked+1)
	}
	slices.Sort(guess.kept)
	for _, part := range []float64{0.02, 0.1} {
		all := lengths{
			low:  guess.kept[int((0.5-part)*float64(len(guess.kept)))],
			high: guess.kept[int((0.5+part)*float64(len(guess.kept)))],
		}
		if square, ok := all.median(m, workers); ok {
			return math.Sqrt(square)
		}
	}
	guess.kept, guess.edges = nil, 0
	square, _ := guess.median(m, workers)
	return math.Sqrt(square)
}

// lengths counts squared lengths of edges and keeps those from low to high.
type lengths struct {
	low, high    float64
	edges, below int
	kept         []float64
}

// median returns the median of all edges if it is one of those to keep.
func (l *lengths) median(m *triangulate.Mesh, workers int) (square float64, ok bool) {
	parts := make([]lengths, workers)
	inParts(m.NumTriangles(), workers, func(w, from, to int) {
		part := lengths{low: l.low, high: l.high}
		part.add(m, from, to)
		parts[w] = part
	})
	for _, part := range parts {
		l.edges += part.edges
		l.below += part.below
		l.kept = append(l.kept, part.kept...)
	}
	k := (l.edges-1)/2 - l.below
	if k < 0 || k >= len(l.kept) {
		return 0, false
	}
	return selectKth(l.kept, k), true
}

// add counts the edges of the triangles from, to (left out).
func (l *lengths) add(m *triangulate.Mesh, from, to int) {
	pos := m.Positions()
	for t := triangulate.Triangle(from); t < triangulate.Triangle(to); t++ {
		h := t.HalfEdge(0)
		a, b, c := &pos[m.Origin(h)], &pos[m.Origin(h+1)], &pos[m.Origin(h+2)]
		l.addEdge(m, h, squared(b[0]-a[0], b[1]-a[1]))
		l.addEdge(m, h+1, squared(c[0]-b[0], c[1]-b[1]))
		l.addEdge(m, h+2, squared(a[0]-c[0], a[1]-c[1]))
	}
}

func (l *lengths) addEdge(m *triangulate.Mesh, h triangulate.HalfEdge, square float64) {
	times := 1
	if m.Twin(h) == triangulate.NoHalfEdge {
		times = 2
	}
	l.edges += times
	// One in two lengths is below: counted without a branch to guess.
	below, upTo := 0, 0
	if square < l.low {
		below = times
	}
	if square <= l.high {
		upTo = times
	}
	l.below += below
	for range upTo - below {
		l.kept = append(l.kept, square)
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
func squaredDistance(a, b orb.Point) float64 { return squared(b[0]-a[0], b[1]-a[1]) }

func squared(dx, dy float64) float64 { return float64(dx*dx) + float64(dy*dy) }

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
