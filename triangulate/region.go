package triangulate

import (
	"fmt"
	"math"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Region is the part of the plane inside an even number of void rings and, if
// there are boundary rings, inside an odd number of those. It is closed: a
// position on a boundary, or on the rim of a void, belongs to it. Read-only and
// safe to share.
type Region struct {
	boundary, voids rings
}

// RingError tells what is wrong with a ring of a Region.
type RingError struct {
	Void   bool // a void ring, else a boundary ring
	Index  int  // of the ring among its kind
	Vertex int  // of the ring near which it is, -1 for the whole ring
	At     orb.Point
	Reason string // what was seen, and what was expected
}

func (e *RingError) Error() string {
	kind := "boundary"
	if e.Void {
		kind = "void"
	}
	if e.Vertex < 0 {
		return fmt.Sprintf("%s ring %d: %s", kind, e.Index+1, e.Reason)
	}
	return fmt.Sprintf("%s ring %d: vertex %d near (%v, %v): %s", kind, e.Index+1, e.Vertex+1, e.At[0], e.At[1], e.Reason)
}

// NewRegion checks the rings and makes them ready for questions. A ring is closed
// (its last position repeats its first), has an area, and does not cross itself,
// though it may touch itself; rings may cross each other. Otherwise the error is
// a *RingError, or a *PositionError for a coordinate that Delaunay would refuse.
//
// Time O(n log n) for rings that run along like outlines do.
func NewRegion(boundary, voids []orb.Ring) (*Region, error) {
	r := &Region{}
	for k, set := range [2][]orb.Ring{boundary, voids} {
		for i, ring := range set {
			if err := checkRing(ring); err != nil {
				err.Void, err.Index = k == 1, i
				return nil, err
			}
		}
	}
	r.boundary, r.voids = newRings(boundary), newRings(voids)
	return r, nil
}

// Contains tells whether p belongs to the region, exactly.
// Time O(ring edges at the height of p).
func (r *Region) Contains(p orb.Point) bool { return r.Place(p) != Outside }

// Place tells whether p is Inside the region, on a ring and so OnEdge, or Outside,
// exactly. Time O(ring edges at the height of p).
func (r *Region) Place(p orb.Point) Place {
	place := Inside
	if len(r.boundary.edges) > 0 {
		odd, onRim := r.boundary.around(p)
		switch {
		case onRim:
			place = OnEdge
		case !odd:
			return Outside
		}
	}
	switch odd, onRim := r.voids.around(p); {
	case onRim:
		place = OnEdge
	case odd:
		return Outside
	}
	return place
}

// Rings returns the boundary rings and the void rings, as given.
func (r *Region) Rings() (boundary, voids []orb.Ring) { return r.boundary.rings, r.voids.rings }

// rings answers how often a position is enclosed. Edges are listed by slabs of
// equal height, so that a question looks at few.
type rings struct {
	rings     []orb.Ring
	edges     [][2]orb.Point // lower end first
	yMin, per float64
	slabs     [][]int32
}

func newRings(set []orb.Ring) rings {
	r := rings{rings: set}
	yMin, yMax := math.Inf(1), math.Inf(-1)
	for _, ring := range set {
		for i := 1; i < len(ring); i++ {
			a, b := ring[i-1], ring[i]
			if a == b {
				continue
			}
			if b[1] < a[1] {
				a, b = b, a
			}
			yMin, yMax = min(yMin, a[1]), max(yMax, b[1])
			r.edges = append(r.edges, [2]orb.Point{a, b})
		}
	}
	if len(r.edges) == 0 {
		return r
	}
	n := len(r.edges)
	r.yMin, r.per = yMin, float64(n)/(yMax-yMin)
	r.slabs = make([][]int32, n)
	for i, e := range r.edges {
		for k := r.slab(e[0][1]); k <= r.slab(e[1][1]); k++ {
			r.slabs[k] = append(r.slabs[k], int32(i))
		}
	}
	return r
}

func (r *rings) slab(y float64) int { return slot((y-r.yMin)*r.per, len(r.slabs)) }

// around tells whether p is enclosed an odd number of times, and whether it lies
// on an edge. A ray to the west decides.
func (r *rings) around(p orb.Point) (odd, onRim bool) {
	if len(r.edges) == 0 {
		return false, false
	}
	for _, i := range r.slabs[r.slab(p[1])] {
		a, b := r.edges[i][0], r.edges[i][1]
		if p[1] < a[1] || p[1] > b[1] {
			continue
		}
		if a[1] == b[1] {
			if p[0] >= min(a[0], b[0]) && p[0] <= max(a[0], b[0]) {
				return odd, true
			}
			continue
		}
		s := exact.Orient(a, b, p)
		if s == 0 {
			return odd, true
		}
		// The edge owns its lower end; it is west of p if p is on its right.
		if p[1] < b[1] && s < 0 {
			odd = !odd
		}
	}
	return odd, false
}

// checkRing returns what is wrong with a ring, its kind and number left open.
func checkRing(ring orb.Ring) *RingError {
	for i, p := range ring {
		if !positionOK(p) {
			return &RingError{Vertex: i, At: p, Reason: fmt.Sprintf("expected finite coordinates, 0 or from %g to %g in size", CoordinateLeast, CoordinateMost)}
		}
	}
	if len(ring) < 2 || ring[0] != ring[len(ring)-1] {
		e := &RingError{Vertex: -1, Reason: fmt.Sprintf("has %d positions: expected a closed ring", len(ring))}
		if len(ring) >= 2 {
			a, b := ring[0], ring[len(ring)-1]
			e.Reason = fmt.Sprintf("begins at (%v, %v) and ends at (%v, %v): expected a closed ring, whose last position repeats its first", a[0], a[1], b[0], b[1])
		}
		return e
	}
	flat := true
	for i := 2; i < len(ring); i++ {
		if exact.Orient(ring[0], ring[i-1], ring[i]) != 0 {
			flat = false
			break
		}
	}
	if flat {
		return &RingError{Vertex: -1, Reason: fmt.Sprintf("%d positions on one line enclose no area", len(ring))}
	}
	return selfCrossing(ring)
}
