package overlay

import (
	"math/big"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// The oracle: every pair of triangles is clipped, split and integrated in rational
// arithmetic, by another way than the package: half-plane after half-plane.

type ratPoint struct{ x, y, a, b *big.Rat } // heights of the two surfaces

func rat(f float64) *big.Rat { return new(big.Rat).SetFloat64(f) }

func sub(a, b *big.Rat) *big.Rat { return new(big.Rat).Sub(a, b) }
func add(a, b *big.Rat) *big.Rat { return new(big.Rat).Add(a, b) }
func mul(a, b *big.Rat) *big.Rat { return new(big.Rat).Mul(a, b) }
func quo(a, b *big.Rat) *big.Rat { return new(big.Rat).Quo(a, b) }

func ratArea2(p, q, r ratPoint) *big.Rat {
	return sub(mul(sub(q.x, p.x), sub(r.y, p.y)), mul(sub(q.y, p.y), sub(r.x, p.x)))
}

// between interpolates from p to q where f, which has values of unlike signs there,
// is zero.
func between(p, q ratPoint, fp, fq *big.Rat) ratPoint {
	t := quo(fp, sub(fp, fq))
	mix := func(u, v *big.Rat) *big.Rat {
		if u == nil || v == nil {
			return nil
		}
		return add(u, mul(t, sub(v, u)))
	}
	return ratPoint{mix(p.x, q.x), mix(p.y, q.y), mix(p.a, q.a), mix(p.b, q.b)}
}

// clip keeps the part of a polygon where f is not negative.
func clip(poly []ratPoint, f func(ratPoint) *big.Rat) []ratPoint {
	var out []ratPoint
	for i, p := range poly {
		q := poly[(i+1)%len(poly)]
		fp, fq := f(p), f(q)
		if fp.Sign() >= 0 {
			out = append(out, p)
		}
		if fp.Sign()*fq.Sign() < 0 {
			out = append(out, between(p, q, fp, fq))
		}
	}
	return out
}

// ratFigures are twice areas and six times volumes.
type ratFigures struct {
	cut, fill, areaCut, areaFill, same, size *big.Rat
}

func corners(s *interp.Surface, t triangulate.Triangle) [3]ratPoint {
	var c [3]ratPoint
	for k, v := range s.Mesh().Corners(t) {
		p := s.Mesh().Position(v)
		c[k] = ratPoint{rat(p[0]), rat(p[1]), rat(s.Z()[v]), nil}
	}
	return c
}

func heightAt(c [3]ratPoint, p ratPoint) *big.Rat {
	d := ratArea2(c[0], c[1], c[2])
	sum := add(add(mul(ratArea2(c[1], c[2], p), c[0].a), mul(ratArea2(c[2], c[0], p), c[1].a)), mul(ratArea2(c[0], c[1], p), c[2].a))
	return quo(sum, d)
}

func oracle(from, to *interp.Surface) ratFigures {
	f := ratFigures{new(big.Rat), new(big.Rat), new(big.Rat), new(big.Rat), new(big.Rat), new(big.Rat)}
	var bounds []orb.Bound
	bound := func(s *interp.Surface, t triangulate.Triangle) orb.Bound {
		var at orb.MultiPoint
		for _, v := range s.Mesh().Corners(t) {
			at = append(at, s.Mesh().Position(v))
		}
		return at.Bound()
	}
	for t := range to.Mesh().Triangles() {
		bounds = append(bounds, bound(to, t))
	}
	for t := range from.Mesh().Triangles() {
		b := bound(from, t)
		ca := corners(from, t)
		for u := range to.Mesh().Triangles() {
			if !b.Intersects(bounds[u]) {
				continue
			}
			cb := corners(to, u)
			poly := ca[:]
			for k := range 3 {
				poly = clip(poly, func(p ratPoint) *big.Rat { return ratArea2(cb[k], cb[(k+1)%3], p) })
			}
			if len(poly) < 3 {
				continue
			}
			full := make([]ratPoint, len(poly))
			for i, p := range poly {
				full[i] = ratPoint{p.x, p.y, p.a, heightAt(cb, p)}
			}
			f.integrate(full)
		}
	}
	return f
}

func (f *ratFigures) integrate(poly []ratPoint) {
	diff := func(p ratPoint) *big.Rat { return sub(p.b, p.a) }
	none := true
	for _, p := range poly {
		none = none && diff(p).Sign() == 0
	}
	measure := func(poly []ratPoint, volume, area *big.Rat) {
		for i := 1; i+1 < len(poly); i++ {
			d := ratArea2(poly[0], poly[i], poly[i+1])
			area.Add(area, d)
			volume.Add(volume, mul(d, add(diff(poly[0]), add(diff(poly[i]), diff(poly[i+1])))))
		}
	}
	if none {
		measure(poly, new(big.Rat), f.same)
		return
	}
	measure(clip(poly, diff), f.fill, f.areaFill)
	below := new(big.Rat)
	measure(clip(poly, func(p ratPoint) *big.Rat { return new(big.Rat).Neg(diff(p)) }), below, f.areaCut)
	f.cut.Sub(f.cut, below)
}

func (f *ratFigures) integral() *big.Rat { return add(f.cut, f.fill) }
