package overlay

import (
	"context"
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

func surface(t testing.TB, pts []orb.Point, z []float64) *interp.Surface {
	t.Helper()
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := interp.FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func figures(t testing.TB, from, to *interp.Surface, workers int) *Figures {
	t.Helper()
	f, err := Between(context.Background(), from, to, Options{Workers: workers})
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// scatter makes n places in a square of the given side from (x0, y0), and heights
// about z0. step, unless 0, puts everything on multiples of it.
func scatter(r *rand.Rand, n int, x0, y0, side, z0, range_, step float64) ([]orb.Point, []float64) {
	seen := map[orb.Point]bool{}
	var pts []orb.Point
	var z []float64
	on := func(v float64) float64 {
		if step == 0 {
			return v
		}
		return math.Round(v/step) * step
	}
	for len(pts) < n {
		p := orb.Point{on(x0 + r.Float64()*side), on(y0 + r.Float64()*side)}
		if seen[p] {
			continue
		}
		seen[p] = true
		pts, z = append(pts, p), append(z, on(z0+(r.Float64()-0.5)*range_))
	}
	return pts, z
}

// pair is two surfaces of a kind that must come out right.
func pair(t testing.TB, r *rand.Rand, kind int) (name string, from, to *interp.Surface) {
	n := 4 + r.IntN(14)
	k := 4 + r.IntN(14)
	switch kind % 8 {
	case 0:
		p, z := scatter(r, n, 0, 0, 10, 5, 6, 0)
		q, y := scatter(r, k, 0, 0, 10, 5, 6, 0)
		return "uniform", surface(t, p, z), surface(t, q, y)
	case 1:
		p, z := scatter(r, n, 431250.25, 5621500.5, 60, 210, 5, 0.001)
		q, y := scatter(r, k, 431240.25, 5621510.5, 60, 210.5, 5, 0.001)
		return "survey coordinates, partly apart", surface(t, p, z), surface(t, q, y)
	case 2:
		p, z := scatter(r, n, 0, 0, 6, 5, 6, 1)
		q, y := scatter(r, k, 0, 0, 6, 5, 6, 1)
		return "lattice", surface(t, p, z), surface(t, q, y)
	case 3:
		p, z := scatter(r, n, 0, 0, 4, 5, 4, 0.5)
		q, y := append([]orb.Point{}, p[:n-1]...), append([]float64{}, z[:n-1]...)
		q, y = append(q, orb.Point{r.Float64() * 4, r.Float64() * 4}), append(y, 5.25)
		return "shared edges", surface(t, p, z), surface(t, q, y)
	case 4:
		p, z := scatter(r, n, 0, 0, 1, 100, 1, 0)
		q, y := []orb.Point{{-8, -9}, {11, -7}, {2, 15}}, []float64{100.25, 99.5, 100}
		return "inside one triangle", surface(t, p, z), surface(t, q, y)
	case 5:
		p, z := scatter(r, n, -2, -2, 4, 0, 3, 0)
		q, y := []orb.Point{{-9, -0.5}, {9, -0.75}, {8, 0.5}, {-9, 0.25}}, []float64{0, 1, -1, 0.5}
		return "a strip across", surface(t, p, z), surface(t, q, y)
	case 6:
		p, z := scatter(r, n, -3, -3, 6, 0, 1, 0)
		q, y := scatter(r, k, -3, -3, 6, 0, 1, 0)
		for i := range p {
			p[i][1] *= 1e-4
		}
		for i := range q {
			q[i][1] *= 1e-4
		}
		return "slivers", surface(t, p, z), surface(t, q, y)
	default:
		p, z := scatter(r, n+4, 1000, 2000, 8, 50, 2, 0.25)
		q, y := scatter(r, k+4, 1000, 2000, 8, 50, 2, 0.25)
		a, b := surface(t, p, z), surface(t, q, y)
		hide := func(s *interp.Surface) *interp.Surface {
			m := s.Mesh()
			h, err := interp.New(m.Hide(func(t triangulate.Triangle) bool { return r.IntN(3) == 0 }), s.Z())
			if err != nil {
				panic(err)
			}
			return h
		}
		return "hidden triangles", hide(a), hide(b)
	}
}

// relative to the integral of |difference|, or to the area.
func off(got float64, want *big.Rat, n int64, whole *big.Rat) float64 {
	d := sub(mul(rat(got), new(big.Rat).SetInt64(n)), want)
	if d.Sign() == 0 {
		return 0
	}
	if whole.Sign() == 0 {
		return math.Inf(1)
	}
	v, _ := quo(d, whole).Float64()
	return math.Abs(v)
}

// P7: cut and fill apart are right to 1e-11 of the integral of |difference|.
func TestP7AgainstRationals(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 7))
	worst := map[string]float64{}
	for i := range 120 {
		name, a, b := pair(t, r, i)
		f := figures(t, a, b, 0)
		want := oracle(a, b)
		whole := want.integral()
		area := add(add(want.areaCut, want.areaFill), want.same)
		for _, c := range []struct {
			what string
			off  float64
		}{
			{"cut", off(f.Cut.Volume, want.cut, 6, whole)},
			{"fill", off(f.Fill.Volume, want.fill, 6, whole)},
			{"net", off(f.Net, sub(want.fill, want.cut), 6, whole)},
			{"cut area", off(f.Cut.Area, want.areaCut, 2, area)},
			{"fill area", off(f.Fill.Area, want.areaFill, 2, area)},
			{"same area", off(f.Same.Area, want.same, 2, area)},
			{"covered", off(f.Covered, area, 2, area)},
		} {
			if c.off > 1e-11 {
				t.Errorf("pair %d, %s: %s is off by %.2g", i, name, c.what, c.off)
			}
			worst[name] = max(worst[name], c.off)
		}
	}
	t.Log(worst)
}

// Swapped surfaces have swapped figures, bit for bit.
func TestSwapped(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 9))
	for i := range 800 {
		name, a, b := pair(t, r, i)
		f, g := figures(t, a, b, 1), figures(t, b, a, 1)
		turn := func(p Part) Part { return Part{p.Volume, p.Area, p.AreaTo, p.AreaFrom} }
		want := Figures{Cut: turn(f.Fill), Fill: turn(f.Cut), Same: turn(f.Same), Net: -f.Net, Covered: f.Covered,
			AreaFrom: f.AreaTo, AreaTo: f.AreaFrom, Pieces: f.Pieces}
		if want.Net == 0 {
			want.Net = 0
		}
		if *g != want {
			t.Fatalf("pair %d, %s:\n there and back %+v\n want %+v", i, name, *g, want)
		}
	}
}

