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
// are list[start[b]:start[b+1]]. It takes 4 bytes a triangle for the list and as many
// while making it, and little more.
func (f *scan) byBlock(ctx context.Context, workers int) (start []int, list []triangulate.Triangle, err error) {
	total := f.m.NumTriangles()
	home := make([]uint32, total) // the only block, or one of
	const none, several = ^uint32(0), ^uint32(0) - 1
	counts := make([][]int, workers) // of each worker's triangles, then where they go
	share := func(pass func(w, lo, hi int)) error {
		group, ctx := errgroup.WithContext(ctx)
		for w := range workers {
			group.Go(func() error {
				for lo := w * total / workers; lo < (w+1)*total/workers; lo += trianglesAtOnce {
					pass(w, lo, min(lo+trianglesAtOnce, (w+1)*total/workers))
					if err := ctx.Err(); err != nil {
						return err
					}
				}
				return nil
			})
		}
		return group.Wait()
	}
	for w := range counts {
		counts[w] = make([]int, f.numBlocks())
	}
	err = share(func(w, lo, hi int) {
		n := counts[w]
		for t := lo; t < hi; t++ {
			in, some := f.blocksOf(triangulate.Triangle(t))
			if !some {
				home[t] = none
				continue
			}
			if in.south == in.north && in.west == in.east {
				b := in.south*f.acrossBlocks + in.west
				home[t] = uint32(b)
				n[b]++
				continue
			}
			home[t] = several
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
	err = share(func(w, lo, hi int) {
		to := counts[w]
		for t := lo; t < hi; t++ {
			switch b := home[t]; b {
			case none:
			case several:
				in, _ := f.blocksOf(triangulate.Triangle(t))
				for r := in.south; r <= in.north; r++ {
					for c := in.west; c <= in.east; c++ {
						b := r*f.acrossBlocks + c
						list[to[b]] = triangulate.Triangle(t)
						to[b]++
					}
				}
			default:
				list[to[b]] = triangulate.Triangle(t)
				to[b]++
			}
		}
	})
	return start, list, err
}

// blockRange holds the blocks from south to north and west to east, all included.
type blockRange struct{ south, north, west, east int }

// blocksOf returns the blocks with nodes in the rectangle around t.
func (f *scan) blocksOf(t triangulate.Triangle) (in blockRange, some bool) {
	p, q, r := f.corners(t)
	west, east := float64((min(p[0], q[0], r[0])-f.x0)*f.perX), float64((max(p[0], q[0], r[0])-f.x0)*f.perX)
	south, north := float64((min(p[1], q[1], r[1])-f.y0)*f.perY), float64((max(p[1], q[1], r[1])-f.y0)*f.perY)
	cols, rows := len(f.xs), len(f.ys)
	if west > float64(cols) || south > float64(rows) || east < -1 || north < -1 {
		return in, false
	}
	c0, c1 := f.after(west, f.tolU), f.before(east, f.tolU, cols)
	r0, r1 := f.after(south, f.tolV), f.before(north, f.tolV, rows)
	if c0 > c1 || r0 > r1 {
		return in, false
	}
	return blockRange{r0 >> f.blockRowsLog, r1 >> f.blockRowsLog, c0 >> blockColsLog, c1 >> blockColsLog}, true
}
