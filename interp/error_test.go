package interp

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// oneTriangle is a surface of one triangle, and its number, which is 0.
func oneTriangle(t testing.TB, c [3]orb.Point, z [3]float64) *Surface {
	return surfaceOf(t, c[:], z[:])
}

// TestErrorInside measures the error of values inside triangles against rationals,
// in ulps of the largest |z|, and holds it to the bound of plane.go.
func TestErrorInside(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	worst := map[string]float64{}
	var worstHeights [len(heightKinds)]float64
	n, gentle, worstGentle := 0, 0, 0.0
	for n < cases(15000) {
		c, kind := someTriangle(r)
		k := r.IntN(len(heightKinds))
		z := heightsOfKind(r, k)
		s := oneTriangle(t, c, z)
		sp := s.Sampler()
		plane := s.Plane(0)
		zMax := max(math.Abs(z[0]), math.Abs(z[1]), math.Abs(z[2]))
		span := max(z[0], z[1], z[2]) - min(z[0], z[1], z[2])
		for range 4 {
			p := somePlaceIn(r, c)
			sample := sp.At(p)
			if sample.Location.Place != triangulate.Inside {
				continue // slivers have few places strictly inside
			}
			n++
			got := sample.Z
			if at := plane.At(p[0], p[1]); at != got {
				t.Fatalf("%s: Plane.At gives %x, Value %x", kind, at, got)
			}
			if got < min(z[0], z[1], z[2]) || got > max(z[0], z[1], z[2]) {
				t.Fatalf("%s: %v lies outside the heights %v", kind, got, z)
			}
			want := ratInside(c, z, p)
			off := ulpsOff(got, want, zMax)
			worst[kind] = max(worst[kind], off)
			worstHeights[k] = max(worstHeights[k], off)
			// The bounds 2e Z + 4e R and, gentle, 4.7e Z, with a thousandth for higher orders.
			bound := 2*zMax + 4*span
			if plane.gentle {
				gentle++
				worstGentle = max(worstGentle, off)
				bound = 4.7 * zMax
			}
			if bound := bound * 0x1p-53 * 1.001 / ulp(zMax); off > bound {
				t.Fatalf("%s: %v at %v over %v: off by %.2f ulp, want at most %.2f", kind, z, p, c, off, bound)
			}
		}
	}
	for kind, w := range worst {
		t.Logf("triangles: %-36s %.3f ulp", kind, w)
	}
	all := 0.0
	// What a million cases came to (see doc.go), with some room for other seeds.
	for k, most := range [len(heightKinds)]float64{1.2, 6, 8, 5, 1.2} {
		w := worstHeights[k]
		all = max(all, w)
		t.Logf("heights: %-36s %.3f ulp", heightKinds[k], w)
		if w > most {
			t.Errorf("%s: largest error %.3f ulp, want at most %v", heightKinds[k], w, most)
		}
	}
	t.Logf("largest error of %d cases: %.3f ulp of the largest |z|; of %d in gentle triangles %.3f", n, all, gentle, worstGentle)
	if gentle < n/20 {
		t.Errorf("%d of %d cases were in gentle triangles: their bound is not tested", gentle, n)
	}
	if len(worst) != 8 {
		t.Errorf("%d kinds of triangles had places inside, want 8", len(worst))
	}
}

// somePlaceIn draws a place near the triangle, in its last places if it is thin.
func somePlaceIn(r *rand.Rand, c [3]orb.Point) orb.Point {
	u, v := r.Float64(), r.Float64()
	if r.IntN(4) == 0 { // near a corner
		u, v = u*0x1p-30, v*0x1p-30
	}
	if u+v > 1 {
		u, v = 1-u, 1-v
	}
	return orb.Point{
		c[0][0] + u*(c[1][0]-c[0][0]) + v*(c[2][0]-c[0][0]),
		c[0][1] + u*(c[1][1]-c[0][1]) + v*(c[2][1]-c[0][1]),
	}
}

