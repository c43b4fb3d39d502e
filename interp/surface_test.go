package interp

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// lumpy are heights with no symmetry that could hide a mistake.
func lumpy(x, y float64) float64 { return 40 + 7*math.Sin(3*x+1) + 5*math.Cos(4*y)*x }

// TestTriangleExamples: testdata/triangle_examples.csv (by rational arithmetic).
// Relative tolerance 1e-10, as printed.
func TestTriangleExamples(t *testing.T) {
	rows := table(t, "testdata/triangle_examples.csv")
	if len(rows) != 9 {
		t.Fatalf("%d rows, want 9", len(rows))
	}
	for _, row := range rows {
		get := func(name string) float64 { return number(t, row[name]) }
		name := row["case"]
		s := surfaceOf(t,
			[]orb.Point{{get("x1"), get("y1")}, {get("x2"), get("y2")}, {get("x3"), get("y3")}},
			[]float64{get("z1"), get("z2"), get("z3")})
		sample := s.Sampler().At(orb.Point{get("xq"), get("yq")})
		if row["z_linear"] == "outside" {
			if sample.Location.Place != triangulate.Outside || !math.IsNaN(sample.Z) {
				t.Errorf("%s: %v, want outside", name, sample)
			}
		} else {
			near(t, name+": value", sample.Z, get("z_linear"), 1e-10*math.Abs(get("z_linear")))
		}
		gx, gy := s.Gradient(0)
		near(t, name+": slope", 100*Slope(gx, gy), get("slope_percent"), 1e-10*get("slope_percent"))
		if azimuth := DownhillAzimuth(gx, gy); row["aspect_downslope_azimuth_deg"] == "" {
			if !math.IsNaN(azimuth) {
				t.Errorf("%s: azimuth %v of a level triangle, want NaN", name, azimuth)
			}
		} else {
			want := get("aspect_downslope_azimuth_deg")
			near(t, name+": azimuth", azimuth, want, 1e-10*want)
		}
		near(t, name+": plan area", s.Area(), get("plan_area"), 1e-10*get("plan_area"))
		near(t, name+": surface area", s.SurfaceArea(), get("surface_area"), 1e-10*get("surface_area"))
	}
}

// TestPlaneIsReproduced: T1 of the trade's test vectors (z = 2 + 0.03 x - 0.02 y),
// slope 0.0360555, downhill azimuth 303.690 degrees.
func TestPlaneIsReproduced(t *testing.T) {
	f := func(x, y float64) float64 { return 2 + 0.03*x - 0.02*y }
	pts := pointsets.Uniform(3000, 1)
	for i := range pts {
		pts[i] = orb.Point{pts[i][0] * 100, pts[i][1] * 100}
	}
	s := surfaceOf(t, pts, heights(pts, f))
	sp := s.Sampler()
	for _, p := range pointsets.Uniform(3000, 2) {
		p = orb.Point{p[0]*96 + 2, p[1]*96 + 2}
		near(t, "value", sp.At(p).Z, f(p[0], p[1]), 1e-14)
	}
	gx, gy := s.Gradient(sp.At(orb.Point{50, 50}).Location.Triangle)
	near(t, "slope", Slope(gx, gy), 0.0360555, 5e-8)
	near(t, "azimuth", DownhillAzimuth(gx, gy), 303.690, 5e-4)

	// T2: heads 100, 99, 99 at (0,0), (100,0), (0,200).
	s = surfaceOf(t, []orb.Point{{0, 0}, {100, 0}, {0, 200}}, []float64{100, 99, 99})
	gx, gy = s.Gradient(0)
	near(t, "T2 gradient", Slope(gx, gy), 0.0111803, 5e-8)
	near(t, "T2 azimuth", DownhillAzimuth(gx, gy), 63.4349, 5e-5)
}

