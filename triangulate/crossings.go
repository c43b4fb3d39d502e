package triangulate

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/big"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// FindCrossings returns every pair of segments that cross at a place between the
// ends of both where there is no input point, sorted. Segments that touch,
// overlap, share an end, or cross in an input point do not count.
//
// Every decision is exact. Segments are swept in the order of their smallest x;
// time O(n log n + pairs whose boxes overlap in x).
func FindCrossings(pts []orb.Point, segs []Segment) []Crossed {
	f := newCrossingFinder(pts, segs)
	var found []Crossed
	f.each(func(i, j int32) {
		if !f.meetInPoint(i, j) {
			found = append(found, Crossed{min(i, j), max(i, j)})
		}
	})
	slices.SortFunc(found, compareCrossed)
	return found
}

func compareCrossed(p, q Crossed) int {
	if p.A != q.A {
		return int(p.A) - int(q.A)
	}
	return int(p.B) - int(q.B)
}

// Made is a vertex that SplitCrossings put where segments cross.
type Made struct {
	Point    int32   // its index among the points returned
	Segments []int32 // the segments given that cross there, rising
}

// Split is what SplitCrossings returns.
type Split struct {
	// Points are the points given and those made, the latter in (x, y) order.
	Points []orb.Point
	// Pieces replace the segments; Of[i] is the segment given that Pieces[i] is
	// a part of.
	Pieces []Segment
	Of     []int32
	Made   []Made
}

// ErrCrossingsRemain is wrapped when rounding the crossings of ever shorter pieces
// makes new ones for longer than splitRounds.
var ErrCrossingsRemain = errors.New("crossings remain after splitting")

// splitRounds is how often pieces are split again. Rounding a crossing moves two
// segments by half a unit in the last place, so a second round is rare.
const splitRounds = 16

// SplitCrossings makes a vertex wherever segments cross. The places are those of
// the segments as given, exactly, rounded once to the nearest doubles; crossings
// that round to one place become one vertex, which may be an input point. Then it
// looks again, since the pieces differ from the segments by that rounding, until
// none cross. Pieces that run almost along each other would go on crossing a few
// units in the last place further each time; where pieces cross as near as
// nearUlps to an end of one of them, they are led through that end. The result
// depends on the sets of points and segments alone, but
// for the order of the pieces.
//
// It returns an error wrapping ErrCrossingsRemain when splitRounds rounds do not
// do, or ctx.Err().
func SplitCrossings(ctx context.Context, pts []orb.Point, segs []Segment) (*Split, error) {
	s := &Split{Points: slices.Clone(pts), Pieces: slices.Clone(segs), Of: make([]int32, len(segs))}
	for i := range s.Of {
		s.Of[i] = int32(i)
	}
	through := map[orb.Point]map[int32]bool{} // the segments that cross at a place
	for round := range splitRounds {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		if !s.round(through, round > 0) {
			s.finish(len(pts), through)
			return s, nil
		}
	}
	return nil, fmt.Errorf("%d rounds: %w", splitRounds, ErrCrossingsRemain)
}

// nearUlps is how near, in units in the last place, a crossing of pieces counts as
// being at an end.
const nearUlps = 32

// nearestEnd returns the end of segment i or j that is nearest to p and within
// nearUlps on both axes, or p if there is none.
func (f *crossingFinder) nearestEnd(i, j int32, p orb.Point) orb.Point {
	ends := [4]orb.Point{f.pts[f.segs[i].From], f.pts[f.segs[i].To], f.pts[f.segs[j].From], f.pts[f.segs[j].To]}
	var ulp [2]float64 // at the largest coordinate of each axis
	for axis := range 2 {
		size := 0.0
		for _, e := range ends {
			size = max(size, math.Abs(e[axis]))
		}
		ulp[axis] = math.Nextafter(size, math.Inf(1)) - size
	}
	best, distance := p, math.Inf(1)
	for _, e := range ends {
		d := max(math.Abs(e[0]-p[0])/ulp[0], math.Abs(e[1]-p[1])/ulp[1])
		if d <= nearUlps && (d < distance || d == distance && exact.CompareXY(e, best) < 0) {
			best, distance = e, d
		}
	}
	return best
}

