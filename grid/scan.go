package grid

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Scan conversion: the nodes of a triangle, row by row.
//
// In each row the triangle covers what lies between its long edge (from the
// lowest corner to the highest) and its short edges. Where an edge crosses a
// row is computed in columns, in floating point; a node further from there than
// the rounding can amount to is certain, and the few others, with every node in
// the row of the lowest or highest corner, are located by exact signs:
//
//	     C ............ exact
//	    /  \
//	 ../....\........   L and R cross the row; nodes from L+tol to R-tol are
//	  L xxxxx R         inside, those within tol of L or R are exact
//	 /    ___B
//	A----- ............ exact
type scan struct {
	g    *Grid
	s    *interp.Surface
	m    *triangulate.Mesh
	show Show
	xs   []float64 // of the columns, rising
	ys   []float64 // of the rows counted from the south, rising

	x0, perX float64 // column of x is about (x-x0) perX
	y0, perY float64
	tol      float64 // rounding of a column number, but for the triangle's own share
}

func newScan(g *Grid, s *interp.Surface, show Show) *scan {
	f := &scan{g: g, s: s, m: s.Mesh(), show: show, xs: g.Spec.Xs(), ys: g.Spec.Ys()}
	for i, j := 0, len(f.ys)-1; i < j; i, j = i+1, j-1 {
		f.ys[i], f.ys[j] = f.ys[j], f.ys[i]
	}
	f.x0, f.perX = f.xs[0], 1/g.Spec.CellX.Float64()
	f.y0, f.perY = f.ys[0], 1/g.Spec.CellY.Float64()
	// Column k stands at x0 + k cell, rounded once; the column of an x is then
	// known to three roundings of itself and one of the largest x.
	farthest := max(math.Abs(f.xs[0]), math.Abs(f.xs[len(f.xs)-1]))
	f.tol = ulpHalf * (8*float64(len(f.xs)) + 16*farthest*f.perX)
	return f
}

// ulpHalf bounds the relative error of one rounding.
const ulpHalf = 1.0 / (1 << 53)

// triangle writes the nodes that t owns.
func (f *scan) triangle(t triangulate.Triangle) {
	c := f.m.Corners(t)
	// a, b, d from the lowest to the highest; each exchange mirrors the turn.
	a, b, d := f.m.Position(c[0]), f.m.Position(c[1]), f.m.Position(c[2])
	shortRight := true
	if b[1] < a[1] {
		a, b, shortRight = b, a, !shortRight
	}
	if d[1] < b[1] {
		b, d, shortRight = d, b, !shortRight
		if b[1] < a[1] {
			a, b, shortRight = b, a, !shortRight
		}
	}
	first := f.firstRow(a[1])
	if first == len(f.ys) || f.ys[first] > d[1] {
		return
	}
	xMin, xMax := min(a[0], b[0], d[0]), max(a[0], b[0], d[0])
	if xMax < f.xs[0] || xMin > f.xs[len(f.xs)-1] {
		return
	}
	// The crossing x is off by at most six roundings of the edge's width and one
	// of the largest x.
	tol := f.tol + ulpHalf*f.perX*(16*max(math.Abs(xMin), math.Abs(xMax))+16*(xMax-xMin))
	w := writer{scan: f, t: t}
	if tol > 0.25 {
		f.everyNode(&w, first, d[1], xMin, xMax)
		return
	}
	w.prepare()
	// Columns and, for each unit of y, what they change by along each edge.
	long := (d[0] - a[0]) / (d[1] - a[1]) * f.perX
	low := (b[0] - a[0]) / (b[1] - a[1]) * f.perX
	high := (d[0] - b[0]) / (d[1] - b[1]) * f.perX
	colA, colB := (a[0]-f.x0)*f.perX, (b[0]-f.x0)*f.perX
	last := float64(len(f.xs)) - 0.5
	for row := first; row < len(f.ys); row++ {
		y := f.ys[row]
		if y > d[1] {
			return
		}
		if y == a[1] || y == d[1] {
			f.endRow(&w, row, a, b, d)
			continue
		}
		l := colA + (y-a[1])*long
		r := colA + (y-a[1])*low
		if y >= b[1] {
			r = colB + (y-b[1])*high
		}
		if !shortRight {
			l, r = r, l
		}
		l, r = min(max(l, -0.5), last), min(max(r, -0.5), last)
		// Whole numbers in (l-tol, l+tol], (l+tol, r-tol], (r-tol, r+tol].
		nearL, inner := int(l-tol+1), int(l+tol+1)
		nearR, end := int(r-tol+1), int(r+tol+1)
		if inner >= nearR {
			w.exactly(row, nearL, end)
			continue
		}
		if nearL < inner {
			w.exactly(row, nearL, inner)
		}
		w.inside(row, inner, nearR)
		if nearR < end {
			w.exactly(row, nearR, end)
		}
	}
}

