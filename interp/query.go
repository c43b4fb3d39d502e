package interp

import (
	"context"
	"runtime"
	"sync"
	"sync/atomic"

	"github.com/paulmach/orb"
	"golang.org/x/sync/errgroup"
)

// queryChunk places are walked through in one go: long enough that the first
// search does not count, short enough to share out among goroutines, to notice that
// the context has ended, and for the buffers to stay in the cache.
const queryChunk = 1024

// Query returns the heights and locations of many places, in the order asked. The
// places are visited along a space-filling curve, so that each lies a step or two
// from the one before and the part of the mesh around them stays in the cache. The
// answers are those of Sampler.At, whatever the number of goroutines; 0 workers
// means one per CPU.
//
// Up to 2^32 places; 24 bytes a place for the answers and 20 while it works; time
// O(places) for evenly spread vertices, and a glance at every vertex. It returns ctx.Err() with nil samples if ctx ends first.
func (s *Surface) Query(ctx context.Context, places []orb.Point, workers int) ([]Sample, error) {
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	order := s.visitOrder(places, workers)
	samples := make([]Sample, len(places))
	var next atomic.Int64
	g, ctx := errgroup.WithContext(ctx)
	for range min(workers, len(places)/queryChunk+1) {
		g.Go(func() error {
			w := walker{sp: s.Sampler()}
			for {
				first := int(next.Add(queryChunk)) - queryChunk
				if first >= len(order) {
					return nil
				}
				if err := ctx.Err(); err != nil {
					return err
				}
				w.visit(places, order[first:min(first+queryChunk, len(order))], samples)
			}
		})
	}
	if err := g.Wait(); err != nil {
		return nil, err
	}
	return samples, nil
}

// walker carries the buffers of one goroutine. Places and samples lie scattered in
// memory in the order of the curve. Fetching a chunk of them in a loop of its own
// lets the processor wait for many at a time; in the walk, where each step hangs on
// the one before, it would wait for each.
type walker struct {
	sp      *Sampler
	places  [queryChunk]orb.Point
	samples [queryChunk]Sample
}

// visit stores the samples of places[n] for n in order.
func (w *walker) visit(places []orb.Point, order []uint32, samples []Sample) {
	for i, n := range order {
		w.places[i] = places[n]
	}
	w.samples[0] = w.sp.At(w.places[0])
	for i := 1; i < len(order); i++ {
		w.samples[i] = w.sp.Next(w.places[i])
	}
	for i, n := range order {
		samples[n] = w.samples[i]
	}
}

// visitOrder returns the indices of places along a Hilbert curve over the mesh.
func (s *Surface) visitOrder(places []orb.Point, workers int) []uint32 {
	curve := newHilbert(s.Bound())
	keys := make([]uint64, len(places))
	var wg sync.WaitGroup
	for w := range workers {
		first, last := len(places)*w/workers, len(places)*(w+1)/workers
		wg.Go(func() {
			for n := first; n < last; n++ {
				keys[n] = uint64(curve.index(places[n]))<<32 | uint64(n)
			}
		})
	}
	wg.Wait()
	keys = sortByHigh(keys)
	order := make([]uint32, len(keys))
	for n, k := range keys {
		order[n] = uint32(k)
	}
	return order
}

// Bound returns the smallest rectangle around the vertices, in time O(vertices); that of
// nothing without any.
func (s *Surface) Bound() orb.Bound {
	if len(s.pos) == 0 {
		return orb.Bound{}
	}
	b := orb.Bound{Min: s.pos[0], Max: s.pos[0]}
	for i := range s.pos {
		p := &s.pos[i]
		b.Min[0], b.Max[0] = min(b.Min[0], p[0]), max(b.Max[0], p[0])
		b.Min[1], b.Max[1] = min(b.Min[1], p[1]), max(b.Max[1], p[1])
	}
	return b
}

// sortByHigh sorts keys by their upper 32 bits, stable, in three passes over 11, 11
// and 10 bits. The result may be keys itself or new.
func sortByHigh(keys []uint64) []uint64 {
	var count [3][1 << 11]uint32
	for _, k := range keys {
		count[0][k>>32&0x7ff]++
		count[1][k>>43&0x7ff]++
		count[2][k>>54]++
	}
	out := make([]uint64, len(keys))
	for pass := range count {
		c := &count[pass]
		sum := uint32(0)
		for d := range c {
			sum, c[d] = sum+c[d], sum
		}
		shift := 32 + 11*pass
		for _, k := range keys {
			d := k >> shift & 0x7ff
			out[c[d]] = k
			c[d]++
		}
		keys, out = out, keys
	}
	return keys
}
