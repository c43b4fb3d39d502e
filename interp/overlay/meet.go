package overlay

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// meeting gathers, for one triangle of the outer side at a time, the triangles of
// the inner side that meet it, and what each of their corners and edges has to do
// with it. Its memory is used again for the next.
type meeting struct {
	outer, inner *side
	weigh        *weigher // nil unless weights are wanted

	// The outer triangle.
	t  triangulate.Triangle
	v  [3]triangulate.Vertex
	p  [3]orb.Point
	z  [3]float64
	up [3]bool // edge k, from corner k to the next, runs in (x, y) order

	corners []corner
	edges   []edge
	found   []innerTriangle

	cornerOf, foundOf table
}

// corner is a vertex of the inner side, seen from the outer triangle.
type corner struct {
	v         triangulate.Vertex
	p         orb.Point
	z         float64
	w         [3]float64 // areas2
	neg, zero uint8      // bit k: it lies outside edge k, on its line
	d         float64    // inner less outer, where it lies in the triangle
}

// inside tells whether the corner lies strictly inside the outer triangle.
func (c *corner) inside() bool { return c.neg|c.zero == 0 }

// edge is an edge of the inner side, seen from the outer triangle.
type edge struct {
	meets bool // it has a place in common with the triangle
	n     uint8
	cross [2]crossing
}

// crossing is where an inner edge crosses an outer one, between the ends of both.
type crossing struct {
	k    uint8 // the outer edge
	from *orb.Point
	off  [2]float64 // from there
	d    float64    // inner less outer
}

// innerTriangle is a triangle of the inner side that meets the outer one, or
// touches it; it is turned.
type innerTriangle struct {
	t triangulate.Triangle
	h [3]triangulate.HalfEdge
	c [3]int32 // of corners
	e [3]int32 // of edges, -1 where not looked at
}

// gather collects what meets the outer triangle t, of which seed is known to meet
// it. The inner triangles that meet t hang together over edges that meet t: t and
// the inner hull are convex, and around a vertex all triangles meet.
func (m *meeting) gather(t, seed triangulate.Triangle) {
	m.t = t
	m.v, _ = m.outer.turned(t)
	for k, v := range m.v {
		m.p[k], m.z[k] = m.outer.pos[v], m.outer.z[v]
	}
	m.up = [3]bool{true, before(&m.p[1], &m.p[2]), false}
	m.corners, m.edges, m.found = m.corners[:0], m.edges[:0], m.found[:0]
	m.cornerOf.clear()
	m.foundOf.clear()
	m.add(seed)
	for i := 0; i < len(m.found); i++ {
		for j := range 3 {
			f := &m.found[i]
			twin := m.inner.mesh.Twin(f.h[j])
			if twin == triangulate.NoHalfEdge {
				m.look(f, j)
				continue
			}
			beyond := m.foundOf.slotOf(int32(twin.Triangle()))
			if beyond >= 0 {
				g := &m.found[beyond]
				for k := range 3 {
					if g.h[k] == twin {
						f.e[j] = g.e[k]
					}
				}
			}
			if f.e[j] < 0 {
				m.look(f, j)
			}
			if beyond < 0 && m.edges[f.e[j]].meets {
				m.add(twin.Triangle())
			}
		}
	}
}

func (m *meeting) add(t triangulate.Triangle) {
	m.foundOf.find(int32(t), int32(len(m.found)))
	v, h := m.inner.turned(t)
	f := innerTriangle{t: t, h: h, e: [3]int32{-1, -1, -1}}
	for k := range v {
		slot, known := m.cornerOf.find(int32(v[k]), int32(len(m.corners)))
		if !known {
			m.corner(v[k])
		}
		f.c[k] = slot
	}
	m.found = append(m.found, f)
}

