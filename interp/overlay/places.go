package overlay

import (
	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// places holds where every vertex of the outer side lies on the inner one, and so
// where gathering begins.
type places struct {
	// of holds a triangle inside which the vertex lies; or, as -2-h, a half-edge h on
	// which it lies; or none; onVertex tells the latter from a vertex at the place.
	of       []int32
	onVertex []triangulate.Vertex // NoVertex where there is none
	d        []float64            // inner less outer
	inner    *side
	// seeds are for outer triangles that the rim of the inner hull passes through.
	seeds map[triangulate.Triangle]triangulate.Triangle
}

const nowhere = -1

func newPlaces(outer, inner *side, workers int) *places {
	n := len(outer.pos)
	p := &places{of: make([]int32, n), onVertex: make([]triangulate.Vertex, n), d: make([]float64, n), inner: inner}
	inChunks(n, workers, func() func(from, to int) {
		loc := inner.mesh.Locator()
		return func(from, to int) {
			for v := from; v < to; v++ {
				var at triangulate.Location
				if v == from {
					at = loc.Locate(outer.pos[v])
				} else {
					at = loc.LocateNext(outer.pos[v])
				}
				p.onVertex[v] = triangulate.NoVertex
				switch at.Place {
				case triangulate.Outside:
					p.of[v] = nowhere
					continue
				case triangulate.Inside:
					p.of[v] = int32(at.Triangle)
				default:
					p.of[v] = -2 - int32(at.Edge)
					p.onVertex[v] = at.Vertex
				}
				p.d[v] = inner.above(&at, &outer.pos[v], outer.z[v])
			}
		}
	})
	p.findSeeds(outer)
	return p
}

// location is where outer vertex v lies.
func (p *places) location(v triangulate.Vertex) triangulate.Location {
	k := p.of[v]
	switch {
	case k == nowhere:
		return triangulate.Location{Place: triangulate.Outside, Triangle: triangulate.NoTriangle, Edge: triangulate.NoHalfEdge, Vertex: triangulate.NoVertex}
	case k >= 0:
		return triangulate.Location{Place: triangulate.Inside, Triangle: triangulate.Triangle(k), Edge: triangulate.NoHalfEdge, Vertex: triangulate.NoVertex}
	}
	h := triangulate.HalfEdge(-2 - k)
	place := triangulate.OnEdge
	if p.onVertex[v] != triangulate.NoVertex {
		place = triangulate.OnVertex
	}
	return triangulate.Location{Place: place, Triangle: h.Triangle(), Edge: h, Vertex: p.onVertex[v]}
}

// seed returns an inner triangle that meets outer triangle t, NoTriangle if there is
// none.
func (p *places) seed(outer *side, t triangulate.Triangle) triangulate.Triangle {
	for _, v := range outer.mesh.Corners(t) {
		switch k := p.of[v]; {
		case k >= 0:
			return triangulate.Triangle(k)
		case k != nowhere:
			return triangulate.HalfEdge(-2 - k).Triangle()
		}
	}
	if s, ok := p.seeds[t]; ok {
		return s
	}
	return triangulate.NoTriangle
}

// findSeeds finds seeds for triangles of the outer side none of whose corners lies
// on the inner hull. The rim of the hull passes through such a triangle, or lies
// inside it.
func (p *places) findSeeds(outer *side) {
	alone := false
	for t := range outer.shown {
		if p.seed(outer, t) == triangulate.NoTriangle {
			alone = true
			break
		}
	}
	if !alone {
		return
	}
	p.seeds = map[triangulate.Triangle]triangulate.Triangle{}
	hull := outerBound(outer)
	loc := outer.mesh.Locator()
	m := p.inner.mesh
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if m.Twin(h) != triangulate.NoHalfEdge {
			continue
		}
		a, b := p.inner.pos[m.Origin(h)], p.inner.pos[m.Dest(h)]
		if !hull.Intersects(orb.MultiPoint{a, b}.Bound()) {
			continue
		}
		give := func(t triangulate.Triangle) {
			if t != triangulate.NoTriangle {
				p.seeds[t] = h.Triangle()
			}
		}
		giveBoth := func(g triangulate.HalfEdge) {
			if g == triangulate.NoHalfEdge {
				return
			}
			give(g.Triangle())
			if twin := outer.mesh.Twin(g); twin != triangulate.NoHalfEdge {
				give(twin.Triangle())
			}
		}
		if at := loc.Locate(a); at.Place == triangulate.Inside {
			give(at.Triangle)
		} else {
			giveBoth(at.Edge)
		}
		for x := range loc.Cross(a, b) {
			give(x.Into)
			giveBoth(x.Edge)
			giveBoth(x.Along)
		}
	}
}

func outerBound(outer *side) orb.Bound { return orb.MultiPoint(outer.pos).Bound() }
