package grid

import (
	"context"

	"golang.org/x/sync/errgroup"

	"isofacet/triangulate"
)

// block is a rectangle of nodes, rows counted from the south; north and east are
// left out. A worker fills one at a time in memory of its own, small enough to stay
// in its cache, and copies it to the grid row by row: triangles write a few nodes
// here and a few there, and each such place in the grid itself would be waited for.
type block struct{ south, north, west, east int }

// The largest block has 128 rows of 256 nodes, 256 KB. Grids with few rows have lower
// ones, so that there are enough to share out. Powers of two, because dividing by
// them is a shift.
const (
	blockColsLog      = 8
	mostBlockRowsLog  = 7
	leastBlockRowsLog = 3
	blocksPerWorker   = 8

	// Rows a power of two apart would share a few places of the cache.
	blockStride = 1<<blockColsLog + 8
)

// setBlocks chooses the size of blocks.
func (f *scan) setBlocks(workers int) {
	f.acrossBlocks = (len(f.xs)-1)>>blockColsLog + 1
	f.blockRowsLog = mostBlockRowsLog
	for f.blockRowsLog > leastBlockRowsLog && f.numBlocks() < blocksPerWorker*workers {
		f.blockRowsLog--
	}
}

func (f *scan) numBlocks() int { return f.acrossBlocks * ((len(f.ys)-1)>>f.blockRowsLog + 1) }

func (f *scan) block(b int) block {
	south, west := b/f.acrossBlocks<<f.blockRowsLog, b%f.acrossBlocks<<blockColsLog
	return block{south, min(south+1<<f.blockRowsLog, len(f.ys)), west, min(west+1<<blockColsLog, len(f.xs))}
}

// byBlock lists the triangles that may own nodes of each block: those of block b
// are list[start[b]:start[b+1]]. It takes 4 bytes a triangle, and 8 a vertex while it
// works.
func (f *scan) byBlock(ctx context.Context, workers int) (start []int, list []triangulate.Triangle, err error) {
	between := make([][2]int32, len(f.pos))
	err = share(ctx, workers, len(f.pos), func(_, lo, hi int) {
		for v, p := range f.pos[lo:hi] {
			between[lo+v] = [2]int32{
				nodesAround(float64((p[0]-f.x0)*f.perX), f.tolU, len(f.xs)),
				nodesAround(float64((p[1]-f.y0)*f.perY), f.tolV, len(f.ys)),
			}
		}
	})
	if err != nil {
		return nil, nil, err
	}
	counts := make([][]int, workers) // of each worker's triangles, then where they go
	for w := range counts {
		counts[w] = make([]int, f.numBlocks())
	}
	total := f.m.NumTriangles()
	err = share(ctx, workers, total, func(w, lo, hi int) {
		n := counts[w]
		for t := lo; t < hi; t++ {
			in := f.blocksOf(triangulate.Triangle(t), between)
			for r := in.south; r <= in.north; r++ {
				for c := in.west; c <= in.east; c++ {
					n[r*f.acrossBlocks+c]++
				}
			}
		}
	})
	if err != nil {
		return nil, nil, err
	}
	start = make([]int, f.numBlocks()+1)
	for b := range f.numBlocks() {
		at := start[b]
		for w := range counts {
			counts[w][b], at = at, at+counts[w][b]
		}
		start[b+1] = at
	}
	list = make([]triangulate.Triangle, start[f.numBlocks()])
	err = share(ctx, workers, total, func(w, lo, hi int) {
		to := counts[w]
		for t := lo; t < hi; t++ {
			in := f.blocksOf(triangulate.Triangle(t), between)
			for r := in.south; r <= in.north; r++ {
				for c := in.west; c <= in.east; c++ {
					b := r*f.acrossBlocks + c
					list[to[b]] = triangulate.Triangle(t)
					to[b]++
				}
			}
		}
	})
	return start, list, err
}

// share gives every worker its part of total, in pieces between which it looks at
// the context.
func share(ctx context.Context, workers, total int, pass func(w, lo, hi int)) error {
	const atOnce = 4096
	group, ctx := errgroup.WithContext(ctx)
	for w := range workers {
		group.Go(func() error {
			end := (w + 1) * total / workers
			for lo := w * total / workers; lo < end; lo += atOnce {
				pass(w, lo, min(lo+atOnce, end))
				if err := ctx.Err(); err != nil {
					return err
				}
			}
			return nil
		})
	}
	return group.Wait()
}

// nodesAround says in one number between which nodes x is, known up to tol, of n
// from 0 on: 2k at node k, 2k+1 between it and the next, and as if one step out where
// it is further out. The first node from x on is (nodesAround+1)/2, the last
// up to x is nodesAround/2, rounded down; both rise with x.
func nodesAround(x, tol float64, n int) int32 {
	if x+tol < 0 {
		return -1
	}
	if x > float64(n) {
		return int32(2*n - 1)
	}
	k := int32(x + tol)
	if float64(k) >= x-tol {
		return 2 * k
	}
	return 2*k + 1
}

// blockRange holds the blocks from south to north and west to east, all included.
type blockRange struct{ south, north, west, east int }

// blocksOf returns the blocks with nodes in the rectangle around t.
func (f *scan) blocksOf(t triangulate.Triangle, between [][2]int32) blockRange {
	e := triangulate.HalfEdge(3 * t)
	p, q, r := &between[f.m.Origin(e)], &between[f.m.Origin(e+1)], &between[f.m.Origin(e+2)]
	west, east := int(min(p[0], q[0], r[0])+1)>>1, min(int(max(p[0], q[0], r[0]))>>1, len(f.xs)-1)
	south, north := int(min(p[1], q[1], r[1])+1)>>1, min(int(max(p[1], q[1], r[1]))>>1, len(f.ys)-1)
	if west > east || south > north {
		return blockRange{0, -1, 0, -1}
	}
	return blockRange{south >> f.blockRowsLog, north >> f.blockRowsLog, west >> blockColsLog, east >> blockColsLog}
}
