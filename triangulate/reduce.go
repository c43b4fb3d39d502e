package triangulate

import (
	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// A Reduction is a mesh from which vertices are taken out: the triangulation of what
// is left, as if it had been built without them.
//
// What becomes of the constrained edges at a vertex that is taken out is told by
// their number:
//
//	none       the star of the vertex is triangulated anew, nothing else changes
//	two        they join into one, from the one neighbour straight to the other, by
//	           the rule of Constrained: a vertex exactly on it divides it. Where it
//	           would cross another constrained edge, both go with the vertex
//	one        it goes with the vertex: the line ends a vertex sooner
//	three on   they go with the vertex: each of the lines ends a vertex sooner
//
// Vertices on the outline are never taken out: their places would lie outside.
//
// One goroutine at a time may use a Reduction; several of one mesh may work at the
// same time. Taking a vertex out takes time O(degree), but for edges far away that a
// joined or missing constraint makes change.
//
// Sources: Devillers 2002 (deletion by ears of a star), Lawson 1977 (flips), Chew 1989.
type Reduction struct {
	inserter
	m     *Mesh
	own   bool              // half, kept and at are copies, free to be changed
	ghost map[Vertex]Vertex // of every vertex taken out, one that was a corner about its place
	view  Locator

	link  []Vertex
	ring  []ear
	slots []Triangle
}

// ear is an edge of the ring about a hole, in a circular list.
type ear struct {
	rimLink
	prev, next int32
}

// Joint tells what became of the constrained edges of a vertex taken out.
type Joint uint8

// The joints.
const (
	NoLine  Joint = iota // there were none
	Joined               // two became one
	LineEnd              // one, which went
	Meeting              // three or more, which went
	Parted               // two, which went: joined they would cross another
)

// Left is where the place of a vertex lies in the triangulation without it.
type Left struct {
	// Place is Inside or OnEdge; Outside for a vertex on the outline or without a
	// triangle, of which nothing else is known.
	Place Place
	// Corners are those of the triangle around the place, counter-clockwise, the
	// smallest in (x, y) order first; on an edge its two ends, the smaller first, and
	// NoVertex.
	Corners [3]Vertex
	Joint   Joint
}

var leftNowhere = Left{Outside, [3]Vertex{NoVertex, NoVertex, NoVertex}, NoLine}

// Reduction returns a reduction of m from which no vertex is taken out yet. It copies
// the mesh (53 bytes a vertex) only when something in it has to change.
func (m *Mesh) Reduction() *Reduction {
	r := &Reduction{inserter: inserter{pos: m.pos, half: m.half, kept: m.kept}, m: m}
	m.firstAroundAll()
	return r
}

// Reset puts back all vertices that were taken out, in time O(vertices).
func (r *Reduction) Reset() {
	r.ghost = nil
	if !r.own {
		return
	}
	copy(r.half, r.m.half)
	if clear(r.kept); r.m.kept != nil {
		copy(r.kept, r.m.kept)
	}
	copy(r.at, r.m.around)
	r.saved.forget()
}

// OnOutline tells whether v lies on the outline of the mesh, or has no triangle.
func (r *Reduction) OnOutline(v Vertex) bool {
	h := r.m.firstAround(v)
	return h == NoHalfEdge || r.m.Twin(h) == NoHalfEdge
}

// Removed tells whether v has been taken out.
func (r *Reduction) Removed(v Vertex) bool {
	_, ok := r.ghost[v]
	return ok
}

// Neighbours appends the vertices that an edge joins with v, counter-clockwise, to
// dst. v must neither have been taken out nor lie on the outline.
func (r *Reduction) Neighbours(dst []Vertex, v Vertex) []Vertex {
	first := r.outgoing(v)
	for h := first; ; {
		dst = append(dst, r.dest(h))
		if h = r.half[h.prev()].twin; h == first {
			return dst
		}
	}
}

func (r *Reduction) outgoing(v Vertex) HalfEdge {
	if r.own {
		return r.at[v]
	}
	return r.m.firstAround(v)
}

// Without returns where v lies in what is left without it, and leaves it in.
//
// It takes no memory. A vertex without constrained edges takes time O(degree); its
// triangle is found without the others of its star.
func (r *Reduction) Without(v Vertex) Left {
	if r.OnOutline(v) {
		return leftNowhere
	}
	if lined := r.star(v); !lined {
		return r.lowest(v)
	}
	left := r.takeOut(v)
	r.undo()
	return left
}

// WithoutAll appends to dst where each of vs would lie without all of them, and leaves
// them in. What is on the outline or has constrained edges is not taken out, and Outside
// is returned for it; what has been taken out before is found where it is.
func (r *Reduction) WithoutAll(dst []Left, vs []Vertex) []Left {
	r.copyMesh()
	stays := func(v Vertex) bool { return r.OnOutline(v) || !r.Removed(v) && r.star(v) }
	from := len(dst)
	for _, v := range vs {
		if stays(v) {
			dst = append(dst, leftNowhere)
			continue
		}
		dst = append(dst, Left{Place: Inside})
		if !r.Removed(v) && r.at[v] != NoHalfEdge {
			r.clear(v)
			r.at[v] = NoHalfEdge
		}
	}
	for i, v := range vs {
		switch {
		case dst[from+i].Place == Outside:
		case r.Removed(v):
			dst[from+i] = r.locateFrom(v, r.anyChanged(v))
		default:
			dst[from+i] = r.around(v)
		}
	}
	r.undo()
	return dst
}

// Remove takes v out and returns where it lies in what is left. A vertex on the
// outline stays.
func (r *Reduction) Remove(v Vertex) Left {
	if r.OnOutline(v) {
		return leftNowhere
	}
	left := r.takeOut(v)
	r.saved.forget()
	r.at[v] = NoHalfEdge
	if r.ghost == nil {
		r.ghost = map[Vertex]Vertex{}
	}
	r.ghost[v] = left.Corners[0]
	return left
}

// Locate returns where v, which has been taken out, lies in what is left by now.
func (r *Reduction) Locate(v Vertex) Left {
	return r.locateFrom(v, r.nearGhost(v))
}

// nearGhost is a triangle near v, which has been taken out.
func (r *Reduction) nearGhost(v Vertex) Triangle {
	for r.Removed(v) {
		v = r.ghost[v]
	}
	return r.at[v].Triangle()
}

// anyChanged is a triangle among those that were noted, if there are any.
func (r *Reduction) anyChanged(v Vertex) Triangle {
	for i := range r.saved.list {
		if t := r.saved.list[i].t; r.half[3*t].origin != NoVertex {
			return t
		}
	}
	return r.nearGhost(v)
}

func (r *Reduction) locateFrom(v Vertex, t Triangle) Left {
	if r.view.m == nil {
		r.view.m = &Mesh{pos: r.pos, half: r.half, shown: len(r.half)}
	}
	place, h := r.view.walk(t, r.pos[v])
	if place == OnEdge {
		return r.onEdge(r.half[h].origin, r.dest(h))
	}
	return r.inside(r.half[h].origin, r.dest(h), r.half[h.prev()].origin)
}

func (r *Reduction) inside(a, b, c Vertex) Left {
	for exact.CompareXY(r.pos[a], r.pos[b]) > 0 || exact.CompareXY(r.pos[a], r.pos[c]) > 0 {
		a, b, c = b, c, a
	}
	return Left{Inside, [3]Vertex{a, b, c}, NoLine}
}

func (r *Reduction) onEdge(a, b Vertex) Left {
	if exact.CompareXY(r.pos[a], r.pos[b]) > 0 {
		a, b = b, a
	}
	return Left{OnEdge, [3]Vertex{a, b, NoVertex}, NoLine}
}

// star puts the neighbours of v into link, counter-clockwise, and tells whether a
// constrained edge leads to any.
func (r *Reduction) star(v Vertex) (lined bool) {
	first := r.outgoing(v)
	link := r.link[:0]
	for h := first; ; {
		if r.kept != nil && r.kept.get(int(h)) {
			lined = true
		}
		p := h.prev()
		link = append(link, r.dest(h))
		if h = r.half[p].twin; h == first {
			break
		}
	}
	r.link = link
	return lined
}

// lowest returns the triangle about v of the triangulation without it, v having no
// constrained edges. Its corners are of link.
//
// It is the one triangle of link vertices that holds v and no link vertex in its
// circle. For it is a Delaunay triangle of the link; and being empty it also belongs
// to the hole: were a corner of the hole in the way of one of its edges, that corner
// would lie in it. Constraints are of no account, as v sees all of link.
//
// So it is the face of the lower hull of the lifted link below v, and is found as by
// the simplex method: begin with any triangle that holds v; a vertex in its circle
// takes the place of one of its corners, so that it still holds v; then the lifted
// triangle is lower at v. Where v is on an edge, v + (e, e²) stands for v: the height
// there falls with each step, so that it ends.
func (r *Reduction) lowest(v Vertex) Left {
	link, p := r.link, r.pos[v]
	n := len(link)
	// From link[0] across v: the edge of the link that comes next to the far side.
	a := link[0]
	i := 2
	for i < n-1 && r.leftOf(a, link[i], p) {
		i++
	}
	b, c := link[i-1], link[i]
	stride := 1
	if n > manyNeighbours {
		stride = coprime(n)
	}
	d, passed := 0, 0
	for passed < n {
		w := link[d]
		if d += stride; d >= n {
			d -= n
		}
		if w == a || w == b || w == c || !r.inCircle(a, b, c, w) {
			passed++
			continue
		}
		passed = 0
		a, b, c = r.closer(a, b, c, w, p)
	}
	switch {
	case orientXY(&r.pos[a], &r.pos[b], &p) == 0:
		return r.onEdge(a, b)
	case orientXY(&r.pos[b], &r.pos[c], &p) == 0:
		return r.onEdge(b, c)
	case orientXY(&r.pos[c], &r.pos[a], &p) == 0:
		return r.onEdge(c, a)
	}
	return r.inside(a, b, c)
}

// manyNeighbours is the degree above which the neighbours are looked at in a
// scattered order: in turn, each could be a little better than the one before.
const manyNeighbours = 32

// coprime is a stride near the golden section of n that comes past all of n.
func coprime(n int) int {
	gcd := func(a, b int) int {
		for b != 0 {
			a, b = b, a%b
		}
		return a
	}
	s := int(float64(n) * 0.6180339887498949)
	for gcd(n, s) != 1 {
		s++
	}
	return s
}

func (r *Reduction) inCircle(a, b, c, d Vertex) bool {
	p, q, s, t := &r.pos[a], &r.pos[b], &r.pos[c], &r.pos[d]
	return exact.InCircleTiedXY(p[0], p[1], q[0], q[1], s[0], s[1], t[0], t[1]) > 0
}

func orientXY(a, b, c *orb.Point) int {
	return exact.OrientXY(a[0], a[1], b[0], b[1], c[0], c[1])
}

// closer returns the triangle of w, which lies in the circle of a, b, c, and two of
// these, that holds p + (e, e²) and is a face of the lower hull of the four.
func (r *Reduction) closer(a, b, c, w Vertex, p orb.Point) (Vertex, Vertex, Vertex) {
	// Turn the three so that w is not beyond the edges b-c and c-a, or not beyond any.
	q := &r.pos[w]
	switch {
	case orientXY(&r.pos[b], &r.pos[c], q) <= 0:
		a, b, c = b, c, a
	case orientXY(&r.pos[c], &r.pos[a], q) <= 0:
		a, b, c = c, a, b
	}
	leftOfC := r.leftOf(c, w, p) // of the line from c to w
	if orientXY(&r.pos[a], &r.pos[b], q) <= 0 {
		// Beyond a-b: the diagonal c-w divides the four.
		if leftOfC {
			return b, c, w
		}
		return a, w, c
	}
	// Inside: three triangles about w.
	if leftOfC {
		if r.leftOf(b, w, p) {
			return a, b, w
		}
		return b, c, w
	}
	if r.leftOf(a, w, p) {
		return c, a, w
	}
	return a, b, w
}

// leftOf tells whether p + (e, e²) lies to the left of the line from a to b.
func (r *Reduction) leftOf(a, b Vertex, p orb.Point) bool {
	o, d := &r.pos[a], &r.pos[b]
	if s := orientXY(o, d, &p); s != 0 {
		return s > 0
	}
	return ahead(d[0]-o[0], d[1]-o[1])
}
