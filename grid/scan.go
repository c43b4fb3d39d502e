package grid

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Scan conversion: the nodes of a triangle, row by row.
//
// All is measured in cells, u east from the first column and v north from the
// last row, so that nodes stand at whole numbers. In each row the triangle covers
// what lies between its long edge (from the lowest corner a to the highest c) and
// its short ones. Where an edge crosses a row is known to a small tolerance; a
// node further from there is certain, and the few others are located by exact
// signs:
//
//	     c ............ rows at a and c: exact, few nodes
//	    /  \
//	 ../....\........   l and s cross the row; nodes between l+tol and s-tol
//	  l xxxxx s         are inside, those within tol of l or s are exact
//	 /    ___b
//	a----- ............
type scan struct {
	g    *Grid
	s    *interp.Surface
	m    *triangulate.Mesh
	show Show
	xs   []float64 // of the columns, rising
	ys   []float64 // of the rows counted from the south, rising

	x0, y0, perX, perY float64
	tolU, tolV         float64 // how far rounding can move a place from its u, v
}

func newScan(g *Grid, s *interp.Surface, show Show) *scan {
	f := &scan{g: g, s: s, m: s.Mesh(), show: show, xs: g.Spec.Xs(), ys: g.Spec.Ys()}
	for i, j := 0, len(f.ys)-1; i < j; i, j = i+1, j-1 {
		f.ys[i], f.ys[j] = f.ys[j], f.ys[i]
	}
	f.x0, f.perX = f.xs[0], 1/g.Spec.CellX.Float64()
	f.y0, f.perY = f.ys[0], 1/g.Spec.CellY.Float64()
	bound := orb.MultiPoint(f.m.Positions()).Bound()
	f.tolU = tolerance(f.xs, bound.Min[0], bound.Max[0], f.perX)
	f.tolV = tolerance(f.ys, bound.Min[1], bound.Max[1], f.perY)
	return f
}

// tolerance bounds, in cells, the rounding in a place's u (or v) and in that of a
// node. With e = 2^-53: the difference from the first node is off by e of itself,
// so is the reciprocal of the cell (two roundings) and the product, and a node is
// off its whole number by e of its coordinate. Four times all that leaves room
// for the steps from there to a crossing.
func tolerance(nodes []float64, low, high, per float64) float64 {
	first, last := nodes[0], nodes[len(nodes)-1]
	span := max(high, last) - min(low, first)
	size := max(math.Abs(low), math.Abs(high), math.Abs(first), math.Abs(last))
	const e = 1.0 / (1 << 53)
	return 4 * e * per * (float64(4*span) + size)
}