// TestErrorOnEdge does the same on edges that have places exactly on them: steps of
// one vector, scaled by a power of two, from the origin and in map coordinates.
func TestErrorOnEdge(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	worst := 0.0
	for range cases(20000) {
		dx, dy := float64(r.IntN(2001)-1000), float64(r.IntN(2001)-1000)
		if dx == 0 && dy == 0 {
			continue
		}
		steps := 2 + r.IntN(1000)
		scale := math.Ldexp(1, r.IntN(20)-20)
		x0, y0 := 0.0, 0.0
		if r.IntN(2) == 0 {
			x0, y0 = 500000, 4600000
		}
		at := func(k int) orb.Point { return orb.Point{x0 + float64(k)*dx*scale, y0 + float64(k)*dy*scale} }
		from := -r.IntN(steps)
		a, b, z := at(from), at(from+steps), someHeights(r)
		s := oneTriangle(t, [3]orb.Point{a, b, {x0 - dy, y0 + dx}}, z)
		k := 1 + r.IntN(steps-1)
		sample := s.Sampler().At(at(from + k))
		if sample.Location.Place != triangulate.OnEdge {
			t.Fatalf("step %d of %d from %v to %v is %v, want edge", k, steps, a, b, sample.Location.Place)
		}
		want := new(big.Rat).Sub(rat(z[1]), rat(z[0]))
		want.Mul(want, big.NewRat(int64(k), int64(steps)))
		want.Add(want, rat(z[0]))
		zMax := max(math.Abs(z[0]), math.Abs(z[1]))
		worst = max(worst, ulpsOff(sample.Z, want, zMax))
	}
	t.Logf("largest error: %.4f ulp of the largest |z|", worst)
	if worst > 0.51 {
		t.Errorf("largest error %.4f ulp, want at most 0.51", worst)
	}
}

// TestErrorOfGradient holds each component to the relative error that its comment
// promises.
func TestErrorOfGradient(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	worst, level := 0.0, 0
	check := func(got float64, num, den *big.Rat) {
		t.Helper()
		want := new(big.Rat).Quo(num, den)
		if want.Sign() == 0 {
			if got != 0 {
				t.Fatalf("gradient %g, want exactly 0", got)
			}
			level++
			return
		}
		e := new(big.Rat).Sub(rat(got), want)
		rel, _ := e.Quo(e, want).Float64()
		worst = max(worst, math.Abs(rel))
	}
	for range cases(10000) {
		c, _ := someTriangle(r)
		z := someHeights(r)
		if r.IntN(10) == 0 {
			z[1], z[2] = z[0], z[0]
		}
		gx, gy := oneTriangle(t, c, z).Gradient(0)
		d := ratArea2(c[0], c[1], c[2])
		at := func(f func(i int) orb.Point) *big.Rat { return ratArea2(f(0), f(1), f(2)) }
		check(gx, at(func(i int) orb.Point { return orb.Point{z[i], c[i][1]} }), d)
		check(gy, at(func(i int) orb.Point { return orb.Point{c[i][0], z[i]} }), d)
	}
	t.Logf("largest relative error %.3g = %.2f x 2^-53", worst, worst*(1<<53))
	if worst > 0x1p-49 {
		t.Errorf("largest relative error %g, want below 2^-49", worst)
	}
	if level == 0 {
		t.Error("no level triangle was drawn")
	}
}

// TestErrorOfWeights: each weight against its definition, relative to itself.
func TestErrorOfWeights(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	worst := 0.0
	for range cases(5000) {
		c, _ := someTriangle(r)
		s := oneTriangle(t, c, someHeights(r))
		p := somePlaceIn(r, c)
		loc := s.Sampler().At(p).Location
		if loc.Place != triangulate.Inside {
			continue
		}
		corners, w := s.Weights(loc, p)
		d := ratArea2(c[0], c[1], c[2])
		for n := range corners {
			q := s.mesh.Position(corners[(n+1)%3])
			u := s.mesh.Position(corners[(n+2)%3])
			want := ratArea2(p, q, u)
			want.Quo(want, d)
			e := new(big.Rat).Sub(rat(w[n]), want)
			rel, _ := e.Quo(e, want).Float64()
			worst = max(worst, math.Abs(rel))
		}
		near(t, "sum of weights", w[0]+w[1]+w[2], 1, 0x1p-49)
	}
	t.Logf("largest relative error %.2f x 2^-53", worst*(1<<53))
	if worst > 0x1p-49 {
		t.Errorf("largest relative error %g, want below 2^-49", worst)
	}
}
