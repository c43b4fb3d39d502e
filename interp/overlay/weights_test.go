package overlay

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
)

// Weights are what the volumes change by per unit of a height.
func TestWeights(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 2))
	p, z := scatter(r, 60, 1000, 2000, 10, 5, 6, 0)
	q, y := scatter(r, 40, 1002, 2001, 10, 5, 6, 0)
	from, to := surface(t, p, z), surface(t, q, y)
	f, err := Between(context.Background(), from, to, Options{Weights: true})
	if err != nil {
		t.Fatal(err)
	}
	const h = 1e-5
	moved := func(s *interp.Surface, v int, by float64) *interp.Surface {
		z := append([]float64{}, s.Z()...)
		z[v] += by
		m, err := interp.New(s.Mesh(), z)
		if err != nil {
			t.Fatal(err)
		}
		return m
	}
	for v := range to.Z() {
		a, b := figures(t, from, moved(to, v, -h), 0), figures(t, from, moved(to, v, h), 0)
		near(t, "fill, to", (b.Fill.Volume-a.Fill.Volume)/(2*h), f.Weights.To.Fill[v], 1e-4)
		near(t, "cut, to", (a.Cut.Volume-b.Cut.Volume)/(2*h), f.Weights.To.Cut[v], 1e-4)
		near(t, "net, to", (b.Net-a.Net)/(2*h), f.Weights.To.All[v], 1e-8)
	}
	for v := range from.Z() {
		a, b := figures(t, moved(from, v, -h), to, 0), figures(t, moved(from, v, h), to, 0)
		near(t, "fill, from", (a.Fill.Volume-b.Fill.Volume)/(2*h), f.Weights.From.Fill[v], 1e-4)
		near(t, "cut, from", (b.Cut.Volume-a.Cut.Volume)/(2*h), f.Weights.From.Cut[v], 1e-4)
		near(t, "net, from", (a.Net-b.Net)/(2*h), f.Weights.From.All[v], 1e-8)
	}
	sum := func(w []float64) (s float64) {
		for _, x := range w {
			s += x
		}
		return s
	}
	for _, w := range []VertexWeights{f.Weights.From, f.Weights.To} {
		near(t, "sum of cut", sum(w.Cut), f.Cut.Area, 1e-11)
		near(t, "sum of fill", sum(w.Fill), f.Fill.Area, 1e-11)
		near(t, "sum of all", sum(w.All), f.Covered, 1e-11)
	}
}

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %v, want %v", what, got, want)
	}
}

// A level under a surface: the figures are those of Surface.Volumes, and those of an
// overlay with a level surface.
func TestOnMesh(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 3))
	p, z := scatter(r, 400, 1000, 2000, 10, 5, 6, 0.25)
	s := surface(t, p, z)
	m := s.Mesh()
	f, err := OnMesh(context.Background(), m, Level(m, 5), s.Z(), Options{Weights: true})
	if err != nil {
		t.Fatal(err)
	}
	v := s.Volumes(5)
	near(t, "above", f.Fill.Volume, v.Above, 1e-13*v.Above)
	near(t, "below", f.Cut.Volume, v.Below, 1e-13*v.Below)
	near(t, "area below", f.Cut.Area, v.AreaBelow, 1e-13*v.AreaBelow)
	near(t, "area above", f.Fill.Area+f.Same.Area, v.AreaAbove, 1e-13*v.AreaAbove)
	near(t, "covered", f.Covered, s.Area(), 1e-15*s.Area())
	near(t, "slope area", f.Fill.AreaTo+f.Cut.AreaTo+f.Same.AreaTo, s.SurfaceArea(), 1e-13*s.SurfaceArea())
	flat, err := interp.New(m, Level(m, 5))
	if err != nil {
		t.Fatal(err)
	}
	g := figures(t, flat, s, 0)
	near(t, "above, overlay", g.Fill.Volume, f.Fill.Volume, 1e-13*v.Above)
	near(t, "below, overlay", g.Cut.Volume, f.Cut.Volume, 1e-13*v.Below)
}

// The plane through points of a plane is that plane.
func TestFitSlope(t *testing.T) {
	plane := Slope{At: orb.Point{431250, 5621500}, Z: 210.5, DzDx: 0.02, DzDy: -0.012}
	r := rand.New(rand.NewPCG(8, 4))
	pts, z := scatter(r, 30, 431200, 5621400, 90, 0, 0, 0.001)
	for i, p := range pts {
		z[i] = plane.Height(p)
	}
	fit, most, ok := FitSlope(pts, z)
	if !ok || most > 1e-12*210 {
		t.Errorf("%+v, off by %v", fit, most)
	}
	near(t, "dz/dx", fit.DzDx, 0.02, 1e-14)
	near(t, "dz/dy", fit.DzDy, -0.012, 1e-14)
	if _, _, ok := FitSlope([]orb.Point{{0, 0}, {1, 1}, {3, 3}}, []float64{1, 2, 3}); ok {
		t.Error("points in line have a plane")
	}
}