// firstRow returns the first row, counted from the south, not below y.
func (f *scan) firstRow(y float64) int {
	n := len(f.ys)
	if y <= f.ys[0] {
		return 0
	}
	if y > f.ys[n-1] {
		return n
	}
	row := min(max(int((y-f.y0)*f.perY), 0), n-1)
	for row > 0 && f.ys[row-1] >= y {
		row--
	}
	for f.ys[row] < y {
		row++
	}
	return row
}

// endRow writes the nodes in the row of the lowest corner a or the highest d:
// at that corner, or along an edge that lies in the row.
func (f *scan) endRow(w *writer, row int, a, b, d orb.Point) {
	y := f.ys[row]
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, p := range [3]orb.Point{a, b, d} {
		if p[1] == y {
			lo, hi = min(lo, p[0]), max(hi, p[0])
		}
	}
	from, to := f.columns(lo, hi)
	w.exactly(row, from, to)
}

// columns returns the columns from the first not west of lo to the last not
// east of hi, exactly.
func (f *scan) columns(lo, hi float64) (from, to int) {
	n := len(f.xs)
	at := func(x float64) int { return int(min(max((x-f.x0)*f.perX, 0), float64(n))) }
	from = at(lo)
	for from > 0 && f.xs[from-1] >= lo {
		from--
	}
	for from < n && f.xs[from] < lo {
		from++
	}
	to = max(at(hi), from)
	for to > from && f.xs[to-1] > hi {
		to--
	}
	for to < n && f.xs[to] <= hi {
		to++
	}
	return from, to
}

// everyNode locates each node of the bounding box exactly: the cells are so
// small for the coordinates that rounding spans a good part of one.
func (f *scan) everyNode(w *writer, first int, yMax, xMin, xMax float64) {
	w.prepare()
	from, to := f.columns(xMin, xMax)
	for row := first; row < len(f.ys) && f.ys[row] <= yMax; row++ {
		w.exactly(row, from, to)
	}
}

// writer puts values of one triangle into the grid.
type writer struct {
	*scan
	t     triangulate.Triangle
	plane interp.Plane
	fixed float64 // the triangle's slope or azimuth
}

func (w *writer) prepare() {
	switch w.show {
	case Value:
		w.plane = w.s.Plane(w.t)
	case Slope:
		w.fixed = interp.Slope(w.s.Gradient(w.t))
	case DownhillAzimuth:
		w.fixed = interp.DownhillAzimuth(w.s.Gradient(w.t))
	}
}

// row returns the values of a row counted from the south.
func (w *writer) row(row int) []float64 { return w.g.Row(len(w.ys) - 1 - row) }

// inside writes nodes that are strictly inside the triangle.
func (w *writer) inside(row, from, to int) {
	values := w.row(row)[from:to]
	if w.show == Value {
		w.plane.Span(values, w.xs[from:to], w.ys[row])
		return
	}
	for i := range values {
		values[i] = w.fixed
	}
}

// exactly writes those of the nodes that the triangle owns.
func (w *writer) exactly(row, from, to int) {
	values := w.row(row)
	for col := from; col < to; col++ {
		p := orb.Point{w.xs[col], w.ys[row]}
		loc := w.m.LocateIn(w.t, p)
		if loc.Place == triangulate.Outside {
			continue
		}
		if w.show == Value {
			values[col] = w.s.Value(loc, p)
		} else {
			values[col] = w.fixed
		}
	}
}
