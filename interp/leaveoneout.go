package interp

import (
	"context"
	"math"
	"runtime"
	"slices"
	"sync/atomic"

	"golang.org/x/sync/errgroup"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// LeftOut is what a surface would say at the place of each of its vertices if that
// vertex were not there (leave-one-out cross-validation; Stone 1974).
//
// A vertex on the outline cannot be predicted: without it its place lies outside. The
// constrained edges at a vertex are treated by the rule of triangulate.Reduction: two
// join into one, else they go with the vertex. What Trim hides is not hidden anew.
type LeftOut struct {
	// Expected is the height at the place of every vertex without it, NaN where there
	// is none.
	Expected []float64
	// Predicted counts the vertices that have one, Outline the others. Lined counts
	// those predicted that have constrained edges, Joined those of them whose two
	// joined.
	Predicted, Outline, Lined, Joined int

	z []float64
}

// Residual is how far vertex v lies above what the others expect: its value less
// Expected, NaN where there is none.
func (l *LeftOut) Residual(v triangulate.Vertex) float64 { return l.z[v] - l.Expected[v] }

// Residuals returns the residuals of the vertices that have one, sorted.
func (l *LeftOut) Residuals() []float64 {
	all := make([]float64, 0, l.Predicted)
	for v, e := range l.Expected {
		if e == e {
			all = append(all, l.z[v]-e)
		}
	}
	slices.Sort(all)
	return all
}

// leaveChunk is how many vertices one goroutine takes at a time: their numbers are
// coherent in space, so that it stays in one part of the mesh.
const leaveChunk = 4096

// LeaveOneOut predicts every vertex from the others, as a mesh built without it would,
// bit for bit. 0 workers means one per CPU; the result does not depend on it.
//
// 8 bytes a vertex; where there are constrained edges 53 bytes a vertex for each
// goroutine while it works. Expected time O(degree) a vertex. It returns ctx.Err() if
// ctx ends first.
func (s *Surface) LeaveOneOut(ctx context.Context, workers int) (*LeftOut, error) {
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	l := &LeftOut{Expected: make([]float64, len(s.pos)), z: s.z}
	var next, predicted, lined, joined atomic.Int64
	g, ctx := errgroup.WithContext(ctx)
	for range min(workers, len(s.pos)/leaveChunk+1) {
		g.Go(func() error {
			p := predictor{s: s, r: s.mesh.Reduction()}
			var count [triangulate.Parted + 1]int64
			all := int64(0)
			for {
				first := int(next.Add(leaveChunk)) - leaveChunk
				if first >= len(s.pos) {
					break
				}
				if err := ctx.Err(); err != nil {
					return err
				}
				for v := first; v < min(first+leaveChunk, len(s.pos)); v++ {
					left := p.r.Without(triangulate.Vertex(v))
					l.Expected[v] = p.value(left, triangulate.Vertex(v))
					if left.Place != triangulate.Outside {
						all++
						count[left.Joint]++
					}
				}
			}
			predicted.Add(all)
			lined.Add(all - count[triangulate.NoLine])
			joined.Add(count[triangulate.Joined])
			return nil
		})
	}
	if err := g.Wait(); err != nil {
		return nil, err
	}
	l.Predicted, l.Lined, l.Joined = int(predicted.Load()), int(lined.Load()), int(joined.Load())
	l.Outline = len(s.pos) - l.Predicted
	return l, nil
}

// predictor reads heights off a mesh from which vertices are taken out.
type predictor struct {
	s     *Surface
	r     *triangulate.Reduction
	plane Plane
}

// value is the height at the place of v on the triangle or edge of left.
func (p *predictor) value(left triangulate.Left, v triangulate.Vertex) float64 {
	at := p.s.pos[v]
	c := left.Corners
	switch left.Place {
	case triangulate.Inside:
		p.s.planeThrough(&p.plane, c[0], c[1], c[2])
		return p.plane.At(at[0], at[1])
	case triangulate.OnEdge:
		return p.s.ValueOnEdge(c[0], c[1], at)
	}
	return math.NaN()
}

// Summary describes residuals, or any other differences: of readings from what others
// expect, of checkpoints from a surface.
type Summary struct {
	Count int
	// Mean is the bias; Median the middle one, of an even number the mean of the two.
	Mean, Median float64
	// SD is the standard deviation about the mean with Count-1, RMSE the root of the
	// mean square.
	SD, RMSE float64
	// P95 is the 95th percentile of the absolute values: linear between the two nearest
	// in order, the smallest being 0 % and the largest 100 %.
	P95 float64
	// Min and Max are the extremes, with their signs.
	Min, Max float64
}

// Summarise describes residuals, in any order; NaN are passed over. What cannot be said
// of so few is NaN. Sums are exact, so that the order does not show. Time O(n log n).
func Summarise(residuals []float64) Summary {
	sorted := make([]float64, 0, len(residuals))
	for _, r := range residuals {
		if r == r {
			sorted = append(sorted, r)
		}
	}
	slices.Sort(sorted)
	n := len(sorted)
	nan := math.NaN()
	s := Summary{n, nan, nan, nan, nan, nan, nan, nan}
	if n == 0 {
		return s
	}
	var sum, squares, off exact.Sum
	for _, r := range sorted {
		sum.Add(r)
		squares.AddProduct(r, r)
	}
	s.Mean, s.RMSE = sum.Mean(n), math.Sqrt(squares.Mean(n))
	if n > 1 {
		for _, r := range sorted {
			off.AddProduct(r-s.Mean, r-s.Mean)
		}
		s.SD = math.Sqrt(off.Mean(n - 1))
	}
	s.Median, s.Min, s.Max = quantile(sorted, 0.5), sorted[0], sorted[n-1]
	for i, r := range sorted {
		sorted[i] = math.Abs(r)
	}
	slices.Sort(sorted)
	s.P95 = quantile(sorted, 0.95)
	return s
}

// quantile is linear between order statistics, the first being 0 and the last 1
// (definition 7 of Hyndman and Fan 1996).
func quantile(sorted []float64, q float64) float64 {
	at := float64(q * float64(len(sorted)-1))
	i := int(at)
	if i+1 == len(sorted) {
		return sorted[i]
	}
	t := at - float64(i)
	return sorted[i] + float64(t*(sorted[i+1]-sorted[i]))
}
