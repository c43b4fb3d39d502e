package profile

import (
	"context"
	"runtime"
	"sync/atomic"

	"golang.org/x/sync/errgroup"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Many returns the profiles of s along lines, in their order, limited by region if
// it is not nil. The result does not depend on the number of workers; 0 is one per
// CPU. It returns ctx.Err() if ctx ends first.
func Many(ctx context.Context, s *interp.Surface, region *triangulate.Region, lines []*Alignment, workers int) ([]Profile, error) {
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	all := make([]Profile, len(lines))
	var next atomic.Int64
	g, ctx := errgroup.WithContext(ctx)
	for range min(workers, len(lines)) {
		g.Go(func() error {
			t := NewTracer(s, region)
			for {
				i := int(next.Add(1)) - 1
				if i >= len(lines) {
					return nil
				}
				if err := ctx.Err(); err != nil {
					return err
				}
				all[i] = *t.Trace(lines[i])
			}
		})
	}
	if err := g.Wait(); err != nil {
		return nil, err
	}
	return all, nil
}
