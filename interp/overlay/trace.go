package overlay

import (
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// rim is what the rim of the outer triangle crosses, once round, counter-clockwise from
// corner 0.
type rim struct {
	of     []rimCrossing
	byIn   [256]uint8 // by the last bits of in, the number of one
	shared bool       // several have the same last bits
	many   table      // in place of byIn
}

type rimCrossing struct {
	x       int32 // in the list of walks
	out, in triangulate.HalfEdge
	k       int8 // the outer edge
	done    bool // the piece that begins here has been made
}

const rimFew = 64 // crossings that byIn is used for

// lookUp returns the number of the crossing where the rim enters over h, -1 if none.
func (r *rim) lookUp(h triangulate.HalfEdge) int {
	if len(r.of) > rimFew {
		return int(r.many.slotOf(int32(h)))
	}
	if i := int(r.byIn[h&255]); i < len(r.of) && r.of[i].in == h {
		return i
	}
	if r.shared {
		for i := range r.of {
			if r.of[i].in == h {
				return i
			}
		}
	}
	return -1
}

// add appends the crossings of outer edge k, those of list from first on.
func (r *rim) add(list []walked, first int32, reversed bool, k int8) {
	n := len(r.of)
	r.of = slices.Grow(r.of, len(list))[:n+len(list)]
	to := r.of[n:]
	if reversed {
		last := len(list) - 1
		for i := range to {
			x := &list[last-i]
			to[i] = rimCrossing{x: first + int32(last-i), out: x.in, in: x.out, k: k}
		}
		return
	}
	for i := range to {
		x := &list[i]
		to[i] = rimCrossing{x: first + int32(i), out: x.out, in: x.in, k: k}
	}
}

// index prepares lookUp.
func (r *rim) index() {
	if len(r.of) > rimFew {
		r.many.clear()
		for i := range r.of {
			r.many.find(int32(r.of[i].in), int32(i))
		}
		return
	}
	r.shared = false
	for i := range r.of {
		in := r.of[i].in
		last := &r.byIn[in&255]
		if j := int(*last); j < i && (r.of[j].in^in)&255 == 0 {
			r.shared = true
		}
		*last = uint8(i)
	}
}

// within is an inner vertex inside the outer triangle, and a half-edge that starts there.
type within struct {
	v triangulate.Vertex
	h triangulate.HalfEdge
}

// insides holds the differences at inner vertices, for those strictly inside an outer
// triangle: there is one such triangle, and so one worker, for each.
type insides struct {
	d     []float64
	owner []triangulate.Triangle // plus 1
}

func newInsides(inner *side) *insides {
	return &insides{make([]float64, len(inner.pos)), make([]triangulate.Triangle, len(inner.pos))}
}

// trace adds the pieces of outer triangle t, if it and the inner mesh are in general
// position: its corners inside inner triangles, no inner vertex on its edges' lines.
// Else it returns false, and nothing was added.
//
// The rim of t is cut where it crosses inner edges. From each crossing a piece is
// followed round: along the rim to the next crossing, to the left along the inner edge
// there, and on along edges of the inner triangle to where the rim comes in again.
// Inner triangles without a crossing have three corners inside t.
func (m *meeting) trace(total *totals, t triangulate.Triangle, at *places) bool {
	v, h := m.outer.turned(t)
	if at.of[v[0]] < 0 || at.of[v[1]] < 0 || at.of[v[2]] < 0 {
		return false
	}
	var s [3]span
	var reversed [3]bool
	for k := range 3 {
		s[k], reversed[k] = m.edge(h[k], v[k], v[after[k]], at)
		if s[k].n < 0 {
			return false
		}
	}
	m.t, m.v = t, v
	for k, c := range v {
		m.p[k], m.z[k], m.d[k] = m.outer.pos[c], m.outer.z[c], at.d[c]
	}
	m.up[1] = m.outer.turn[t]&turnUp != 0
	r := &m.rim
	r.of = r.of[:0]
	for k := range 3 {
		r.add(m.walks.list[s[k].from:s[k].from+s[k].n], s[k].from, reversed[k], int8(k))
	}
	if len(r.of) == 0 {
		m.whole(total, triangulate.Triangle(at.of[v[0]]))
		return true
	}
	r.index()
	m.insides = m.insides[:0]
	for i := range r.of {
		if !r.of[i].done {
			m.round(total, i, r.of[i].in.Triangle())
		}
	}
	if len(m.insides) >= 3 {
		m.flood(total)
	}
	return true
}

// end adds the polygon to the sums, unless f is hidden. (Those are followed round all
// the same, for the inner vertices that they have.)
func (m *meeting) end(total *totals, f triangulate.Triangle) {
	if f >= m.inner.shown {
		return
	}
	total.addPiece(&m.poly, m.outer.slant[m.t], m.inner.slant[f])
	if m.weigh != nil {
		m.weigh.add(&m.poly, m.t, f)
	}
}

// whole adds the outer triangle, which lies inside f.
func (m *meeting) whole(total *totals, f triangulate.Triangle) {
	m.poly.begin(&m.p[0], m.inner.least(f))
	for k := range m.p {
		m.poly.add(&m.p[k], 0, 0, m.d[k])
	}
	m.end(total, f)
}

// round adds the piece of f that begins where the rim enters f at crossing start.
func (m *meeting) round(total *totals, start int, f triangulate.Triangle) {
	m.poly.begin(&m.p[0], m.inner.least(f))
	r, poly, list := &m.rim, &m.poly, m.walks.list
	for i := start; ; {
		c := &r.of[i]
		c.done = true
		poly.addWalked(&list[c.x])
		i++
		k := c.k
		if i == len(r.of) {
			i = 0
			k = int8(after[k])
			poly.add(&m.p[k], 0, 0, m.d[k])
		}
		c = &r.of[i]
		for k != c.k {
			k = int8(after[k])
			poly.add(&m.p[k], 0, 0, m.d[k])
		}
		poly.addWalked(&list[c.x])
		h := c.out
		for {
			if i = r.lookUp(h); i >= 0 {
				break
			}
			h += nextBy[h-h.Triangle().HalfEdge(0)]
			v := m.inner.mesh.Origin(h)
			poly.add(&m.inner.pos[v], 0, 0, m.inside(v, h))
		}
		if i == start {
			break
		}
	}
	m.end(total, f)
}

// nextBy leads from a half-edge of a triangle to the next: without a branch.
var nextBy = [3]triangulate.HalfEdge{1, 1, -2}

// inside returns the difference at inner vertex v inside the outer triangle, and notes
// it the first time; h starts there.
func (m *meeting) inside(v triangulate.Vertex, h triangulate.HalfEdge) float64 {
	if m.seen.owner[v] == m.t+1 {
		return m.seen.d[v]
	}
	w := areas2(&m.p, m.up[1], &m.inner.pos[v])
	d := -aboveInside(&w, &m.z, m.inner.z[v])
	m.seen.owner[v], m.seen.d[v] = m.t+1, d
	m.insides = append(m.insides, within{v, h})
	return d
}

// flood adds the inner triangles that lie inside the outer one, going over edges from
// the inner vertices that the rim's pieces have.
func (m *meeting) flood(total *totals) {
	mesh := m.inner.mesh
	for i := 0; i < len(m.insides); i++ {
		c := m.insides[i]
		// The spokes, counter-clockwise: those that the rim does not cross end inside.
		was := m.rim.lookUp(c.h) < 0
		for h := c.h; ; {
			last := mesh.Prev(h)
			next := mesh.Twin(last)
			is := m.rim.lookUp(next) < 0
			if is {
				b := mesh.Origin(last)
				m.inside(b, last)
				if a := mesh.Dest(h); was && c.v < a && c.v < b {
					m.inner3(total, h.Triangle())
				}
			}
			if h = next; h == c.h {
				break
			}
			was = is
		}
	}
}

// inner3 adds inner triangle f, all of whose corners are inside.
func (m *meeting) inner3(total *totals, f triangulate.Triangle) {
	m.poly.begin(&m.p[0], m.inner.least(f))
	v, h := m.inner.turned(f)
	for k := range v {
		m.poly.add(&m.inner.pos[v[k]], 0, 0, m.inside(v[k], h[k]))
	}
	m.end(total, f)
}

func (p *polygon) addWalked(x *walked) {
	p.at[p.n] = point{(x.fromX - p.origin[0]) + x.offX, (x.fromY - p.origin[1]) + x.offY, x.d}
	p.n++
}

// least is the smallest corner of t in (x, y) order.
func (x *side) least(t triangulate.Triangle) *orb.Point {
	return &x.pos[x.mesh.Origin(t.HalfEdge(int(x.turn[t]&3)))]
}
