package contour

import (
	"cmp"
	"math"
	"math/bits"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Once no segment touches another but at ends, paths meet in points that they share. Such a point, and each end of a
// path, is a node; a path from node to node is a chain. Chains can only run along each other segment by segment,
// between the same two nodes: these become one chain, with the changes of band added up, or none if nothing
// is left to change.

// chain is a way through points[first..last] of the net, from node from to node to.
type chain struct {
	first, last int32
	from, to    int32
	jump        jump
}

// jump tells what changes from the right of a chain to its left: of the floors, how often the place is above them. Floor 0
// is the bottom of the surface, floor f the level f-1; so band b means above floors 0 to b once, and outside above none.
//
// It lists the floors from which on a change begins or ends, in rising order without zeros: the change of floor f is the
// sum of by up to f. From band r to band l > r it is {{r+1, 1}, {l+1, -1}}.
type jump []floorStep

type floorStep struct{ floor, by int32 }

// jumpFrom returns the jump from the band on the right to that on the left.
func jumpFrom(right, left int32) jump {
	switch {
	case right < left:
		return jump{{right + 1, 1}, {left + 1, -1}}
	case right > left:
		return jump{{left + 1, -1}, {right + 1, 1}}
	}
	return nil
}

// plus returns j and times k, times +1 or -1.
func (j jump) plus(k jump, times int32) jump {
	sum := make(jump, 0, len(j)+len(k))
	for len(j) > 0 || len(k) > 0 {
		switch {
		case len(k) == 0 || len(j) > 0 && j[0].floor < k[0].floor:
			sum = append(sum, j[0])
			j = j[1:]
		case len(j) == 0 || k[0].floor < j[0].floor:
			sum = append(sum, floorStep{k[0].floor, times * k[0].by})
			k = k[1:]
		default:
			if by := j[0].by + times*k[0].by; by != 0 {
				sum = append(sum, floorStep{j[0].floor, by})
			}
			j, k = j[1:], k[1:]
		}
	}
	return sum
}

// band returns the band of a place that is above the floors as j tells, counted from outside all: the highest band whose
// floors it is all above at least once.
func (j jump) band() int32 {
	if len(j) == 0 || j[0].floor > 0 || j[0].by < 1 {
		return outside
	}
	above := int32(0)
	for _, s := range j {
		if above += s.by; above < 1 {
			return s.floor - 1
		}
	}
	return math.MaxInt32 // not reached: what begins ends
}

// chains cuts the paths at their nodes and merges chains that coincide. It returns the chains and the number of nodes,
// which are numbered in (x, y) order.
func (n *net) chains() ([]chain, int) {
	node := n.meetings()
	var chains []chain
	var ends []end
	for _, p := range n.paths {
		first := p.first
		for k := p.first + 1; k <= p.last; k++ {
			if k < p.last && !node.has(k) {
				continue
			}
			// There and back on one segment, the far end not a node: nothing.
			if !(k == first+2 && n.points[first] == n.points[k]) {
				i := int32(len(chains))
				ends = append(ends, end{n.points[first], 2 * i}, end{n.points[k], 2*i + 1})
				chains = append(chains, chain{first: first, last: k, jump: jumpFrom(p.right, p.left)})
			}
			first = k
		}
	}
	slices.SortFunc(ends, func(a, b end) int {
		if c := exact.CompareXY(a.at, b.at); c != 0 {
			return c
		}
		return cmp.Compare(a.which, b.which)
	})
	nodes := 0
	for i, e := range ends {
		if i > 0 && e.at != ends[i-1].at {
			nodes++
		}
		c := &chains[e.which/2]
		if e.which%2 == 0 {
			c.from = int32(nodes)
		} else {
			c.to = int32(nodes)
		}
	}
	if len(ends) > 0 {
		nodes++
	}
	return mergeChains(chains), nodes
}

// end is an end of chain which/2: the first if which is even.
type end struct {
	at    orb.Point
	which int32
}

// mergeChains makes one chain of those of one segment between the same nodes, and leaves out what changes nothing. Chains of
// one segment run from the smaller node to the larger afterwards.
func mergeChains(chains []chain) []chain {
	var single []chain
	kept := chains[:0]
	for _, c := range chains {
		if c.last-c.first > 1 {
			kept = append(kept, c)
		} else {
			single = append(single, c)
		}
	}
	low := func(c *chain) int32 { return min(c.from, c.to) }
	high := func(c *chain) int32 { return max(c.from, c.to) }
	slices.SortFunc(single, func(a, b chain) int {
		return cmp.Or(cmp.Compare(low(&a), low(&b)), cmp.Compare(high(&a), high(&b)), cmp.Compare(a.first, b.first))
	})
	for len(single) > 0 {
		c := single[0]
		n := 1
		for ; n < len(single) && low(&single[n]) == low(&c) && high(&single[n]) == high(&c); n++ {
			times := int32(1)
			if single[n].from != c.from {
				times = -1
			}
			c.jump = c.jump.plus(single[n].jump, times)
		}
		if len(c.jump) > 0 {
			kept = append(kept, c)
		}
		single = single[n:]
	}
	slices.SortFunc(kept, func(a, b chain) int { return cmp.Compare(a.first, b.first) })
	return kept
}

// bitset is a set of small numbers.
type bitset []uint64

func (b bitset) has(i int32) bool { return b[i>>6]>>(i&63)&1 != 0 }
func (b bitset) add(i int32)      { b[i>>6] |= 1 << (i & 63) }

// meetings returns the points that coincide with another point of a path, and the ends of paths.
func (n *net) meetings() bitset {
	found := make(bitset, (len(n.points)+63)/64)
	// A hash table of points by place, open addressing with steps of one: numbers of points plus one.
	shift := 64 - bits.Len(uint(2*len(n.points)+1))
	slots := make([]int32, 1<<(64-shift))
	for _, p := range n.paths {
		found.add(p.first)
		found.add(p.last)
		last := p.last
		if n.points[p.first] == n.points[last] {
			last-- // the repetition of the first point is no meeting
		}
		for k := p.first; k <= last; k++ {
			at := n.points[k]
			for h := hash(at) >> shift; ; h = (h + 1) & uint64(len(slots)-1) {
				if slots[h] == 0 {
					slots[h] = k + 1
					break
				}
				if other := slots[h] - 1; n.points[other] == at {
					found.add(other)
					found.add(k)
					break
				}
			}
		}
	}
	return found
}

// hash mixes the bits of a point's coordinates (the multipliers are those of Steele & Vigna 2021 for 64 bits).
func hash(p orb.Point) uint64 {
	h := math.Float64bits(p[0]+0)*0xd1342543de82ef95 ^ bits.RotateLeft64(math.Float64bits(p[1]+0), 32)*0xf1357aea2e62a9c5
	h ^= h >> 32
	return h * 0xd1342543de82ef95
}
