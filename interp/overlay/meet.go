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

	corners list[corner]
	edges   list[edge]
	found   list[innerTriangle]

	cornerOf, foundOf table

	// For triangles in general position.
	walks   walks
	rim     rim
	insides []within
	seen    *insides
	poly    polygon
	d       [3]float64 // inner less outer, at the corners
}

// list is a slice that grows by numbers that keep what they held before: whoever takes
// one sets what it reads.
type list[T any] struct {
	of []T
	n  int32
}

func (l *list[T]) next() *T {
	if int(l.n) == len(l.of) {
		l.of = append(l.of, make([]T, len(l.of)+32)...)
	}
	l.n++
	return &l.of[l.n-1]
}

// corner is a vertex of the inner side, seen from the outer triangle.
type corner struct {
	p         *orb.Point
	v         triangulate.Vertex
	neg, zero uint8      // bit k: it lies outside edge k, on its line
	w         [3]float64 // areas2
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
	from *orb.Point
	off  [2]float64 // from there
	d    float64    // inner less outer
	k    uint8      // the outer edge
}

// innerTriangle is a triangle of the inner side that meets the outer one, or
// touches it; it is turned.
type innerTriangle struct {
	t triangulate.Triangle
	h [3]triangulate.HalfEdge
	c [3]int32 // of corners
	e [3]int32 // of edges: unseen, or apart
	// entered is the edge over which it was found, -1 for the first.
	entered int8
	up      bool // the edge from corner 1 to corner 2 runs in (x, y) order
}

// Numbers of edges that have none.
const (
	unseen = -1
	apart  = -2 // it has no place in common with the outer triangle
)

// gather collects what meets the outer triangle t, of which seed is known to meet
// it. The inner triangles that meet t hang together over edges that meet t: t and
// the inner hull are convex, and around a vertex all triangles meet.
func (m *meeting) gather(t, seed triangulate.Triangle) {
	m.t = t
	m.v, _ = m.outer.turned(t)
	for k, v := range m.v {
		m.p[k], m.z[k] = m.outer.pos[v], m.outer.z[v]
	}
	m.up = [3]bool{true, m.outer.turn[t]&turnUp != 0, false}
	m.corners.n, m.edges.n, m.found.n = 0, 0, 0
	m.cornerOf.clear()
	m.foundOf.clear()
	m.first(seed)
	for i := int32(0); i < m.found.n; i++ {
		for j := range 3 {
			f := &m.found.of[i]
			if int(f.entered) == j {
				continue
			}
			lo, hi := f.c[j], f.c[after[j]]
			if m.corners.of[lo].neg&m.corners.of[hi].neg != 0 {
				f.e[j] = apart // both ends outside one edge
				continue
			}
			twin := m.inner.mesh.Twin(f.h[j])
			if twin == triangulate.NoHalfEdge {
				m.look(f, j)
				continue
			}
			slot := m.foundOf.slotOf(int32(twin.Triangle()))
			if slot >= 0 {
				g := &m.found.of[slot]
				for k := range 3 {
					if g.h[k] == twin {
						f.e[j] = g.e[k]
					}
				}
			}
			if f.e[j] == unseen {
				m.look(f, j)
			}
			if slot < 0 && m.edges.of[f.e[j]].meets {
				m.add(twin, lo, hi, f.e[j])
			}
		}
	}
}

// first adds the triangle from which gathering begins.
func (m *meeting) first(t triangulate.Triangle) {
	m.foundOf.find(int32(t), m.found.n)
	f := m.found.next()
	f.t, f.entered, f.up = t, -1, m.inner.turn[t]&turnUp != 0
	var v [3]triangulate.Vertex
	v, f.h = m.inner.turned(t)
	for k := range v {
		f.c[k], f.e[k] = m.slot(v[k]), unseen
	}
}

