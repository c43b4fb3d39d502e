package triangulate

import "isofacet/triangulate/exact"

// restore flips suspect edges, and those that become suspect by it, until every
// one that is not kept passes the in-circle test (Lawson 1977). Each flip lowers
// the lifted surface, ties included, so it ends. An edge that a flip moves to
// another half-edge is among those it makes suspect: none is lost from sight.
func (n *inserter) restore() {
	for len(n.suspects) > 0 {
		h := n.suspects[len(n.suspects)-1]
		n.suspects = n.suspects[:len(n.suspects)-1]
		t := n.half[h].twin
		if t == NoHalfEdge || n.kept.get(int(h)) {
			continue
		}
		a, b := n.half[h].origin, n.half[t].origin
		c, d := n.half[h.prev()].origin, n.half[t.prev()].origin
		p, q, r, s := &n.pos[a], &n.pos[b], &n.pos[c], &n.pos[d]
		sign := exact.InCircleXY(p[0], p[1], q[0], q[1], r[0], r[1], s[0], s[1])
		if sign == 0 {
			sign = exact.InCircleTied(*p, *q, *r, *s)
		}
		if sign > 0 {
			n.flip(h)
			n.suspects = append(n.suspects, h, h.prev(), t, t.prev())
		}
	}
}

// flip turns the edge of h, which is not kept, to the other diagonal of the two
// triangles beside it.
//
//	   c                   c
//	  / \                 /|\
//	 / h \               / | \
//	a-----b      →      a g|f b
//	 \ t /               \ | /
//	  \ /                 \|/
//	   d                   d
//
// h was a→b and t was b→a. Afterwards h.Triangle() is (a, d, c), t.Triangle() is (b, c, d), with
//
//	h: a→d   h.next(): d→c   h.prev(): c→a (as before)
//	t: b→c   t.next(): c→d   t.prev(): d→b (as before)
func (n *inserter) flip(h HalfEdge) {
	t := n.half[h].twin
	hn, tn := h.next(), t.next() // b→c and a→d
	a, b := n.half[h].origin, n.half[t].origin
	c, d := n.half[h.prev()].origin, n.half[t.prev()].origin
	beyondBC, keptBC := n.half[hn].twin, n.kept.get(int(hn))
	beyondAD, keptAD := n.half[tn].twin, n.kept.get(int(tn))

	n.note(h.Triangle())
	n.note(t.Triangle())
	n.half[hn].origin = d
	n.half[tn].origin = c
	n.join(h, beyondAD)
	n.join(t, beyondBC)
	n.join(hn, tn)
	n.kept.put(int(h), keptAD)
	n.kept.put(int(t), keptBC)
	n.kept.put(int(hn), false)
	n.kept.put(int(tn), false)
	n.at[a], n.at[b], n.at[c], n.at[d] = h, t, tn, hn
}
