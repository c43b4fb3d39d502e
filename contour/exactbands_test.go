package contour

import (
	"fmt"
	"math"
	"math/big"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// A checker of where bands lie, in rational arithmetic: the exact borders of bands in the triangles, from which the given ones
// are no further away than the report says, and what follows from that for places.

// place is a point with rational coordinates.
type place struct{ x, y *big.Rat }

func rat(v float64) *big.Rat { return new(big.Rat).SetFloat64(v) }

func placeOf(p orb.Point) place { return place{rat(p[0]), rat(p[1])} }

func minus(a, b *big.Rat) *big.Rat { return new(big.Rat).Sub(a, b) }
func times(a, b *big.Rat) *big.Rat { return new(big.Rat).Mul(a, b) }
func plus(a, b *big.Rat) *big.Rat  { return new(big.Rat).Add(a, b) }

// between returns a + t (b - a).
func between(a, b place, t *big.Rat) place {
	return place{plus(a.x, times(t, minus(b.x, a.x))), plus(a.y, times(t, minus(b.y, a.y)))}
}

// float returns the nearest point with coordinates that are doubles.
func (p place) float() orb.Point {
	x, _ := p.x.Float64()
	y, _ := p.y.Float64()
	return orb.Point{x, y}
}

// border is a piece of the exact border of a band.
type border struct {
	a, b  place
	p, q  orb.Point // a and b, rounded
	bound orb.Bound // larger by an ulp than the piece
}

func newBorder(a, b place) border {
	p, q := a.float(), b.float()
	bound := orb.Bound{}
	for i := range 2 {
		bound.Min[i] = math.Nextafter(min(p[i], q[i]), math.Inf(-1))
		bound.Max[i] = math.Nextafter(max(p[i], q[i]), math.Inf(1))
	}
	return border{a, b, p, q, bound}
}

// within reports whether p is no further than off from s.
func (s border) within(p orb.Point, off float64) bool {
	if wide := 2 * off; p[0] < s.bound.Min[0]-wide || p[0] > s.bound.Max[0]+wide || p[1] < s.bound.Min[1]-wide || p[1] > s.bound.Max[1]+wide {
		return false
	}
	// Far from rounding, doubles tell.
	if s.p != s.q && distance(s.p, s.q, p) > 4*off {
		return false
	}
	q := placeOf(p)
	dx, dy := minus(s.b.x, s.a.x), minus(s.b.y, s.a.y)
	ux, uy := minus(q.x, s.a.x), minus(q.y, s.a.y)
	length2 := plus(times(dx, dx), times(dy, dy))
	along := plus(times(ux, dx), times(uy, dy))
	off2 := times(rat(off), rat(off))
	switch {
	case along.Sign() <= 0:
	case along.Cmp(length2) >= 0:
		ux, uy = minus(q.x, s.b.x), minus(q.y, s.b.y)
	default: // area² <= off² length²
		area := minus(times(dx, uy), times(dy, ux))
		return times(area, area).Cmp(times(off2, length2)) <= 0
	}
	return plus(times(ux, ux), times(uy, uy)).Cmp(off2) <= 0
}

// exactBands is where the bands of a surface exactly are.
type exactBands struct {
	s       *interp.Surface
	zs      []float64
	borders [][]border // of every band
	places  []orb.Point
	in      []triangulate.Triangle // of places: a triangle that the place lies in or on
}

// newExactBands finds the borders, and takes places: the vertices, and in every piece of band in a triangle one that lies in it
// but for rounding.
func newExactBands(s *interp.Surface, levels Levels) *exactBands {
	e := &exactBands{s: s, zs: levels.values(), borders: make([][]border, len(levels)+1)}
	m, z := s.Mesh(), s.Z()
	seen := make([]bool, m.NumVertices())
	for t := range m.Triangles() {
		var corner [3]place
		var value [3]*big.Rat
		c := m.Corners(t)
		for i, v := range c {
			corner[i], value[i] = placeOf(m.Position(v)), rat(z[v])
			if !seen[v] {
				seen[v] = true
				e.places, e.in = append(e.places, m.Position(v)), append(e.in, t)
			}
		}
		// Round the corners, with the places where levels are crossed: what each band has of them.
		pieces := map[int][]place{}
		cuts := map[int][]place{} // of every level
		for i := range 3 {
			j := (i + 1) % 3
			ri, rj := below(e.zs, z[c[i]]), below(e.zs, z[c[j]])
			from := corner[i]
			pieces[ri] = append(pieces[ri], from)
			rim := m.Twin(t.HalfEdge(i)) == triangulate.NoHalfEdge
			add := func(to place, band int) {
				if rim {
					e.borders[band] = append(e.borders[band], newBorder(from, to))
				}
				from = to
			}
			for r := ri; r != rj; {
				k, next := r, r+1
				if rj < ri {
					k, next = r-1, r-1
				}
				at := between(corner[i], corner[j], new(big.Rat).Quo(minus(rat(e.zs[k]), value[i]), minus(value[j], value[i])))
				add(at, r)
				pieces[r], pieces[next] = append(pieces[r], at), append(pieces[next], at)
				cuts[k] = append(cuts[k], at)
				r = next
			}
			add(corner[j], rj)
		}
		for k, cut := range cuts {
			b := newBorder(cut[0], cut[1])
			e.borders[k], e.borders[k+1] = append(e.borders[k], b), append(e.borders[k+1], b)
		}
		for _, piece := range pieces {
			var sum orb.Point
			for _, p := range piece {
				q := p.float()
				sum[0] += q[0] / float64(len(piece))
				sum[1] += q[1] / float64(len(piece))
			}
			p := [3]orb.Point{m.Position(c[0]), m.Position(c[1]), m.Position(c[2])}
			if exact.Orient(p[0], p[1], sum) >= 0 && exact.Orient(p[1], p[2], sum) >= 0 && exact.Orient(p[2], p[0], sum) >= 0 {
				e.places, e.in = append(e.places, sum), append(e.in, t)
			}
		}
	}
	return e
}

// bandAt returns the band of place number i.
func (e *exactBands) bandAt(i int) int {
	m, z := e.s.Mesh(), e.s.Z()
	c := m.Corners(e.in[i])
	// The weights are areas with relative errors below 2^-52, and none is below zero: the value is off by far less than
	// 1e-12 of the largest number.
	var sum, whole, size float64
	for k, v := range c {
		a, b := m.Position(c[(k+1)%3]), m.Position(c[(k+2)%3])
		w := exact.Area2(a[0], a[1], b[0], b[1], e.places[i][0], e.places[i][1])
		sum, whole, size = sum+w*z[v], whole+w, max(size, math.Abs(z[v]))
	}
	about := sum / whole
	if !slices.ContainsFunc(e.zs, func(l float64) bool { return math.Abs(l-about) <= 1e-12*(size+math.Abs(l)) }) {
		return below(e.zs, about)
	}
	p := placeOf(e.places[i])
	var q [3]place
	for k, v := range c {
		q[k] = placeOf(m.Position(v))
	}
	area := func(a, b, c place) *big.Rat {
		return minus(times(minus(b.x, a.x), minus(c.y, a.y)), times(minus(b.y, a.y), minus(c.x, a.x)))
	}
	total := new(big.Rat)
	for k, v := range c {
		total.Add(total, times(area(q[(k+1)%3], q[(k+2)%3], p), rat(z[v])))
	}
	all := area(q[0], q[1], q[2])
	band := 0
	for band < len(e.zs) && total.Cmp(times(all, rat(e.zs[band]))) >= 0 {
		band++
	}
	return band
}

// near reports whether the border of a band comes within off of p.
func (e *exactBands) near(band int, p orb.Point, off float64) bool {
	return slices.ContainsFunc(e.borders[band], func(s border) bool { return s.within(p, off) })
}

// placesMost bounds how many places of a surface, and points of a ring, are looked at.
func placesMost() int {
	if *long {
		return 150
	}
	return 50
}

// checkPlaces checks what the report of bands promises, by rationals.
func checkPlaces(s *interp.Surface, levels Levels, bands []Band, numbers []int, r BandReport) error {
	if s.Mesh().NumTriangles() == 0 {
		return nil
	}
	_, _, largest := exactArea(s)
	if most := offMost(s, largest); r.Off > most {
		return fmt.Errorf("borders off by %v: expected %v at most", r.Off, most)
	}
	e := newExactBands(s, levels)
	// What is given lies no further than Off from what is exact.
	for i, b := range bands {
		for _, ring := range b.Polygon {
			for k := 1; k < len(ring); k += 1 + len(ring)/placesMost() {
				if !e.near(numbers[i], ring[k], r.Off) {
					return fmt.Errorf("polygon %d of band %d: (%v, %v) is further than %v from the border", i, numbers[i], ring[k][0], ring[k][1], r.Off)
				}
			}
		}
	}
	// Places further than Off from the border of their band lie in it; and where a polygon is, its band is no further than Off.
	for i := 0; i < len(e.places); i += 1 + len(e.places)/placesMost() {
		p, want := e.places[i], e.bandAt(i)
		found := false
		for k, b := range bands {
			side := sideOfPolygon(b.Polygon, p)
			if side < 0 {
				continue
			}
			if numbers[k] == want {
				found = found || side > 0
			} else if !e.near(numbers[k], p, r.Off) {
				return fmt.Errorf("(%v, %v) in band %d: in polygon %d of band %d, which is further than %v away", p[0], p[1], want, k, numbers[k], r.Off)
			}
		}
		if !found && !e.near(want, p, r.Off) {
			return fmt.Errorf("(%v, %v), further than %v from the border of band %d: in no polygon of it", p[0], p[1], r.Off, want)
		}
	}
	return nil
}

// offMost is the most that borders were ever off: see BandReport.
func offMost(s *interp.Surface, largest float64) float64 {
	low, high := orb.Point{math.Inf(1), math.Inf(1)}, orb.Point{math.Inf(-1), math.Inf(-1)}
	for _, p := range s.Mesh().Positions() {
		low, high = orb.Point{min(low[0], p[0]), min(low[1], p[1])}, orb.Point{max(high[0], p[0]), max(high[1], p[1])}
	}
	return 3 * math.Sqrt2 * (ulp(largest)/2 + 0x1p-51*(high[0]-low[0]+high[1]-low[1]))
}

// checkReadings checks the list of readings, for those with triangles.
func checkReadings(s *interp.Surface, levels Levels, bands []Band, numbers []int, r BandReport) error {
	m := s.Mesh()
	var readings []Narrow
	seen := make([]bool, m.NumVertices())
	for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
		if v := m.Origin(h); !seen[v] {
			seen[v] = true
			readings = append(readings, Narrow{m.Position(v), s.Z()[v]})
		}
	}
	return checkList(readings, levels.values(), bands, numbers, r)
}

