package overlay

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// side is one of the two surfaces, its hidden triangles shown, so that walks pass
// through them; those numbered shown and above are hidden.
type side struct {
	mesh  *triangulate.Mesh
	pos   []orb.Point
	z     []float64
	shown triangulate.Triangle
	// slant is the area on the slope over the plan area of every triangle shown.
	slant []float64
	// turn holds, for every triangle, which of its corners is the smallest in (x, y)
	// order, and turnUp if the edge across from it runs in that order.
	turn []uint8
}

const turnUp = 4

func newSide(s *interp.Surface, workers int) *side {
	whole := s.Mesh().Whole()
	n := s.Mesh().NumTriangles()
	x := &side{
		mesh: whole, pos: whole.Positions(), z: s.Z(),
		shown: triangulate.Triangle(n), slant: make([]float64, n),
	}
	x.turn = make([]uint8, whole.NumTriangles())
	inChunks(len(x.turn), workers, func() func(from, to int) {
		return func(from, to int) {
			for i := from; i < to; i++ {
				t := triangulate.Triangle(i)
				c := whole.Corners(t)
				first := smallest(&x.pos[c[0]], &x.pos[c[1]], &x.pos[c[2]])
				x.turn[i] = uint8(first)
				a, b := after[first], after[after[first]]
				if before(&x.pos[c[a]], &x.pos[c[b]]) {
					x.turn[i] |= turnUp
				}
				if i < n {
					x.slant[i] = x.slope(c[first], c[a], c[b])
				}
			}
		}
	})
	return x
}

// slope returns the area of a triangle over that of its plan.
func (x *side) slope(i, j, k triangulate.Vertex) float64 {
	a, b, c := &x.pos[i], &x.pos[j], &x.pos[k]
	za, zb, zc := x.z[i], x.z[j], x.z[k]
	plan := area2(a, b, c)
	dx := area2(&orb.Point{za, a[1]}, &orb.Point{zb, b[1]}, &orb.Point{zc, c[1]}) / plan
	dy := area2(&orb.Point{a[0], za}, &orb.Point{b[0], zb}, &orb.Point{c[0], zc}) / plan
	return math.Sqrt(1 + float64(dx*dx) + float64(dy*dy))
}

// turned returns the corners of t counter-clockwise, the smallest in (x, y) order
// first, and the half-edges that start there.
func (x *side) turned(t triangulate.Triangle) (v [3]triangulate.Vertex, h [3]triangulate.HalfEdge) {
	c := x.mesh.Corners(t)
	h0 := t.HalfEdge(0)
	switch x.turn[t] & 3 {
	case 0:
		return c, [3]triangulate.HalfEdge{h0, h0 + 1, h0 + 2}
	case 1:
		return [3]triangulate.Vertex{c[1], c[2], c[0]}, [3]triangulate.HalfEdge{h0 + 1, h0 + 2, h0}
	default:
		return [3]triangulate.Vertex{c[2], c[0], c[1]}, [3]triangulate.HalfEdge{h0 + 2, h0, h0 + 1}
	}
}

func smallest(a, b, c *orb.Point) int {
	if before(b, a) {
		if before(c, b) {
			return 2
		}
		return 1
	}
	if before(c, a) {
		return 2
	}
	return 0
}

func before(p, q *orb.Point) bool {
	return p[0] < q[0] || p[0] == q[0] && p[1] < q[1]
}

// area2 is twice the area of the triangle p, q, r; p comes before q in (x, y) order,
// so that an edge gives the same bits from both its sides. Its relative error is below
// 2^-45 and its sign is exact: where the two products do not nearly cancel, plain
// arithmetic does it; else exact.Area2.
func area2(p, q, r *orb.Point) float64 {
	l := float64((q[0] - p[0]) * (r[1] - p[1]))
	m := float64((q[1] - p[1]) * (r[0] - p[0]))
	if d := l - m; math.Abs(d)*cancels > math.Abs(l)+math.Abs(m) {
		return d
	}
	return exact.Area2(p[0], p[1], q[0], q[1], r[0], r[1])
}

// A difference of products with relative errors of 3 e each, e = 2^-53, is off by at
// most 3 e (|l|+|m|) + e |d|: below 2^-45 of d if it is more than (|l|+|m|)/cancels.
const cancels = 64

// areas2 are twice the areas of p with the sides 0-1, 1-2, 2-0 of the triangle c,
// which is turned, up telling whether side 1-2 runs in (x, y) order: positive inside.
// That with side k is the weight of the corner after next.
func areas2(c *[3]orb.Point, up bool, p *orb.Point) (w [3]float64) {
	w[0] = area2(&c[0], &c[1], p)
	if up {
		w[1] = area2(&c[1], &c[2], p)
	} else {
		w[1] = -area2(&c[2], &c[1], p)
	}
	w[2] = -area2(&c[0], &c[2], p)
	return w
}

// The height of one surface above a vertex of the other, in three cases, each from
// differences with the height z of that vertex, so that what is small comes out
// with few errors.

// aboveInside is the height above a place inside a triangle with the heights zs, w
// being what areas2 returns.
func aboveInside(w, zs *[3]float64, z float64) float64 {
	sum := float64(w[1]*(zs[0]-z)) + float64(w[2]*(zs[1]-z)) + float64(w[0]*(zs[2]-z))
	return sum / (w[0] + w[1] + w[2])
}

// aboveEdge is the height above p on the edge from lo to hi.
func aboveEdge(lo, hi, p *orb.Point, zlo, zhi, z float64) float64 {
	dx, dy := hi[0]-lo[0], hi[1]-lo[1]
	var t float64
	if math.Abs(dx) >= math.Abs(dy) {
		t = (p[0] - lo[0]) / dx
	} else {
		t = (p[1] - lo[1]) / dy
	}
	return (zlo - z) + float64(t*(zhi-zlo))
}

// above is the height of x above a vertex at p of height z that lies at at.
func (x *side) above(at *triangulate.Location, p *orb.Point, z float64) float64 {
	switch at.Place {
	case triangulate.OnVertex:
		return x.z[at.Vertex] - z
	case triangulate.OnEdge:
		o, d := x.mesh.Origin(at.Edge), x.mesh.Dest(at.Edge)
		if !before(&x.pos[o], &x.pos[d]) {
			o, d = d, o
		}
		return aboveEdge(&x.pos[o], &x.pos[d], p, x.z[o], x.z[d], z)
	}
	v, _ := x.turned(at.Triangle)
	c := [3]orb.Point{x.pos[v[0]], x.pos[v[1]], x.pos[v[2]]}
	zs := [3]float64{x.z[v[0]], x.z[v[1]], x.z[v[2]]}
	w := areas2(&c, x.turn[at.Triangle]&turnUp != 0, p)
	return aboveInside(&w, &zs, z)
}
