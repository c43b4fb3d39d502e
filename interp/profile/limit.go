package profile

import (
	"cmp"
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// limit cuts profiles at the rings of a region.
//
// A place of the line is inside if the number of ring edges that the line, coming
// from infinity, has crossed before it is odd for the boundary and even for the
// voids. Where the line passes through a vertex of a ring or runs along its edge, it
// is taken twice, moved to the left and to the right by an infinitesimal: a vertex
// on the line then lies on its right, or on its left. A place counts as inside if
// either of the two is, so that rims belong to the surface.
//
// Which edges are crossed, and which of these crossings lie before the beginning of
// a leg, is decided by exact signs. Their places are rounded once, and rounding
// keeps their order.
type limit struct {
	region *triangulate.Region
	edges  []ringEdge
	bound  bool // there is a boundary
	found  []crossing
}

type ringEdge struct {
	u, v orb.Point
	void bool
}

// crossing is where a ring edge takes the line from one side to the other.
type crossing struct {
	at          orb.Point
	key         float64 // along the leg
	void        bool
	left, right bool // of the lines moved to the left and to the right
}

func newLimit(r *triangulate.Region) *limit {
	l := &limit{region: r}
	boundary, voids := r.Rings()
	l.bound = len(boundary) > 0
	for k, set := range [2][]orb.Ring{boundary, voids} {
		for _, ring := range set {
			for i := 1; i < len(ring); i++ {
				if ring[i-1] != ring[i] {
					l.edges = append(l.edges, ringEdge{ring[i-1], ring[i], k == 1})
				}
			}
		}
	}
	return l
}

// parity counts crossings, odd or even, of the two moved lines with boundary and
// voids.
type parity struct{ left, right [2]bool }

func (p *parity) flip(c *crossing) {
	k := 0
	if c.void {
		k = 1
	}
	p.left[k] = p.left[k] != c.left
	p.right[k] = p.right[k] != c.right
}

func (l *limit) inside(p *parity) bool {
	return (!l.bound || p.left[0]) && !p.left[1] || (!l.bound || p.right[0]) && !p.right[1]
}

// cross finds the crossings of a leg in order, and the parity at its beginning.
func (l *limit) cross(a, b orb.Point, r *ruler) (start parity) {
	l.found = l.found[:0]
	for i := range l.edges {
		e := &l.edges[i]
		su, sv := exact.Orient(a, b, e.u), exact.Orient(a, b, e.v)
		c := crossing{void: e.void, left: (su > 0) != (sv > 0), right: (su >= 0) != (sv >= 0)}
		if !c.left && !c.right {
			continue
		}
		// How the line goes by the edge's own line: it comes from the side of a.
		sa, sb := exact.Orient(e.u, e.v, a), exact.Orient(e.u, e.v, b)
		if sa == 0 {
			start.flip(&c)
			continue
		}
		if sa*sb >= 0 && sb != 0 {
			// Both ends on one side. The line runs away from the edge if it runs to
			// the side that it is on: to the left of u→v if it crosses u→v from right
			// to left, which is when u lies left of the line.
			if away := (su > sv) == (sa > 0); away {
				start.flip(&c)
			}
			continue
		}
		switch {
		case su == 0:
			c.at = e.u
		case sv == 0:
			c.at = e.v
		case sb == 0:
			c.at = b
		default:
			c.at = triangulate.Intersection(a, b, e.u, e.v)
		}
		c.key = r.station(c.at)
		l.found = append(l.found, c)
	}
	slices.SortFunc(l.found, func(p, q crossing) int { return cmp.Or(cmp.Compare(p.key, q.key), exact.CompareXY(p.at, q.at)) })
	return start
}

// within returns the events of the leg at hand as the region leaves them.
func (t *Tracer) within(al *Alignment, k int) []event {
	run := newRuler(al, k)
	l := t.limit
	now := l.cross(al.points[k], al.points[k+1], &run)
	t.merged = t.merged[:0]
	behind := false // there is surface behind
	next := 0
	for i := range t.events {
		e := t.events[i]
		for next < len(l.found) && l.found[next].key <= e.Station && l.found[next].at == e.At {
			now.flip(&l.found[next])
			next++
		}
		behind = t.keep(e, l.inside(&now), behind)
		if i == len(t.events)-1 {
			break
		}
		to := t.events[i+1]
		for next < len(l.found) && l.found[next].key <= to.Station && l.found[next].at != to.At {
			c := l.found[next]
			for ; next < len(l.found) && l.found[next].at == c.at; next++ {
				now.flip(&l.found[next])
			}
			rim := e
			rim.At, rim.Station, rim.Bend, rim.Place = c.at, max(c.key, e.Station), false, triangulate.OnEdge
			rim.Z = t.on(&e, c.at)
			if inside := l.inside(&now); inside != behind && e.Ahead == Surface {
				behind = t.keep(rim, inside, behind)
			}
		}
	}
	return t.merged
}

// on is the height at p on the piece ahead of e.
func (t *Tracer) on(e *event, p orb.Point) float64 {
	loc := triangulate.Location{Place: triangulate.Outside}
	switch {
	case e.into != triangulate.NoTriangle:
		loc.Place, loc.Triangle = triangulate.Inside, e.into
	case e.along != triangulate.NoHalfEdge:
		loc.Place, loc.Edge = triangulate.OnEdge, e.along
	}
	return t.s.Value(loc, p)
}

// keep adds an event, ahead of which the region is or is not, unless there is
// surface on neither side of it. It returns whether there is surface ahead.
func (t *Tracer) keep(e event, inside, behind bool) bool {
	ahead := inside && e.Ahead == Surface
	if !ahead {
		e.Ahead, e.Grade = Gap, math.NaN()
	}
	if !ahead && !behind {
		if !e.Bend {
			return false
		}
		if t.limit.region.Place(e.At) == triangulate.Outside {
			e.Z, e.Place = math.NaN(), triangulate.Outside
		}
	}
	t.merged = append(t.merged, e)
	return ahead
}
