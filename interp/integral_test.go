package interp

import (
	"math"
	"math/big"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate/pointsets"
)

// TestSolids: volumes of solids by the formulas of elementary geometry; T3, T4 and
// T5 of the trade's test vectors.
func TestSolids(t *testing.T) {
	pyramid := func(base, apex float64) *Surface {
		return surfaceOf(t, []orb.Point{{0, 0}, {base, 0}, {base, base}, {0, base}, {base / 2, base / 2}}, []float64{0, 0, 0, 0, apex})
	}
	near(t, "pyramid, base 20, apex 6: base x height / 3", pyramid(20, 6).VolumeAboveZero(), 800, 1e-12)
	near(t, "the same above 3", pyramid(20, 6).VolumeAbove(3), 100, 1e-12)
	near(t, "pyramid, base 10", pyramid(10, 6).VolumeAboveZero(), 200, 1e-12)
	near(t, "its surface: 4 triangles of height sqrt(61)", pyramid(10, 6).SurfaceArea(), 20*math.Sqrt(61), 1e-12)

	tilted := surfaceOf(t, []orb.Point{{-50, 0}, {50, 0}, {50, 50}, {-50, 50}}, []float64{-5, 5, 5, -5})
	v := tilted.Volumes(0)
	if v != (Volumes{Above: 6250, Below: 6250, AreaAbove: 2500, AreaBelow: 2500}) {
		t.Errorf("plane z = 0.1 x over 100 x 50: %+v, want 6250 and 6250", v)
	}
	if got := tilted.VolumeAboveZero(); got != 0 {
		t.Errorf("its integral: %v, want 0", got)
	}

	frustum := surfaceOf(t, []orb.Point{{0, 0}, {20, 0}, {20, 20}, {0, 20}, {6, 6}, {14, 6}, {14, 14}, {6, 14}}, []float64{0, 0, 0, 0, 5, 5, 5, 5})
	near(t, "frustum: h/3 (A1 + A2 + sqrt(A1 A2))", frustum.VolumeAboveZero(), 1040, 1e-11)
	near(t, "its surface", frustum.SurfaceArea(), 501.373981851, 1e-9)
	if v := frustum.Volumes(5); v.Above != 0 || v.AreaAbove != 64 {
		t.Errorf("frustum at the level of its top: %+v, want no volume but the area 64 above", v)
	}
}

// TestPlaneOverRectangle: testdata/plane_over_rectangle.csv (exact integrals).
func TestPlaneOverRectangle(t *testing.T) {
	rows := table(t, "testdata/plane_over_rectangle.csv")
	if len(rows) != 3 {
		t.Fatalf("%d rows, want 3", len(rows))
	}
	for _, row := range rows {
		get := func(name string) float64 { return number(t, row[name]) }
		pts := []orb.Point{{0, 0}, {get("width_x"), 0}, {get("width_x"), get("height_y")}, {0, get("height_y")}}
		s := surfaceOf(t, pts, heights(pts, func(x, y float64) float64 {
			return get("z_at_origin") + get("dz_dx")*x + get("dz_dy")*y
		}))
		v := s.Volumes(get("level"))
		name := row["case"]
		tol := 1e-9 * (v.Above + v.Below)
		near(t, name+": above", v.Above, get("volume_above_level(cut)"), tol)
		near(t, name+": below", v.Below, get("volume_below_level(fill)"), tol)
		near(t, name+": net", v.Net, get("net"), tol)
		near(t, name+": area above", v.AreaAbove, get("plan_area_above"), 1e-9*s.Area())
		if s.VolumeAbove(get("level")) != v.Above || s.VolumeBelow(get("level")) != v.Below {
			t.Errorf("%s: VolumeAbove, VolumeBelow differ from Volumes", name)
		}
	}
}

// TestCurvedSurfaces: testdata/curved_surfaces.csv, the column of the diagonals that
// the tie rule picks. (Franke's function 1 as in its report.)
func TestCurvedSurfaces(t *testing.T) {
	functions := map[string]func(x, y float64) float64{
		"paraboloid": func(x, y float64) float64 { return 1 - (x-0.5)*(x-0.5) - (y-0.5)*(y-0.5) },
		"sine":       func(x, y float64) float64 { return 2 + math.Sin(math.Pi*x)*math.Sin(math.Pi*y) },
		"franke1": func(x, y float64) float64 {
			sq := func(v float64) float64 { return v * v }
			return 0.75*math.Exp(-(sq(9*x-2)+sq(9*y-2))/4) + 0.75*math.Exp(-sq(9*x+1)/49-(9*y+1)/10) +
				0.5*math.Exp(-(sq(9*x-7)+sq(9*y-3))/4) - 0.2*math.Exp(-sq(9*x-4)-sq(9*y-7))
		},
	}
	rows := table(t, "testdata/curved_surfaces.csv")
	if len(rows) != 15 {
		t.Fatalf("%d rows, want 15", len(rows))
	}
	for _, row := range rows {
		n := int(number(t, row["n_per_side"]))
		var pts []orb.Point
		for i := range n {
			for j := range n {
				pts = append(pts, orb.Point{float64(i) / float64(n-1), float64(j) / float64(n-1)})
			}
		}
		s := surfaceOf(t, pts, heights(pts, functions[row["surface"]]))
		want := number(t, row["triangulated_diagonal_NW_SE"])
		near(t, row["surface"]+" "+row["n_per_side"], s.VolumeAboveZero(), want, 1e-9*want)
	}
}

