package contour

import (
	"cmp"
	"fmt"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// faces are what the chains divide the plane into. A chain has two sides, each seen as a half: half 2c runs as chain c
// does, half 2c+1 the other way. A half has the face that is named with it on its left. Following halves, at each node
// the next to the right of turning back, goes once round one edge of a face: its outer one, or one of a hole.
//
// The edges that belong to one face are put together by a look to the west from each connected group of chains, from its
// smallest point; and the bands of faces are found from the outside in, by adding up jumps.
type faces struct {
	net    *net
	chains []chain
	around [][]int32 // of every node, the halves that start there, counter-clockwise
	next   []int32   // of every half, the one after it round its face
	edge   []int32   // of every half, the edge of a face that it is part of
	starts []int32   // of every edge, a half of it
	sets   unions    // of edges that have one face
	above  []jump    // of every edge's face, as jump.band takes it
	bands  []int32   // of every edge's face, once polygons were made
}

// half returns which points a half runs through: the first two of them, and whether it runs as its chain does.
func (f *faces) firstTwo(h int32) (p, q orb.Point) {
	c := &f.chains[h/2]
	if h%2 == 0 {
		return f.net.points[c.first], f.net.points[c.first+1]
	}
	return f.net.points[c.last], f.net.points[c.last-1]
}

// origin returns the node at which a half starts.
func (f *faces) origin(h int32) int32 {
	if h%2 == 0 {
		return f.chains[h/2].from
	}
	return f.chains[h/2].to
}

// newFaces finds the faces between the paths of a net, which are split, and their bands.
func newFaces(n *net, tree *boxes) (*faces, error) {
	chains, nodes := n.chains()
	return facesBetween(n, tree, chains, nodes)
}

func facesBetween(n *net, tree *boxes, chains []chain, nodes int) (*faces, error) {
	f := &faces{net: n, chains: chains, around: make([][]int32, nodes)}
	halves := int32(2 * len(chains))
	for h := range halves {
		v := f.origin(h)
		f.around[v] = append(f.around[v], h)
	}
	for _, out := range f.around {
		slices.SortFunc(out, f.compareDirections)
	}
	f.link(func(int32) bool { return true })
	f.goRound()
	return f, f.nest(tree)
}

// compareDirections orders halves that start at one node counter-clockwise, from the south (exclusive) on.
func (f *faces) compareDirections(g, h int32) int {
	p, q := f.firstTwo(g)
	_, r := f.firstTwo(h)
	if c := cmp.Compare(westward(p, q), westward(p, r)); c != 0 {
		return c
	}
	return -exact.Orient(p, q, r)
}

// westward is 0 for directions from the south (exclusive) over the east to the north (inclusive), and 1 for the others.
func westward(p, q orb.Point) int {
	if exact.CompareXY(p, q) < 0 {
		return 0
	}
	return 1
}

// link sets next, leaving out halves of chains that are not kept.
func (f *faces) link(kept func(chain int32) bool) {
	if f.next == nil {
		f.next = make([]int32, 2*len(f.chains))
	}
	for i, out := range f.around {
		left := out[:0]
		for _, h := range out {
			if kept(h / 2) {
				left = append(left, h)
			}
		}
		f.around[i] = left
		// Arriving by the twin of left[k], whose way back is left[k], the next to the right is left[k-1].
		for k, h := range left {
			f.next[h^1] = left[(k+len(left)-1)%len(left)]
		}
	}
}

// goRound numbers the edges of faces.
func (f *faces) goRound() {
	f.edge = make([]int32, len(f.next))
	for h := range f.edge {
		f.edge[h] = -1
	}
	for h := range int32(len(f.next)) {
		if f.edge[h] >= 0 {
			continue
		}
		e := int32(len(f.starts))
		f.starts = append(f.starts, h)
		for g := h; f.edge[g] < 0; g = f.next[g] {
			f.edge[g] = e
		}
	}
	f.sets = newUnions(len(f.starts))
	f.above = make([]jump, len(f.starts))
}

// group is chains that hang together.
type group struct {
	west orb.Point // its smallest point
	half int32     // a half that has on its left what lies west of that point
}

// groups returns the groups of chains, the one with the smallest point first.
func (f *faces) groups() []group {
	together := newUnions(len(f.around))
	for i := range f.chains {
		together.join(f.chains[i].from, f.chains[i].to)
	}
	found := map[int32]group{}
	for i := range int32(len(f.chains)) {
		c := &f.chains[i]
		g, ok := found[together.find(c.from)]
		for k := c.first; k <= c.last; k++ {
			if !ok || exact.CompareXY(f.net.points[k], g.west) < 0 {
				g, ok = group{f.net.points[k], f.westHalf(i, k)}, true
			}
		}
		found[together.find(c.from)] = g
	}
	out := make([]group, 0, len(found))
	for _, g := range found {
		out = append(out, g)
	}
	slices.SortFunc(out, func(a, b group) int { return exact.CompareXY(a.west, b.west) })
	return out
}

// westHalf returns the half that has on its left what lies west of point k of chain i, the smallest of its group. All
// directions from there go between the south and the north by the east; the last of them, counter-clockwise, has the
// west on its left.
func (f *faces) westHalf(i, k int32) int32 {
	c := &f.chains[i]
	switch k {
	case c.first:
		out := f.around[c.from]
		return out[len(out)-1]
	case c.last:
		out := f.around[c.to]
		return out[len(out)-1]
	}
	p := f.net.points
	if exact.Orient(p[k], p[k-1], p[k+1]) > 0 {
		return 2 * i
	}
	return 2*i + 1
}

// nest puts the edges of each face together, and finds which band each face has.
func (f *faces) nest(tree *boxes) error {
	known := make([]bool, len(f.starts))
	for _, g := range f.groups() {
		outer := f.edge[g.half]
		// What is met to the west is of a group with a smaller point: its faces are known.
		if s := tree.westOf(g.west, func(s int32) bool { return f.chainOf(s) >= 0 }); s >= 0 {
			h := f.eastHalf(s)
			f.sets.join(outer, f.edge[h])
			f.above[outer] = f.above[f.edge[h]]
		}
		known[outer] = true
		if err := f.spread(outer, known); err != nil {
			return err
		}
	}
	return nil
}

// spread finds the faces that hang together with the edge e by chains.
func (f *faces) spread(e int32, known []bool) error {
	todo := []int32{e}
	for len(todo) > 0 {
		e := todo[len(todo)-1]
		todo = todo[:len(todo)-1]
		for h := f.starts[e]; ; {
			// Left of the half lies e; across it, on its right, the other.
			times := int32(-1)
			if h%2 == 1 {
				times = 1
			}
			there := f.above[e].plus(f.chains[h/2].jump, times)
			o := f.edge[h^1]
			if !known[o] {
				known[o] = true
				f.above[o] = there
				todo = append(todo, o)
			} else if !slices.Equal(f.above[o], there) {
				p, _ := f.firstTwo(h)
				return fmt.Errorf("bands near (%v, %v): lines do not close", p[0], p[1])
			}
			if h = f.next[h]; h == f.starts[e] {
				break
			}
		}
	}
	return nil
}

// chainOf returns the chain that a segment is part of, -1 if none is.
func (f *faces) chainOf(segment int32) int32 {
	i, ok := slices.BinarySearchFunc(f.chains, segment, func(c chain, s int32) int {
		switch {
		case c.last <= s:
			return -1
		case c.first > s:
			return 1
		}
		return 0
	})
	if !ok {
		return -1
	}
	return int32(i)
}

// unions keeps sets of numbers that grow together.
type unions []int32

func newUnions(n int) unions {
	u := make(unions, n)
	for i := range u {
		u[i] = int32(i)
	}
	return u
}

func (u unions) find(i int32) int32 {
	for u[i] != i {
		u[i] = u[u[i]]
		i = u[i]
	}
	return i
}

func (u unions) join(i, j int32) { u[u.find(i)] = u.find(j) }
