package overlay

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// The closed form and a simulation agree: where the surfaces lie well apart, for cut,
// fill and net; within a polygon too.
func TestUncertainty(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 9))
	p, z := scatter(r, 80, 0, 0, 10, 5, 1, 0)
	q, y := scatter(r, 60, 0, 0, 10, 5, 1, 0)
	for i, at := range q { // above on the right, below on the left
		y[i] += 2 * (at[0] - 5)
	}
	region, err := triangulate.NewRegion([]orb.Ring{star}, nil)
	if err != nil {
		t.Fatal(err)
	}
	from, to := Ground{Surface: surface(t, p, z)}, Ground{Surface: surface(t, q, y)}
	sigma := func(n int, s float64) []float64 {
		list := make([]float64, n)
		for i := range list {
			list[i] = s
		}
		return list
	}
	sf, st := sigma(80, 0.02), sigma(60, 0.03)
	f, err := Compare(context.Background(), from, to, region, Options{Weights: true})
	if err != nil {
		t.Fatal(err)
	}
	u := f.Weights.Uncertainty(sf, st)
	s, err := Simulate(context.Background(), from, to, region, sf, st, 600, Options{})
	if err != nil {
		t.Fatal(err)
	}
	// 600 draws have a standard deviation within 3 % of theirs, one sigma.
	for _, c := range [][2]float64{{u.Cut, s.Deviation.Cut}, {u.Fill, s.Deviation.Fill}, {u.Net, s.Deviation.Net}} {
		if math.Abs(c[0]/c[1]-1) > 0.1 {
			t.Errorf("closed form %v, draws %v", c[0], c[1])
		}
	}
	if math.Abs(s.Difference.Net) > 4*u.Net/math.Sqrt(600) {
		t.Errorf("mean off by %v, standard uncertainty %v", s.Difference.Net, u.Net)
	}
	again, err := Simulate(context.Background(), from, to, region, sf, st, 600, Options{Workers: 1})
	if err != nil || *again != *s {
		t.Errorf("once more: %+v, %+v, %v", again, s, err)
	}
	// A pile over a level, by hand: a pyramid's net is (area/3) h: uncertainty of its
	// top is area/3 sigma.
	pyramid := surface(t, []orb.Point{{0, 0}, {20, 0}, {20, 20}, {0, 20}, {10, 10}}, []float64{0, 0, 0, 0, 6})
	f, err = Compare(context.Background(), Ground{Level: 0}, Ground{Surface: pyramid}, nil, Options{Weights: true})
	if err != nil {
		t.Fatal(err)
	}
	top := make([]float64, 5)
	for v, at := range pyramid.Mesh().Positions() {
		if at == (orb.Point{10, 10}) {
			top[v] = 0.03
		}
	}
	u = f.Weights.Uncertainty(nil, top)
	near(t, "uncertainty of a pyramid", u.Net, 400.0/3*0.03, 1e-9)
	near(t, "its fill", u.Fill, 400.0/3*0.03, 1e-9)
}
