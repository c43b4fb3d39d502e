package interp

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// Sample is the height at a place, and where the place lies in the mesh.
type Sample struct {
	Z        float64 // NaN outside
	Location triangulate.Location
}

// Sampler reads single values off a surface. It remembers where it was: one
// goroutine uses it at a time, each its own.
type Sampler struct {
	s *Surface
	l *triangulate.Locator
}

// Sampler returns a new sampler of s.
func (s *Surface) Sampler() *Sampler {
	return &Sampler{s, s.mesh.Locator()}
}

// At returns the height and the location of p. A place that is not finite is
// outside.
func (sp *Sampler) At(p orb.Point) Sample {
	if !finite(p) {
		return outside
	}
	return sp.sample(sp.l.Locate(p), p)
}

// Next is At for a place that is likely near the one before: it walks from there.
func (sp *Sampler) Next(p orb.Point) Sample {
	if !finite(p) {
		return outside
	}
	return sp.sample(sp.l.LocateNext(p), p)
}

func (sp *Sampler) sample(loc triangulate.Location, p orb.Point) Sample {
	return Sample{sp.s.Value(loc, p), loc}
}

var outside = Sample{math.NaN(), triangulate.Location{
	Place:    triangulate.Outside,
	Triangle: triangulate.NoTriangle,
	Edge:     triangulate.NoHalfEdge,
	Vertex:   triangulate.NoVertex,
}}

// finite reports whether both coordinates are numbers.
func finite(p orb.Point) bool { return p[0]-p[0] == 0 && p[1]-p[1] == 0 }
