package gen

// place is a position on the site.
type place struct{ u, v float64 }

// polygon is a convex ring, counter-clockwise, not closed by a repeated place.
type polygon []place

// piece is a convex part of the site on which one plane rules.
type piece struct {
	ring polygon
	top  plane
}

func (p plane) split(ring polygon) []piece { return []piece{{ring, p}} }

func (s lowerOf) split(ring polygon) []piece  { return splitPair(s.a, s.b, ring, -1) }
func (s higherOf) split(ring polygon) []piece { return splitPair(s.a, s.b, ring, +1) }

// splitPair overlays the pieces of two surfaces and cuts each overlap along
// the line where its two planes are equally high; a rules on its own side and
// on ties.
func splitPair(a, b surface, ring polygon, sign float64) []piece {
	var out []piece
	for _, pa := range a.split(ring) {
		for _, pb := range b.split(pa.ring) {
			// diff > 0 where b takes over.
			diff := plane{
				float64(sign * (pb.top.a - pa.top.a)),
				float64(sign * (pb.top.b - pa.top.b)),
				float64(sign * (pb.top.c - pa.top.c)), "",
			}
			below, above := pb.ring.cut(diff)
			if len(below) >= 3 {
				out = append(out, piece{below, pa.top})
			}
			if len(above) >= 3 {
				out = append(out, piece{above, pb.top})
			}
		}
	}
	return out
}

// cut divides a convex ring along diff = 0 into the part where diff <= 0 and
// the part where diff > 0; either may be empty. Places nearer to the line
// than a hundredth of a micrometre of height count as on it.
func (r polygon) cut(diff plane) (below, above polygon) {
	const near = 1e-8
	d := make([]float64, len(r))
	lowest, highest := 0.0, 0.0
	for i, p := range r {
		if d[i] = diff.z(p.u, p.v); d[i] > -near && d[i] < near {
			d[i] = 0
		}
		lowest, highest = min(lowest, d[i]), max(highest, d[i])
	}
	if highest == 0 {
		return r, nil
	}
	if lowest == 0 {
		return nil, r
	}
	for i, p := range r {
		j := (i + 1) % len(r)
		if d[i] <= 0 {
			below = append(below, p)
		}
		if d[i] >= 0 {
			above = append(above, p)
		}
		if d[i] < 0 && d[j] > 0 || d[i] > 0 && d[j] < 0 {
			q, t := r[j], d[i]/(d[i]-d[j])
			x := place{p.u + float64(t*(q.u-p.u)), p.v + float64(t*(q.v-p.v))}
			below, above = append(below, x), append(above, x)
		}
	}
	return below, above
}

// area returns the plan area, positive for a counter-clockwise ring.
func (r polygon) area() float64 {
	sum := 0.0
	for i := 1; i+1 < len(r); i++ {
		sum += corner(r[0], r[i], r[i+1])
	}
	return float64(sum / 2)
}

// volume returns the integral of the plane over the ring: of a linear
// function over a triangle, area times the mean of the three corners.
func (r polygon) volume(p plane) float64 {
	sum := 0.0
	for i := 1; i+1 < len(r); i++ {
		z := p.z(r[0].u, r[0].v) + p.z(r[i].u, r[i].v) + p.z(r[i+1].u, r[i+1].v)
		sum += float64(corner(r[0], r[i], r[i+1]) * z)
	}
	return float64(sum / 6)
}

// corner is twice the area of the triangle a b c.
func corner(a, b, c place) float64 {
	return float64((b.u-a.u)*(c.v-a.v)) - float64((c.u-a.u)*(b.v-a.v))
}

// inside reports whether p lies inside a ring of any shape (even-odd rule).
func inside(ring []place, p place) bool {
	in := false
	for i, a := range ring {
		b := ring[(i+1)%len(ring)]
		if (a.v > p.v) != (b.v > p.v) &&
			p.u < a.u+float64((b.u-a.u)*((p.v-a.v)/(b.v-a.v))) {
			in = !in
		}
	}
	return in
}
