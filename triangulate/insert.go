package triangulate

import (
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Inserting a segment into a triangulation: the triangles that it crosses are
// taken out, the two holes on its sides are filled again, and edges are flipped
// until every one that may be is Delaunay. The constrained Delaunay
// triangulation of a set is unique under the tie rule, so neither the order of
// segments nor the way of filling shows in the result.
//
// Sources: Chew 1989 and Lee & Lin 1986 (constrained Delaunay triangulation);
// Lawson 1977 (flipping); the filling is the stack of Graham 1972.

// inserter changes a triangulation that has no ghosts.
type inserter struct {
	pos  []orb.Point
	half []half
	kept bits       // constrained half-edges
	at   []HalfEdge // of every vertex, some outgoing half-edge

	chains []chainEdge
	saved  journal // of what changes, for a Reduction

	// Scratch of one hole, reused.
	rimLeft, rimRight, made, suspects []HalfEdge
	left, right, open                 []rimLink
	free                              []Triangle
}

// chainEdge notes that the edge between two vertices is part of a segment.
type chainEdge struct {
	u, v    Vertex // u < v
	segment int32
}

// rimLink is one edge of the rim of a hole: from the vertex u on, with what
// lies beyond it.
type rimLink struct {
	u     Vertex
	outer HalfEdge // NoHalfEdge on the outline
	pair  int32    // when >= 0, beyond lies the hole itself: the rim edge pair
	index int32    // of this rim edge among those of its hole, -1 for a filled one
	kept  bool
}

func (n *inserter) orient(u, v, w Vertex) int { return exact.Orient(n.pos[u], n.pos[v], n.pos[w]) }

// insert makes the segment from a to b, a != b, a chain of edges, and notes it.
// Where a kept edge is in the way it returns false.
func (n *inserter) insert(a, b Vertex, segment int32) bool {
	for a != b {
		along, into := n.toward(a, b)
		if along != NoHalfEdge {
			next := n.dest(along)
			if n.half[along].origin != a {
				next = n.half[along].origin
			}
			n.keep(along, segment)
			a = next
			continue
		}
		w, ok := n.cross(a, b, into, segment)
		if !ok {
			return false
		}
		a = w
	}
	return true
}

func (n *inserter) dest(h HalfEdge) Vertex { return n.half[h.next()].origin }

// keep makes the edge of h constrained, as a part of segment.
func (n *inserter) keep(h HalfEdge, segment int32) {
	n.note(h.Triangle())
	n.kept.set(int(h))
	if t := n.half[h].twin; t != NoHalfEdge {
		n.note(t.Triangle())
		n.kept.set(int(t))
	}
	u, v := n.half[h].origin, n.dest(h)
	n.chains = append(n.chains, chainEdge{min(u, v), max(u, v), segment})
}

// toward finds how the line from a to b begins: along is an edge at a, in either
// direction, on which it begins, or else into is the half-edge from a whose
// triangle it enters. b lies within the fan of triangles about a, since the
// mesh is convex, less than half a turn from any edge on the side on which it
// lies of that edge's line, so turning to that side finds it.
func (n *inserter) toward(a, b Vertex) (along, into HalfEdge) {
	e := n.at[a]
	d := n.dest(e)
	s := n.orient(a, d, b)
	if s == 0 && exact.CompareXY(n.pos[a], n.pos[d]) == exact.CompareXY(n.pos[a], n.pos[b]) {
		return e, NoHalfEdge
	}
	for s < 0 { // clockwise
		t := n.half[e].twin
		if t == NoHalfEdge {
			panic("triangulate: no way from a vertex to another of its mesh")
		}
		e = t.next()
		switch s = n.orient(a, n.dest(e), b); {
		case s == 0:
			return e, NoHalfEdge
		case s > 0:
			return NoHalfEdge, e
		}
	}
	for { // counter-clockwise; from an edge that leads straight away from b, too
		switch s = n.orient(a, n.half[e.prev()].origin, b); {
		case s == 0:
			return e.prev(), NoHalfEdge
		case s < 0:
			return NoHalfEdge, e
		}
		if e = n.half[e.prev()].twin; e == NoHalfEdge {
			panic("triangulate: no way from a vertex to another of its mesh")
		}
	}
}

// cross takes out the triangles between a and the next vertex w on the line to
// b, which enters the triangle of into, and makes a-w an edge.
func (n *inserter) cross(a, b Vertex, into HalfEdge, segment int32) (w Vertex, ok bool) {
	T := n.half
	// The rims of the two holes, as half-edges of the triangles taken out: the
	// right one from a on, the left one backwards from a, turned round below.
	right := append(n.rimRight[:0], into)
	left := append(n.rimLeft[:0], into.prev())
	n.free = append(n.free[:0], into.Triangle())
	for h := into.next(); ; {
		if n.kept.get(int(h)) {
			return NoVertex, false
		}
		t := T[h].twin
		n.free = append(n.free, t.Triangle())
		apex := t.prev()
		w = T[apex].origin
		s := 0
		if w != b {
			s = n.orient(a, b, w)
		}
		if s <= 0 {
			right = append(right, t.next())
			h = apex
		}
		if s >= 0 {
			left = append(left, apex)
			h = t.next()
		}
		if s == 0 {
			break
		}
	}
	slices.Reverse(left)
	n.rimRight, n.rimLeft = right, left
	n.right, n.left = n.link(n.right[:0], right), n.link(n.left[:0], left)
	r, l := n.fill(n.right, w), n.fill(n.left, a)
	n.join(l, r)
	n.keep(l, segment)
	n.restore()
	return w, true
}

// link turns the inner half-edges of a rim into links with what lies beyond
// them, and scribbles over the triangles of the hole.
func (n *inserter) link(links []rimLink, rim []HalfEdge) []rimLink {
	for i, h := range rim {
		links = append(links, rimLink{u: n.half[h].origin, outer: n.half[h].twin, pair: -1, index: int32(i), kept: n.kept.get(int(h))})
	}
	// An edge that hangs into the hole is on the rim twice, once a side.
	for i, h := range rim {
		n.note(h.Triangle())
		n.half[h].origin = Vertex(-2 - i)
	}
	for i := range links {
		if o := links[i].outer; o != NoHalfEdge && n.half[o].origin <= -2 {
			links[i].pair = int32(-2 - n.half[o].origin)
		}
	}
	return links
}

// fill triangulates the hole whose rim begins with links and ends at vertex
// last; the base edge from last to the beginning closes it. It returns the
// half-edge along the base.
//
// From every vertex of the rim an edge that was taken out led to the base, so
// the rim is in order along the base, and cutting off each vertex that turns
// left, checking its predecessor again, leaves valid triangles only: the part
// of the hole between two such edges is convex but for the rim between.
//
// Only the edges inside the hole become suspect. A triangle that the segment
// does not cross stays constrained Delaunay, as a segment more only hides
// vertices from it, so the rim passes the in-circle test in the end whatever
// the filling (Chew 1989).
func (n *inserter) fill(links []rimLink, last Vertex) HalfEdge {
	made := n.made[:0] // the new half-edge of every rim edge, for pairs
	for range links {
		made = append(made, NoHalfEdge)
	}
	n.made = made
	s := n.open[:0]
	for i, l := range links {
		w := last
		if i+1 < len(links) {
			w = links[i+1].u
		}
		s = append(s, l)
		for len(s) >= 2 && n.orient(s[len(s)-2].u, s[len(s)-1].u, w) > 0 {
			first, second := s[len(s)-2], s[len(s)-1]
			t := n.free[len(n.free)-1]
			n.free = n.free[:len(n.free)-1]
			h := t.HalfEdge(0)
			n.note(t)
			n.half[h].origin, n.half[h+1].origin, n.half[h+2].origin = first.u, second.u, w
			n.at[first.u], n.at[second.u], n.at[w] = h, h+1, h+2
			n.attach(h, first, made)
			n.attach(h+1, second, made)
			n.kept.put(int(h+2), false)
			if len(s) > 2 || i+1 < len(links) { // not the base itself
				n.suspects = append(n.suspects, h+2)
			}
			s = append(s[:len(s)-2], rimLink{u: first.u, outer: h + 2, pair: -1, index: -1})
		}
	}
	n.open = s
	return s[0].outer
}

// attach links the new half-edge h to what lies beyond l.
func (n *inserter) attach(h HalfEdge, l rimLink, made []HalfEdge) {
	n.kept.put(int(h), l.kept)
	if l.index >= 0 {
		made[l.index] = h
	}
	if l.pair < 0 {
		n.join(h, l.outer)
		return
	}
	if other := made[l.pair]; other != NoHalfEdge {
		n.join(h, other)
	}
}

// join makes h and g twins; either may be NoHalfEdge.
func (n *inserter) join(h, g HalfEdge) {
	if h != NoHalfEdge {
		n.note(h.Triangle())
		n.half[h].twin = g
	}
	if g != NoHalfEdge {
		n.note(g.Triangle())
		n.half[g].twin = h
	}
}
