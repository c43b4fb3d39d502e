package triangulate

import (
	"context"
	"errors"
	"fmt"
	"math"
	"runtime"
	"slices"

	"github.com/paulmach/orb"
	"golang.org/x/sync/errgroup"
)

// VerticesMost is the largest number of points in one mesh: half-edges, six a
// vertex, must stay below 2^31.
const VerticesMost = 350_000_000

// Coordinates are 0 or between these in size, so that no product of four
// differences leaves the range of a float64.
const (
	CoordinateLeast = 1e-60
	CoordinateMost  = 1e60
)

// ErrTooMany is wrapped by the error for more than VerticesMost points.
var ErrTooMany = errors.New("too many points for one mesh")

// PositionError tells which input point has a coordinate that cannot be used.
type PositionError struct {
	Index int       // of the point in the input
	Point orb.Point // as given
}

func (e *PositionError) Error() string {
	return fmt.Sprintf("point %d: position (%v, %v): expected finite coordinates, 0 or from %g to %g in size",
		e.Index, e.Point[0], e.Point[1], CoordinateLeast, CoordinateMost)
}

// Options says how to work, never what comes out.
type Options struct {
	// Workers is the largest number of goroutines; 0 means one per CPU.
	Workers int
	// Progress, when not nil, is told now and then, from one goroutine at a
	// time, about how many of the points are done. done never falls; it is total
	// once, in the last call, when the mesh is finished. No point, no call.
	Progress func(done, total int)
}

func (o Options) workers() int {
	if o.Workers > 0 {
		return o.Workers
	}
	return runtime.GOMAXPROCS(0)
}

// Delaunay returns the Delaunay triangulation of pts.
//
// Every accepted input has exactly one answer, whatever the order of pts and
// the number of workers: orientation and in-circle are decided exactly, and
// cocircular points by their coordinates (see the package comment). Points at
// one place become one vertex. Fewer than three distinct places, or all on one
// line, make a mesh of vertices without triangles.
//
// It returns a *PositionError for a coordinate that is not finite or out of
// range, an error wrapping ErrTooMany, or ctx.Err() with a nil mesh if ctx
// ends first.
//
// Time O(n log n); for n points it holds about 92 n bytes beside pts while it
// works, and leaves a mesh of 68 n.
//
// Sources: Guibas & Stolfi 1985; Dwyer 1987.
func Delaunay(ctx context.Context, pts []orb.Point, opt Options) (*Mesh, error) {
	if len(pts) > VerticesMost {
		return nil, fmt.Errorf("%d points, expected at most %d: %w", len(pts), VerticesMost, ErrTooMany)
	}
	workers := min(opt.workers(), len(pts)/parallelLeast+1)
	b := &builder{ctx: ctx, progress: opt.Progress, rec: make([]record, len(pts))}
	if err := b.load(pts, workers); err != nil {
		return nil, err
	}
	if len(pts) == 0 {
		return &Mesh{}, nil
	}
	b.half = make([]half, max(0, 6*len(pts)-6))
	whole := b.build(0, len(pts), 0, workers)
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	m := b.finish(whole, workers)
	if opt.Progress != nil {
		opt.Progress(len(pts), len(pts))
	}
	return m, nil
}

// load makes the records, and refuses coordinates out of range.
func (b *builder) load(pts []orb.Point, workers int) error {
	bad := make([]int, workers)
	inRanges(len(pts), workers, func(w, lo, hi int) {
		bad[w] = -1
		for i, p := range pts[lo:hi] {
			if !positionOK(p) {
				bad[w] = lo + i
				return
			}
			// Adding 0 makes -0 into 0: one place, one spelling.
			b.rec[lo+i] = record{x: p[0] + 0, y: p[1] + 0, id: int32(lo + i)}
		}
	})
	if i := slices.IndexFunc(bad, func(i int) bool { return i >= 0 }); i >= 0 && len(pts) > 0 {
		return &PositionError{Index: bad[i], Point: pts[bad[i]]}
	}
	return nil
}

// positionOK tells whether exact signs can be promised for p.
func positionOK(p orb.Point) bool { return coordinateOK(p[0]) && coordinateOK(p[1]) }

func coordinateOK(c float64) bool {
	a := math.Abs(c)
	return a >= CoordinateLeast && a <= CoordinateMost || a == 0
}

// inRanges calls work for workers consecutive ranges that cover 0..n, at the
// same time, and waits for all.
func inRanges(n, workers int, work func(w, lo, hi int)) {
	if workers == 1 || n < parallelLeast {
		for w := range workers {
			if w == 0 {
				work(0, 0, n)
				continue
			}
			work(w, n, n)
		}
		return
	}
	var g errgroup.Group
	for w := range workers {
		g.Go(func() error {
			work(w, w*n/workers, (w+1)*n/workers)
			return nil
		})
	}
	_ = g.Wait()
}
