package overlay

import "math"

// share is what a polygon contributes to one of the two sides of zero.
type share struct {
	area2   float64 // twice its plan area
	volume6 float64 // six times its volume, positive
}

// The polygon is cut into a fan from its first point. A triangle of the fan with
// differences of one sign contributes D (d0 + d1 + d2), D twice its area; one with
// differences of both is split.

// fan returns twice the area of the polygon and six times the integral of the
// difference, for differences of one sign.
func (p *polygon) fan(first int) (area2, volume6 float64) {
	o := &p.at[first]
	i := p.after(first)
	q := &p.at[i]
	bx, by, b := q.x-o.x, q.y-o.y, q.d
	for range p.n - 2 {
		i = p.after(i)
		q = &p.at[i]
		cx, cy, c := q.x-o.x, q.y-o.y, q.d
		d := float64(bx*cy) - float64(by*cx)
		area2 += d
		volume6 += float64(d * (o.d + b + c))
		bx, by, b = cx, cy, c
	}
	return area2, volume6
}

// splitFan returns what the polygon contributes where its differences are positive, to
// the one, negative, to the other, and zero throughout (only an area).
func (p *polygon) splitFan(first int) (to [2]share, zero2 float64) {
	o := &p.at[first]
	i := p.after(first)
	q := &p.at[i]
	bx, by, b := q.x-o.x, q.y-o.y, q.d
	for range p.n - 2 {
		i = p.after(i)
		q = &p.at[i]
		cx, cy, c := q.x-o.x, q.y-o.y, q.d
		split(float64(bx*cy)-float64(by*cx), o.d, b, c, &to, &zero2)
		bx, by, b = cx, cy, c
	}
	return to, zero2
}

func (p *polygon) after(i int) int {
	if i++; i == p.n {
		i = 0
	}
	return i
}

// split shares out a triangle of twice the area d with the differences h at its
// corners.
//
// Where zero lies between the corners, one corner, a, may be alone on its side:
//
//	      a                P at s = |a|/(|a|+|b|) of the way from a to b,
//	     / \               Q at u = |a|/(|a|+|c|) from a to c.
//	----P---Q----  zero
//	   /  .  \             a P Q has s u of the area and mean difference a/3;
//	  b-------c            Q b c has 1-u and (b+c)/3, Q P b has (1-s) u and b/3.
//
// With 1-s = |b|/(|a|+|b|) and 1-u = |c|/(|a|+|c|) every term is a product of numbers
// of one sign. Or zero runs through one corner and divides the edge across in the
// ratio of its ends. Nothing here takes one sign for the other, so that negative
// differences give the same bits on the other side.
func split(d, h0, h1, h2 float64, to *[2]share, zero2 *float64) {
	if h0 == 0 || h1 == 0 || h2 == 0 {
		splitZero(d, h0, h1, h2, to, zero2)
		return
	}
	negative := oneIf(h0 < 0) | oneIf(h1 < 0)<<1 | oneIf(h2 < 0)<<2
	k := int(alone[negative])
	if k < 0 {
		s := &to[negative&1]
		s.area2 += d
		s.volume6 += float64(d * size(h0+h1+h2))
		return
	}
	h := [5]float64{size(h0), size(h1), size(h2), size(h0), size(h1)}
	a, b, c := h[k], h[k+1], h[k+2]
	s, s1 := a/(a+b), b/(a+b)
	u, u1 := a/(a+c), c/(a+c)
	su, q := float64(s*u), float64(s1*u)
	side := negative >> k & 1
	to[side].area2 += float64(d * su)
	to[side].volume6 += float64(d * float64(su*a))
	to[side^1].area2 += float64(d * (u1 + q))
	to[side^1].volume6 += float64(d * (float64(u1*(b+c)) + float64(q*b)))
}

// alone is the corner that is alone on its side, by bits that tell which are negative.
var alone = [8]int8{-1, 0, 1, 2, 2, 1, 0, -1}

// splitZero is split where a difference is zero.
func splitZero(d, h0, h1, h2 float64, to *[2]share, zero2 *float64) {
	hasPos, hasNeg := h0 > 0 || h1 > 0 || h2 > 0, h0 < 0 || h1 < 0 || h2 < 0
	switch {
	case hasPos && hasNeg:
	case hasPos || hasNeg:
		s := &to[oneIf(hasNeg)]
		s.area2 += d
		s.volume6 += float64(d * size(h0+h1+h2))
		return
	default:
		*zero2 += d
		return
	}
	// One corner at zero, the others on either side.
	b, c := h1, h2
	if h1 == 0 {
		b, c = h2, h0
	} else if h2 == 0 {
		b, c = h0, h1
	}
	side := oneIf(b < 0)
	b, c = size(b), size(c)
	rb, rc := b/(b+c), c/(b+c)
	to[side].area2 += float64(d * rb)
	to[side].volume6 += float64(float64(d*rb) * b)
	to[side^1].area2 += float64(d * rc)
	to[side^1].volume6 += float64(float64(d*rc) * c)
}

func size(x float64) float64 { return math.Abs(x) }