// round splits the pieces that cross and tells whether there were any. snap leads
// pieces that cross near an end through it.
func (s *Split) round(through map[orb.Point]map[int32]bool, snap bool) bool {
	f := newCrossingFinder(s.Points, s.Pieces)
	type cut struct {
		at orb.Point
		on *big.Rat // the part of the piece up to there
	}
	cuts := map[int32][]cut{}
	f.each(func(i, j int32) {
		if f.meetInPoint(i, j) {
			return
		}
		at, onI, onJ := f.intersection(i, j)
		if snap {
			at = f.nearestEnd(i, j, at)
		}
		cuts[i] = append(cuts[i], cut{at, onI})
		cuts[j] = append(cuts[j], cut{at, onJ})
		if through[at] == nil {
			through[at] = map[int32]bool{}
		}
		through[at][s.Of[i]], through[at][s.Of[j]] = true, true
	})
	if len(cuts) == 0 {
		return false
	}
	index := map[orb.Point]int32{}
	for i := len(s.Points) - 1; i >= 0; i-- {
		index[s.Points[i]] = int32(i)
	}
	var pieces []Segment
	var of []int32
	for i, p := range s.Pieces {
		cs := cuts[int32(i)]
		slices.SortFunc(cs, func(a, b cut) int {
			if c := a.on.Cmp(b.on); c != 0 {
				return c
			}
			return exact.CompareXY(a.at, b.at)
		})
		from := p.From
		for _, c := range cs {
			k, ok := index[c.at]
			if !ok {
				k = int32(len(s.Points))
				s.Points = append(s.Points, c.at)
				index[c.at] = k
			}
			if k != from {
				pieces, of = append(pieces, Segment{from, k}), append(of, s.Of[i])
			}
			from = k
		}
		if from != p.To || len(cs) == 0 {
			pieces, of = append(pieces, Segment{from, p.To}), append(of, s.Of[i])
		}
	}
	s.Pieces, s.Of = pieces, of
	return true
}

// finish puts the points made in (x, y) order and tells which segments each is on.
func (s *Split) finish(given int, through map[orb.Point]map[int32]bool) {
	made := slices.Clone(s.Points[given:])
	slices.SortFunc(made, func(a, b orb.Point) int { return exact.CompareXY(a, b) })
	index := map[orb.Point]int32{}
	for i, p := range made {
		index[p] = int32(given + i)
	}
	to := func(k int32) int32 {
		if int(k) < given {
			return k
		}
		return index[s.Points[k]]
	}
	for i, p := range s.Pieces {
		s.Pieces[i] = Segment{to(p.From), to(p.To)}
	}
	s.Points = append(s.Points[:given:given], made...)
	for i, p := range made {
		m := Made{Point: int32(given + i)}
		for seg := range through[p] {
			m.Segments = append(m.Segments, seg)
		}
		slices.Sort(m.Segments)
		s.Made = append(s.Made, m)
	}
}

// crossingFinder sweeps segments from west to east.
type crossingFinder struct {
	pts   []orb.Point
	segs  []Segment
	west  []int32 // the segments by their smallest x
	place map[orb.Point]bool
	byX   []int
}

func newCrossingFinder(pts []orb.Point, segs []Segment) *crossingFinder {
	f := &crossingFinder{pts: pts, segs: segs}
	for i := range segs {
		f.west = append(f.west, int32(i))
	}
	slices.SortFunc(f.west, func(i, j int32) int {
		a, _ := f.ends(i)
		b, _ := f.ends(j)
		if c := exact.CompareXY(a, b); c != 0 {
			return c
		}
		return int(i) - int(j)
	})
	return f
}

// ends returns the ends of segment i, the smaller in (x, y) order first.
func (f *crossingFinder) ends(i int32) (a, b orb.Point) {
	a, b = f.pts[f.segs[i].From], f.pts[f.segs[i].To]
	if exact.CompareXY(a, b) > 0 {
		a, b = b, a
	}
	return a, b
}

