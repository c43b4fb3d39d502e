package triangulate

import (
	"context"
	"sync"

	"isofacet/triangulate/exact"
)

// The builder keeps the Delaunay triangulation of a range of records as a
// closed surface: every hull edge carries a ghost triangle whose third corner
// is the point at infinity, so that walking around the hull, deleting an edge
// and closing the gap between two halves are all link changes among triangles:
//
//	      lc .            real triangle (l, lc, x) inside the left half,
//	     / |    .         its ghost (lc, l, ∞) to the right of it.
//	    /  | ghost  ∞     Deleting the edge l-lc turns the two into the
//	   x   |    .         ghosts (x, l, ∞) and (lc, x, ∞): no triangle is
//	    \  | .            made or freed.
//	      l
//
// n distinct points, n >= 2, always make 2n-2 triangles, ghosts counted. A
// range [lo, hi) of records therefore owns the triangles [2lo, 2hi-2); merging
// its halves takes the two that lie between theirs. Disjoint ranges touch
// disjoint memory and can be built at the same time.
//
// Sources: Guibas & Stolfi 1985 (merging upwards from the lower tangent),
// Dwyer 1987 (alternating cuts). The ghost triangles are the closing of the
// plane to a sphere that both papers use in their proofs.

const ghost Vertex = -1

type builder struct {
	ctx  context.Context
	rec  []record
	half []half

	mu       sync.Mutex // of what follows
	progress func(done, total int)
	done     int
}

// stopped tells whether the caller has given up. Parts made after that are
// empty shells that nobody merges.
func (b *builder) stopped() bool { return b.ctx.Err() != nil }

// report adds n records to those whose triangles are made. Where places repeat,
// some ranges are built again and count twice and others do not count, so the
// sum is kept below the total, which Delaunay reports when all is done.
func (b *builder) report(n int) {
	if b.progress == nil {
		return
	}
	b.mu.Lock()
	defer b.mu.Unlock()
	b.done = min(b.done+n, len(b.rec)-1)
	b.progress(b.done, len(b.rec))
}

// part is a finished range: how many distinct places it has, and two hull
// edges as half-edges of ghosts (they run clockwise around the hull), the ones
// that its last merge put at both ends of the gap. A part of one place has no
// triangle; first is then its record.
type part struct {
	n         int
	first     int32
	low, high HalfEdge
}

// parallelLeast is the number of records below which a range is built by one
// goroutine: some tens of times the cost of starting one.
const parallelLeast = 8192

// build makes the triangulation of rec[lo:hi], hi > lo, by at most workers
// goroutines, cutting along axis first.
func (b *builder) build(lo, hi, axis, workers int) part {
	if hi-lo <= 3 {
		return b.leaf(lo, hi)
	}
	big := hi-lo >= parallelLeast
	if big && b.stopped() {
		return part{n: hi - lo}
	}
	at := cut(b.rec[lo:hi], axis)
	if at == 0 || at == hi-lo {
		for i := lo + 1; i < hi; i++ {
			b.markRepeated(i, lo)
		}
		return part{n: 1, first: int32(lo)}
	}
	mid := lo + at
	var l, r part
	if workers > 1 && big {
		l, r = b.buildBoth(lo, mid, hi, 1-axis, workers)
	} else {
		l = b.build(lo, mid, 1-axis, 1)
		r = b.build(mid, hi, 1-axis, 1)
	}
	if big && b.stopped() {
		return part{n: hi - lo}
	}
	if l.n == 1 || r.n == 1 {
		// Only repeated places make so uneven a cut. Put them aside and
		// build what is left again; that range has none.
		n := b.putRepeatedLast(lo, hi)
		return b.build(lo, lo+n, axis, workers)
	}
	m := b.merge(l, r, axis, Triangle(2*mid-2))
	m.n = l.n + r.n
	if big && hi-lo < 2*parallelLeast {
		b.report(hi - lo)
	}
	return m
}

// buildBoth builds two neighbouring ranges at the same time.
func (b *builder) buildBoth(lo, mid, hi, axis, workers int) (l, r part) {
	var wg sync.WaitGroup
	wg.Go(func() { l = b.build(lo, mid, axis, workers/2) })
	r = b.build(mid, hi, axis, workers-workers/2)
	wg.Wait()
	return l, r
}

