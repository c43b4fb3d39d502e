package interp

import (
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// Uncertainty returns the standard uncertainty of the value at p, whose location in the
// mesh is loc, from those of the readings: sigma has one for every vertex. It is NaN
// outside.
//
// With the three weights w and independent readings it is the root of the sum of w² sigma²
// (GUM, JCGM 100:2008, equation 10). It holds the readings' own uncertainty and nothing
// else: not that the ground between them is no plane.
func (s *Surface) Uncertainty(loc triangulate.Location, p orb.Point, sigma []float64) float64 {
	corners, w := s.Weights(loc, p)
	sum := 0.0
	for n, v := range corners {
		if v == triangulate.NoVertex {
			return math.NaN()
		}
		u := float64(w[n] * sigma[v])
		sum += float64(u * u)
	}
	return math.Sqrt(sum)
}

// Spread fills the gaps in values of the vertices: one that is NaN becomes the median of
// its neighbours, those that have none of these after them in turn, and what is left the
// median of all. It is for scales, which the outline does not have. All NaN stays so.
func (s *Surface) Spread(values []float64) []float64 {
	out := slices.Clone(values)
	var known []float64
	var gaps []triangulate.Vertex
	for v, x := range values {
		if x == x {
			known = append(known, x)
		} else {
			gaps = append(gaps, triangulate.Vertex(v))
		}
	}
	if len(known) == 0 {
		return out
	}
	all := middleOf(known)
	var near, fill []float64
	for len(gaps) > 0 && s.mesh.NumTriangles() > 0 {
		fill = fill[:0]
		for _, v := range gaps {
			near = near[:0]
			add := func(w triangulate.Vertex) {
				if x := out[w]; x == x {
					near = append(near, x)
				}
			}
			last := triangulate.NoVertex
			first := triangulate.NoVertex
			for h := range s.mesh.Around(v) {
				if first == triangulate.NoVertex {
					first = s.mesh.Dest(h)
				}
				add(s.mesh.Dest(h))
				last = s.mesh.Apex(h)
			}
			if last != first && last != triangulate.NoVertex {
				add(last) // on the outline the last edge only enters
			}
			x := math.NaN()
			if len(near) > 0 {
				x = middleOf(near)
			}
			fill = append(fill, x)
		}
		rest := gaps[:0:0]
		for k, v := range gaps {
			if out[v] = fill[k]; fill[k] != fill[k] {
				rest = append(rest, v)
			}
		}
		if len(rest) == len(gaps) {
			break
		}
		gaps = rest
	}
	for v, x := range out {
		if x != x {
			out[v] = all
		}
	}
	return out
}

// middleOf sorts values and returns the median.
func middleOf(values []float64) float64 {
	slices.Sort(values)
	n := len(values)
	if n%2 == 1 {
		return values[n/2]
	}
	return float64(values[n/2-1]/2) + float64(values[n/2]/2)
}