// add adds the triangle of half-edge h, which runs from corner hi to corner lo along
// an edge that was looked at.
func (m *meeting) add(h triangulate.HalfEdge, lo, hi, e int32) {
	t := h.Triangle()
	m.foundOf.find(int32(t), m.found.n)
	f := m.found.next()
	f.t, f.up = t, m.inner.turn[t]&turnUp != 0
	var v [3]triangulate.Vertex
	v, f.h = m.inner.turned(t)
	k := 0
	for f.h[k] != h {
		k++
	}
	next := after[k]
	last := after[next]
	f.entered = int8(k)
	f.c[k], f.c[next], f.c[last] = hi, lo, m.slot(v[last])
	f.e[k], f.e[next], f.e[last] = e, unseen, unseen
}

// slot returns the number of an inner vertex, and looks at it the first time.
func (m *meeting) slot(v triangulate.Vertex) int32 {
	slot, known := m.cornerOf.find(int32(v), m.corners.n)
	if !known {
		m.corner(v)
	}
	return slot
}

// corner looks at an inner vertex.
func (m *meeting) corner(v triangulate.Vertex) {
	c := m.corners.next()
	c.v, c.p = v, &m.inner.pos[v]
	c.w = areas2(&m.p, m.up[1], c.p)
	var neg, zero uint8
	for k, w := range c.w {
		if w < 0 {
			neg |= 1 << k
		} else if w == 0 {
			zero |= 1 << k
		}
	}
	c.neg, c.zero = neg, zero
	if neg != 0 {
		return
	}
	z := m.inner.z[v]
	switch zero {
	case 0:
		c.d = -aboveInside(&c.w, &m.z, z)
	case 1, 2, 4:
		lo, hi := m.ends(int(zero >> 1))
		c.d = -aboveEdge(&m.p[lo], &m.p[hi], c.p, m.z[lo], m.z[hi], z)
	default:
		// On two edges, and so at the corner they share.
		c.d = z - m.z[shared[zero]]
	}
}

// shared is the corner on two edges: 0 and 1 share corner 1, 1 and 2 corner 2.
var shared = [8]uint8{3: 1, 6: 2, 5: 0}

// ends returns the corners of outer edge k in (x, y) order.
func (m *meeting) ends(k int) (lo, hi int) {
	if m.up[k] {
		return k, after[k]
	}
	return after[k], k
}

// look looks at edge j of an inner triangle, whose ends are not both outside one outer
// edge.
func (m *meeting) look(f *innerTriangle, j int) {
	f.e[j] = m.edges.n
	e := m.edges.next()
	e.n = 0
	lo, hi := &m.corners.of[f.c[j]], &m.corners.of[f.c[after[j]]]
	if lo.neg|hi.neg == 0 {
		e.meets = true
		return
	}
	if j == 2 || j == 1 && !f.up {
		lo, hi = hi, lo
	}
	var u [3]float64 // twice the areas of the outer corners with the edge
	for k := range u {
		u[k] = area2(lo.p, hi.p, &m.p[k])
	}
	if u[0] > 0 && u[1] > 0 && u[2] > 0 || u[0] < 0 && u[1] < 0 && u[2] < 0 {
		e.meets = false
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
	zlo, zhi := m.inner.z[lo.v], m.inner.z[hi.v]
	x.d = (zlo - m.z[o]) + (float64(t*(zhi-zlo)) - float64(s*(m.z[d]-m.z[o])))
	outX, outY := m.p[d][0]-m.p[o][0], m.p[d][1]-m.p[o][1]
	inX, inY := hi.p[0]-lo.p[0], hi.p[1]-lo.p[1]
	out, in := math.Abs(outX)+math.Abs(outY), math.Abs(inX)+math.Abs(inY)
	if out < in || out == in && before(&m.p[o], lo.p) {
		x.from, x.off = &m.outer.pos[m.v[o]], [2]float64{s * outX, s * outY}
	} else {
		x.from, x.off = lo.p, [2]float64{t * inX, t * inY}
	}
}

// part returns |a| / (|a| + |b|).
func part(a, b float64) float64 {
	a, b = math.Abs(a), math.Abs(b)
	return a / (a + b)
}
