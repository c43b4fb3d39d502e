package flow

import (
	"math"
	"math/big"

	"isofacet/triangulate"
)

// drains tells how the plane of half-edge h's triangle leads at h: +1 out over it, -1
// away from it into the triangle, 0 along it (or nowhere: the triangle is level).
//
//	   c        The height rises from the line of ab towards c, apart from the rise
//	  / \       along ab, by
//	 /   \
//	a--h--b     N / |ab|²,  N = (zc-za) |ab|² - ((c-a).(b-a)) (zb-za)
//
// so the plane falls outward where N is positive. The sign is exact: a product of
// rounded differences decides where it is larger than its error, which is below
// 2^-49 of the sum of the sizes of its terms (eleven roundings of 2^-53 each);
// rationals decide elsewhere.
func (t *Tracer) drains(h triangulate.HalfEdge) int {
	a, b, c := t.m.Origin(h), t.m.Dest(h), t.m.Apex(h)
	p, q, r := t.m.Position(a), t.m.Position(b), t.m.Position(c)
	bx, by, cx, cy := q[0]-p[0], q[1]-p[1], r[0]-p[0], r[1]-p[1]
	zb, zc := t.z[b]-t.z[a], t.z[c]-t.z[a]
	u := float64(zc * (float64(bx*bx) + float64(by*by)))
	x, y := float64(float64(cx*bx)*zb), float64(float64(cy*by)*zb)
	n := u - (x + y)
	if math.Abs(n) > float64(0x1p-49*(math.Abs(u)+math.Abs(x)+math.Abs(y))) {
		if n > 0 {
			return 1
		}
		return -1
	}
	return t.drainsExactly(a, b, c)
}

func (t *Tracer) drainsExactly(a, b, c triangulate.Vertex) int {
	p, q, r := t.m.Position(a), t.m.Position(b), t.m.Position(c)
	sub := func(x, y float64) *big.Rat {
		u, v := new(big.Rat).SetFloat64(x), new(big.Rat).SetFloat64(y)
		return u.Sub(u, v)
	}
	mul := func(x, y *big.Rat) *big.Rat { return new(big.Rat).Mul(x, y) }
	bx, by, cx, cy := sub(q[0], p[0]), sub(q[1], p[1]), sub(r[0], p[0]), sub(r[1], p[1])
	zb, zc := sub(t.z[b], t.z[a]), sub(t.z[c], t.z[a])
	square, dot := mul(bx, bx), mul(cx, bx)
	square.Add(square, mul(by, by))
	dot.Add(dot, mul(cy, by))
	return mul(zc, square).Cmp(mul(dot, zb))
}

// way is a way down from a place: into a triangle, or along an edge.
type way struct {
	steep   float64 // rise over run
	azimuth float64
	into    triangulate.HalfEdge // the triangle's half-edge where the way begins
	along   triangulate.HalfEdge // towards its destination
}

var noWay = way{-1, 0, triangulate.NoHalfEdge, triangulate.NoHalfEdge}

// better tells whether w is to be taken before v.
func (w *way) better(v *way) bool {
	return w.steep > v.steep || w.steep == v.steep && w.azimuth < v.azimuth
}

// down is the way down the plane of h's triangle.
func (t *Tracer) down(h triangulate.HalfEdge) way {
	g := t.gradient(h.Triangle())
	return way{g.Size(), g.Azimuth(), h, triangulate.NoHalfEdge}
}

// lower is the way along h to its destination, in the direction given.
func (t *Tracer) lower(h triangulate.HalfEdge, from, to triangulate.Vertex) way {
	p, q := t.m.Position(from), t.m.Position(to)
	dx, dy := q[0]-p[0], q[1]-p[1]
	l := math.Sqrt(float64(dx*dx) + float64(dy*dy))
	g := Gradient{DzDx: -dx, DzDy: -dy} // downhill is towards q
	return way{(t.z[from] - t.z[to]) / l, g.Azimuth(), triangulate.NoHalfEdge, h}
}

// fromVertex returns the steepest way down from v; none is noWay. open tells whether
// v is on the outline, low whether a neighbour is as low.
func (t *Tracer) fromVertex(v triangulate.Vertex) (best way, open, flat bool) {
	best = noWay
	take := func(w way) {
		if w.better(&best) {
			best = w
		}
	}
	for h := range t.m.Around(v) {
		into, back := t.drains(h), t.drains(t.m.Prev(h))
		if into < 0 && back < 0 {
			take(t.down(h))
		}
		// The edge that starts the triangle's turn about v.
		twin := t.m.Twin(h)
		a := t.m.Dest(h)
		flat = flat || t.z[a] == t.z[v]
		if t.z[a] < t.z[v] && (twin == triangulate.NoHalfEdge && into == 0 ||
			twin != triangulate.NoHalfEdge && into >= 0 && t.drains(twin) >= 0) {
			take(t.lower(h, v, a))
		}
		open = open || twin == triangulate.NoHalfEdge
		// The edge that ends it is looked at by its neighbour, if there is one.
		if last := t.m.Prev(h); t.m.Twin(last) == triangulate.NoHalfEdge {
			b := t.m.Origin(last)
			flat = flat || t.z[b] == t.z[v]
			if t.z[b] < t.z[v] && back == 0 {
				take(t.lower(last, v, b))
			}
		}
	}
	return best, open, flat
}
