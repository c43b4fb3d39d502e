package triangulate

import (
	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Place tells how a position lies in a mesh.
type Place uint8

// The places. Edges and vertices on the outline belong to the surface.
const (
	Outside  Place = iota // in no triangle
	Inside                // strictly inside one triangle
	OnEdge                // on an edge, between its two vertices
	OnVertex              // at a vertex
)

// String returns the word that outputs use.
func (p Place) String() string {
	return [...]string{"outside", "inside", "edge", "vertex"}[p]
}

// Location is the exact place of a position in a mesh.
type Location struct {
	Place Place
	// Triangle owns the position: the one that holds p + (e, e²) for an
	// infinitesimal e > 0; if that is outside, the first one met turning
	// counter-clockwise about p. NoTriangle outside.
	Triangle Triangle
	// Edge is, on an edge, the owner's half-edge along it; at a vertex, the
	// owner's half-edge that starts there; else NoHalfEdge.
	Edge HalfEdge
	// Vertex is the vertex at the position, if there is one, else NoVertex.
	Vertex Vertex
}

var nowhere = Location{Outside, NoTriangle, NoHalfEdge, NoVertex}

// Locator finds positions in a mesh. It remembers where it was and may be used
// by one goroutine at a time.
type Locator struct {
	m    *Mesh
	last Triangle
	turn uint32 // which edge is tried first; see walk
}

// Locator returns a new locator. The first one of a mesh makes an index of
// about 2 bytes a vertex.
func (m *Mesh) Locator() *Locator {
	m.startsOnce.Do(func() { m.starts = newStarts(m) })
	return &Locator{m: m}
}

// Locate returns the place of p; every decision is exact, so it does not depend
// on what was asked before. A place that Delaunay would refuse is Outside.
//
// Expected time O(1) for evenly spread vertices; O(sqrt n) where they crowd.
func (l *Locator) Locate(p orb.Point) Location {
	if len(l.m.half) == 0 || !positionOK(p) {
		return nowhere
	}
	return l.m.surface(l.walk(l.m.starts.near(p), p))
}

// LocateNext is Locate for a position that is likely near the one before: it
// walks from there.
func (l *Locator) LocateNext(p orb.Point) Location {
	if len(l.m.half) == 0 || !positionOK(p) {
		return nowhere
	}
	return l.m.surface(l.walk(l.last, p))
}

// surface is the location of a position that walk has found, hidden triangles
// being no part of the surface.
func (m *Mesh) surface(place Place, h HalfEdge) Location {
	switch {
	case place == OnVertex:
		return m.onVertex(h)
	case place == OnEdge:
		return m.onEdge(h)
	case place == Outside || int(h) >= m.shown:
		return nowhere
	}
	return Location{Inside, h.Triangle(), NoHalfEdge, NoVertex}
}

// walk finds the place of p in the hull: a half-edge of the triangle it is in, or
// the one it is on, or one that starts there; NoHalfEdge outside.
//
// It goes from t towards p, each time across an edge that has p strictly on
// its other side.
//
// In a Delaunay mesh that ends whichever edge is tried first; with constrained
// edges it could go round in circles for ever if the choice were fixed, so the
// first edge to try changes from step to step (Devillers, Pion & Teillaud
// 2002, the remembering stochastic walk).
func (l *Locator) walk(t Triangle, p orb.Point) (Place, HalfEdge) {
	T, pos := l.m.half, l.m.pos
	h := t.HalfEdge(0)
	came := NoHalfEdge // the edge that we came over, p is left of it
step:
	for {
		if came == NoHalfEdge {
			l.turn = l.turn*1664525 + 1013904223
			h = h.Triangle().HalfEdge(int(l.turn>>16) % 3)
		}
		onEdge, zeros := NoHalfEdge, 0
		e := h
		for range 3 {
			if e != came {
				o, d := pos[T[e].origin], pos[T[e.next()].origin]
				switch exact.OrientXY(o[0], o[1], d[0], d[1], p[0], p[1]) {
				case -1:
					twin := T[e].twin
					if twin == NoHalfEdge {
						l.last = e.Triangle()
						return Outside, NoHalfEdge
					}
					came = twin
					l.turn = l.turn*1664525 + 1013904223
					if h = twin.next(); l.turn>>31 == 1 {
						h = twin.prev()
					}
					continue step
				case 0:
					zeros++
					if onEdge == NoHalfEdge || e.next() != onEdge {
						// The later of two in turn starts at the vertex they share.
						onEdge = e
					}
				}
			}
			e = e.next()
		}
		l.last = h.Triangle()
		switch zeros {
		case 0:
			return Inside, h
		case 1:
			return OnEdge, onEdge
		}
		return OnVertex, onEdge
	}
}

// ahead tells whether p + (e, e²), e infinitesimal, lies to the left of a line
// through p in the direction (dx, dy).
func ahead(dx, dy float64) bool { return dy < 0 || dy == 0 && dx > 0 }

// onEdge is the location of a position between the ends of h.
func (m *Mesh) onEdge(h HalfEdge) Location {
	o, d := m.pos[m.Origin(h)], m.pos[m.Dest(h)]
	// The signs of differences are exact in floating point.
	first, second := h, m.half[h].twin
	if second != NoHalfEdge && !ahead(d[0]-o[0], d[1]-o[1]) {
		first, second = second, first
	}
	if int(first) >= m.shown {
		first = second
	}
	if first == NoHalfEdge || int(first) >= m.shown {
		return nowhere
	}
	return Location{OnEdge, first.Triangle(), first, NoVertex}
}

// onVertex is the location at the origin of h.
func (m *Mesh) onVertex(h HalfEdge) Location {
	v := m.half[h].origin
	p := m.pos[v]
	// The triangle that holds p + (e, e²), or the one after the outside of the
	// hull; from there on, the first that shows.
	first := m.firstClockwise(h)
	owner := first
	for e := first; ; {
		a, b := m.pos[m.Dest(e)], m.pos[m.Apex(e)]
		if ahead(a[0]-p[0], a[1]-p[1]) && ahead(p[0]-b[0], p[1]-b[1]) {
			owner = e
			break
		}
		if e = m.turn(e); e == first {
			break
		}
	}
	for e := owner; ; {
		if int(e) < m.shown {
			return Location{OnVertex, e.Triangle(), e, v}
		}
		if e = m.turn(e); e == owner {
			return nowhere
		}
	}
}

// firstClockwise turns clockwise about the origin of h until the outside lies
// beyond, or returns h when there is no outside.
func (m *Mesh) firstClockwise(h HalfEdge) HalfEdge {
	for e := h; ; {
		twin := m.half[e].twin
		if twin == NoHalfEdge {
			return e
		}
		if e = twin.next(); e == h {
			return h
		}
	}
}

// LocateIn returns the location of p if triangle t owns it, else one that is
// Outside: every position of the surface has one owner. Time O(1), except at a
// vertex of the outline.
func (m *Mesh) LocateIn(t Triangle, p orb.Point) Location {
	onEdge, zeros := NoHalfEdge, 0
	for i := range 3 {
		e := t.HalfEdge(i)
		o, d := m.pos[m.half[e].origin], m.pos[m.Dest(e)]
		switch exact.OrientXY(o[0], o[1], d[0], d[1], p[0], p[1]) {
		case -1:
			return nowhere
		case 0:
			zeros++
			if i < 2 || zeros == 1 || onEdge != t.HalfEdge(0) {
				onEdge = e // of two, the one that starts at the vertex they share
			}
		}
	}
	switch zeros {
	case 0:
		return Location{Inside, t, NoHalfEdge, NoVertex}
	case 1:
		if loc := m.onEdge(onEdge); loc.Triangle == t {
			return loc
		}
		return nowhere
	}
	v := m.half[onEdge].origin
	a, b := m.pos[m.Dest(onEdge)], m.pos[m.Apex(onEdge)]
	if ahead(a[0]-p[0], a[1]-p[1]) && ahead(p[0]-b[0], p[1]-b[1]) {
		return Location{OnVertex, t, onEdge, v}
	}
	if m.Twin(onEdge) != NoHalfEdge {
		return nowhere
	}
	// The first triangle after the outside owns a vertex if no other does.
	if loc := m.onVertex(onEdge); loc.Triangle == t {
		return loc
	}
	return nowhere
}
