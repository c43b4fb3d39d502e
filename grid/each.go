package grid

import (
	"context"
	"runtime"
	"sync/atomic"

	"github.com/paulmach/orb"
	"golang.org/x/sync/errgroup"
)

// Each replaces every value by that of another quantity at its node; where there is no
// value there stays none. of is called once a goroutine and returns what is asked, along
// rows from west to east, so that it can walk from node to node. 0 workers means one per
// CPU. It returns ctx.Err() if ctx ends first.
func (g *Grid) Each(ctx context.Context, workers int, of func() func(p orb.Point) float64) error {
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	xs, ys := g.Spec.Xs(), g.Spec.Ys()
	var next atomic.Int64
	group, ctx := errgroup.WithContext(ctx)
	for range min(workers, len(ys)) {
		group.Go(func() error {
			value := of()
			for {
				row := int(next.Add(1)) - 1
				if row >= len(ys) {
					return nil
				}
				if err := ctx.Err(); err != nil {
					return err
				}
				values := g.Values[row*len(xs) : (row+1)*len(xs)]
				for col, v := range values {
					if v == v {
						values[col] = value(orb.Point{xs[col], ys[row]})
					}
				}
			}
		})
	}
	return group.Wait()
}
