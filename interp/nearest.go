package interp

import (
	"context"
	"math"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Nearest finds the vertex of a surface that is nearest to a place: how far a value is
// from what was measured. It is read-only and safe to share among goroutines.
type Nearest struct {
	mesh *triangulate.Mesh // without constraints, all triangles shown
	pos  []orb.Point
}

// Nearest returns what finds the nearest vertex of s. Every vertex counts, of readings and
// of lines. Where s has constrained edges it triangulates the vertices once more, without
// them.
//
// In a Delaunay triangulation every vertex but the nearest has a neighbour that is nearer
// (so greedy search ends at the nearest; Bose and Morin 2004), and the vertices within a
// circle hang together by edges.
func (s *Surface) Nearest(ctx context.Context, opt triangulate.Options) (*Nearest, error) {
	m := s.mesh.Whole()
	if s.mesh.HasConstraints() {
		var err error
		if m, err = triangulate.Delaunay(ctx, s.pos, opt); err != nil {
			return nil, err
		}
	}
	return &Nearest{m, m.Positions()}, nil
}

// A Finder looks for nearest vertices. It remembers where it was: one goroutine uses it
// at a time.
type Finder struct {
	n    *Nearest
	l    *triangulate.Locator
	last triangulate.Vertex
	seen map[triangulate.Vertex]bool
	open []triangulate.Vertex
}

// Finder returns a new finder.
func (n *Nearest) Finder() *Finder {
	return &Finder{n: n, l: n.mesh.Locator(), seen: map[triangulate.Vertex]bool{}}
}

// At returns the position of the vertex nearest to p, and how far it is: rounded, within
// 2 ulp. Of several equally near ones it is the smallest in (x, y) order. Expected time
// O(1) near the place before; the surface must have a vertex.
func (f *Finder) At(p orb.Point) (orb.Point, float64) {
	v := f.nearest(p)
	return f.n.pos[v], math.Sqrt(f.distance2(v, p))
}

// nearest walks from the corners about p to ever nearer neighbours.
func (f *Finder) nearest(p orb.Point) triangulate.Vertex {
	v := f.last
	if loc := f.l.LocateNext(p); loc.Place != triangulate.Outside {
		c := f.n.mesh.Corners(loc.Triangle)
		v = c[0]
		for _, w := range c[1:] {
			v = f.nearer(v, w, p)
		}
	}
	for moved := true; moved && f.n.mesh.NumTriangles() > 0; {
		moved = false
		best := v
		for h := range f.n.mesh.Around(v) {
			best = f.nearer(f.nearer(best, f.n.mesh.Dest(h), p), f.n.mesh.Apex(h), p)
		}
		v, moved = best, best != v
	}
	if f.n.mesh.NumTriangles() == 0 {
		for w := range f.n.mesh.Vertices() {
			v = f.nearer(v, w, p)
		}
	}
	f.last = v
	return v
}

// nearer returns the one of v and w that is nearer to p, of two equally near ones the
// smaller in (x, y) order.
func (f *Finder) nearer(v, w triangulate.Vertex, p orb.Point) triangulate.Vertex {
	a, b := f.distance2(v, p), f.distance2(w, p)
	if b < a || a == b && exact.CompareXY(f.n.pos[w], f.n.pos[v]) < 0 {
		return w
	}
	return v
}

func (f *Finder) distance2(v triangulate.Vertex, p orb.Point) float64 {
	dx, dy := f.n.pos[v][0]-p[0], f.n.pos[v][1]-p[1]
	return float64(dx*dx) + float64(dy*dy)
}

// Within calls use for the position of every vertex within the distance of p, in no
// particular order.
func (f *Finder) Within(p orb.Point, distance float64, use func(orb.Point)) {
	m := f.n.mesh
	clear(f.seen)
	f.open = append(f.open[:0], f.nearest(p))
	f.seen[f.open[0]] = true
	most := float64(distance * distance)
	for len(f.open) > 0 {
		v := f.open[len(f.open)-1]
		f.open = f.open[:len(f.open)-1]
		if f.distance2(v, p) > most {
			continue
		}
		use(f.n.pos[v])
		for h := range m.Around(v) {
			for _, w := range [2]triangulate.Vertex{m.Dest(h), m.Apex(h)} {
				if !f.seen[w] {
					f.seen[w] = true
					f.open = append(f.open, w)
				}
			}
		}
	}
}
