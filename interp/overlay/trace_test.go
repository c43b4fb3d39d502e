package overlay

import (
	"context"
	"math/rand/v2"
	"testing"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Triangles in general position are traced, the others gathered. Gathering all of them
// makes the same terms, bit for bit.
func TestTraceIsGather(t *testing.T) {
	r := rand.New(rand.NewPCG(31, 9))
	check := func(name string, a, b *interp.Surface, least int) {
		t.Helper()
		outer, inner := newSide(a, 1), newSide(b, 1)
		if inner.shown > outer.shown {
			outer, inner = inner, outer
		}
		m := &meeting{outer: outer, inner: inner, seen: newInsides(inner)}
		at := newPlaces(outer, inner, 1)
		gathered, traced := &totals{}, 0
		m.walks.start(0, outer.shown)
		for tri := range outer.shown {
			m.addTo(gathered, tri, at)
			if m.trace(&totals{}, tri, at) {
				traced++
			}
		}
		if traced < least {
			t.Errorf("%s: traced only %d of %d triangles", name, traced, outer.shown)
		}
		got, err := sumPieces(context.Background(), outer, inner, 1, nil, nil)
		if err != nil {
			t.Fatal(err)
		}
		f, g := got.figures(a, b, false, nil), gathered.figures(a, b, false, nil)
		if *f != *g {
			t.Fatalf("%s, traced %d of %d:\ntraced   %+v\ngathered %+v", name, traced, outer.shown, f, g)
		}
	}
	for i := range 800 {
		name, a, b := pair(t, r, i)
		check(name, a, b, 0)
	}
	// Triangles that have many of the other surface inside, and edges that cross many.
	for i, n := range []int{3, 40, 4000} {
		p, z := scatter(r, n, 1000, 2000, 100, 5, 6, 0.001)
		q, y := scatter(r, 4000, 1010, 2010, 80, 5, 6, 0.001)
		p, z = append(p, [2]float64{0, 0}, [2]float64{9000, 0}, [2]float64{0, 9000}), append(z, 1, 2, 3)
		a, b := surface(t, p, z), surface(t, q, y)
		h, err := interp.New(a.Mesh().Hide(func(triangulate.Triangle) bool { return r.IntN(5) == 0 }), a.Z())
		if err != nil {
			t.Fatal(err)
		}
		check("crowd", h, b, 6000)
		if i == 2 {
			check("the other way", b, a, 4000)
		}
	}
}
