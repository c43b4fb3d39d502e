package triangulate

import (
	"slices"

	"github.com/paulmach/orb"
)

// finish turns the closed surface of the builder into a mesh: repeated places
// leave gaps that are closed, and the ghosts go.
func (b *builder) finish(whole part, workers int) *Mesh {
	n := len(b.rec)
	m := &Mesh{vertexOf: make([]Vertex, n), half: b.half}
	low := whole.low
	if whole.n < n {
		low = b.closeGaps(whole)
		m.half = b.half
		n = whole.n
	}
	m.pos = make([]orb.Point, n)
	inRanges(n, workers, func(_, lo, hi int) {
		for i, r := range b.rec[lo:hi] {
			m.pos[lo+i] = orb.Point{r.x, r.y}
			m.vertexOf[r.id] = Vertex(lo + i)
		}
	})
	for _, r := range b.rec[n:] {
		m.vertexOf[^r.id] = m.vertexOf[int32(r.x)]
	}
	if n >= 2 {
		m.half = dropGhosts(m.half, b.ghosts(low))
	}
	m.shown = len(m.half)
	return m
}

// closeGaps moves the records of distinct places to the front and the
// triangles between them to the front of their array. Triangles that an
// abandoned build left behind are not reached from the finished part. It
// returns the new number of the part's hull half-edge.
func (b *builder) closeGaps(whole part) (low HalfEdge) {
	number := make([]Vertex, len(b.rec))
	n := 0
	for i := range b.rec {
		if b.rec[i].id >= 0 {
			number[i] = Vertex(n)
			n++
		}
	}
	if n >= 2 {
		low = b.keepReached(whole.low)
		for h := range b.half {
			if v := b.half[h].origin; v != ghost {
				b.half[h].origin = number[v]
			}
		}
	} else {
		b.half = nil
	}
	b.putRepeatedLast(0, len(b.rec))
	return low
}

// keepReached renumbers the triangles that hang together with low's, in their
// order, forgets the rest, and returns the new number of low.
func (b *builder) keepReached(low HalfEdge) HalfEdge {
	reached := make([]bool, len(b.half)/3)
	stack := []Triangle{low.Triangle()}
	reached[stack[0]] = true
	for len(stack) > 0 {
		t := stack[len(stack)-1]
		stack = stack[:len(stack)-1]
		for i := range 3 {
			u := b.half[t.HalfEdge(i)].twin.Triangle()
			if !reached[u] {
				reached[u] = true
				stack = append(stack, u)
			}
		}
	}
	to := make([]HalfEdge, len(reached))
	n := HalfEdge(0)
	for t, ok := range reached {
		if ok {
			to[t] = n
			n += 3
		}
	}
	moved := func(h HalfEdge) HalfEdge { return to[h/3] + h%3 }
	for t, ok := range reached {
		if !ok {
			continue
		}
		for i := range HalfEdge(3) {
			e := b.half[HalfEdge(3*t)+i]
			b.half[to[t]+i] = half{e.origin, moved(e.twin)}
		}
	}
	b.half = b.half[:n]
	return moved(low)
}

// ghosts lists the ghost triangles in the order of the hull, clockwise, and
// cuts the real triangles' links to them.
func (b *builder) ghosts(low HalfEdge) []Triangle {
	var ts []Triangle
	for g := low; ; {
		ts = append(ts, g.Triangle())
		if real := b.half[g].twin; real != NoHalfEdge {
			b.half[real].twin = NoHalfEdge
		}
		g = b.clockwise(g)
		if g == low {
			return ts
		}
	}
}

// dropGhosts fills the places of the ghosts with the last real triangles and
// returns the shortened array.
func dropGhosts(T []half, ghosts []Triangle) []half {
	slices.Sort(ghosts)
	real := Triangle(len(T)/3 - len(ghosts))
	from := Triangle(len(T)/3 - 1)
	last := len(ghosts) - 1
	for _, g := range ghosts {
		if g >= real {
			break
		}
		for last >= 0 && ghosts[last] == from {
			from--
			last--
		}
		for i := range 3 {
			e := T[from.HalfEdge(i)]
			T[g.HalfEdge(i)] = e
			if e.twin != NoHalfEdge {
				T[e.twin].twin = g.HalfEdge(i)
			}
		}
		from--
	}
	return slices.Clip(T[:3*real])
}