// corner looks at an inner vertex.
func (m *meeting) corner(v triangulate.Vertex) {
	m.corners = append(m.corners, corner{v: v, p: m.inner.pos[v], z: m.inner.z[v]})
	c := &m.corners[len(m.corners)-1]
	c.w = areas2(&m.p, &c.p)
	for k, w := range c.w {
		if w < 0 {
			c.neg |= 1 << k
		} else if w == 0 {
			c.zero |= 1 << k
		}
	}
	if c.neg != 0 {
		return
	}
	switch c.zero {
	case 0:
		c.d = -aboveInside(&c.w, &m.z, c.z)
	case 1, 2, 4:
		lo, hi := m.ends(int(c.zero >> 1))
		c.d = -aboveEdge(&m.p[lo], &m.p[hi], &c.p, m.z[lo], m.z[hi], c.z)
	default:
		// On edges k and k+1, and so at the corner they share.
		c.d = c.z - m.z[map3[c.zero]]
	}
}

// map3 is the corner on two edges: 0 and 1 share corner 1, 1 and 2 corner 2.
var map3 = [8]uint8{3: 1, 6: 2, 5: 0}

// ends returns the corners of outer edge k in (x, y) order.
func (m *meeting) ends(k int) (lo, hi int) {
	next := k + 1
	if next == 3 {
		next = 0
	}
	if m.up[k] {
		return k, next
	}
	return next, k
}

// look looks at edge j of an inner triangle.
func (m *meeting) look(f *innerTriangle, j int) {
	f.e[j] = int32(len(m.edges))
	m.edges = append(m.edges, edge{})
	e := &m.edges[f.e[j]]
	lo, hi := &m.corners[f.c[j]], &m.corners[f.c[(j+1)%3]]
	if lo.neg&hi.neg != 0 {
		return // both outside one edge
	}
	if lo.neg|hi.neg == 0 {
		e.meets = true
		return
	}
	if !before(&lo.p, &hi.p) {
		lo, hi = hi, lo
	}
	var u [3]float64 // twice the areas of the outer corners with the edge
	for k := range u {
		u[k] = area2(&lo.p, &hi.p, &m.p[k])
	}
	if u[0] > 0 && u[1] > 0 && u[2] > 0 || u[0] < 0 && u[1] < 0 && u[2] < 0 {
		return // all of the triangle to one side
	}
	e.meets = true
	across := (lo.neg ^ hi.neg) &^ (lo.zero | hi.zero)
	for k := range 3 {
		if across>>k&1 == 0 {
			continue
		}
		o, d := m.ends(k)
		if u[o] > 0 && u[d] < 0 || u[o] < 0 && u[d] > 0 {
			m.cross(e, k, o, d, lo, hi, &u)
		}
	}
}

// cross adds the crossing of outer edge k, from corner o to corner d, with the inner
// edge from lo to hi. With s and t the ways along the two, its place is reckoned on
// the shorter of them. Each of s and t is a quotient of areas of one sign.
func (m *meeting) cross(e *edge, k, o, d int, lo, hi *corner, u *[3]float64) {
	s := part(u[o], u[d])
	t := part(lo.w[k], hi.w[k])
	x := &e.cross[e.n]
	e.n++
	x.k = uint8(k)
	x.d = (lo.z - m.z[o]) + (float64(t*(hi.z-lo.z)) - float64(s*(m.z[d]-m.z[o])))
	outX, outY := m.p[d][0]-m.p[o][0], m.p[d][1]-m.p[o][1]
	inX, inY := hi.p[0]-lo.p[0], hi.p[1]-lo.p[1]
	out, in := math.Abs(outX)+math.Abs(outY), math.Abs(inX)+math.Abs(inY)
	if out < in || out == in && before(&m.p[o], &lo.p) {
		x.from, x.off = &m.outer.pos[m.v[o]], [2]float64{s * outX, s * outY}
	} else {
		x.from, x.off = &m.inner.pos[lo.v], [2]float64{t * inX, t * inY}
	}
}

// part returns |a| / (|a| + |b|).
func part(a, b float64) float64 {
	a, b = math.Abs(a), math.Abs(b)
	return a / (a + b)
}