// TestReferenceSurveys: areas, volumes and values of the open survey sets, by
// rational arithmetic on their decimals. Tolerances as stated there: 1e-9 relative,
// 1e-9 x (1 + height range) for values; the volume of camg is known to 1e-5, because
// of a cocircular quadrilateral.
func TestReferenceSurveys(t *testing.T) {
	columns := map[string][3]string{
		"topo":     {"x_50ft", "y_50ft", "z_ft"},
		"akima50":  {"x", "y", "z"},
		"wolfcamp": {"x_km", "y_km", "head_m"},
		"meuse":    {"x_m_RD", "y_m_RD", "elev_m_above_local_river_bed"},
		"camg":     {"east_m", "north_m", "elevation_m"},
	}
	for _, summary := range reference(t, "datasets/mesh_summary.csv") {
		name := summary["dataset"]
		cols := columns[name]
		var pts []orb.Point
		var z []float64
		for _, row := range reference(t, "datasets/"+name+"_points.csv") {
			pts = append(pts, orb.Point{number(t, row[cols[0]]), number(t, row[cols[1]])})
			z = append(z, number(t, row[cols[2]]))
		}
		s := surfaceOf(t, pts, z)
		get := func(col string) float64 { return number(t, summary[col]) }
		if got, want := s.Mesh().NumTriangles(), int(get("triangles")); got != want {
			t.Errorf("%s: %d triangles, want %d", name, got, want)
		}
		loose := 1e-9
		if name == "camg" {
			loose = 1e-5
		}
		near(t, name+": area", s.Area(), get("hull_area_unit2"), 1e-9*s.Area())
		near(t, name+": volume", s.VolumeAboveZero(), get("volume_under_surface_to_z0_unit3"), loose*s.VolumeAboveZero())
		near(t, name+": mean height", s.VolumeAboveZero()/s.Area(), get("mean_height_unit"), loose*get("mean_height_unit"))
		near(t, name+": surface area", s.SurfaceArea(), get("surface_area_3d_unit2"), loose*s.SurfaceArea())

		sp := s.Sampler()
		tol := 1e-9 * (1 + get("z_max") - get("z_min"))
		queries := reference(t, "datasets/"+name+"_queries.csv")
		for _, q := range queries {
			got := sp.At(orb.Point{number(t, q["x"]), number(t, q["y"])})
			if q["z_linear"] == "outside" {
				if !math.IsNaN(got.Z) {
					t.Errorf("%s at %s, %s: %v, want outside", name, q["x"], q["y"], got.Z)
				}
				continue
			}
			near(t, name+" at "+q["x"]+", "+q["y"], got.Z, number(t, q["z_linear"]), tol)
		}
		if len(queries) < 20 {
			t.Errorf("%s: %d queries, want at least 20", name, len(queries))
		}
		for _, row := range reference(t, "datasets/"+name+"_isolines.csv") {
			v := s.Volumes(number(t, row["level"]))
			at := func(prefix string) float64 {
				for col, x := range row {
					if strings.HasPrefix(col, prefix) {
						return number(t, x)
					}
				}
				t.Fatalf("%s_isolines.csv has no column %s", name, prefix)
				return 0
			}
			what := name + " at level " + row["level"] + ": "
			tol := max(1e-9, loose) * (v.Above + v.Below)
			near(t, what+"volume above", v.Above, at("volume_above"), tol)
			near(t, what+"volume below", v.Below, at("volume_below"), tol)
			near(t, what+"area above", v.AreaAbove, at("plan_area_above"), loose*s.Area())
			near(t, what+"area below", v.AreaBelow, at("plan_area_below"), loose*s.Area())
		}
	}
}

