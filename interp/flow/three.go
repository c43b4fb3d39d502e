package flow

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Solution is the gradient from three neighbouring wells.
type Solution struct {
	Triangle triangulate.Triangle
	Wells    [3]triangulate.Vertex // counter-clockwise, the smallest in (x, y) order first
	Gradient Gradient
	Area     float64
	Range    float64 // of the three heads
	Across   float64 // see Plane
	Verdict  Verdict
}

// Solve returns the solution of three wells, in time O(1). Sigma is the standard
// uncertainty of a head, NaN if unknown.
func Solve(s *interp.Surface, t triangulate.Triangle, sigma float64) Solution {
	return solve(s, t, sigma, OfTriangle(s, t, sigma))
}

// SolveEach is Solve for heads that have an uncertainty each, by vertex. The noise that
// their range is judged by is the root of the mean square of the three.
func SolveEach(s *interp.Surface, t triangulate.Triangle, sigmas []float64) Solution {
	vs := canonical(s.Mesh(), t)
	own := [3]float64{sigmas[vs[0]], sigmas[vs[1]], sigmas[vs[2]]}
	if alike(own[:]) {
		return Solve(s, t, own[0])
	}
	return solve(s, t, rootMeanSquare(own[:]), ofTriangle(s, t, own))
}

func solve(s *interp.Surface, t triangulate.Triangle, sigma float64, g Gradient) Solution {
	m := s.Mesh()
	vs := canonical(m, t)
	d := doubleArea(m, vs)
	x := Solution{Triangle: t, Wells: vs, Gradient: g, Area: d / 2}
	low, high := math.Inf(1), math.Inf(-1)
	var uu, uv, vv float64
	for i, v := range vs {
		z := s.Z()[v]
		low, high = min(low, z), max(high, z)
		// For three places the sums about the mean are those of the sides, over 3.
		p, q := m.Position(v), m.Position(vs[(i+1)%3])
		dx, dy := q[0]-p[0], q[1]-p[1]
		uu += float64(dx * dx)
		uv += float64(dx * dy)
		vv += float64(dy * dy)
	}
	x.Range = high - low
	// And their determinant is a third of the square of twice the area.
	x.Across = across(uu/3, uv/3, vv/3, float64(d*d)/3)
	x.Verdict = Judge(x.Gradient, x.Range, x.Across, sigma)
	return x
}

// canonical returns the corners of t with the smallest in (x, y) order first.
func canonical(m *triangulate.Mesh, t triangulate.Triangle) [3]triangulate.Vertex {
	c := m.Corners(t)
	first := 0
	for i := range c {
		if exact.CompareXY(m.Position(c[i]), m.Position(c[first])) < 0 {
			first = i
		}
	}
	return [3]triangulate.Vertex{c[first], c[(first+1)%3], c[(first+2)%3]}
}

func doubleArea(m *triangulate.Mesh, vs [3]triangulate.Vertex) float64 {
	a, b, c := m.Position(vs[0]), m.Position(vs[1]), m.Position(vs[2])
	return exact.Area2(a[0], a[1], b[0], b[1], c[0], c[1])
}

// Nest is a pair of wells at one place with screens at two depths.
type Nest struct {
	Upper, Lower int // of the wells given
	// Gradient is the vertical one: head lost per height on the way down,
	//
	//	(head of the upper well - head of the lower) / (middle of its screen - middle of the other's)
	//
	// positive where water is driven down.
	Gradient float64
	Sigma    float64 // its standard uncertainty; NaN if that of heads is unknown
	Apart    float64 // distance in plan
}

// Nests returns the pairs of wells no further apart than within, whose screens have
// middles at unlike heights; every well with the next lower one of its place. Middles
// are NaN where a screen is not known. Time O(wells²), for the few that sites have.
//
// sigmas are the standard uncertainties of the heads, nil if they are unknown.
func Nests(wells []orb.Point, heads, middles []float64, within float64, sigmas []float64) []Nest {
	var all []Nest
	for i := range wells {
		best := -1
		for k := range wells {
			dx, dy := wells[k][0]-wells[i][0], wells[k][1]-wells[i][1]
			if k == i || !(middles[k] < middles[i]) || !(math.Sqrt(float64(dx*dx)+float64(dy*dy)) <= within) {
				continue
			}
			if best < 0 || middles[k] > middles[best] {
				best = k
			}
		}
		if best < 0 {
			continue
		}
		rise := middles[i] - middles[best]
		dx, dy := wells[best][0]-wells[i][0], wells[best][1]-wells[i][1]
		sigma := math.NaN()
		if sigmas != nil {
			sigma = math.Sqrt(float64(sigmas[i]*sigmas[i]) + float64(sigmas[best]*sigmas[best]))
		}
		all = append(all, Nest{
			Upper: i, Lower: best, Gradient: (heads[i] - heads[best]) / rise,
			Sigma: sigma / rise,
			Apart: math.Sqrt(float64(dx*dx) + float64(dy*dy)),
		})
	}
	return all
}
