package grid

import (
	"context"
	"fmt"
	"math"
	"runtime"
	"sync/atomic"

	"golang.org/x/sync/errgroup"

	"isofacet/interp"
)

// Show says what of a surface a raster shows.
type Show uint8

// What can be shown.
const (
	Value           Show = iota // the interpolated value
	Slope                       // rise over run of the triangle that owns the node
	DownhillAzimuth             // where water would run, degrees clockwise from north; no-data on a flat
	Shade                       // the share of a light from the north-west that the owner is struck by, 0 to 1; see shade
)

// Options says what to show and how to work.
type Options struct {
	Show Show
	// Workers is the largest number of goroutines; 0 means one per CPU. It
	// never changes a bit of the result.
	Workers int
	// Progress, when not nil, is told from several goroutines how many parts of the
	// raster are done.
	Progress func(done, total int)
}

// Fill returns s, or its slope, azimuth or shade, at every node of spec. Nodes outside
// the surface are NaN; a node on the outline is inside.
//
// Every node is written once, by the triangle that owns it (see
// triangulate.Location), with exactly the bits that s.Value returns there, for
// any number of workers.
//
// It returns the error of spec.Validate, or ctx.Err() with a nil grid if ctx
// ends first. Call spec.Check first where the size comes from outside: the
// values take 8 bytes a node.
//
// Time O(nodes + triangles x rows that each spans); 4 bytes a triangle and
// 8 a vertex while it works.
func Fill(ctx context.Context, spec Spec, s *interp.Surface, opt Options) (*Grid, error) {
	g, err := newUnset(spec)
	if err != nil {
		return nil, err
	}
	workers := opt.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	f := newScan(g, s, opt.Show)
	f.setBlocks(workers)
	start, list, err := f.byBlock(ctx, workers)
	if err != nil {
		return nil, err
	}
	blocks := f.numBlocks()
	var next, done atomic.Int64
	group, ctx := errgroup.WithContext(ctx)
	for range min(workers, blocks) {
		group.Go(func() error {
			w := f.newWriter()
			for b := int(next.Add(1)) - 1; b < blocks; b = int(next.Add(1)) - 1 {
				w.begin(f.block(b))
				for _, t := range list[start[b]:start[b+1]] {
					f.triangle(w, t)
				}
				w.end()
				if err := ctx.Err(); err != nil {
					return err
				}
				if opt.Progress != nil {
					opt.Progress(int(done.Add(1)), blocks)
				}
			}
			return nil
		})
	}
	if err := group.Wait(); err != nil {
		return nil, err
	}
	return g, nil
}

// mostAlong is the most columns or rows: places between nodes are numbered in 32 bits.
const mostAlong = 1<<30 - 1

// newUnset is New without the no-data.
func newUnset(spec Spec) (*Grid, error) {
	if err := spec.Validate(); err != nil {
		return nil, err
	}
	if spec.NumNodes() > math.MaxInt/8 {
		return nil, spec.Check(math.MaxInt64 / 8)
	}
	if spec.Cols > mostAlong || spec.Rows > mostAlong {
		return nil, &SpecError{What: "columns and rows", Seen: fmt.Sprintf("%d x %d", spec.Cols, spec.Rows), Expected: fmt.Sprintf("at most %d of each", mostAlong)}
	}
	return &Grid{Spec: spec, Values: make([]float64, spec.NumNodes())}, nil
}

// String returns the word that options use.
func (s Show) String() string {
	switch s {
	case Value:
		return "value"
	case Slope:
		return "slope"
	case DownhillAzimuth:
		return "downhill-azimuth"
	case Shade:
		return "shade"
	}
	return fmt.Sprintf("Show(%d)", uint8(s))
}
