package triangulate

import (
	"cmp"
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Touched is a point that Touch took as lying on a segment.
type Touched struct {
	Segment  int32
	Point    int32
	Distance float64 // of the point from the segment, never 0
}

// Touch replaces every segment by one that passes through all points within
// distance of it: points that are on a line in decimals are seldom so in binary.
// A point counts if its foot lies between the segment's ends; those exactly on it
// need no replacing and are not told.
//
// It returns the pieces, the segment that each is a part of, and what it took as
// touching, sorted. Every segment is looked at as given, so the result depends on
// the sets of points and segments alone.
//
// Time O(1) for each point near a segment, for evenly spread points.
func Touch(pts []orb.Point, segs []Segment, distance float64) (pieces []Segment, of []int32, touched []Touched) {
	b := newBuckets(pts)
	type on struct {
		point int32
		along float64
	}
	for i, s := range segs {
		a, c := pts[s.From], pts[s.To]
		if exact.CompareXY(a, c) > 0 {
			a, c = c, a
		}
		dx, dy := c[0]-a[0], c[1]-a[1]
		length2 := float64(dx*dx) + float64(dy*dy)
		seen := map[orb.Point]bool{a: true, c: true}
		var through []on
		b.near(a, c, distance, func(k int32) {
			p := pts[k]
			px, py := p[0]-a[0], p[1]-a[1]
			along := float64(px*dx) + float64(py*dy)
			cross := float64(px*dy) - float64(py*dx)
			if seen[p] || along <= 0 || along >= length2 || float64(cross*cross) > float64(float64(distance*distance)*length2) {
				return
			}
			seen[p] = true
			if exact.Orient(a, c, p) != 0 {
				through = append(through, on{k, along})
				touched = append(touched, Touched{int32(i), k, math.Abs(cross) / math.Sqrt(length2)})
			}
		})
		slices.SortFunc(through, func(p, q on) int {
			if c := cmp.Compare(p.along, q.along); c != 0 {
				return c
			}
			return exact.CompareXY(pts[p.point], pts[q.point])
		})
		if pts[s.From] != a {
			slices.Reverse(through)
		}
		from := s.From
		for _, t := range append(through, on{point: s.To}) {
			pieces, of = append(pieces, Segment{from, t.point}), append(of, int32(i))
			from = t.point
		}
	}
	slices.SortFunc(touched, func(p, q Touched) int {
		if c := cmp.Compare(p.Segment, q.Segment); c != 0 {
			return c
		}
		return exact.CompareXY(pts[p.Point], pts[q.Point])
	})
	return pieces, of, touched
}

// buckets lists points by the cells of a raster, about two a cell.
type buckets struct {
	pts        []orb.Point
	xMin, yMin float64
	perX, perY float64
	cols, rows int
	first      []int32 // of every cell, its place in order; one more at the end
	order      []int32
}

func newBuckets(pts []orb.Point) *buckets {
	b := &buckets{pts: pts, cols: 1, rows: 1}
	bound := orb.MultiPoint(pts).Bound()
	b.xMin, b.yMin = bound.Min[0], bound.Min[1]
	w, h := bound.Max[0]-bound.Min[0], bound.Max[1]-bound.Min[1]
	if w > 0 && h > 0 {
		cells := float64(len(pts)/2 + 1)
		b.cols = int(min(max(math.Sqrt(cells)*math.Sqrt(w)/math.Sqrt(h), 1), cells))
		b.rows = int(max(cells/float64(b.cols), 1))
		b.perX, b.perY = float64(b.cols)/w, float64(b.rows)/h
	}
	b.first = make([]int32, b.cols*b.rows+1)
	b.order = make([]int32, len(pts))
	for _, p := range pts {
		b.first[b.cell(p)+1]++
	}
	for i := 1; i < len(b.first); i++ {
		b.first[i] += b.first[i-1]
	}
	next := slices.Clone(b.first)
	for i, p := range pts {
		c := b.cell(p)
		b.order[next[c]] = int32(i)
		next[c]++
	}
	return b
}

func (b *buckets) cell(p orb.Point) int { return b.row(p[1])*b.cols + b.col(p[0]) }

func (b *buckets) col(x float64) int { return slot((x-b.xMin)*b.perX, b.cols) }
func (b *buckets) row(y float64) int { return slot((y-b.yMin)*b.perY, b.rows) }

// near calls f for every point of the cells within d of the line from a to c, and
// perhaps for others.
func (b *buckets) near(a, c orb.Point, d float64, f func(point int32)) {
	low, high := a, c
	if high[1] < low[1] {
		low, high = high, low
	}
	for row := b.row(low[1] - d); row <= b.row(high[1]+d); row++ {
		// The part of the line in this row of cells, a cell more on both sides.
		xLow, xHigh := low[0], high[0]
		if dy := high[1] - low[1]; dy > 0 && b.perY > 0 {
			at := func(y float64) float64 {
				return low[0] + float64((high[0]-low[0])*min(max((y-low[1])/dy, 0), 1))
			}
			south := b.yMin + float64(row)/b.perY
			xLow, xHigh = at(south-1/b.perY-d), at(south+2/b.perY+d)
		}
		first, last := b.col(min(xLow, xHigh)-d), b.col(max(xLow, xHigh)+d)
		for k := b.first[row*b.cols+first]; k < b.first[row*b.cols+last+1]; k++ {
			f(b.order[k])
		}
	}
}
