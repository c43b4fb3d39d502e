package contour

import (
	"fmt"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// polygons returns the faces as polygons with their bands, in order of band and points. Faces of one band on both sides
// of a chain become one.
//
// The edge of a face may come to one node several times, where the face touches itself. There it is cut: of each edge
// that leaves rings which come to no node twice. One of a face's rings goes round counter-clockwise, the outer one,
// since the face hangs together; the others are holes.
func (f *faces) polygons() ([]bandPolygon, error) {
	bands := make([]int32, len(f.above))
	for e, above := range f.above {
		bands[e] = above.band()
	}
	f.bands = bands
	kept := func(c int32) bool { return bands[f.edge[2*c]] != bands[f.edge[2*c+1]] }
	for c := range int32(len(f.chains)) {
		if !kept(c) {
			f.sets.join(f.edge[2*c], f.edge[2*c+1])
		}
	}
	f.link(kept)

	place := map[int32]int{} // of a set of edges among the polygons
	var found []bandPolygon
	done := make([]bool, len(f.next))
	for h := range int32(len(f.next)) {
		if done[h] || !kept(h/2) {
			continue
		}
		band := bands[f.edge[h]]
		rings := f.ringsFrom(h, done)
		if band == outside {
			continue
		}
		set := f.sets.find(f.edge[h])
		i, ok := place[set]
		if !ok {
			i = len(found)
			place[set] = i
			found = append(found, bandPolygon{band: int(band)})
		}
		found[i].rings = append(found[i].rings, rings...)
	}
	for i := range found {
		if err := found[i].arrange(); err != nil {
			return nil, err
		}
	}
	slices.SortFunc(found, func(a, b bandPolygon) int {
		if a.band != b.band {
			return a.band - b.band
		}
		return comparePoints(a.rings[0], b.rings[0])
	})
	return found, nil
}

// ringsFrom goes round the edge that h is part of, marks its halves as done, and returns its rings.
func (f *faces) ringsFrom(h int32, done []bool) []orb.Ring {
	var rings []orb.Ring
	var way []int32       // halves, no node twice
	on := map[int32]int{} // of the nodes on the way, where on it
	for g := h; !done[g]; g = f.next[g] {
		done[g] = true
		on[f.origin(g)] = len(way)
		way = append(way, g)
		if at, ok := on[f.origin(g^1)]; ok { // back at a node
			rings = append(rings, f.ring(way[at:]))
			for _, c := range way[at:] {
				delete(on, f.origin(c))
			}
			way = way[:at]
		}
	}
	return rings
}

// ring returns the points of halves that follow each other and close, from the smallest point on.
func (f *faces) ring(halves []int32) orb.Ring {
	n := 1
	for _, h := range halves {
		c := &f.chains[h/2]
		n += int(c.last - c.first)
	}
	ring := make(orb.Ring, 0, n)
	for _, h := range halves {
		c := &f.chains[h/2]
		part := f.net.points[c.first : c.last+1]
		if h%2 == 0 {
			ring = append(ring, part[:len(part)-1]...)
			continue
		}
		for k := len(part) - 1; k > 0; k-- {
			ring = append(ring, part[k])
		}
	}
	rotate(ring, smallestStart(ring))
	return append(ring, ring[0])
}

// bandPolygon is a polygon of a band.
type bandPolygon struct {
	band  int
	rings []orb.Ring
}

// arrange puts the outer ring first and the others in order.
func (p *bandPolygon) arrange() error {
	var outer []orb.Ring
	var holes []orb.Ring
	for _, r := range p.rings {
		// A ring starts at its smallest point, where it cannot turn the wrong way.
		if exact.Orient(r[len(r)-2], r[0], r[1]) > 0 {
			outer = append(outer, r)
		} else {
			holes = append(holes, r)
		}
	}
	if len(outer) != 1 {
		at := p.rings[0][0]
		return fmt.Errorf("bands near (%v, %v): %d outer rings round one polygon", at[0], at[1], len(outer))
	}
	slices.SortFunc(holes, func(a, b orb.Ring) int { return comparePoints(a, b) })
	p.rings = append(outer, holes...)
	return nil
}
