package overlay

import (
	"context"
	"math"
	"math/rand/v2"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Spread is how far figures are uncertain: standard uncertainties, or standard
// deviations of draws.
type Spread struct{ Cut, Fill, Net float64 }

// Uncertainty returns the standard uncertainty of the volumes from those of the heights,
// sigma, one a vertex, which are taken as independent: the root of the sum of
// (weight x sigma)², to first order, and exactly for the net volume, which is linear.
// Where the surfaces differ by less than their noise, cut and fill each are larger on
// average than they would be without noise; Simulate shows by how much.
//
// A slice that is nil stands for heights without uncertainty.
func (w *Weights) Uncertainty(sigmaFrom, sigmaTo []float64) Spread {
	var cut, fill, net exact.Sum
	add := func(sum *exact.Sum, weights, sigma []float64) {
		for v, x := range weights {
			u := x * sigma[v]
			sum.AddProduct(u, u)
		}
	}
	for _, side := range []struct {
		w     *VertexWeights
		sigma []float64
	}{{&w.From, sigmaFrom}, {&w.To, sigmaTo}} {
		if side.sigma == nil || side.w.All == nil {
			continue
		}
		add(&cut, side.w.Cut, side.sigma)
		add(&fill, side.w.Fill, side.sigma)
		add(&net, side.w.All, side.sigma)
	}
	return Spread{math.Sqrt(cut.Value()), math.Sqrt(fill.Value()), math.Sqrt(net.Value())}
}

// Simulated is what came out of draws.
type Simulated struct {
	Draws      int
	Mean       Spread // of the volumes
	Deviation  Spread // standard deviations, n - 1
	Difference Spread // means less the figures without noise
}

// Simulate draws every height n times about its own with the standard deviations
// sigma, independently, and measures the volumes each time: a check of Uncertainty.
// Noise is the sum of twelve uniform numbers less 6, close to normal within three
// deviations and never beyond six, by a generator with a fixed seed; it goes to
// vertices in (x, y) order. The same input gives the same result.
//
// It takes n times what Compare takes, and returns its errors. n is at least 2.
func Simulate(ctx context.Context, from, to Ground, region *triangulate.Region, sigmaFrom, sigmaTo []float64, n int, opt Options) (*Simulated, error) {
	opt.Weights = false
	opt.Progress = nil
	plain, err := Compare(ctx, from, to, region, opt)
	if err != nil {
		return nil, err
	}
	orderFrom, orderTo := from.order(), to.order()
	draws := make([]Spread, n)
	for i := range draws {
		r := rand.New(rand.NewPCG(1, uint64(i)))
		a, err := from.shaken(r, orderFrom, sigmaFrom)
		if err != nil {
			return nil, err
		}
		b, err := to.shaken(r, orderTo, sigmaTo)
		if err != nil {
			return nil, err
		}
		f, err := Compare(ctx, a, b, region, opt)
		if err != nil {
			return nil, err
		}
		draws[i] = Spread{f.Cut.Volume, f.Fill.Volume, f.Net}
	}
	s := &Simulated{Draws: n}
	s.Mean.Cut, s.Deviation.Cut = meanAndDeviation(draws, func(d *Spread) float64 { return d.Cut })
	s.Mean.Fill, s.Deviation.Fill = meanAndDeviation(draws, func(d *Spread) float64 { return d.Fill })
	s.Mean.Net, s.Deviation.Net = meanAndDeviation(draws, func(d *Spread) float64 { return d.Net })
	s.Difference = Spread{s.Mean.Cut - plain.Cut.Volume, s.Mean.Fill - plain.Fill.Volume, s.Mean.Net - plain.Net}
	return s, nil
}

func meanAndDeviation(draws []Spread, of func(*Spread) float64) (mean, deviation float64) {
	var sum, squares exact.Sum
	for i := range draws {
		sum.Add(of(&draws[i]))
	}
	mean = sum.Mean(len(draws))
	for i := range draws {
		d := of(&draws[i]) - mean
		squares.AddProduct(d, d)
	}
	return mean, math.Sqrt(squares.Value() / float64(len(draws)-1))
}

func (g *Ground) order() []triangulate.Vertex {
	if g.Surface == nil {
		return nil
	}
	return g.Surface.Mesh().Ordered()
}

// shaken returns the ground with noise on its heights.
func (g *Ground) shaken(r *rand.Rand, order []triangulate.Vertex, sigma []float64) (Ground, error) {
	if g.Surface == nil || sigma == nil {
		return *g, nil
	}
	z := make([]float64, len(order))
	for _, v := range order {
		noise := -6.0
		for range 12 {
			noise += float64(r.Float64())
		}
		z[v] = g.Surface.Z()[v] + float64(sigma[v]*noise)
	}
	s, err := interp.New(g.Surface.Mesh(), z)
	return Ground{Surface: s}, err
}
