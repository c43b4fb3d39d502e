package overlay

import (
	"math"
	"math/bits"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// point is a corner of a polygon, and the difference there, inner less outer.
type point struct{ x, y, d float64 }

// polygon is what two triangles have in common, counter-clockwise, relative to a
// point of theirs. Two triangles have at most six corners in common.
type polygon struct {
	at     [8]point
	n      int
	origin orb.Point
}

// piece is the polygon that the outer triangle has in common with f; fewer than
// three points where they only touch, or do not.
//
// It goes along the edges of the outer triangle. On each it meets, in this order:
// the corner where the edge begins, if f holds it; where the edge enters f; corners
// of f on the edge; where it leaves f. From each of these the polygon goes on along
// the edges of f as long as those lead to corners of f inside the outer triangle.
func (m *meeting) piece(f *innerTriangle, at *[3]triangulate.Location, d *[3]float64, poly *polygon) {
	var c [3]*corner
	for j := range c {
		c[j] = &m.corners.of[f.c[j]]
	}
	poly.begin(&m.p[0], c[0].p)
	var enters, leaves [3]*crossing
	var leavesOver [3]int
	some := false
	for j := range 3 {
		if f.e[j] < 0 {
			continue
		}
		e := &m.edges.of[f.e[j]]
		next := c[after[j]]
		for i := range e.n {
			x := &e.cross[i]
			if next.neg>>x.k&1 == 1 { // the inner edge goes out, so the outer one comes in
				enters[x.k] = x
			} else {
				leaves[x.k], leavesOver[x.k] = x, j
			}
			some = true
		}
	}
	onEdges := (c[0].zero | c[1].zero | c[2].zero) != 0
	for k := range 3 {
		if in, chain := m.holds(f, k, &at[k]); in {
			some = true
			poly.add(&m.p[k], 0, 0, d[k])
			if chain >= 0 {
				poly.chain(&c, chain)
			}
		}
		if x := enters[k]; x != nil {
			poly.add(x.from, x.off[0], x.off[1], x.d)
		}
		if onEdges {
			some = m.alongEdge(&c, k, poly) || some
		}
		if x := leaves[k]; x != nil {
			poly.add(x.from, x.off[0], x.off[1], x.d)
			poly.chain(&c, after[leavesOver[k]])
		}
	}
	if !some && c[0].inside() { // all of f
		for _, v := range c {
			poly.add(v.p, 0, 0, v.d)
		}
	}
}

var after = [3]int{1, 2, 0}

// holds tells whether f holds outer corner k, which lies at at; chain is the corner of
// f that comes next when it lies on f's rim, else -1.
func (m *meeting) holds(f *innerTriangle, k int, at *triangulate.Location) (in bool, chain int) {
	switch at.Place {
	case triangulate.Inside:
		return at.Triangle == f.t, -1
	case triangulate.OnEdge:
		twin := m.inner.mesh.Twin(at.Edge)
		for j, h := range f.h {
			if h == at.Edge || h == twin {
				return true, after[j]
			}
		}
	case triangulate.OnVertex:
		for j, c := range f.c {
			if m.corners.of[c].v == at.Vertex {
				return true, after[j]
			}
		}
	}
	return false, -1
}

// alongEdge adds the corners of f that lie on outer edge k, between its ends.
func (m *meeting) alongEdge(c *[3]*corner, k int, poly *polygon) bool {
	var on [3]int
	n := 0
	for j, v := range c {
		if v.neg == 0 && v.zero == 1<<k {
			on[n] = j
			n++
		}
	}
	if n == 2 && before(c[on[1]].p, c[on[0]].p) == m.up[k] {
		on[0], on[1] = on[1], on[0]
	}
	for _, j := range on[:n] {
		poly.add(c[j].p, 0, 0, c[j].d)
		poly.chain(c, after[j])
	}
	return n > 0
}

// chain adds corner j and those after it as long as they lie inside the outer
// triangle.
func (p *polygon) chain(c *[3]*corner, j int) {
	for c[j].inside() && p.n < len(p.at) {
		p.add(c[j].p, 0, 0, c[j].d)
		j = after[j]
	}
}

// begin empties the polygon, relative now to the smaller one of a and b.
func (p *polygon) begin(a, b *orb.Point) {
	p.n = 0
	second := oneIf(b[0] < a[0])
	if a[0] == b[0] {
		second = oneIf(b[1] < a[1])
	}
	p.origin = *[2]*orb.Point{a, b}[second] // which is as likely as not
}

func (p *polygon) add(from *orb.Point, offX, offY, d float64) {
	p.at[p.n] = point{(from[0] - p.origin[0]) + offX, (from[1] - p.origin[1]) + offY, d}
	p.n++
}

// first returns the number of the smallest point in (x, y) order: a beginning that
// does not depend on which triangle was the outer one. Of points that rounding made
// equal it takes the first of their run, counter-clockwise, and of several runs the
// one with the larger difference.
func (p *polygon) first() int {
	first, _ := p.survey()
	return first
}

// survey returns the number of the first point, and which signs there are among the
// differences: somePos, someNeg. It has no branches to be guessed wrong.
func (p *polygon) survey() (first int, signs int) {
	least := ^uint64(0)
	ties := 0
	for i := range p.at[:p.n] {
		q := &p.at[i]
		// Bits in the order of the numbers. There is no -0: it begins with a - a + x.
		b := math.Float64bits(q.x)
		key := b ^ (uint64(int64(b)>>63) | 1<<63)
		_, less := bits.Sub64(key, least, 0)
		ties |= oneIf(key == least)
		least ^= (least ^ key) & -less
		first ^= (first ^ i) & -int(less)
		signs |= oneIf(q.d > 0)*somePos | oneIf(q.d < 0)*someNeg
	}
	if ties != 0 {
		first = p.firstOfTied()
	}
	return first, signs
}

const (
	somePos = 1
	someNeg = 2
)

// firstOfTied is first where several points have one x.
func (p *polygon) firstOfTied() int {
	best := 0
	for i := 1; i < p.n; i++ {
		a, b := &p.at[i], &p.at[best]
		if a.x < b.x || a.x == b.x && a.y < b.y {
			best = i
		}
	}
	tied := 0
	for i := range p.n {
		if p.same(i, best) {
			tied++
		}
	}
	if tied == 1 {
		return best
	}
	run := -1
	for i := range p.n {
		if p.same(i, best) && !p.same((i+p.n-1)%p.n, best) &&
			(run < 0 || math.Abs(p.at[i].d) > math.Abs(p.at[run].d)) {
			run = i
		}
	}
	return max(run, 0)
}

func (p *polygon) same(i, j int) bool { return p.at[i].x == p.at[j].x && p.at[i].y == p.at[j].y }