// markRepeated notes that record i stands at the place of record rep.
func (b *builder) markRepeated(i, rep int) {
	b.rec[i].x = float64(b.rec[rep].id)
	b.rec[i].id = ^b.rec[i].id
}

// putRepeatedLast moves the records of rec[lo:hi] that represent a place to
// the front, in their order, and returns how many they are.
func (b *builder) putRepeatedLast(lo, hi int) int {
	n := lo
	for i := lo; i < hi; i++ {
		if b.rec[i].id >= 0 {
			b.rec[n], b.rec[i] = b.rec[i], b.rec[n]
			n++
		}
	}
	return n - lo
}

// leaf builds one to three records.
func (b *builder) leaf(lo, hi int) part {
	r := b.rec[lo:hi]
	insertionSort(r, 0)
	n := 1
	for i := 1; i < len(r); i++ {
		if samePlace(&r[i], &r[n-1]) {
			b.markRepeated(lo+i, lo+n-1)
			continue
		}
		r[n], r[i] = r[i], r[n]
		n++
	}
	v := Vertex(lo)
	h := HalfEdge(6 * lo)
	switch n {
	case 1:
		return part{n: 1, first: int32(lo)}
	case 2:
		b.ghost(h, v, v+1, h+3)
		b.ghost(h+3, v+1, v, h)
		b.link(h, h+3)
		return part{n: 2, low: h, high: h + 3}
	}
	p := v + 1
	q := v + 2
	switch b.orient(v, p, q) {
	case 0:
		// There along v p q, and back: four ghosts.
		b.ghost(h, v, p, h+3)
		b.ghost(h+3, p, q, h+6)
		b.ghost(h+6, q, p, h+9)
		b.ghost(h+9, p, v, h)
		b.link(h, h+9)
		b.link(h+3, h+6)
		return part{n: 3, low: h, high: h + 9}
	case -1:
		p, q = q, p
	}
	b.half[h].origin, b.half[h+1].origin, b.half[h+2].origin = v, p, q
	b.ghost(h+3, v, q, h+6) // clockwise
	b.ghost(h+6, q, p, h+9)
	b.ghost(h+9, p, v, h+3)
	b.link(h, h+9) // v p, and the ghost of p v
	b.link(h+1, h+6)
	b.link(h+2, h+3)
	return part{n: 3, low: h + 3, high: h + 9}
}

// ghost writes the ghost of the clockwise hull edge u→w at half-edge h:
// (u→w, w→∞, ∞→u). The one after it round the hull is written at after.
func (b *builder) ghost(h HalfEdge, u, w Vertex, after HalfEdge) {
	b.half[h].origin, b.half[h+1].origin, b.half[h+2].origin = u, w, ghost
	b.link(h+1, after+2)
}

func (b *builder) link(g, h HalfEdge) {
	b.half[g].twin = h
	b.half[h].twin = g
}

// clockwise returns the ghost's hull half-edge after g, clockwise round the hull.
func (b *builder) clockwise(g HalfEdge) HalfEdge { return b.half[g.next()].twin.next() }

// counterClockwise returns the one before.
func (b *builder) counterClockwise(g HalfEdge) HalfEdge { return b.half[g.prev()].twin.prev() }

// extreme returns the ghost hull half-edge that starts at the last vertex (or
// the first) of a part in the order of axis. The hull is convex: walking on
// from g while it gets better, one way round or the other, finds the best.
func (b *builder) extreme(g HalfEdge, axis int, wantLast bool) HalfEdge {
	start := &b.rec[b.half[g].origin]
	better := func(r *record) bool {
		if wantLast {
			return before(start, r, axis)
		}
		return before(r, start, axis)
	}
	moved := false
	for {
		h := b.clockwise(g)
		r := &b.rec[b.half[h].origin]
		if !better(r) {
			break
		}
		g, start, moved = h, r, true
	}
	for !moved {
		h := b.counterClockwise(g)
		r := &b.rec[b.half[h].origin]
		if !better(r) {
			break
		}
		g, start = h, r
	}
	return g
}

// orient is the exact orientation of three records.
func (b *builder) orient(i, j, k Vertex) int {
	p, q, r := &b.rec[i], &b.rec[j], &b.rec[k]
	return exact.OrientXY(p.x, p.y, q.x, q.y, r.x, r.y)
}