// TestExactAtTheReadings: P3. At every vertex the value is the reading bit for bit;
// -0 and the ends of the range among them.
func TestExactAtTheReadings(t *testing.T) {
	for _, d := range pointsets.All {
		pts := d.Points(3000, 3)
		r := rand.New(rand.NewPCG(9, 10))
		z := make([]float64, len(pts))
		for i := range z {
			z[i] = (r.Float64() - 0.5) * math.Pow(10, float64(r.IntN(20)-10))
		}
		z[0], z[1], z[2], z[3] = math.Copysign(0, -1), 1e60, -1e-60, 0.1
		m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
		if err != nil {
			t.Fatal(err)
		}
		first := m.Inputs()
		for i := range z { // one height a place
			z[i] = z[first[m.VertexOf(i)]]
		}
		s, err := FromInputs(m, z)
		if err != nil {
			t.Fatal(err)
		}
		sp := s.Sampler()
		for i, p := range pts {
			if got := sp.At(p); math.Float64bits(got.Z) != math.Float64bits(z[i]) || got.Location.Place != triangulate.OnVertex {
				t.Fatalf("%s: point %d: %v, want %x", d.Name, i, got, z[i])
			}
		}
	}
}

// TestEdgeDependsOnItsEndsOnly: the heights beside an edge, and which of its
// triangles owns a place, do not matter to a bit.
func TestEdgeDependsOnItsEndsOnly(t *testing.T) {
	pts := []orb.Point{{0, 0}, {30, 40}, {40, 0}, {-10, 40}}
	p := orb.Point{9, 12}
	want := surfaceOf(t, pts[:3], []float64{0.1, 0.7, 5}).Sampler().At(p)
	if want.Location.Place != triangulate.OnEdge {
		t.Fatalf("%v is not on an edge", p)
	}
	for _, z := range [][]float64{{0.1, 0.7, 5, 9}, {0.1, 0.7, -1e9, 3}, {0.1, 0.7, 1e-9, 1e30}} {
		got := surfaceOf(t, pts, z).Sampler().At(p)
		if got.Z != want.Z || got.Location.Place != triangulate.OnEdge {
			t.Errorf("heights %v: %v, want %v", z, got, want)
		}
	}
	// Either order of the ends, and the other way up.
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := FromInputs(m, []float64{0.1, 0.7, 5, 9})
	if err != nil {
		t.Fatal(err)
	}
	a, b := m.VertexOf(0), m.VertexOf(1)
	if s.ValueOnEdge(a, b, p) != want.Z || s.ValueOnEdge(b, a, p) != want.Z {
		t.Errorf("ValueOnEdge %v and %v, want %v", s.ValueOnEdge(a, b, p), s.ValueOnEdge(b, a, p), want.Z)
	}
}

// TestFreeOfOrder: P2. Shuffled input renumbers the mesh and changes no bit of any
// result.
func TestFreeOfOrder(t *testing.T) {
	for _, d := range pointsets.All {
		pts := d.Points(5000, 4)
		places := pointsets.Uniform(500, 5)
		b := orb.MultiPoint(pts).Bound()
		for i, p := range places {
			places[i] = orb.Point{b.Min[0] + p[0]*(b.Max[0]-b.Min[0]), b.Min[1] + p[1]*(b.Max[1]-b.Min[1])}
		}
		places = append(places, pts[:100]...)
		var want []float64
		for run := range 3 {
			pts := slices.Clone(pts)
			if run > 0 {
				pointsets.Shuffle(pts, uint64(run))
			}
			s := surfaceOf(t, pts, heights(pts, lumpy))
			samples, err := s.Query(context.Background(), places, run)
			if err != nil {
				t.Fatal(err)
			}
			v := s.Volumes(41)
			got := []float64{s.Area(), s.SurfaceArea(), s.VolumeAboveZero(), v.Above, v.Below, v.Net, v.AreaAbove, v.AreaBelow}
			for i, sample := range samples {
				got = append(got, sample.Z)
				if sample.Location.Place != triangulate.Outside {
					gx, gy := s.Gradient(sample.Location.Triangle)
					_, w := s.Weights(sample.Location, places[i])
					got = append(got, gx, gy, w[0], w[1], w[2])
				}
			}
			if run == 0 {
				want = got
				continue
			}
			for i := range want {
				if math.Float64bits(got[i]) != math.Float64bits(want[i]) {
					t.Fatalf("%s, shuffle %d: number %d is %x, was %x", d.Name, run, i, got[i], want[i])
				}
			}
		}
	}
}

