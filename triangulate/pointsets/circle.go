package pointsets

import (
	"slices"

	"github.com/paulmach/orb"
)

// Circle returns integer points that lie exactly on circles: one circle of 12,
// 36, 108, 324, 972 or 2916 points, the smallest that holds n, of which n are
// kept; beyond that as many circles of 2916 points as are needed, side by
// side. All are distinct and no circle has a point inside it. A seed other
// than 0 shuffles them.
//
// Points on x² + y² = R² are Gaussian integers of norm R². With R a product
// of k primes of the form 4m+1, each p = π·π̄, they are the products of one
// factor π², π·π̄ or π̄² per prime and one of the four units: 4·3^k points
// (Hardy & Wright, An Introduction to the Theory of Numbers, 16.9).
func Circle(n int, seed uint64) []orb.Point {
	primes := []gauss{{2, 1}, {3, 2}, {4, 1}, {5, 2}, {6, 1}, {5, 4}} // 5 13 17 29 37 41
	ring := []gauss{{1, 0}, {0, 1}, {-1, 0}, {0, -1}}
	radius := 1
	for k, p := range primes {
		if k > 0 && len(ring) >= n {
			break
		}
		q := gauss{p.re, -p.im}
		radius *= p.times(q).re
		next := make([]gauss, 0, 3*len(ring))
		for _, f := range []gauss{p.times(p), p.times(q), q.times(q)} {
			for _, g := range ring {
				next = append(next, g.times(f))
			}
		}
		ring = next
	}
	slices.SortFunc(ring, func(a, b gauss) int {
		if a.re != b.re {
			return a.re - b.re
		}
		return a.im - b.im
	})

	circles := (n + len(ring) - 1) / len(ring)
	cols := 1
	for cols*cols < circles {
		cols++
	}
	step := 2*radius + radius/8 + 1 // circles do not touch
	pts := make([]orb.Point, n)
	for i := range pts {
		c, g := i/len(ring), ring[i%len(ring)]
		pts[i] = orb.Point{
			float64(c%cols*step + g.re),
			float64(c/cols*step + g.im),
		}
	}
	if seed != 0 {
		Shuffle(pts, seed)
	}
	return pts
}

// gauss is a Gaussian integer re + im·i.
type gauss struct{ re, im int }

func (a gauss) times(b gauss) gauss {
	return gauss{a.re*b.re - a.im*b.im, a.re*b.im + a.im*b.re}
}