// triangle writes the nodes that t owns. w is scratch of the caller's.
func (f *scan) triangle(w *writer, t triangulate.Triangle) {
	k := f.m.Corners(t)
	p, q, r := f.m.Position(k[0]), f.m.Position(k[1]), f.m.Position(k[2])
	ua, va := (p[0]-f.x0)*f.perX, (p[1]-f.y0)*f.perY
	ub, vb := (q[0]-f.x0)*f.perX, (q[1]-f.y0)*f.perY
	uc, vc := (r[0]-f.x0)*f.perX, (r[1]-f.y0)*f.perY
	// From the lowest to the highest; each exchange mirrors the turn.
	shortRight := true
	if vb < va {
		ua, va, ub, vb, shortRight = ub, vb, ua, va, !shortRight
	}
	if vc < vb {
		ub, vb, uc, vc, shortRight = uc, vc, ub, vb, !shortRight
		if vb < va {
			ua, va, ub, vb, shortRight = ub, vb, ua, va, !shortRight
		}
	}
	top := float64(len(f.ys) - 1)
	if vc < -f.tolV || va > top+f.tolV {
		return
	}
	right := float64(len(f.xs) - 1)
	uMin, uMax := ua, ua
	if ub < uMin {
		uMin = ub
	} else if ub > uMax {
		uMax = ub
	}
	if uc < uMin {
		uMin = uc
	} else if uc > uMax {
		uMax = uc
	}
	if uMax < -f.tolU || uMin > right+f.tolU {
		return
	}
	first, last := 0, len(f.ys)-1
	if va > f.tolV {
		first = int(va-f.tolV) + 1
	}
	if vc+f.tolV < top {
		last = int(vc + f.tolV)
	}
	if first > last {
		return
	}
	long := (uc - ua) / (vc - va)
	low := (ub - ua) / (vb - va)
	high := (uc - ub) / (vc - vb)
	tolV := 4 * f.tolV
	tolLong := f.tolU + float64(math.Abs(long)*tolV)
	tolLow := f.tolU + float64(math.Abs(low)*tolV)
	tolHigh := f.tolU + float64(math.Abs(high)*tolV)
	inView := uMin > 1 && uMax < right-1

	w.prepare(t)
	for row := first; row <= last; row++ {
		v := float64(row)
		if v <= va+f.tolV || v >= vc-f.tolV {
			lo, hi := math.Inf(1), math.Inf(-1)
			for _, e := range [3]struct{ u, v, tol float64 }{{ua, va, tolLong + tolLow}, {ub, vb, tolLow + tolHigh}, {uc, vc, tolLong + tolHigh}} {
				if math.Abs(e.v-v) <= 2*f.tolV {
					lo, hi = min(lo, e.u), max(hi, e.u)
					// Not a number where an edge lies in the row, then both ends do.
					if e.tol <= uMax-uMin {
						lo, hi = min(lo, e.u-e.tol), max(hi, e.u+e.tol)
					} else {
						lo, hi = uMin, uMax
					}
				}
			}
			w.exactly(row, f.column(max(lo, uMin)-2*f.tolU), f.column(min(hi, uMax)+2*f.tolU))
			continue
		}
		l, tolL := ua+float64((v-va)*long), tolLong
		s, tolS := ua+float64((v-va)*low), tolLow
		if v > vb-f.tolV {
			if v > vb+f.tolV {
				s, tolS = ub+float64((v-vb)*high), tolHigh
			} else {
				s, tolS = ub, f.tolU+float64(f.tolV*(uMax-uMin))
				if t := max(tolLow, tolHigh); t > tolS {
					tolS = min(t, uMax-uMin)
				}
			}
		}
		if !shortRight {
			l, tolL, s, tolS = s, tolS, l, tolL
		}
		// Whole numbers in (l-tol, l+tol], (l+tol, s-tol], (s-tol, s+tol].
		var nearL, inner, nearS, end int
		if inView && tolL < 1 && tolS < 1 {
			nearL, inner, nearS, end = int(l-tolL+1), int(l+tolL+1), int(s-tolS+1), int(s+tolS+1)
		} else {
			nearL, inner, nearS, end = f.column(l-tolL), f.column(l+tolL), f.column(s-tolS), f.column(s+tolS)
		}
		if inner >= nearS {
			w.exactly(row, nearL, end)
			continue
		}
		if nearL < inner {
			w.exactly(row, nearL, inner)
		}
		w.inside(row, inner, nearS)
		if nearS < end {
			w.exactly(row, nearS, end)
		}
	}
}

// column returns the first column east of u, from 0 to the number of columns.
func (f *scan) column(u float64) int {
	if !(u >= 0) {
		return 0
	}
	if u >= float64(len(f.xs)-1) {
		return len(f.xs)
	}
	return int(u) + 1
}

// writer puts values of one triangle after another into the grid.
type writer struct {
	*scan
	t     triangulate.Triangle
	plane interp.Plane
	fixed float64 // the triangle's slope, azimuth or shade
}

func (w *writer) prepare(t triangulate.Triangle) {
	w.t = t
	if w.show == Value {
		w.s.PlaneInto(&w.plane, t)
		return
	}
	w.fixed = w.show.of(w.s.Gradient(t))
}

// of returns what is shown of a triangle with this gradient.
func (s Show) of(dzdx, dzdy float64) float64 {
	switch s {
	case Slope:
		return interp.Slope(dzdx, dzdy)
	case DownhillAzimuth:
		return interp.DownhillAzimuth(dzdx, dzdy)
	}
	return shade(dzdx, dzdy)
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
