package flow

import (
	"context"
	"encoding/csv"
	"errors"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/paulmach/orb"
	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat"

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

// threeWells are the three-well cases. Heath 1983 (from memory), an EPA training page, a
// textbook exercise and a course handout, solved with rational arithmetic; T2 of the
// trade's list of numbers.
var threeWells = []struct {
	name          string
	at            []orb.Point
	head          []float64
	dx, dy        float64
	size, azimuth float64
}{
	{"Heath 1983", []orb.Point{{0, 0}, {165, 0}, {154.3939394, 149.6245684}}, []float64{26.26, 26.20, 26.07}, -0.000363636364, -0.000894617446, 0.000965697561, 22.1203335},
	{"EPA training W1 W2 W7", []orb.Point{{190, 163}, {138, 153}, {217, 43}}, []float64{90.24, 90.27, 90.01}, -0.000906298003, 0.00171274962, 0.00193775316, 152.114535},
	{"right triangle of 100 m", []orb.Point{{0, 0}, {100, 0}, {100, 100}}, []float64{-10, -10.2, -10.1}, -0.002, 0.001, 0.00223606798, 116.565051},
	{"three points of a bed", []orb.Point{{0, 0}, {-3774.069899, -1601.997627}, {-1594.527691, -4907.451624}}, []float64{700, 500, 200}, 0.0113042918, 0.0982128874, 0.0988613082, 186.565845},
	{"T2", []orb.Point{{0, 0}, {100, 0}, {0, 200}}, []float64{100, 99, 99}, -0.01, -0.005, 0.0111803399, 63.4349488},
}

func near(got, want, relative float64) bool { return math.Abs(got-want) <= relative*math.Abs(want) }

// Every published three-well case, from the triangle and as a fitted plane.
func TestThreeWells(t *testing.T) {
	for _, c := range threeWells {
		s := surface(t, c.at, c.head)
		x := Solve(s, 0, 0.01)
		p, err := Fit(c.at, c.head, 0.01)
		if err != nil {
			t.Fatal(err)
		}
		for name, g := range map[string]Gradient{"triangle": x.Gradient, "plane": p.Gradient} {
			if !near(g.DzDx, c.dx, 1e-8) || !near(g.DzDy, c.dy, 1e-8) || !near(g.Size(), c.size, 1e-8) || !near(g.Azimuth(), c.azimuth, 1e-8) {
				t.Errorf("%s, %s: %v, %v, size %v, azimuth %v", c.name, name, g.DzDx, g.DzDy, g.Size(), g.Azimuth())
			}
		}
		if a, b := x.Gradient, p.Gradient; !near(a.SizeSigma(), b.SizeSigma(), 1e-9) || !near(a.AzimuthSigma(), b.AzimuthSigma(), 1e-9) || !near(x.Across, p.Across, 1e-9) {
			t.Errorf("%s: triangle %v ± %v, %v across; plane %v ± %v, %v", c.name, a.SizeSigma(), a.AzimuthSigma(), x.Across, b.SizeSigma(), b.AzimuthSigma(), p.Across)
		}
		if !math.IsNaN(p.Misfit) || math.Abs(p.WorstResidual) > 1e-12*700 {
			t.Errorf("%s: three wells: misfit %v, worst %v", c.name, p.Misfit, p.WorstResidual)
		}
	}
	// Heath's own graphical answer: 0.13 m in 133 m, measured on paper: 2 percent.
	if !near(threeWells[0].size, 0.13/133, 0.02) {
		t.Error("far from the graphical answer")
	}
}

// The reference folder's table of the same, as far as it can be had.
func TestReferenceTables(t *testing.T) {
	dir := os.Getenv("ISOFACET_REFERENCE")
	if dir == "" {
		t.Skip("ISOFACET_REFERENCE is not set: no reference tables")
	}
	rows := func(name string) []map[string]string {
		f, err := os.Open(filepath.Join(dir, name))
		if err != nil {
			t.Fatal(err)
		}
		defer f.Close()
		all, err := csv.NewReader(f).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		var out []map[string]string
		for _, r := range all[1:] {
			m := map[string]string{}
			for i, name := range all[0] {
				m[name] = r[i]
			}
			out = append(out, m)
		}
		return out
	}
	num := func(text string) float64 {
		v, err := strconv.ParseFloat(text, 64)
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
	at, head := map[string][]orb.Point{}, map[string][]float64{}
	for _, r := range rows("groundwater/three_point_inputs.csv") {
		at[r["case"]] = append(at[r["case"]], orb.Point{num(r["x"]), num(r["y"])})
		head[r["case"]] = append(head[r["case"]], num(r["head_or_elevation"]))
	}
	n := 0
	for _, r := range rows("groundwater/three_point_results.csv") {
		p, err := Fit(at[r["case"]], head[r["case"]], math.NaN())
		if err != nil {
			t.Fatal(err)
		}
		n++
		if !near(p.Gradient.Size(), num(r["gradient_magnitude"]), 1e-8) || !near(p.Gradient.Azimuth(), num(r["downslope_azimuth_deg_clockwise_from_north"]), 1e-8) {
			t.Errorf("%s: %v, %v", r["case"], p.Gradient.Size(), p.Gradient.Azimuth())
		}
	}
	if n != 4 {
		t.Errorf("%d cases, want 4", n)
	}
	var pts []orb.Point
	var z []float64
	for _, r := range rows("datasets/wolfcamp_points.csv") {
		var xy [3]float64
		k := 0
		for _, name := range []string{"x_km", "y_km", "head_m"} {
			if _, ok := r[name]; !ok {
				t.Fatalf("no column %s in %v", name, r)
			}
			xy[k] = num(r[name])
			k++
		}
		pts, z = append(pts, orb.Point{xy[0], xy[1]}), append(z, xy[2])
	}
	p, err := Fit(pts, z, math.NaN())
	if err != nil {
		t.Fatal(err)
	}
	r := rows("groundwater/best_fit_plane.csv")[0]
	for name, got := range map[string]float64{"dh_dx": p.Gradient.DzDx, "dh_dy": p.Gradient.DzDy, "gradient_magnitude": p.Gradient.Size(), "downslope_azimuth_deg": p.Gradient.Azimuth(), "rms_residual": p.RMS} {
		if !near(got, num(r[name]), 1e-8) && !near(got, num(r[name]), 5e-7) {
			t.Errorf("best fit plane: %s %v, want %s", name, got, r[name])
		}
	}
}

// The fit and its covariance are those of gonum's QR decomposition.
func TestFitAgainstQR(t *testing.T) {
	r := rand.New(rand.NewPCG(81, 82))
	for range 200 {
		n := 4 + r.IntN(30)
		origin := orb.Point{5e5 * r.Float64(), 6e6 * r.Float64()}
		pts, z := make([]orb.Point, n), make([]float64, n)
		x := mat.NewDense(n, 3, nil)
		y := mat.NewVecDense(n, nil)
		for i := range pts {
			pts[i] = orb.Point{origin[0] + 400*r.Float64(), origin[1] + 300*r.Float64()}
			z[i] = 100 - 0.003*(pts[i][0]-origin[0]) + 0.001*(pts[i][1]-origin[1]) + 0.1*r.NormFloat64()
			x.SetRow(i, []float64{1, pts[i][0] - origin[0], pts[i][1] - origin[1]})
			y.SetVec(i, z[i])
		}
		p, err := Fit(pts, z, 5)
		if err != nil {
			t.Fatal(err)
		}
		var qr mat.QR
		qr.Factorize(x)
		var b mat.VecDense
		if err := qr.SolveVecTo(&b, false, y); err != nil {
			t.Fatal(err)
		}
		var xtx, inv mat.Dense
		xtx.Mul(x.T(), x)
		if err := inv.Inverse(&xtx); err != nil {
			t.Fatal(err)
		}
		var res mat.VecDense
		res.MulVec(x, &b)
		res.SubVec(y, &res)
		rss := mat.Dot(&res, &res)
		for _, c := range []struct {
			name      string
			got, want float64
		}{
			{"dz/dx", p.Gradient.DzDx, b.AtVec(1)}, {"dz/dy", p.Gradient.DzDy, b.AtVec(2)},
			{"var x", p.Gradient.VarX, 25 * inv.At(1, 1)}, {"var y", p.Gradient.VarY, 25 * inv.At(2, 2)},
			{"misfit", p.Misfit, math.Sqrt(rss / float64(n-3))}, {"RMS", p.RMS, math.Sqrt(rss / float64(n))},
		} {
			if !near(c.got, c.want, 1e-9) {
				t.Errorf("%s: %v, want %v", c.name, c.got, c.want)
			}
		}
		if math.Abs(p.Gradient.Cov-25*inv.At(1, 2)) > 1e-9*math.Sqrt(p.Gradient.VarX*p.Gradient.VarY) {
			t.Errorf("covariance %v, want %v", p.Gradient.Cov, 25*inv.At(1, 2))
		}
		// Any order, the same bits.
		r.Shuffle(n, func(i, k int) { pts[i], pts[k] = pts[k], pts[i]; z[i], z[k] = z[k], z[i] })
		q, err := Fit(pts, z, 5)
		if err != nil {
			t.Fatal(err)
		}
		if q.Gradient != p.Gradient || q.Misfit != p.Misfit || q.Across != p.Across || q.WorstResidual != p.WorstResidual {
			t.Errorf("another order: %+v, want %+v", q, p)
		}
	}
}

// Must show: a turned, shifted, scaled site turns its azimuth by the angle, to 1e-9.
func TestTurnedSite(t *testing.T) {
	r := rand.New(rand.NewPCG(83, 84))
	for range 300 {
		n := 3 + r.IntN(12)
		pts, turned, z := make([]orb.Point, n), make([]orb.Point, n), make([]float64, n)
		angle := 360 * r.Float64() // clockwise
		sin, cos := math.Sincos(angle * math.Pi / 180)
		scale, dx, dy := 0.25+4*r.Float64(), 1000*r.Float64(), -2000*r.Float64()
		for i := range pts {
			pts[i] = orb.Point{300 * r.Float64(), 300 * r.Float64()}
			z[i] = 50 + 0.02*pts[i][0] - 0.05*pts[i][1] + 0.2*r.Float64()
			turned[i] = orb.Point{dx + scale*(cos*pts[i][0]+sin*pts[i][1]), dy + scale*(cos*pts[i][1]-sin*pts[i][0])}
		}
		p, err := Fit(pts, z, 0.01)
		if err != nil {
			t.Fatal(err)
		}
		q, err := Fit(turned, z, 0.01)
		if err != nil {
			t.Fatal(err)
		}
		if p.Across < 0.2 { // an ill-conditioned site magnifies the rounding of its places
			continue
		}
		off := math.Mod(q.Gradient.Azimuth()-p.Gradient.Azimuth()-angle+720+180, 360) - 180
		if math.Abs(off) > 1e-9 {
			t.Errorf("turned by %v, azimuth from %v to %v: off by %v", angle, p.Gradient.Azimuth(), q.Gradient.Azimuth(), off)
		}
		if !near(q.Gradient.Size(), p.Gradient.Size()/scale, 1e-11) || !near(q.Gradient.AzimuthSigma(), p.Gradient.AzimuthSigma(), 1e-9) {
			t.Errorf("scaled by %v: %v ± %v, before %v ± %v", scale, q.Gradient.Size(), q.Gradient.AzimuthSigma(), p.Gradient.Size(), p.Gradient.AzimuthSigma())
		}
	}
}

// Heads of unlike uncertainty: the covariance is that of draws, and of three wells both
// ways to it agree.
func TestFitEach(t *testing.T) {
	at := []orb.Point{{0, 0}, {120, 10}, {40, 150}, {130, 140}, {60, 70}}
	sigmas := []float64{0.05, 0.01, 0.02, 0.1, 0.03}
	exact := make([]float64, len(at))
	for i, p := range at {
		exact[i] = 100 - 0.02*p[0] + 0.01*p[1]
	}
	p, err := FitEach(at, exact, sigmas)
	if err != nil || p.FromMisfit || !near(p.Sigma, math.Sqrt((0.0025+0.0001+0.0004+0.01+0.0009)/5), 1e-12) {
		t.Fatalf("%+v, %v", p, err)
	}
	r := rand.New(rand.NewPCG(6, 7))
	var xs, ys []float64
	for range 20_000 {
		z := make([]float64, len(at))
		for i := range z {
			z[i] = exact[i] + sigmas[i]*r.NormFloat64()
		}
		q, err := Fit(at, z, math.NaN())
		if err != nil {
			t.Fatal(err)
		}
		xs, ys = append(xs, q.Gradient.DzDx), append(ys, q.Gradient.DzDy)
	}
	g := p.Gradient
	if !near(stat.Variance(xs, nil), g.VarX, 0.05) || !near(stat.Variance(ys, nil), g.VarY, 0.05) || math.Abs(stat.Covariance(xs, ys, nil)-g.Cov) > 0.05*math.Sqrt(g.VarX*g.VarY) {
		t.Errorf("draws %v %v %v, want %+v", stat.Variance(xs, nil), stat.Variance(ys, nil), stat.Covariance(xs, ys, nil), g)
	}
	s := surface(t, at[:3], exact[:3])
	byVertex := make([]float64, 3)
	for v, i := range s.Mesh().Inputs() {
		byVertex[v] = sigmas[i]
	}
	plane, err := FitEach(at[:3], exact[:3], sigmas[:3])
	x := SolveEach(s, 0, byVertex)
	if err != nil || !near(x.Gradient.VarX, plane.Gradient.VarX, 1e-9) || !near(x.Gradient.VarY, plane.Gradient.VarY, 1e-9) || !near(x.Gradient.Cov, plane.Gradient.Cov, 1e-9) {
		t.Errorf("three wells: %+v, plane %+v, %v", x.Gradient, plane.Gradient, err)
	}
}

// Must show: 20,000 seeded draws agree with the delta method within 3 percent where
// noise is small.
func TestDrawsAgreeWithDelta(t *testing.T) {
	const draws = 20_000
	for _, c := range threeWells {
		r := rand.New(rand.NewPCG(85, 86))
		low, high := c.head[0], c.head[0]
		for _, z := range c.head {
			low, high = min(low, z), max(high, z)
		}
		sigma := (high - low) / 100
		p, err := Fit(c.at, c.head, sigma)
		if err != nil {
			t.Fatal(err)
		}
		sizes, azimuths := make([]float64, draws), make([]float64, draws)
		z := make([]float64, len(c.head))
		for i := range draws {
			for k := range z {
				z[k] = c.head[k] + sigma*r.NormFloat64()
			}
			q, err := Fit(c.at, z, sigma)
			if err != nil {
				t.Fatal(err)
			}
			sizes[i] = q.Gradient.Size()
			azimuths[i] = math.Mod(q.Gradient.Azimuth()-p.Gradient.Azimuth()+540, 360)
		}
		if got, want := stat.StdDev(sizes, nil), p.Gradient.SizeSigma(); !near(got, want, 0.03) {
			t.Errorf("%s: gradient: draws %v, delta method %v", c.name, got, want)
		}
		if got, want := stat.StdDev(azimuths, nil), p.Gradient.AzimuthSigma(); !near(got, want, 0.03) {
			t.Errorf("%s: azimuth: draws %v, delta method %v", c.name, got, want)
		}
	}
}

// The rule of the trade: an equilateral triangle of side L gives each component of the
// slope s √2/L.
func TestEquilateral(t *testing.T) {
	for _, c := range []struct{ sigma, side, slope, degrees float64 }{{0.01, 50, 0.002, 8}, {0.02, 50, 0.002, 16}, {0.01, 300, 0.002, 1.4}} {
		at := []orb.Point{{0, 0}, {c.side, 0}, {c.side / 2, c.side * math.Sqrt(3) / 2}}
		z := []float64{0, c.slope * c.side, c.slope * c.side / 2}
		p, err := Fit(at, z, c.sigma)
		if err != nil {
			t.Fatal(err)
		}
		want := c.sigma * math.Sqrt2 / c.side
		if !near(math.Sqrt(p.Gradient.VarX), want, 1e-9) || !near(math.Sqrt(p.Gradient.VarY), want, 1e-9) || !near(p.Across, 1, 1e-9) {
			t.Errorf("side %v: %v and %v, want %v; across %v", c.side, math.Sqrt(p.Gradient.VarX), math.Sqrt(p.Gradient.VarY), want, p.Across)
		}
		if math.Abs(p.Gradient.AzimuthSigma()-c.degrees) > 0.15*1.4 {
			t.Errorf("side %v: ± %v degrees, want about %v", c.side, p.Gradient.AzimuthSigma(), c.degrees)
		}
	}
}

func TestVerdicts(t *testing.T) {
	square := []orb.Point{{0, 0}, {100, 0}, {100, 100}, {0, 100}}
	line := []orb.Point{{0, 0}, {100, 1}, {200, -1}, {300, 1}}
	for _, c := range []struct {
		at    []orb.Point
		z     []float64
		sigma float64
		want  Verdict
	}{
		{square, []float64{10, 9, 9, 10}, 0.01, Sound},
		{square, []float64{10, 10, 10, 10}, 0.01, Level},
		{square, []float64{10, 10.02, 10.01, 10}, 0.01, BelowNoise},
		{line, []float64{10, 9, 8, 7}, 0.01, InLine},
		{square, []float64{10, 9, 10.2, 9}, 0.01, Vague}, // a saddle: the plane says nothing
	} {
		p, err := Fit(c.at, c.z, c.sigma)
		if err != nil {
			t.Fatal(err)
		}
		if got := p.Verdict(); got != c.want {
			t.Errorf("%v: %v, want %v", c.z, got, c.want)
		}
	}
	if _, err := Fit([]orb.Point{{0, 0}, {1, 1}, {3, 3}}, []float64{1, 2, 3}, 1); !errors.Is(err, ErrInLine) {
		t.Errorf("in line: %v", err)
	}
	if _, err := Fit(square[:2], []float64{1, 2}, 1); !errors.Is(err, ErrInLine) {
		t.Errorf("two wells: %v", err)
	}
	// Without an uncertainty three wells have none, four that of their misfit.
	p, err := Fit(square[:3], []float64{1, 2, 4}, math.NaN())
	if err != nil || !math.IsNaN(p.Sigma) || !math.IsNaN(p.Gradient.AzimuthSigma()) || p.Verdict() != Sound {
		t.Errorf("%+v, %v", p, err)
	}
	p, err = Fit(square, []float64{10, 9, 9.1, 10}, math.NaN())
	if err != nil || !p.FromMisfit || p.Sigma != p.Misfit || !near(p.Misfit, 0.05, 1e-9) {
		t.Errorf("%+v, %v", p, err)
	}
}

func TestNests(t *testing.T) {
	at := []orb.Point{{0, 0}, {3, 0}, {0, 4}, {500, 0}}
	nests := Nests(at, []float64{100.2, 100.0, 99.5, 90}, []float64{95, 80, 60, 50}, 5, []float64{0.01, 0.01, 0.01, 0.01})
	if len(nests) != 2 || nests[0].Upper != 0 || nests[0].Lower != 1 || nests[1].Upper != 1 || nests[1].Lower != 2 {
		t.Fatalf("%+v", nests)
	}
	if n := nests[0]; !near(n.Gradient, 0.2/15, 1e-12) || !near(n.Sigma, 0.01*math.Sqrt2/15, 1e-12) || n.Apart != 3 {
		t.Errorf("%+v, want (100.2 - 100.0) / (95 - 80)", n)
	}
	if n := Nests(at, []float64{1, 2, 3, 4}, []float64{95, 95, math.NaN(), 95}, 5, []float64{0.01, 0.01, 0.01, 0.01}); len(n) != 0 {
		t.Errorf("same screen middles, or none: %+v", n)
	}
}

// Heath 1983, p. 25 (from memory): 60 m/d, 1 m in 1000, porosity 0.20: 0.3 m/d.
func TestSeepageVelocity(t *testing.T) {
	k, err := ParseConductivity("60 m/d")
	if err != nil || k.Unit() != "m/d" || k.String() != "60 m/d" {
		t.Fatal(k, err)
	}
	if v := SeepageVelocity(k, 1.0/1000, 0.20); !near(v, 0.3, 1e-12) {
		t.Errorf("%v m/d, want 0.3", v)
	}
	for _, text := range []string{"", "12", "12 ft", "-1 m/d", "0 m/d", "x m/d", "1 m/week", "1 mile/d", "NaN m/d"} {
		if _, err := ParseConductivity(text); err == nil {
			t.Errorf("%q: no error", text)
		}
	}
}
