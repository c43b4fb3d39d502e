package overlay

import (
	"math"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// walks keeps the crossings of outer edges with inner ones for a run of outer triangles,
// so that the second triangle of an edge finds what the first has computed.
type walks struct {
	first triangulate.HalfEdge // of the run
	of    []span               // of every half-edge of the run
	list  []walked
}

// span is where the crossings of a half-edge lie in the list, in its direction. Without
// any, n tells whether it was walked at all, and whether that could be done.
type span struct{ from, n int32 }

const (
	unwalked = -1
	unclear  = -2 // something lies on the line of the edge, or the hull's rim is near
)

// walked is where an outer edge leaves an inner triangle over the half-edge out and
// enters the next over its twin, in. What it holds does not depend on the direction.
type walked struct {
	fromX, fromY float64
	offX, offY   float64 // from there
	d            float64 // inner less outer
	out, in      triangulate.HalfEdge
}

// start begins a run of outer triangles, from first up to last.
func (w *walks) start(first, last triangulate.Triangle) {
	w.first = first.HalfEdge(0)
	w.list = w.list[:0]
	n := int(last.HalfEdge(0) - w.first)
	if cap(w.of) < n {
		w.of = make([]span, n)
	}
	w.of = w.of[:n]
	for i := range w.of {
		w.of[i].n = unwalked
	}
}

// edge returns the crossings of outer half-edge h, from vertex a to vertex b, both
// inside inner triangles; reversed if they are listed from b to a.
func (m *meeting) edge(h triangulate.HalfEdge, a, b triangulate.Vertex, at *places) (s span, reversed bool) {
	w := &m.walks
	if twin := int(m.outer.mesh.Twin(h) - w.first); uint(twin) < uint(len(w.of)) && w.of[twin].n != unwalked {
		return w.of[twin], true
	}
	ta, tb := triangulate.Triangle(at.of[a]), triangulate.Triangle(at.of[b])
	if ta != tb {
		s.from = int32(len(w.list))
		if m.walk(a, b, ta, tb) {
			s.n = int32(len(w.list)) - s.from
		} else {
			w.list = w.list[:s.from]
			s.n = unclear
		}
	}
	w.of[h-w.first] = s
	return s, false
}

// exits is the edge over which a line leaves a triangle; bit k of the index tells
// whether corner k lies to its left. None where all do, or none does.
var exits = [8]int8{-1, 2, 0, 2, 1, 1, 0, -1}

// turns leads from the edge over which a line enters a triangle to that over which it
// leaves, when the corner across lies to its right, and to its left.
var turns = [2][3]int8{{2, 0, 1}, {1, 2, 0}}

// walk goes straight from outer vertex a in inner triangle ta to b in tb and lists the
// edges it crosses. It gives up, false, where an inner vertex lies on the line.
func (m *meeting) walk(a, b triangulate.Vertex, ta, tb triangulate.Triangle) bool {
	mesh, pos := m.inner.mesh, m.inner.pos
	// The ends in (x, y) order.
	right := 0 // whether right of the line is left of the walk
	if !before(&m.outer.pos[a], &m.outer.pos[b]) {
		a, b = b, a
		right = 1
	}
	ax, ay, az := m.outer.pos[a][0], m.outer.pos[a][1], m.outer.z[a]
	bx, by := m.outer.pos[b][0], m.outer.pos[b][1]
	abx, aby, abz := bx-ax, by-ay, m.outer.z[b]-az
	long := math.Abs(abx) + math.Abs(aby)
	// The ends of the inner edge to cross, right and left of the walk, and their
	// areas with the line.
	var end [2]triangulate.Vertex
	var area [2]float64

	var corner [3]triangulate.Vertex
	var w [3]float64
	sides := 0
	for k := range 3 {
		v := mesh.Origin(ta.HalfEdge(k))
		p := &pos[v]
		l, r := float64(abx*(p[1]-ay)), float64(aby*(p[0]-ax))
		d := l - r
		if !(math.Abs(d)*cancels > math.Abs(l)+math.Abs(r)) {
			if d = exact.Area2(ax, ay, bx, by, p[0], p[1]); d == 0 {
				return false
			}
		}
		corner[k], w[k] = v, d
		sides |= (oneIf(d > 0) ^ right) << k
	}
	k := int(exits[sides])
	if k < 0 {
		return false
	}
	next := after[k]
	end[0], area[0] = corner[k], w[k]
	end[1], area[1] = corner[next], w[next]
	h := ta.HalfEdge(k)
	for {
		// The inner edge in (x, y) order.
		p, q := &pos[end[0]], &pos[end[1]]
		lo := oneIf(q[0] < p[0])
		if q[0] == p[0] {
			lo = oneIf(q[1] < p[1])
		}
		vc, vd := end[lo], end[lo^1]
		c, d := &pos[vc], &pos[vd]
		cx, cy := c[0], c[1]
		cdx, cdy := d[0]-cx, d[1]-cy
		l, r := float64(cdx*(ay-cy)), float64(cdy*(ax-cx))
		ua := l - r
		if !(math.Abs(ua)*cancels > math.Abs(l)+math.Abs(r)) {
			ua = exact.Area2(cx, cy, d[0], d[1], ax, ay)
		}
		l, r = float64(cdx*(by-cy)), float64(cdy*(bx-cx))
		ub := l - r
		if !(math.Abs(ub)*cancels > math.Abs(l)+math.Abs(r)) {
			ub = exact.Area2(cx, cy, d[0], d[1], bx, by)
		}
		// As meeting.cross has it.
		s, t := part(ua, ub), part(area[lo], area[lo^1])
		cz := m.inner.z[vc]
		twin := mesh.Twin(h)
		if twin == triangulate.NoHalfEdge {
			return false
		}
		x := walked{d: (cz - az) + (float64(t*(m.inner.z[vd]-cz)) - float64(s*abz)), out: h, in: twin}
		if short := math.Abs(cdx) + math.Abs(cdy); long < short || long == short && before(&m.outer.pos[a], c) {
			x.fromX, x.fromY, x.offX, x.offY = ax, ay, s*abx, s*aby
		} else {
			x.fromX, x.fromY, x.offX, x.offY = cx, cy, t*cdx, t*cdy
		}
		m.walks.list = append(m.walks.list, x)
		tri := twin.Triangle()
		if tri == tb {
			return true
		}
		// The corner across.
		k := int(twin - tri.HalfEdge(0))
		v := mesh.Origin(tri.HalfEdge(int(turns[0][k])))
		p = &pos[v]
		l, r = float64(abx*(p[1]-ay)), float64(aby*(p[0]-ax))
		e := l - r
		if !(math.Abs(e)*cancels > math.Abs(l)+math.Abs(r)) {
			if e = exact.Area2(ax, ay, bx, by, p[0], p[1]); e == 0 {
				return false
			}
		}
		side := oneIf(e > 0) ^ right
		end[side], area[side] = v, e
		h = tri.HalfEdge(int(turns[side][k]))
	}
}

func oneIf(b bool) int {
	if b {
		return 1
	}
	return 0
}
