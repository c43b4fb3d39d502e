package overlay

import (
	"math"
	"sync/atomic"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// Weights tell how the volumes change with the heights of vertices: a height of to
// that rises by a little h adds h w to the fill and takes h w from the cut, w being
// its weight in each; a height of from does the opposite. A weight is the integral of
// the tent of height 1 over the vertex, over the part that is cut, filled, or both and
// what is the same; those of a surface add up to the area of that part.
//
// Each is right to about 2^-60 of the area of its surface, plus rounding.
type Weights struct {
	From, To VertexWeights
}

// VertexWeights has a number for every vertex of a surface's mesh.
type VertexWeights struct {
	Cut, Fill, All []float64
}

// weigher adds up weights. They are added as whole numbers, in units of 2^-60 of the
// area, so that the order does not matter.
type weigher struct {
	outer, inner sideWeigher
}

type sideWeigher struct {
	x     *side
	unit  float64 // a power of two
	parts [3][]int64
}

// The parts of weights, by the sign of the difference inner less outer.
const (
	weightPos = iota
	weightNeg
	weightZero
)

func newWeigher(outer, inner *side) *weigher {
	start := func(x *side) sideWeigher {
		b := orb.MultiPoint(x.pos).Bound()
		_, e := math.Frexp((b.Max[0] - b.Min[0]) * (b.Max[1] - b.Min[1]))
		w := sideWeigher{x: x, unit: math.Ldexp(1, max(e-60, -1022))}
		for i := range w.parts {
			w.parts[i] = make([]int64, len(x.pos))
		}
		return w
	}
	return &weigher{start(outer), start(inner)}
}

// add adds the weights in a polygon of the two triangles.
func (w *weigher) add(poly *polygon, outer, inner triangulate.Triangle) {
	o := poly.tents(w.outer.x, outer)
	i := poly.tents(w.inner.x, inner)
	for part := range 3 {
		w.outer.give(part, outer, o[part])
		w.inner.give(part, inner, i[part])
	}
}

func (s *sideWeigher) give(part int, t triangulate.Triangle, tents [3]float64) {
	v, _ := s.x.turned(t)
	for k := range v {
		if n := int64(tents[k] / s.unit); n != 0 {
			atomic.AddInt64(&s.parts[part][v[k]], n)
		}
	}
}

// tents returns, by part, the integrals over the polygon of the three functions that
// are 1 at one corner of t and 0 at the others.
func (p *polygon) tents(x *side, t triangulate.Triangle) (sum [3][3]float64) {
	v, _ := x.turned(t)
	var c [3][2]float64
	for k := range v {
		c[k] = [2]float64{x.pos[v[k]][0] - p.origin[0], x.pos[v[k]][1] - p.origin[1]}
	}
	whole := cross(c[0], c[1], c[2])
	add := func(part int, a, b, d [2]float64) {
		area := cross(a, b, d)
		if area == 0 || whole == 0 {
			return
		}
		m := [2]float64{(a[0] + b[0] + d[0]) / 3, (a[1] + b[1] + d[1]) / 3}
		for k := range 3 {
			at := cross(m, c[after[k]], c[after[after[k]]]) / whole
			sum[part][k] += float64(area * min(max(at, 0), 1) / 2)
		}
	}
	first := p.first()
	at := func(i int) (q [2]float64, d float64) {
		k := (first + i) % p.n
		return [2]float64{p.at[k].x, p.at[k].y}, p.at[k].d
	}
	a, da := at(0)
	for i := 1; i+1 < p.n; i++ {
		b, db := at(i)
		d, dd := at(i + 1)
		parts([3][2]float64{a, b, d}, [3]float64{da, db, dd}, add)
	}
	return sum
}

func cross(a, b, c [2]float64) float64 {
	return float64((b[0]-a[0])*(c[1]-a[1])) - float64((b[1]-a[1])*(c[0]-a[0]))
}

// parts divides a triangle at the zero line into triangles of one part each.
func parts(p [3][2]float64, d [3]float64, give func(part int, a, b, c [2]float64)) {
	hasPos, hasNeg := d[0] > 0 || d[1] > 0 || d[2] > 0, d[0] < 0 || d[1] < 0 || d[2] < 0
	switch {
	case hasPos && !hasNeg:
		give(weightPos, p[0], p[1], p[2])
		return
	case hasNeg && !hasPos:
		give(weightNeg, p[0], p[1], p[2])
		return
	case !hasNeg:
		give(weightZero, p[0], p[1], p[2])
		return
	}
	for part, sign := range []float64{1, -1} {
		var ring [4][2]float64
		n := 0
		for k := range 3 {
			next := after[k]
			if d[k]*sign >= 0 {
				ring[n] = p[k]
				n++
			}
			if d[k] > 0 && d[next] < 0 || d[k] < 0 && d[next] > 0 {
				t := size(d[k]) / (size(d[k]) + size(d[next]))
				ring[n] = [2]float64{p[k][0] + float64(t*(p[next][0]-p[k][0])), p[k][1] + float64(t*(p[next][1]-p[k][1]))}
				n++
			}
		}
		for i := 1; i+1 < n; i++ {
			give(part, ring[0], ring[i], ring[i+1])
		}
	}
}

func (w *weigher) weights(swapped bool) *Weights {
	// Differences are inner less outer: to less from unless swapped.
	pos, neg := weightPos, weightNeg
	if swapped {
		pos, neg = neg, pos
	}
	read := func(s *sideWeigher) VertexWeights {
		n := len(s.x.pos)
		v := VertexWeights{Cut: make([]float64, n), Fill: make([]float64, n), All: make([]float64, n)}
		for i := range n {
			v.Cut[i] = float64(s.parts[neg][i]) * s.unit
			v.Fill[i] = float64(s.parts[pos][i]) * s.unit
			v.All[i] = float64(s.parts[neg][i]+s.parts[pos][i]+s.parts[weightZero][i]) * s.unit
		}
		return v
	}
	out := &Weights{From: read(&w.outer), To: read(&w.inner)}
	if swapped {
		out.From, out.To = out.To, out.From
	}
	return out
}
