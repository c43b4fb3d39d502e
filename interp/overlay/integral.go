package overlay

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

// splitFan returns what the polygon contributes where its differences are positive,
// negative, and zero throughout (only an area).
func (p *polygon) splitFan(first int) (pos, neg share, zero2 float64) {
	o := &p.at[first]
	i := p.after(first)
	q := &p.at[i]
	bx, by, b := q.x-o.x, q.y-o.y, q.d
	for range p.n - 2 {
		i = p.after(i)
		q = &p.at[i]
		cx, cy, c := q.x-o.x, q.y-o.y, q.d
		split(float64(bx*cy)-float64(by*cx), o.d, b, c, &pos, &neg, &zero2)
		bx, by, b = cx, cy, c
	}
	return pos, neg, zero2
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
func split(d, h0, h1, h2 float64, pos, neg *share, zero2 *float64) {
	hasPos, hasNeg := h0 > 0 || h1 > 0 || h2 > 0, h0 < 0 || h1 < 0 || h2 < 0
	switch {
	case hasPos && !hasNeg:
		pos.area2 += d
		pos.volume6 += float64(d * (h0 + h1 + h2))
		return
	case hasNeg && !hasPos:
		neg.area2 += d
		neg.volume6 += float64(d * -(h0 + h1 + h2))
		return
	case !hasNeg:
		*zero2 += d
		return
	}
	// Turn a corner at zero, else the corner that is alone, to the front.
	a, b, c := h0, h1, h2
	switch {
	case h1 == 0 || h0 != 0 && h2 != 0 && (h1 > 0) != (h0 > 0) && (h1 > 0) != (h2 > 0):
		a, b, c = h1, h2, h0
	case h2 == 0 || h0 != 0 && (h2 > 0) != (h0 > 0) && (h2 > 0) != (h1 > 0):
		a, b, c = h2, h0, h1
	}
	alone, other := pos, neg
	if a < 0 || a == 0 && b < 0 {
		alone, other = neg, pos
	}
	if a == 0 {
		// b is on the side of alone, c on the other.
		b, c = size(b), size(c)
		rb, rc := b/(b+c), c/(b+c)
		alone.area2 += float64(d * rb)
		alone.volume6 += float64(float64(d*rb) * b)
		other.area2 += float64(d * rc)
		other.volume6 += float64(float64(d*rc) * c)
		return
	}
	a, b, c = size(a), size(b), size(c)
	s, s1 := a/(a+b), b/(a+b)
	u, u1 := a/(a+c), c/(a+c)
	su, q := float64(s*u), float64(s1*u)
	alone.area2 += float64(d * su)
	alone.volume6 += float64(d * float64(su*a))
	other.area2 += float64(d * (u1 + q))
	other.volume6 += float64(d * (float64(u1*(b+c)) + float64(q*b)))
}

func size(x float64) float64 {
	if x < 0 {
		return -x
	}
	return x
}