// TestWeightsExplainTheValue: weights at vertices and on edges, and that they give
// the value.
func TestWeightsExplainTheValue(t *testing.T) {
	pts := pointsets.UnitLattice(400, 1)
	s := surfaceOf(t, pts, heights(pts, lumpy))
	sp := s.Sampler()
	seen := map[triangulate.Place]bool{}
	for _, p := range []orb.Point{{3, 4}, {3.5, 4}, {3, 4.25}, {3.5, 4.5}, {3.2, 4.1}, {3.75, 4.75}, {-5, 0}} {
		sample := sp.At(p)
		seen[sample.Location.Place] = true
		corners, w := s.Weights(sample.Location, p)
		if sample.Location.Place == triangulate.Outside {
			if corners[0] != triangulate.NoVertex || !math.IsNaN(w[0]) {
				t.Errorf("weights outside: %v %v, want none", corners, w)
			}
			continue
		}
		var x, y, z float64
		for n, v := range corners {
			q := s.Mesh().Position(v)
			x, y, z = x+w[n]*q[0], y+w[n]*q[1], z+w[n]*s.Z()[v]
		}
		near(t, "x of the weights", x, p[0], 1e-14)
		near(t, "y of the weights", y, p[1], 1e-14)
		near(t, "value of the weights", z, sample.Z, 1e-13)
		near(t, "sum of weights", w[0]+w[1]+w[2], 1, 1e-15)
		zeros := 0
		for _, x := range w {
			if x == 0 {
				zeros++
			}
		}
		if want := map[triangulate.Place]int{triangulate.OnVertex: 2, triangulate.OnEdge: 1}[sample.Location.Place]; zeros != want {
			t.Errorf("%v: weights %v: %d zeros, want %d", p, w, zeros, want)
		}
	}
	if len(seen) != 4 {
		t.Errorf("places seen: %v, want all four", seen)
	}
}

// TestRunsAreAt: runs of any length give the bits of one by one, on all kinds, and
// touch nothing beside them.
func TestRunsAreAt(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	const triangles = 4000
	far, gentle := 0, 0
	for range triangles {
		c, kind := someTriangle(r)
		z := someHeights(r)
		if r.IntN(2) == 0 {
			for i := range z {
				z[i] = 100 + z[i]/64
			}
		}
		plane := oneTriangle(t, c, z).Plane(0)
		if !plane.near {
			far++
		}
		if plane.gentle {
			gentle++
		}
		u, v := (c[0][0]+c[1][0]+c[2][0])/3, (c[0][1]+c[1][1]+c[2][1])/3
		xs := []float64{c[0][0], c[1][0], u, c[2][0], u, c[1][0]}
		ys := []float64{c[0][1], v, c[2][1]}
		dst := make([]float64, len(xs)*len(ys)+2)
		for i := range dst {
			dst[i] = math.Inf(1)
		}
		var runs []Run
		for row := range ys {
			col := r.IntN(len(xs))
			n := 1 + r.IntN(len(xs)-col)
			runs = append(runs, Run{Row: int32(row), Col: int32(col), N: int32(n), Into: int32(1 + row*len(xs) + col)})
		}
		plane.Runs(dst, xs, ys, runs)
		written := 0
		for _, run := range runs {
			for n := range run.N {
				got, at := dst[run.Into+n], plane.At(xs[run.Col+n], ys[run.Row])
				if math.Float64bits(at) != math.Float64bits(got) {
					t.Fatalf("%s: Runs %x, At %x", kind, got, at)
				}
				dst[run.Into+n] = math.Inf(1)
				written++
			}
		}
		for i := range dst {
			if !math.IsInf(dst[i], 1) {
				t.Fatalf("%s: value %d was written and is in no run", kind, i)
			}
		}
		// near is a short cut and no other method.
		if plane.near && !plane.gentle {
			general := plane
			general.near = false
			if a, b := plane.At(u, v), general.At(u, v); a != b {
				t.Fatalf("%s: %x with exact differences, %x in general", kind, a, b)
			}
		}
	}
	for what, n := range map[string]int{"far": far, "near": triangles - far, "gentle": gentle, "not gentle": triangles - gentle} {
		if n < triangles/50 {
			t.Errorf("%d of %d triangles were %s: that way is not tested", n, triangles, what)
		}
	}
}

