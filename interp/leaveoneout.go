package interp

import (
	"context"
	"math"
	"runtime"
	"slices"
	"sync/atomic"

	"github.com/paulmach/orb"
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
	// Reach is how far every prediction reaches: the root of the mean square distance of
	// the readings that it is made from, weighted as they are; NaN where there is none.
	// Where the ground is curved, predictions are off by half the curvature times its
	// square.
	Reach []float64
	// Predicted counts the vertices that have one, Outline the others. Lined counts
	// those predicted that have constrained edges, Joined those of them whose two
	// joined.
	Predicted, Outline, Lined, Joined int

	z []float64
}

// Residual is how far vertex v lies above what the others expect: its value less
// Expected, NaN where there is none.
func (l *LeftOut) Residual(v triangulate.Vertex) float64 { return l.z[v] - l.Expected[v] }

// Residuals returns the residuals of the vertices that have one, rising. Package accuracy
// describes them; its residuals have the other sign, surface minus reading.
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
// 16 bytes a vertex; where there are constrained edges 53 bytes a vertex for each
// goroutine while it works. Expected time O(degree) a vertex. It returns ctx.Err() if
// ctx ends first.
func (s *Surface) LeaveOneOut(ctx context.Context, workers int) (*LeftOut, error) {
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	l := &LeftOut{Expected: make([]float64, len(s.pos)), Reach: make([]float64, len(s.pos)), z: s.z}
	var next, predicted, lined, joined atomic.Int64
	g, ctx := errgroup.WithContext(ctx)
	for range min(workers, len(s.pos)/leaveChunk+1) {
		g.Go(func() error {
			r := s.mesh.Reduction()
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
					left := r.Without(triangulate.Vertex(v))
					l.Expected[v], l.Reach[v] = s.ValueOf(left, s.pos[v]), s.Reach(left, s.pos[v])
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

// ValueOf returns the height at p on the triangle or the edge that left names, as Value
// would; NaN outside.
func (s *Surface) ValueOf(left triangulate.Left, p orb.Point) float64 {
	c := left.Corners
	switch left.Place {
	case triangulate.Inside:
		var plane Plane
		s.planeThrough(&plane, c[0], c[1], c[2])
		return plane.At(p[0], p[1])
	case triangulate.OnEdge:
		return s.ValueOnEdge(c[0], c[1], p)
	}
	return math.NaN()
}

// Reach is how far the value at p reaches for the readings that left names: the root of
// their mean square distance, weighted as they are; NaN outside.
//
// For a triangle it is the root of R² - d², R being the radius of its circle and d how far
// p is from the centre.
func (s *Surface) Reach(left triangulate.Left, p orb.Point) float64 {
	c := left.Corners
	distance2 := func(v triangulate.Vertex) float64 {
		dx, dy := s.pos[v][0]-p[0], s.pos[v][1]-p[1]
		return float64(dx*dx) + float64(dy*dy)
	}
	switch left.Place {
	case triangulate.Inside:
		area, sum := 0.0, 0.0
		for n := range c {
			q, r := &s.pos[c[(n+1)%3]], &s.pos[c[(n+2)%3]]
			w := exact.Area2(p[0], p[1], q[0], q[1], r[0], r[1])
			area += w
			sum += float64(w * distance2(c[n]))
		}
		return math.Sqrt(sum / area)
	case triangulate.OnEdge:
		t := fraction(s.pos[c[0]], s.pos[c[1]], p)
		return math.Sqrt(float64((1-t)*distance2(c[0])) + float64(t*distance2(c[1])))
	}
	return math.NaN()
}
