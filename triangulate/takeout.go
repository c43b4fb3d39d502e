package triangulate

import "slices"

// Taking a vertex out of a triangulation and, if wanted, putting it back: the
// triangles that change are noted before they do.

// journal holds triangles as they were.
type journal struct {
	on    bool
	noted bits // of every triangle
	list  []noted
}

type noted struct {
	t    Triangle
	half [3]half
	kept [3]bool
}

// note keeps triangle t as it is, if it is not noted yet.
func (n *inserter) note(t Triangle) {
	j := &n.saved
	if !j.on || j.noted.get(int(t)) {
		return
	}
	j.noted.set(int(t))
	e := noted{t: t}
	for i := range 3 {
		h := t.HalfEdge(i)
		e.half[i], e.kept[i] = n.half[h], n.kept.get(int(h))
	}
	j.list = append(j.list, e)
}

// forget makes what was noted the past.
func (j *journal) forget() {
	for i := range j.list {
		j.noted[j.list[i].t>>6] &^= 1 << (j.list[i].t & 63)
	}
	j.list = j.list[:0]
}

// undo brings back all triangles that are noted.
func (n *inserter) undo() {
	for i := range n.saved.list {
		e := &n.saved.list[i]
		for k := range 3 {
			h := e.t.HalfEdge(k)
			n.half[h] = e.half[k]
			n.kept.put(int(h), e.kept[k])
			if o := e.half[k].origin; o != NoVertex {
				n.at[o] = h
			}
		}
	}
	n.saved.forget()
}

// copyMesh makes the triangles the reduction's own.
func (r *Reduction) copyMesh() {
	if r.own {
		return
	}
	r.half = slices.Clone(r.m.half)
	if r.kept = slices.Clone(r.m.kept); r.kept == nil {
		r.kept = newBits(len(r.half))
	}
	r.at = slices.Clone(r.m.around)
	r.saved = journal{on: true, noted: newBits(len(r.half) / 3)}
	r.own = true
}

// takeOut takes v out and returns where it lies in what is left. It notes what it
// changes.
func (r *Reduction) takeOut(v Vertex) Left {
	r.copyMesh()
	lines, a, b := r.constrainedAt(v)
	joint := [...]Joint{NoLine, LineEnd, Joined, Meeting}[min(lines, 3)]
	r.clear(v)
	if joint == Joined && !r.joinEnds(a, b) {
		r.undo()
		joint = Parted
		r.clear(v)
	}
	left := r.around(v)
	left.Joint = joint
	return left
}

// constrainedAt counts the constrained edges at v and returns the other ends of two.
func (r *Reduction) constrainedAt(v Vertex) (count int, a, b Vertex) {
	a, b = NoVertex, NoVertex
	first := r.at[v]
	for h := first; ; {
		if r.kept.get(int(h)) {
			count++
			a, b = b, r.dest(h)
		}
		if h = r.half[h.prev()].twin; h == first {
			return count, a, b
		}
	}
}

// joinEnds makes the edge from a to b a constrained one, unless another is in the way.
func (r *Reduction) joinEnds(a, b Vertex) bool {
	ok := r.insert(a, b, 0)
	r.chains = r.chains[:0]
	return ok
}

// clear takes v out with its edges and triangulates its star by cutting off ears; v
// stays inside or on the rim of what is left of the star, which ends as one triangle.
// Then it flips edges until all are Delaunay that may be. Where constrained edges went,
// vertices see each other that did not before, and the ring may have to change too.
func (r *Reduction) clear(v Vertex) {
	r.ring, r.slots = r.ring[:0], r.slots[:0]
	first := r.at[v]
	for h := first; ; {
		e := h.next()
		i := int32(len(r.ring))
		r.ring = append(r.ring, ear{rimLink{u: r.dest(h), outer: r.half[e].twin, pair: -1, index: -1, kept: r.kept.get(int(e))}, i - 1, i + 1})
		r.note(h.Triangle())
		r.slots = append(r.slots, h.Triangle())
		if h = r.half[h.prev()].twin; h == first {
			break
		}
	}
	ring, p := r.ring, &r.pos[v]
	ring[0].prev, ring[len(ring)-1].next = int32(len(ring)-1), 0
	at := int32(0)
	for left := len(ring); ; {
		e := &ring[at]
		before, after := e.prev, e.next
		o, q, s := &r.pos[ring[before].u], &r.pos[e.u], &r.pos[ring[after].u]
		if left > 3 && (orientXY(o, q, s) <= 0 || orientXY(o, s, p) < 0) {
			at = after
			continue
		}
		h := r.cutEar(&ring[before], e, ring[after].u)
		if left == 3 {
			last := &ring[after]
			r.attach(h+2, last.rimLink, nil)
			r.suspects = append(r.suspects, h+2)
			break
		}
		ring[before].rimLink = rimLink{u: ring[before].u, outer: h + 2, pair: -1, index: -1}
		ring[before].next, ring[after].prev = after, before
		left--
		at = before
	}
	for _, t := range r.slots {
		for i := range 3 {
			r.half[t.HalfEdge(i)] = half{NoVertex, NoHalfEdge}
		}
	}
	r.restore()
}

// cutEar makes a triangle of two edges of the ring in turn and w, where the second
// ends, and returns the half-edge along the first.
func (r *Reduction) cutEar(first, second *ear, w Vertex) HalfEdge {
	t := r.slots[len(r.slots)-1]
	r.slots = r.slots[:len(r.slots)-1]
	h := t.HalfEdge(0)
	r.half[h].origin, r.half[h+1].origin, r.half[h+2].origin = first.u, second.u, w
	r.half[h+2].twin = NoHalfEdge
	r.at[first.u], r.at[second.u], r.at[w] = h, h+1, h+2
	r.kept.put(int(h+2), false)
	r.attach(h, first.rimLink, nil)
	r.attach(h+1, second.rimLink, nil)
	r.suspects = append(r.suspects, h, h+1)
	return h
}

// around returns where v, taken out, lies among the triangles that were noted.
func (r *Reduction) around(v Vertex) Left {
	p := &r.pos[v]
next:
	for i := range r.saved.list {
		t := r.saved.list[i].t
		a, b, c := r.half[3*t].origin, r.half[3*t+1].origin, r.half[3*t+2].origin
		if a == NoVertex {
			continue
		}
		ends := [4]Vertex{a, b, c, a}
		on := -1
		for k := range 3 {
			switch orientXY(&r.pos[ends[k]], &r.pos[ends[k+1]], p) {
			case -1:
				continue next
			case 0:
				on = k
			}
		}
		if on >= 0 {
			return r.onEdge(ends[on], ends[on+1])
		}
		return r.inside(a, b, c)
	}
	panic("triangulate: no triangle about a vertex taken out")
}