// checkList checks that the report lists the readings that lie neither in nor on a polygon of their band, or for a value
// equal to a level of the band below, and no others.
func checkList(readings []Narrow, zs []float64, bands []Band, numbers []int, r BandReport) error {
	listed := map[orb.Point]float64{}
	for i, n := range r.TooNarrow {
		if i > 0 && comparePlaces(r.TooNarrow[i-1].At, n.At) >= 0 {
			return fmt.Errorf("list of readings: number %d out of order", i)
		}
		listed[n.At] = n.Z
	}
	for _, v := range readings {
		want := below(zs, v.Z)
		equal := want > 0 && zs[want-1] == v.Z
		found := false
		for i := range bands {
			if n := numbers[i]; n == want || equal && n == want-1 {
				found = found || sideOfPolygon(bands[i].Polygon, v.At) >= 0
			}
		}
		if z, ok := listed[v.At]; ok == found || ok && z != v.Z {
			return fmt.Errorf("reading %v at (%v, %v), band %d: in or on a polygon of it %v, listed as too narrow %v", v.Z, v.At[0], v.At[1], want, found, ok)
		}
		delete(listed, v.At)
	}
	if len(listed) > 0 {
		return fmt.Errorf("%d places listed that are no readings", len(listed))
	}
	return nil
}

// sideOfPolygon is +1 for a place inside the polygon, 0 on its border, -1 outside, exactly.
func sideOfPolygon(p orb.Polygon, q orb.Point) int {
	side := sideOfRing(p[0], q)
	for _, hole := range p[1:] {
		side = min(side, -sideOfRing(hole, q))
	}
	return side
}