// Any number of workers, any order of the points: the same bits.
func TestSameBits(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 4))
	for kind := range 4 {
		n := 3000
		p, z := scatter(r, n, 1000, 2000, 100, 5, 6, []float64{0, 0.01, 1, 0}[kind])
		q, y := scatter(r, n, 1010, 2010, 100, 5, 6, []float64{0, 0.01, 1, 0.001}[kind])
		want := *figures(t, surface(t, p, z), surface(t, q, y), 1)
		for range 3 {
			r.Shuffle(n, func(i, j int) { p[i], p[j], z[i], z[j] = p[j], p[i], z[j], z[i] })
			r.Shuffle(n, func(i, j int) { q[i], q[j], y[i], y[j] = q[j], q[i], y[j], y[i] })
			for _, workers := range []int{1, 2, 5} {
				if got := *figures(t, surface(t, p, z), surface(t, q, y), workers); got != want {
					t.Fatalf("kind %d, %d workers:\n got %+v\nwant %+v", kind, workers, got, want)
				}
			}
		}
	}
}

// Identical surfaces have no difference at all, and those that have triangles in
// common none there.
func TestSame(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 5))
	p, z := scatter(r, 2000, 431250, 5621500, 100, 200, 5, 0.001)
	a := surface(t, p, z)
	f := figures(t, a, surface(t, p, z), 0)
	if f.Cut != (Part{}) || f.Fill != (Part{}) || f.Net != 0 || f.Same.Volume != 0 {
		t.Errorf("identical surfaces differ: %+v", f)
	}
	if f.Covered != f.AreaFrom || f.Same.Area != f.AreaFrom {
		t.Errorf("area %v of %v", f.Same.Area, f.AreaFrom)
	}
	// One reading moved up: the difference is a pyramid on its triangles.
	moved := append([]float64{}, z...)
	moved[77] += 0.5
	b := surface(t, p, moved)
	f = figures(t, a, b, 0)
	area := 0.0
	for tri := range a.Mesh().Triangles() {
		for _, v := range a.Mesh().Corners(tri) {
			if v == a.Mesh().VertexOf(77) {
				c := a.Mesh().Corners(tri)
				area += area2(ptr(a, c[0]), ptr(a, c[1]), ptr(a, c[2])) / 2
			}
		}
	}
	if f.Cut != (Part{}) || math.Abs(f.Fill.Area-area) > 1e-12*area || math.Abs(f.Fill.Volume-area*0.5/3) > 1e-12*area {
		t.Errorf("pyramid of area %v: %+v", area, f)
	}
	// A surface raised by a binary fraction.
	raised := append([]float64{}, z...)
	for i := range raised {
		raised[i] = math.Round(raised[i]*1024) / 1024
	}
	low := surface(t, p, raised)
	for i := range raised {
		raised[i] += 0.375
	}
	f = figures(t, low, surface(t, p, raised), 0)
	if f.Cut != (Part{}) || math.Abs(f.Fill.Volume-0.375*f.AreaFrom) > 1e-14*f.AreaFrom {
		t.Errorf("raised by 0.375 over %v: %v", f.AreaFrom, f.Fill.Volume)
	}
}

