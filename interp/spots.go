package interp

import (
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// SpotKind says what is special about the height of a vertex.
type SpotKind uint8

// The kinds.
const (
	Summit SpotKind = iota // all about it is lower
	Hollow                 // a pit: all about it is higher
	Saddle                 // higher and lower ground take turns about it, twice or more
)

// String returns the word that outputs use.
func (k SpotKind) String() string { return [...]string{"summit", "pit", "saddle"}[k] }

// Spot is a summit, a pit or a saddle of a surface.
type Spot struct {
	Vertex triangulate.Vertex
	Kind   SpotKind
	// Folds is, of a saddle, how many ways lead up from it: 2 for an ordinary one.
	Folds int
	// Level tells that a neighbour has the same height: the spot stands for a level
	// part, or for a point of it.
	Level bool
}

// Spots returns the summits, pits and saddles of s in (x, y) order. Of equal heights
// the one that is later in (x, y) order counts as higher, so that a level part has as
// many of each as if it were a little tilted.
//
// Vertices of the outline are left out: what the ground does beyond is not known. On
// a surface whose outline is one ring, with all of it below, summits and pits less
// saddles (Folds - 1 each) are 1 (the critical point theorem for planes over
// triangles: T. Banchoff, J. Differential Geometry 1, 1967). Time O(vertices).
func (s *Surface) Spots() []Spot {
	m := s.mesh
	var all []Spot
	for _, v := range m.Ordered() {
		if spot, ok := s.spot(v); ok {
			all = append(all, spot)
		}
	}
	return all
}

// spot looks at the neighbours of v in turn.
func (s *Surface) spot(v triangulate.Vertex) (Spot, bool) {
	spot := Spot{Vertex: v}
	turns, n := 0, 0
	first, last := false, false
	for h := range s.mesh.Around(v) {
		if s.mesh.Twin(h) == triangulate.NoHalfEdge || s.mesh.Twin(s.mesh.Prev(h)) == triangulate.NoHalfEdge {
			return spot, false
		}
		u := s.mesh.Dest(h)
		spot.Level = spot.Level || s.z[u] == s.z[v]
		up := s.higher(u, v)
		if n == 0 {
			first = up
		} else if up != last {
			turns++
		}
		last = up
		n++
	}
	if n == 0 {
		return spot, false
	}
	if first != last {
		turns++
	}
	switch {
	case turns == 0 && first:
		spot.Kind = Hollow
	case turns == 0:
		spot.Kind = Summit
	case turns >= 4:
		spot.Kind, spot.Folds = Saddle, turns/2
	default:
		return spot, false
	}
	return spot, true
}

// higher tells whether u is higher than v, of equal heights the later in (x, y) order.
func (s *Surface) higher(u, v triangulate.Vertex) bool {
	if s.z[u] != s.z[v] {
		return s.z[u] > s.z[v]
	}
	return exact.CompareXY(s.pos[u], s.pos[v]) > 0
}
