package contour

import (
	"sync/atomic"

	"golang.org/x/sync/errgroup"
)

// parallelLeast is the number of items below which dividing work costs more than it saves.
const parallelLeast = 1 << 13

// inRanges calls work for consecutive ranges w = 0, 1, ... that cover 0..n, at the same time where that pays, and
// returns how many ranges there were, at most workers.
func inRanges(n, workers int, work func(w, from, to int)) int {
	workers = max(1, min(workers, n/parallelLeast))
	if workers == 1 {
		work(0, 0, n)
		return 1
	}
	var g errgroup.Group
	for w := range workers {
		g.Go(func() error {
			work(w, w*n/workers, (w+1)*n/workers)
			return nil
		})
	}
	_ = g.Wait()
	return workers
}

// inTasks calls task for every i below n, several at the same time, and returns the first error; w names the goroutine.
func inTasks(n, workers int, task func(w, i int) error) error {
	if workers = min(workers, n); workers <= 1 {
		for i := range n {
			if err := task(0, i); err != nil {
				return err
			}
		}
		return nil
	}
	var g errgroup.Group
	var next atomic.Int64
	for w := range workers {
		g.Go(func() error {
			for {
				i := int(next.Add(1)) - 1
				if i >= n {
					return nil
				}
				if err := task(w, i); err != nil {
					return err
				}
			}
		})
	}
	return g.Wait()
}
