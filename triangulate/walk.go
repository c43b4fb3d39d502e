package triangulate

import (
	"iter"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Crossing is one thing that a straight line meets on its way through a mesh.
type Crossing struct {
	// Place is OnVertex where the line passes exactly through Vertex, OnEdge
	// where it crosses Edge between its ends.
	Place  Place
	Vertex Vertex
	// Edge is the half-edge crossed, of the triangle that the line enters, or
	// of the one it leaves where it ends or nothing lies beyond; NoHalfEdge at a
	// vertex.
	Edge HalfEdge
	// Into is the triangle that the line goes on through, NoTriangle where it
	// goes on along an edge, leaves the mesh, or ends.
	Into Triangle
	// Along is the half-edge along which the line goes on from a vertex,
	// pointing the line's way; NoHalfEdge elsewhere. On the outline, where only
	// one half-edge exists, it may point back.
	Along HalfEdge
}

// Cross ranges over the vertices and edges that the straight line from a to b
// meets, in order from a to b; those at a and b themselves are included. An edge
// that the line runs along is told once, by Along where the line joins it. The
// line need not begin or end inside, and may have no length. A line from or to a
// place that Delaunay would refuse meets nothing. Every decision is exact.
//
// Time O(1) for each crossing beside locating a; O(edges of the outline) when a
// lies outside.
func (l *Locator) Cross(a, b orb.Point) iter.Seq[Crossing] {
	return func(yield func(Crossing) bool) {
		if len(l.m.half) == 0 || !positionOK(a) || !positionOK(b) {
			return
		}
		w := walker{m: l.m, a: a, b: b, yield: yield}
		switch place, h := l.walk(l.m.starts.near(a), a); place {
		case Outside:
			if a != b {
				w.fromOutside()
			}
		case Inside:
			if a != b {
				w.fromInside(h.Triangle())
			}
		case OnEdge:
			w.fromEdge(h)
		case OnVertex:
			w.fromVertex(h)
		}
	}
}

// walker follows the line from a to b.
//
// A line that crosses a half-edge from its left to its right has the origin on
// the line's right and the destination on its left.
type walker struct {
	m     *Mesh
	a, b  orb.Point
	yield func(Crossing) bool
}

// meet hands on a crossing as the surface has it: without triangles that are
// hidden, and not at all where all about it are.
func (w *walker) meet(c Crossing) bool {
	m := w.m
	if c.Into != NoTriangle && 3*int(c.Into) >= m.shown {
		c.Into = NoTriangle
	}
	c.Along = m.showing(c.Along)
	if c.Place == OnEdge {
		if c.Edge = m.showing(c.Edge); c.Edge == NoHalfEdge {
			return true
		}
	} else if m.firstAround(c.Vertex) == NoHalfEdge {
		return true
	}
	return w.yield(c)
}

// showing returns h, or its twin if h is hidden, or NoHalfEdge if both are.
func (m *Mesh) showing(h HalfEdge) HalfEdge {
	if h != NoHalfEdge && int(h) >= m.shown {
		h = m.half[h].twin
	}
	if int(h) >= m.shown {
		return NoHalfEdge
	}
	return h
}

// side is the side of the line a→b on which v lies.
func (w *walker) side(v Vertex) int {
	p := &w.m.pos[v]
	return exact.OrientXY(w.a[0], w.a[1], w.b[0], w.b[1], p[0], p[1])
}

// sideOf is the side of half-edge h on which p lies; its triangle is left.
func (w *walker) sideOf(h HalfEdge, p orb.Point) int {
	o, d := &w.m.pos[w.m.Origin(h)], &w.m.pos[w.m.Dest(h)]
	return exact.OrientXY(o[0], o[1], d[0], d[1], p[0], p[1])
}

// toward tells whether v, on the line through a and b, lies on b's side of a.
func (w *walker) toward(v Vertex) bool {
	return exact.CompareXY(w.a, w.m.pos[v]) == exact.CompareXY(w.a, w.b)
}

// within tells whether v, on the line through a and b, lies from a to b.
func (w *walker) within(v Vertex) bool {
	p := w.m.pos[v]
	order := exact.CompareXY(w.a, w.b)
	return exact.CompareXY(w.a, p)*order >= 0 && exact.CompareXY(p, w.b)*order >= 0
}

// fromInside leaves triangle t, in which the line begins.
func (w *walker) fromInside(t Triangle) {
	for i := range 3 {
		h := t.HalfEdge(i)
		o, d := w.side(w.m.Origin(h)), w.side(w.m.Dest(h))
		if o == 0 && w.toward(w.m.Origin(h)) {
			w.reach(h)
			return
		}
		if o < 0 && d > 0 {
			w.over(h)
			return
		}
	}
}

// reach arrives at the vertex where h starts, if the line goes that far.
func (w *walker) reach(h HalfEdge) {
	if w.within(w.m.Origin(h)) {
		w.fromVertex(h)
	}
}

// over leaves over h, if the line goes that far, and follows it on.
func (w *walker) over(h HalfEdge) {
	for {
		s := w.sideOf(h, w.b)
		if s > 0 {
			return
		}
		twin := w.m.half[h].twin
		if s == 0 || twin == NoHalfEdge {
			w.meet(Crossing{OnEdge, NoVertex, h, NoTriangle, NoHalfEdge})
			return
		}
		if !w.meet(Crossing{OnEdge, NoVertex, twin, twin.Triangle(), NoHalfEdge}) {
			return
		}
		if h = w.out(twin); h == NoHalfEdge {
			return
		}
	}
}

// out returns the half-edge over which the line leaves the triangle that it
// has entered over h; NoHalfEdge if it meets the apex, and then goes on there.
func (w *walker) out(h HalfEdge) HalfEdge {
	apex := h.prev()
	switch w.side(w.m.Origin(apex)) {
	case 0:
		w.reach(apex)
		return NoHalfEdge
	case 1:
		return h.next()
	}
	return apex
}

// enter goes on from a place on half-edge h, between its ends, b not to its right.
func (w *walker) enter(h HalfEdge) {
	if w.meet(Crossing{OnEdge, NoVertex, h, h.Triangle(), NoHalfEdge}) {
		if next := w.out(h); next != NoHalfEdge {
			w.over(next)
		}
	}
}

// fromEdge begins on the half-edge h, between its ends.
func (w *walker) fromEdge(h HalfEdge) {
	twin := w.m.half[h].twin
	s := w.sideOf(h, w.b)
	switch {
	case w.a == w.b || s < 0 && twin == NoHalfEdge:
		w.meet(Crossing{OnEdge, NoVertex, h, NoTriangle, NoHalfEdge})
	case s > 0:
		w.enter(h)
	case s < 0:
		w.enter(twin)
	default:
		next := h.next()
		if !w.toward(w.m.Origin(next)) {
			next = h
			if twin != NoHalfEdge {
				h = twin
			}
		}
		if w.meet(Crossing{OnEdge, NoVertex, h, NoTriangle, h}) {
			w.reach(next)
		}
	}
}

// fromVertex passes through the vertex where h starts, and goes on.
func (w *walker) fromVertex(h HalfEdge) {
	for {
		v := w.m.half[h].origin
		c := Crossing{OnVertex, v, NoHalfEdge, NoTriangle, NoHalfEdge}
		into := NoHalfEdge
		if w.m.pos[v] != w.b {
			c.Along, into = w.leave(h)
		}
		if into != NoHalfEdge {
			c.Into = into.Triangle()
		}
		if !w.meet(c) {
			return
		}
		if into != NoHalfEdge {
			w.over(into.next())
			return
		}
		if c.Along == NoHalfEdge {
			return
		}
		h = c.Along
		if w.m.half[h].origin == v { // else an edge of the outline that points back
			h = h.next()
		}
		if !w.within(w.m.Origin(h)) {
			return
		}
	}
}

// leave turns about the origin of h to find the edge along which the line goes
// on to b, or the half-edge from there whose triangle it goes on through.
func (w *walker) leave(h HalfEdge) (along, into HalfEdge) {
	p := w.m.pos[w.m.Origin(h)]
	side := func(u Vertex) int { return exact.Orient(p, w.m.pos[u], w.b) }
	onward := func(u Vertex) bool {
		return exact.CompareXY(p, w.m.pos[u]) == exact.CompareXY(p, w.b)
	}
	first := w.m.firstClockwise(h)
	for e := first; ; {
		a, b := w.m.Dest(e), w.m.Apex(e)
		sa, sb := side(a), side(b)
		if sa == 0 && onward(a) {
			return e, NoHalfEdge
		}
		if sa > 0 && sb < 0 {
			return NoHalfEdge, e
		}
		next := w.m.half[e.prev()].twin
		if next == NoHalfEdge && sb == 0 && onward(b) {
			return e.prev(), NoHalfEdge
		}
		if next == NoHalfEdge || next == first {
			return NoHalfEdge, NoHalfEdge
		}
		e = next
	}
}

// fromOutside finds where a line that begins outside comes in: over an edge of
// the outline that it crosses inwards, or else at the first vertex on it.
func (w *walker) fromOutside() {
	first := NoHalfEdge
	for _, h := range w.m.starts.rim {
		o, d := w.side(w.m.Origin(h)), w.side(w.m.Dest(h))
		if o > 0 && d < 0 && w.sideOf(h, w.a) < 0 && w.sideOf(h, w.b) >= 0 {
			w.comeIn(h)
			return
		}
		if o == 0 && w.within(w.m.Origin(h)) && (first == NoHalfEdge || w.sooner(h, first)) {
			first = h
		}
	}
	if first != NoHalfEdge {
		w.fromVertex(first)
	}
}

// sooner tells whether the line meets the origin of h before that of g.
func (w *walker) sooner(h, g HalfEdge) bool {
	return exact.CompareXY(w.m.pos[w.m.Origin(h)], w.m.pos[w.m.Origin(g)]) == exact.CompareXY(w.a, w.b)
}

// comeIn crosses the outline's half-edge h inwards, or ends on it.
func (w *walker) comeIn(h HalfEdge) {
	if w.sideOf(h, w.b) == 0 {
		w.meet(Crossing{OnEdge, NoVertex, h, NoTriangle, NoHalfEdge})
		return
	}
	w.enter(h)
}
