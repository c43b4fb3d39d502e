package advice

import (
	"math"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Spacing returns the median length of the edges of m, the lower one of two; NaN
// if there are no triangles.
func Spacing(m *triangulate.Mesh) float64 {
	squares := make([]float64, 0, m.NumHalfEdges()/2+1)
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		// Each edge once: from its larger half, or its only one.
		if m.Twin(h) < h {
			squares = append(squares, squaredLength(m, h))
		}
	}
	if len(squares) == 0 {
		return math.NaN()
	}
	return math.Sqrt(selectKth(squares, (len(squares)-1)/2))
}

// squaredLength returns the square of the length of h, the same for its twin:
// both differences only change sign.
func squaredLength(m *triangulate.Mesh, h triangulate.HalfEdge) float64 {
	a, b := m.Position(m.Origin(h)), m.Position(m.Dest(h))
	dx, dy := b[0]-a[0], b[1]-a[1]
	return float64(dx*dx) + float64(dy*dy)
}

// LongOutline returns which part of the area of m lies in triangles that have an
// edge longer than limit and reach the outside through such triangles: what an
// edge limit would take away. 0 if there are no triangles.
func LongOutline(m *triangulate.Mesh, limit float64) float64 {
	square := float64(limit * limit)
	isLong := func(t triangulate.Triangle) bool {
		for i := range 3 {
			if squaredLength(m, t.HalfEdge(i)) > square {
				return true
			}
		}
		return false
	}
	gone := make([]bool, m.NumTriangles())
	var stack []triangulate.Triangle
	reach := func(t triangulate.Triangle) {
		if !gone[t] && isLong(t) {
			gone[t] = true
			stack = append(stack, t)
		}
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
	// Twice the areas, summed without rounding. That of all triangles is the sum
	// along the outline alone, since inner edges run both ways.
	var taken, whole exact.Sum
	for t, g := range gone {
		for i := range 3 {
			h := triangulate.Triangle(t).HalfEdge(i)
			if g {
				addEdge(&taken, m, h)
			}
			if m.Twin(h) == triangulate.NoHalfEdge {
				addEdge(&whole, m, h)
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
	a, b := m.Position(m.Origin(h)), m.Position(m.Dest(h))
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