// inside tells whether l, that is d, lies inside the circle of i, j, k, with
// ties broken; i, j, k are counter-clockwise.
func (b *builder) inside(i, j, k, l Vertex) bool {
	p, q, r, s := &b.rec[i], &b.rec[j], &b.rec[k], &b.rec[l]
	if sign := exact.InCircleXY(p.x, p.y, q.x, q.y, r.x, r.y, s.x, s.y); sign != 0 {
		return sign > 0
	}
	return exact.InCircleTied([2]float64{p.x, p.y}, [2]float64{q.x, q.y}, [2]float64{r.x, r.y}, [2]float64{s.x, s.y}) > 0
}

// merge closes the gap between part l and part r, all of l before all of r in
// the order of axis, with the two triangles spare and spare+1.
//
// Seen with the cut upright, l on the left. The names follow the picture: the
// current base edge runs from left to right; cl is the half-edge, inside a
// ghost, from the left candidate down to left; cr from right up to the right
// candidate.
//
//	leftTop .     . rightTop
//	     |    ∞    |
//	  cl ↓         ↑ cr
//	     |         |
//	   left-------right
//	        base ← (half-edge below, from right to left)
func (b *builder) merge(l, r part, axis int, spare Triangle) part {
	T := b.half
	// Lower tangent: start at the two vertices nearest the cut.
	// The ends of the gaps that the halves closed themselves, cut the other
	// way, are near there.
	nearLeft, nearRight := l.low, r.high
	if axis == 1 {
		nearLeft, nearRight = l.high, r.low
	}
	gl := b.extreme(nearLeft, axis, true)
	gr := b.counterClockwise(b.extreme(nearRight, axis, false))
	left, right := T[gl].origin, T[gr.next()].origin
	for {
		if below := T[gl.next()].origin; b.orient(left, below, right) > 0 {
			gl, left = b.clockwise(gl), below
			continue
		}
		if below := T[gr].origin; b.orient(right, below, left) < 0 {
			gr, right = b.counterClockwise(gr), below
			continue
		}
		break
	}
	cl, cr := b.counterClockwise(gl), b.clockwise(gr)
	leftTop, rightTop := T[cl].origin, T[cr.next()].origin

	bottom := spare.HalfEdge(0)
	T[bottom].origin, T[bottom+1].origin, T[bottom+2].origin = right, left, ghost
	b.link(bottom+1, gl.prev())
	b.link(bottom+2, gr.next())
	base := bottom

	for {
		leftUp := b.orient(left, right, leftTop) > 0
		rightUp := b.orient(left, right, rightTop) > 0
		if !leftUp && !rightUp {
			break
		}
		if leftUp {
			for {
				t := T[cl].twin // left→leftTop, in its real triangle
				e1 := t.next()  // leftTop→x
				e2 := e1.next() // x→left
				x := T[e2].origin
				if x == ghost || !b.inside(left, right, leftTop, x) {
					break
				}
				f1 := cl.next() // left→∞
				b.link(cl, T[e1].twin)
				T[f1].origin = x
				T[e1].origin = ghost
				b.link(f1, e1)
				cl, leftTop = e2, x
			}
		}
		if rightUp {
			for {
				t := T[cr].twin // rightTop→right
				e1 := t.next()  // right→x
				e2 := e1.next() // x→rightTop
				x := T[e2].origin
				if x == ghost || !b.inside(left, right, rightTop, x) {
					break
				}
				k2 := cr.prev() // ∞→right
				T[cr].origin = x
				b.link(cr, T[e2].twin)
				T[t].origin = ghost
				b.link(e2, k2)
				cr, rightTop = e1, x
			}
		}
		if leftUp && (!rightUp || !b.inside(left, right, leftTop, rightTop)) {
			// The ghost of cl becomes the triangle (left, right, leftTop).
			f1 := cl.next()
			f2 := f1.next()
			up := T[f2].twin
			T[f2].origin = right
			b.link(f1, base)
			base = f2
			cl, left = up.prev(), leftTop
			leftTop = T[cl].origin
		} else {
			k1 := cr.next()
			k2 := k1.next()
			up := T[k1].twin
			T[k2].origin = left
			b.link(k2, base)
			base = k1
			cr, right = up.next(), rightTop
			rightTop = T[cr.next()].origin
		}
	}
	top := spare.HalfEdge(0) + 3
	T[top].origin, T[top+1].origin, T[top+2].origin = left, right, ghost
	b.link(top, base)
	b.link(top+1, cr.prev())
	b.link(top+2, cl.next())
	return part{low: bottom, high: top}
}