// TestManyValueSets: two sets of values on one mesh do not disturb each other.
func TestManyValueSets(t *testing.T) {
	pts := pointsets.Uniform(1000, 6)
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	var sets [2]*Surface
	for i := range sets {
		z := make([]float64, m.NumVertices())
		for v := range z {
			z[v] = float64(i*1000 + v)
		}
		if sets[i], err = New(m, z); err != nil {
			t.Fatal(err)
		}
	}
	for _, p := range pointsets.Uniform(200, 7) {
		a, b := sets[0].Sampler().At(p), sets[1].Sampler().At(p)
		if a.Location != b.Location {
			t.Fatalf("locations %v and %v", a.Location, b.Location)
		}
		if a.Location.Place != triangulate.Outside {
			near(t, "difference of the sets", b.Z-a.Z, 1000, 1e-9)
		}
	}
}

func TestRefusals(t *testing.T) {
	pts := []orb.Point{{0, 0}, {1, 0}, {0, 1}, {1, 0}}
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	cases := []struct {
		name string
		err  func() error
		want string
	}{
		{"too few for vertices", func() error { _, err := New(m, []float64{1, 2}); return err },
			"2 values: expected one per vertex, 3"},
		{"too few for inputs", func() error { _, err := FromInputs(m, []float64{1, 2, 3}); return err },
			"3 values: expected one per input point, 4"},
		{"not a number", func() error { _, err := New(m, []float64{1, math.NaN(), 3}); return err },
			"value 1 is NaN: expected 0 or a number from 1e-60 to 1e60 in size"},
		{"too large", func() error { _, err := FromInputs(m, []float64{1, 2, -2e60, 2}); return err },
			"value 2 is -2e+60: expected 0 or a number from 1e-60 to 1e60 in size"},
		{"two heights at one place", func() error { _, err := FromInputs(m, []float64{1, 2, 3, 2.5}); return err },
			"points 1 and 3 at (1, 0) have values 2 and 2.5: expected one value at one place"},
	}
	for _, c := range cases {
		if err := c.err(); err == nil || err.Error() != c.want {
			t.Errorf("%s: %v, want %s", c.name, err, c.want)
		}
	}
	var spot *SameSpotError
	if _, err := FromInputs(m, []float64{1, 2, 3, 4}); !errors.As(err, &spot) || spot.First != 1 || spot.Second != 3 {
		t.Errorf("%v, want a SameSpotError for points 1 and 3", err)
	}
	if _, err := FromInputs(m, []float64{1, 2, 3, 2}); err != nil {
		t.Errorf("equal heights at one place: %v, want none", err)
	}
}

// TestNoSurface: meshes without triangles have no value anywhere and no area.
func TestNoSurface(t *testing.T) {
	for _, pts := range [][]orb.Point{nil, {{1, 2}}, {{0, 0}, {1, 1}, {2, 2}}} {
		s := surfaceOf(t, pts, heights(pts, lumpy))
		if got := s.Sampler().At(orb.Point{1, 2}); !math.IsNaN(got.Z) || got.Location.Place != triangulate.Outside {
			t.Errorf("%d points: %v, want outside", len(pts), got)
		}
		if samples, err := s.Query(context.Background(), []orb.Point{{1, 2}, {0, 0}}, 2); err != nil || !math.IsNaN(samples[1].Z) {
			t.Errorf("%d points: %v, %v, want outside", len(pts), samples, err)
		}
		if s.Area() != 0 || s.SurfaceArea() != 0 || s.VolumeAboveZero() != 0 || s.Volumes(3) != (Volumes{}) {
			t.Errorf("%d points: areas or volumes are not 0", len(pts))
		}
	}
}
