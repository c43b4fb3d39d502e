package contour

import (
	"cmp"
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Readings and their bands. A floor's region is bounded by closed curves: its isolines and the outline. Rounding and splitting
// move every point of them by no more than some distance, off. Let the curves move there steadily: a place further than
// off from them is passed by none, so they wind about it as often as before. Of a place further than off from
// the exact border of its own band, that holds for all floors, as other floors' curves lie beyond that border; so it lies in a
// polygon of its band. And a place further than off from all of a band is in no polygon of it: the curves of the
// band's two floors near it are the same outline, so that both floors' counts change alike, and stay equal.
//
// Nearer to a border, rounding may put a reading on the wrong side of it, or leave a band nothing at all: these
// readings are looked for, borders are led through them where that helps, and the others are listed.

// BandReport tells how far bands can be trusted at their borders, and which readings they miss.
type BandReport struct {
	// Off is how far, at most, the borders are from where they exactly are: by rounding, and by leading them past each
	// other. Every place further than Off from the exact border of its band lies in a polygon of that band; and where there is a
	// polygon of a band, the surface has that band there or no further than Off away.
	Off float64
	// TooNarrow lists the readings with triangles (of a raster, the nodes of squares with values) that lie neither in nor on a
	// polygon of their band, in (x, y) order: within Off of them the band ends or narrows to nothing. For a value equal to a
	// level, the band below does as well.
	TooNarrow []Narrow
}

// Narrow is a reading at which its band is narrower than coordinates can show.
type Narrow struct {
	At orb.Point
	Z  float64
}

// borderOff returns how far borders within a bound are from where they exactly are: crossings are rounded as Crossing says,
// and segments were moved by as much again as splitting tells.
func borderOff(bound orb.Bound, moved float64) float64 {
	most := max(-bound.Min[0], bound.Max[0], -bound.Min[1], bound.Max[1])
	ulp := math.Nextafter(most, math.Inf(1)) - most
	// No side is longer than width and height together.
	longest := bound.Max[0] - bound.Min[0] + bound.Max[1] - bound.Min[1]
	return float64(math.Sqrt2*(float64(ulp/2)+float64(0x1p-51*longest))) + moved
}

// nearest are the readings to which a line or the rim may come within some distance. They are looked for while splitting goes
// on, much of which has to go step by step; so it costs little time.
type nearest struct {
	within float64
	found  chan []int32 // gives them once
	known  []int32
}

// lookNear begins to look for the readings near the lines of n, within three times what rounding of crossings comes to:
// no border has been seen further off.
func lookNear(n *net, src source, zs []float64, workers int) *nearest {
	bound := orb.Bound{Min: n.points[0], Max: n.points[0]}
	for _, p := range n.points {
		bound = extend(bound, orb.Bound{Min: p, Max: p})
	}
	a := &nearest{within: 3 * borderOff(bound, 0), found: make(chan []int32, 1)}
	look := func() { a.found <- src.near(a.within, zs, 1) }
	if workers > 1 {
		go look()
	} else {
		look()
	}
	return a
}

// wait returns the readings once they are found.
func (a *nearest) wait() []int32 {
	if a.found != nil {
		a.known = <-a.found
		a.found = nil
	}
	return a.known
}

// report tells about the polygons that were made of the faces.
func (f *faces) report(tree *boxes, src source, zs []float64, near *nearest, workers int) BandReport {
	r := BandReport{Off: borderOff(tree.nodes[len(tree.nodes)-1].bound, f.net.moved)}
	candidates := near.wait()
	if r.Off > near.within {
		candidates = src.near(r.Off, zs, workers)
	}
	r.TooNarrow = f.tooNarrow(tree, src, zs, candidates, workers)
	return r
}

// tooNarrow returns, of the candidates, those that do not lie in or on a polygon of their band.
func (f *faces) tooNarrow(tree *boxes, src source, zs []float64, candidates []int32, workers int) []Narrow {
	const share = 256
	parts := make([][]Narrow, max(1, workers))
	_ = inTasks((len(candidates)+share-1)/share, len(parts), func(w, i int) error {
		for _, v := range candidates[i*share : min(len(candidates), (i+1)*share)] {
			at, z := src.reading(v)
			want := int32(below(zs, z))
			equal := want > 0 && zs[want-1] == z
			if !f.anyBandAt(tree, at, func(band int32) bool { return band == want || equal && band == want-1 }) {
				parts[w] = append(parts[w], Narrow{at, z})
			}
		}
		return nil
	})
	found := slices.Concat(parts...)
	slices.SortFunc(found, func(a, b Narrow) int { return exact.CompareXY(a.At, b.At) })
	return found
}

// anyBandAt reports whether is holds for the band of a face that p lies in or on the edge of.
func (f *faces) anyBandAt(tree *boxes, p orb.Point, is func(band int32) bool) bool {
	touched, found := false, false
	tree.meeting(&orb.Bound{Min: p, Max: p}, func(s int32) {
		if exact.Orient(f.net.points[s], f.net.points[s+1], p) != 0 {
			return
		}
		if c := f.chainOf(s); c >= 0 {
			touched = true
			found = found || is(f.bands[f.edge[2*c]]) || is(f.bands[f.edge[2*c+1]])
		}
	})
	if touched {
		return found
	}
	s := tree.westOf(p, func(s int32) bool { return f.chainOf(s) >= 0 })
	if s < 0 {
		return is(outside)
	}
	return is(f.bands[f.edge[f.eastHalf(s)]])
}

// eastHalf returns the half of a segment's chain that has on its left what lies east of the segment, which is not level.
func (f *faces) eastHalf(s int32) int32 {
	h := f.chainOf(s) * 2
	if f.net.points[s+1][1] > f.net.points[s][1] {
		h++ // the segment runs north: the half that runs south has the east on its left
	}
	return h
}

// leadsMost bounds how often borders are led through readings, the first making of polygons included.
const leadsMost = 4

// leads returns splits that lead borders of its band through a reading that they left on the wrong side: the nearest of those
// that the reading lies above, and no further from than borders are off.
func (f *faces) leads(tree *boxes, r BandReport, zs []float64) []split {
	var all []split
	for _, v := range r.TooNarrow {
		want := int32(below(zs, v.Z))
		reach := orb.Bound{Min: v.At, Max: v.At}.Pad(r.Off)
		best, bestOff := int32(-1), r.Off
		tree.meeting(&reach, func(s int32) {
			c := f.chainOf(s)
			if c < 0 || (f.bands[f.edge[2*c]] == want) == (f.bands[f.edge[2*c+1]] == want) {
				return
			}
			a, b := f.net.points[s], f.net.points[s+1]
			ux, uy, wx, wy := a[0]-v.At[0], a[1]-v.At[1], b[0]-v.At[0], b[1]-v.At[1]
			if float64(ux*wx)+float64(uy*wy) >= 0 { // outside the disk over the segment
				return
			}
			off := f.net.distance(split{s, v.At})
			if off < bestOff || off == bestOff && best >= 0 && f.net.compareSegments(s, best) < 0 {
				best, bestOff = s, off
			}
		})
		if best < 0 {
			continue
		}
		tree.meeting(&reach, func(s int32) { // and what runs along it
			if f.net.compareSegments(s, best) == 0 {
				all = append(all, split{s, v.At})
			}
		})
	}
	slices.SortFunc(all, f.net.compareSplits)
	return slices.Compact(all)
}

// compareSegments orders segments by their smaller ends, then the larger ones.
func (n *net) compareSegments(s, t int32) int {
	ends := func(s int32) (a, b orb.Point) {
		if a, b = n.points[s], n.points[s+1]; exact.CompareXY(a, b) > 0 {
			a, b = b, a
		}
		return a, b
	}
	a, b := ends(s)
	c, d := ends(t)
	return cmp.Or(exact.CompareXY(a, c), exact.CompareXY(b, d))
}

// meeting calls use for the segments whose boxes meet a bound.
func (b *boxes) meeting(bound *orb.Bound, use func(segment int32)) {
	if len(b.nodes) > 0 {
		b.meet(int32(len(b.nodes)-1), bound, use)
	}
}

func (b *boxes) meet(i int32, bound *orb.Bound, use func(int32)) {
	n := &b.nodes[i]
	if !meet(&n.bound, bound) {
		return
	}
	if n.below[1] >= 0 {
		b.meet(n.below[0], bound, use)
		b.meet(n.below[1], bound, use)
		return
	}
	r := &b.leaves[n.below[0]]
	for s := r.first; s < r.last; s++ {
		q, t := b.net.points[s], b.net.points[s+1]
		if box := (orb.Bound{Min: q, Max: q}).Extend(t); meet(&box, bound) {
			use(s)
		}
	}
}

// levelGap returns how far the value of rank r is from the nearest level.
func levelGap(z float64, r int32, zs []float64) float64 {
	gap := math.Inf(1)
	if r > 0 {
		gap = z - zs[r-1]
	}
	if int(r) < len(zs) {
		gap = min(gap, zs[r]-z)
	}
	return gap
}

// keeps reports whether no line or side comes within some distance of a corner: altitude is above the corner's opposite
// side, gap the difference of its value from the nearest level, spread what values differ by. A piece of line stays
// gap/spread of the altitude away at least; what lies beyond the opposite side, all of it.
func keeps(altitude, gap, spread, within float64) bool {
	return altitude > within && (gap >= spread || float64(altitude*gap) > float64(within*spread))
}

// sortedOnce returns the numbers of all parts in order, without repeats.
func sortedOnce(parts [][]int32) []int32 {
	all := slices.Concat(parts...)
	slices.Sort(all)
	return slices.Compact(all)
}
