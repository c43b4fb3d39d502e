package suspect

import (
	"container/heap"
	"context"
	"math"
)

// A stretchOff is shots in a row, by their places in the walk, that may be a run.
type stretchOff struct {
	first, last int
	run         Run
	clear       float64 // the evidence for it
	settled     int     // how many runs were settled when it was looked at
}

// stretches finds what may be runs among the shots from low up to but without high.
func (w *walk) stretches(low, high, settled int) (found []stretchOff) {
	for first := low; first < high; first++ {
		side := math.Copysign(1, w.off(first))
		off := func(i int) bool { return side*w.off(i) > runOff*w.scale(i) }
		if !off(first) {
			continue
		}
		last, count := first, 1
		for i := first + 1; i < high && i <= last+2; i++ {
			if off(i) {
				last = i
				count++
			}
		}
		if count < runLeast {
			continue
		}
		if c, ok := w.settle(first, last); ok {
			c.settled = settled
			found = append(found, c)
			last = max(last, c.last)
		}
		first = last
	}
	return found
}

// choose settles runs, the clearest first. Its shots are taken out, and what else may be a
// run is expected anew from the others before it is settled: one that only looked off
// because of a run is no run.
func (w *walk) choose(ctx context.Context) (chosen []stretchOff, err error) {
	q := stretchQueue(w.stretches(0, len(w.x), 0))
	heap.Init(&q)
	for len(q) > 0 {
		c := heap.Pop(&q).(stretchOff)
		if c.settled < len(chosen) {
			low, high := max(0, c.first-runMoved), min(len(w.x), c.last+1+runMoved)
			if err := w.miss(ctx, low, high); err != nil {
				return nil, err
			}
			for _, again := range w.stretches(c.first, c.last+1, len(chosen)) {
				heap.Push(&q, again)
			}
			continue
		}
		for i := c.first; i <= c.last; i++ {
			c.run.Shots = append(c.run.Shots, Shot{w.vs[i], w.x[i]})
			w.taken[i] = true
		}
		for _, s := range c.run.Shots {
			if !w.f.near.r.Removed(s.Vertex) {
				w.f.near.r.Remove(s.Vertex)
			}
		}
		chosen = append(chosen, c)
	}
	return chosen, nil
}

// stretchQueue is a heap with the clearest on top, of two alike the first.
type stretchQueue []stretchOff

func (q stretchQueue) Len() int { return len(q) }
func (q stretchQueue) Less(i, j int) bool {
	return q[i].clear > q[j].clear || q[i].clear == q[j].clear && q[i].first < q[j].first
}
func (q stretchQueue) Swap(i, j int) { q[i], q[j] = q[j], q[i] }
func (q *stretchQueue) Push(x any)   { *q = append(*q, x.(stretchOff)) }
func (q *stretchQueue) Pop() any {
	old := *q
	c := old[len(old)-1]
	*q = old[:len(old)-1]
	return c
}