func ptr(s *interp.Surface, v triangulate.Vertex) *orb.Point { return &s.Mesh().Positions()[v] }

// Surfaces that have no place in common, or none at all.
func TestApart(t *testing.T) {
	a := surface(t, []orb.Point{{0, 0}, {1, 0}, {0, 1}}, []float64{1, 2, 3})
	for name, b := range map[string]*interp.Surface{
		"apart":    surface(t, []orb.Point{{5, 5}, {6, 5}, {5, 6}}, []float64{1, 2, 3}),
		"near":     surface(t, []orb.Point{{1, 1}, {0.75, 1}, {1, 0.75}}, []float64{1, 2, 3}),
		"touching": surface(t, []orb.Point{{0.5, 0.5}, {1, 0.5}, {0.5, 1}}, []float64{1, 2, 3}),
		"in line":  surface(t, []orb.Point{{0, 0}, {1, 0}, {2, 0}}, []float64{1, 2, 3}),
		"along":    surface(t, []orb.Point{{0, 0}, {1, 0}, {0, -1}}, []float64{1, 2, 3}),
	} {
		f, g := figures(t, a, b, 0), figures(t, b, a, 0)
		if f.Covered != 0 || f.Cut != (Part{}) || f.Fill != (Part{}) || g.Covered != 0 {
			t.Errorf("%s: %+v", name, f)
		}
	}
}

func constrained(t testing.TB, pts []orb.Point, segs []triangulate.Segment, z []float64) *interp.Surface {
	t.Helper()
	m, err := triangulate.Constrained(context.Background(), pts, segs, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := interp.FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// Thousands of triangles within one of the other surface, both ways: nothing is counted
// twice or left out.
func TestCrowd(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 3))
	crowd := func(x0, y0 float64) ([]orb.Point, []float64) {
		p, z := scatter(r, 1500, x0, y0, 0.5, 0, 1, 0)
		return append(p, orb.Point{0, 0}, orb.Point{10, 0}, orb.Point{10, 10}, orb.Point{0, 10}), append(z, 0, 1, 2, 3)
	}
	p, z := crowd(1, 1)
	q, y := crowd(8, 8.5)
	a, b := surface(t, p, z), surface(t, q, y)
	f, g := figures(t, a, b, 0), figures(t, b, a, 0)
	near(t, "covered", f.Covered, 100, 1e-12)
	near(t, "net", f.Net, b.VolumeAboveZero()-a.VolumeAboveZero(), 1e-11)
	if f.Cut.Volume != g.Fill.Volume || f.Fill.Volume != g.Cut.Volume || f.Pieces != g.Pieces {
		t.Errorf("there %+v, and back %+v", f, g)
	}
}