// TestCutAgainstRationals: one triangle and one level, against the integral by the
// definition: the positive part of a plane over a triangle, cut into triangles at
// the level in rational arithmetic. Levels that take off next to nothing, or pass
// through corners, are among them.
func TestCutAgainstRationals(t *testing.T) {
	r := rand.New(rand.NewPCG(17, 18))
	worst := 0.0
	check := func(what string, got float64, want *big.Rat) {
		t.Helper()
		if want.Sign() == 0 || got == 0 {
			if got != 0 || want.Sign() != 0 {
				t.Fatalf("%s: %v, want %s", what, got, want.FloatString(30))
			}
			return
		}
		e := new(big.Rat).Sub(rat(got), want)
		rel, _ := e.Quo(e, want).Float64()
		worst = max(worst, math.Abs(rel))
	}
	for range cases(4000) {
		c, _ := someTriangle(r)
		z := someHeights(r)
		level := z[r.IntN(3)]
		switch r.IntN(3) {
		case 0:
			level = math.Nextafter(level, math.Inf(1-2*r.IntN(2)))
		case 1:
			level = z[0] + r.Float64()*(z[1]-z[0])
		}
		v := oneTriangle(t, c, z).Volumes(level)
		above, areaAbove := ratAbove(c, z, level, 1)
		below, areaBelow := ratAbove(c, z, level, -1)
		check("above", v.Above, above)
		check("below", v.Below, below)
		// The area at the level itself is nothing, or the whole triangle, which counts
		// as above.
		if z[0] == level && z[1] == level && z[2] == level {
			areaAbove = new(big.Rat).Mul(ratArea2(c[0], c[1], c[2]), big.NewRat(1, 2))
		}
		check("area above", v.AreaAbove, areaAbove)
		check("area below", v.AreaBelow, areaBelow)
	}
	t.Logf("largest relative error %.2f x 2^-53", worst*(1<<53))
	if worst > 0x1p-48 {
		t.Errorf("largest relative error %g, want below 2^-48", worst)
	}
}

// ratAbove is the integral of the positive part of sign (z - level) over the
// triangle, and the area where it is positive: the triangle cut by the level into
// a fan, Sutherland and Hodgman's way.
func ratAbove(c [3]orb.Point, z [3]float64, level float64, sign int64) (volume, area *big.Rat) {
	type vertex struct{ x, y, h *big.Rat }
	var in, out []vertex
	for i := range 3 {
		h := new(big.Rat).Sub(rat(z[i]), rat(level))
		in = append(in, vertex{rat(c[i][0]), rat(c[i][1]), h.Mul(h, big.NewRat(sign, 1))})
	}
	for i, a := range in {
		b := in[(i+1)%3]
		if a.h.Sign() >= 0 {
			out = append(out, a)
		}
		if a.h.Sign()*b.h.Sign() < 0 {
			u := new(big.Rat).Quo(a.h, new(big.Rat).Sub(a.h, b.h))
			mix := func(p, q *big.Rat) *big.Rat {
				d := new(big.Rat).Sub(q, p)
				return d.Add(p, d.Mul(d, u))
			}
			out = append(out, vertex{mix(a.x, b.x), mix(a.y, b.y), new(big.Rat)})
		}
	}
	volume, area = new(big.Rat), new(big.Rat)
	for i := 1; i+1 < len(out); i++ {
		p, q, s := out[0], out[i], out[i+1]
		sub := func(a, b *big.Rat) *big.Rat { return new(big.Rat).Sub(a, b) }
		d := new(big.Rat).Mul(sub(q.x, p.x), sub(s.y, p.y))
		d.Sub(d, new(big.Rat).Mul(sub(q.y, p.y), sub(s.x, p.x)))
		d.Quo(d, big.NewRat(2, 1))
		mean := new(big.Rat).Add(p.h, q.h)
		mean.Add(mean, s.h).Quo(mean, big.NewRat(3, 1))
		if mean.Sign() > 0 {
			area.Add(area, d)
			volume.Add(volume, mean.Mul(mean, d))
		}
	}
	return volume, area
}

// TestVolumesBalance: above less below is the integral less level times area, and
// the parts of the area make the whole: P7 on every distribution.
func TestVolumesBalance(t *testing.T) {
	for _, d := range pointsets.All {
		pts := d.Points(4000, 8)
		b := orb.MultiPoint(pts).Bound()
		s := surfaceOf(t, pts, heights(pts, func(x, y float64) float64 {
			return lumpy((x-b.Min[0])/(b.Max[0]-b.Min[0]), (y-b.Min[1])/(b.Max[1]-b.Min[1]))
		}))
		area := s.Area()
		for _, level := range []float64{0, 35, 41, 44.5, 100} {
			v := s.Volumes(level)
			tol := 1e-13 * area * 100
			near(t, d.Name+": net", v.Net, s.VolumeAboveZero()-level*area, tol)
			near(t, d.Name+": net", v.Net, v.Above-v.Below, tol)
			near(t, d.Name+": area", v.AreaAbove+v.AreaBelow, area, 1e-14*area)
		}
	}
}

// TestLatticeArea: T10 of the trade's test vectors, in small: the exact area of a
// unit lattice at 6e6.
func TestLatticeArea(t *testing.T) {
	var pts []orb.Point
	for i := range 100 {
		for j := range 100 {
			pts = append(pts, orb.Point{6e6 + float64(i), 6e6 + float64(j)})
		}
	}
	s := surfaceOf(t, pts, make([]float64, len(pts)))
	if got := s.Area(); got != 9801 {
		t.Errorf("plan area %v, want 9801 exactly", got)
	}
	if got := s.SurfaceArea(); got != 9801 {
		t.Errorf("surface area %v, want 9801 exactly", got)
	}
}
