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
	pos  []orb.Point // of the vertices
	show Show
	xs   []float64 // of the columns, rising
	ys   []float64 // of the rows counted from the south, rising

	x0, y0, perX, perY float64
	tolU, tolV         float64 // how far rounding can move a place from its u, v
	moderate           bool    // no corner is 2^50 columns away: those of edges fit an int

	blockRowsLog, acrossBlocks int // of the rows in a block; how many blocks from west to east
}

func newScan(g *Grid, s *interp.Surface, show Show) *scan {
	f := &scan{g: g, s: s, m: s.Mesh(), pos: s.Mesh().Positions(), show: show, xs: g.Spec.Xs(), ys: g.Spec.Ys()}
	for i, j := 0, len(f.ys)-1; i < j; i, j = i+1, j-1 {
		f.ys[i], f.ys[j] = f.ys[j], f.ys[i]
	}
	f.x0, f.perX = f.xs[0], 1/g.Spec.CellX.Float64()
	f.y0, f.perY = f.ys[0], 1/g.Spec.CellY.Float64()
	bound := s.Bound()
	f.tolU = tolerance(f.xs, bound.Min[0], bound.Max[0], f.perX)
	f.tolV = tolerance(f.ys, bound.Min[1], bound.Max[1], f.perY)
	f.moderate = math.Abs(bound.Min[0]-f.x0)*f.perX < 1<<50 && math.Abs(bound.Max[0]-f.x0)*f.perX < 1<<50
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

// corners returns where the corners of t are, counter-clockwise. Pointers, because
// arrays would be copied to the stack, which is a quarter of the work here.
func (f *scan) corners(t triangulate.Triangle) (p, q, r *orb.Point) {
	e := triangulate.HalfEdge(3 * t)
	return &f.pos[f.m.Origin(e)], &f.pos[f.m.Origin(e+1)], &f.pos[f.m.Origin(e+2)]
}

// triangle writes the nodes of the writer's block that t owns.
func (f *scan) triangle(w *writer, t triangulate.Triangle) {
	p, q, r := f.corners(t)
	v0, v1, v2 := float64((p[1]-f.y0)*f.perY), float64((q[1]-f.y0)*f.perY), float64((r[1]-f.y0)*f.perY)
	// From the lowest to the highest, by rank: which branch to take would be a guess
	// that the processor gets wrong half of the time.
	r0 := one(v1 < v0) + one(v2 < v0)
	r1 := one(v0 <= v1) + one(v2 < v1)
	r2 := one(v0 <= v2) + one(v1 <= v2)
	var us, vs [4]float64
	us[r0&3], vs[r0&3] = float64((p[0]-f.x0)*f.perX), v0
	us[r1&3], vs[r1&3] = float64((q[0]-f.x0)*f.perX), v1
	us[r2&3], vs[r2&3] = float64((r[0]-f.x0)*f.perX), v2
	ua, va, ub, vb, uc, vc := us[0], vs[0], us[1], vs[1], us[2], vs[2]
	shortRight := (r1-r0+3)%3 == 1 // an even exchange of corners does not mirror the turn
	first, last := max(f.after(va, f.tolV), w.south), min(f.before(vc, f.tolV, len(f.ys)), w.north-1)
	if first > last {
		return
	}
	w.prepare(t)
	long, low, high := f.lineThrough(ua, va, uc, vc), f.lineThrough(ua, va, ub, vb), f.lineThrough(ub, vb, uc, vc)
	if mid := lastBelow(vb - f.tolV); float64(first) > va+f.tolV && float64(last) < vc-f.tolV && float64(mid+1) > vb+f.tolV {
		// No row is near a corner.
		if mid >= first {
			w.rows(first, min(mid, last), long, low, shortRight)
		}
		if mid < last {
			w.rows(max(mid+1, first), last, long, high, shortRight)
		}
	} else {
		f.nearCorners(w, first, last, [3]corner{{ua, va}, {ub, vb}, {uc, vc}}, long, low, high, shortRight)
	}
	w.finish()
}

// corner is one of a triangle's, in cells.
type corner struct{ u, v float64 }

// nearCorners finds the nodes in rows from first to last of which some come near
// corners: the lowest, the middle or the highest.
func (f *scan) nearCorners(w *writer, first, last int, c [3]corner, long, low, high line, shortRight bool) {
	uMin, uMax := min(c[0].u, c[1].u, c[2].u), max(c[0].u, c[1].u, c[2].u)
	va, vb, vc := c[0].v, c[1].v, c[2].v
	for row := first; row <= last; row++ {
		v := float64(row)
		switch {
		case v <= va+f.tolV || v >= vc-f.tolV:
			lo, hi := math.Inf(1), math.Inf(-1)
			for i, tol := range [3]float64{long.tol + low.tol, low.tol + high.tol, long.tol + high.tol} {
				if math.Abs(c[i].v-v) <= 2*f.tolV {
					lo, hi = min(lo, c[i].u), max(hi, c[i].u)
					// Not a number where an edge lies in the row, then both ends do.
					if tol <= uMax-uMin {
						lo, hi = min(lo, c[i].u-tol), max(hi, c[i].u+tol)
					} else {
						lo, hi = uMin, uMax
					}
				}
			}
			w.exactly(row, f.column(max(lo, uMin)-2*f.tolU+1), f.column(min(hi, uMax)+2*f.tolU+1))
		case v > vb-f.tolV && v <= vb+f.tolV:
			mid := line{from: c[1].u, tol: f.tolU + float64(f.tolV*(uMax-uMin))}
			if t := max(low.tol, high.tol); t > mid.tol {
				mid.tol = min(t, uMax-uMin)
			}
			w.rows(row, row, long, mid, shortRight)
		case v < vb:
			w.rows(row, row, long, low, shortRight)
		default:
			w.rows(row, row, long, high, shortRight)
		}
	}
}

// line is an edge's line: in row v, u is from + slope v, and uncertain by tol.
type line struct{ from, slope, tol float64 }

// lineThrough returns the line through two corners. Leading it back to row 0 rounds
// at the size of |slope| rows, of which tolV holds sixteen times as much.
func (f *scan) lineThrough(ua, va, ub, vb float64) line {
	slope := (ub - ua) / (vb - va)
	return line{ua - float64(va*slope), slope, f.tolU + float64(math.Abs(slope)*(4*f.tolV))}
}

// rows finds the nodes in rows that pass between the same two edges, at some
// distance from the corners.
func (w *writer) rows(first, last int, l, s line, shortRight bool) {
	if !shortRight {
		l, s = s, l
	}
	// Whole numbers in (l-tol, l+tol], (l+tol, s-tol], (s-tol, s+tol].
	nearL, inner, nearS, end := l.from-l.tol+1, l.from+l.tol+1, s.from-s.tol+1, s.from+s.tol+1
	if !w.moderate || !(l.tol < 1 && s.tol < 1) {
		for row := first; row <= last; row++ {
			v := float64(row)
			l, s := float64(v*l.slope), float64(v*s.slope)
			w.columns(row, w.column(nearL+l), w.column(inner+l), w.column(nearS+s), w.column(end+s))
		}
		return
	}
	// Whole parts of negative numbers are not the next below, but in negative columns
	// there are no nodes.
	n, runs, west, east := len(w.runs), w.runs[:cap(w.runs)], w.west, w.east
	into := (first-w.south)*blockStride - west
	for row := first; row <= last; row++ {
		v := float64(row)
		l, s := float64(v*l.slope), float64(v*s.slope)
		nearL, inner, nearS, end := int(nearL+l), int(inner+l), int(nearS+s), int(end+s)
		if nearL != inner || nearS != end {
			w.runs = runs[:n]
			w.columns(row, nearL, inner, nearS, end)
			n = len(w.runs)
		} else {
			// Written in any case and kept if there is a node, without a branch.
			from := max(inner, west)
			count := min(nearS, east) - from
			runs[n] = interp.Run{Row: int32(row), Col: int32(from), N: int32(count), Into: int32(into + from)}
			n += one(count > 0)
		}
		into += blockStride
	}
	w.runs = runs[:n]
}

// one is 1 for true, without a branch.
func one(b bool) int {
	i := 0
	if b {
		i = 1
	}
	return i
}

// after returns the first whole number above x - tol, at least 0.
func (f *scan) after(x, tol float64) int {
	if x > tol {
		return int(x-tol) + 1
	}
	return 0
}

// before returns the last whole number up to x + tol, below n.
func (f *scan) before(x, tol float64, n int) int {
	switch {
	case x+tol < 0:
		return -1
	case x+tol < float64(n-1):
		return int(x + tol)
	}
	return n - 1
}

// lastBelow returns the last whole number below x, at least -1.
func lastBelow(x float64) int {
	if x <= 0 {
		return -1
	}
	i := int(x)
	if float64(i) == x {
		i--
	}
	return i
}

// column returns the whole part of u, from 0 to the number of columns.
func (f *scan) column(u float64) int {
	if !(u >= 0) {
		return 0
	}
	if u >= float64(len(f.xs)) {
		return len(f.xs)
	}
	return int(u)
}