// each calls cross for every pair that crosses between the ends of both.
func (f *crossingFinder) each(cross func(i, j int32)) {
	type box struct {
		a, b       orb.Point
		yMin, yMax float64
		i          int32
	}
	var active []box
	for _, i := range f.west {
		a, b := f.ends(i)
		cur := box{a, b, min(a[1], b[1]), max(a[1], b[1]), i}
		kept := active[:0]
		for _, o := range active {
			if o.b[0] < a[0] {
				continue
			}
			kept = append(kept, o)
			if o.yMax < cur.yMin || o.yMin > cur.yMax {
				continue
			}
			if exact.Orient(a, b, o.a)*exact.Orient(a, b, o.b) < 0 && exact.Orient(o.a, o.b, a)*exact.Orient(o.a, o.b, b) < 0 {
				cross(o.i, i)
			}
		}
		active = append(kept, cur)
	}
}

// meetInPoint tells whether two crossing segments do so exactly in an input point.
func (f *crossingFinder) meetInPoint(i, j int32) bool {
	if f.place == nil {
		f.place = make(map[orb.Point]bool, len(f.pts))
		for _, p := range f.pts {
			f.place[p] = true
		}
	}
	at, _, _ := f.intersection(i, j)
	if !f.place[at] {
		return false
	}
	a, b := f.ends(i)
	c, d := f.ends(j)
	return exact.Orient(a, b, at) == 0 && exact.Orient(c, d, at) == 0
}

// intersection returns where two crossing segments cross, each coordinate rounded
// once, and how far along each, as a part of it from its first end to its second.
func (f *crossingFinder) intersection(i, j int32) (at orb.Point, onI, onJ *big.Rat) {
	return intersect(f.pts[f.segs[i].From], f.pts[f.segs[i].To], f.pts[f.segs[j].From], f.pts[f.segs[j].To])
}

// Intersection returns where the lines through p and q and through r and s, which
// are not parallel, cross: the exact place, each coordinate rounded once to the
// nearest double. It is the same for every order of the lines and their points.
// Some hundred nanoseconds; some microseconds where lines are all but parallel or
// the place lies half-way between two doubles.
func Intersection(p, q, r, s orb.Point) orb.Point {
	if at, ok := meet(p, q, r, s); ok {
		return at
	}
	at, _, _ := intersect(p, q, r, s)
	return at
}

func intersect(p, q, r, s orb.Point) (at orb.Point, onPQ, onRS *big.Rat) {
	dx, dy := ratSub(q[0], p[0]), ratSub(q[1], p[1])
	ex, ey := ratSub(s[0], r[0]), ratSub(s[1], r[1])
	wx, wy := ratSub(r[0], p[0]), ratSub(r[1], p[1])
	det := ratCross(dx, dy, ex, ey)
	onPQ = new(big.Rat).Quo(ratCross(wx, wy, ex, ey), det)
	onRS = new(big.Rat).Quo(ratCross(wx, wy, dx, dy), det)
	at[0] = ratAlong(p[0], onPQ, dx)
	at[1] = ratAlong(p[1], onPQ, dy)
	return at, onPQ, onRS
}

func ratSub(a, b float64) *big.Rat {
	x, y := new(big.Rat).SetFloat64(a), new(big.Rat).SetFloat64(b)
	return x.Sub(x, y)
}

func ratCross(ax, ay, bx, by *big.Rat) *big.Rat {
	p, q := new(big.Rat).Mul(ax, by), new(big.Rat).Mul(ay, bx)
	return p.Sub(p, q)
}

// ratAlong is from + t d, rounded to the nearest double; never -0.
func ratAlong(from float64, t, d *big.Rat) float64 {
	x := new(big.Rat).Mul(t, d)
	f, _ := x.Add(x, new(big.Rat).SetFloat64(from)).Float64()
	return f + 0
}
