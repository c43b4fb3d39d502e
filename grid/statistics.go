package grid

import (
	"math"
	"runtime"
	"sync"

	"isofacet/triangulate/exact"
)

// Statistics describe the values of a grid. Without values the numbers that need some are NaN.
type Statistics struct {
	Nodes    int
	NoData   int     // nodes without a value
	Min, Max float64 // in the unit of the values, as are the next two
	Mean     float64 // the exact sum divided by the count, rounded once
	StdDev   float64 // with count - 1; 0 for a single value
}

// Count returns how many nodes have a value.
func (s Statistics) Count() int { return s.Nodes - s.NoData }

// Statistics returns the statistics of g's values.
//
// Sums are accumulated exactly, so that the result is the same for any number of workers and any order of rows; 0
// workers means one per CPU. The squares are those of each value's difference from the mean, rounded
// once each, with the mean's own rounding corrected for: values of 1e6 that differ by 1e-3 lose nothing. (Spreads below 1e-150
// lose digits: their squares are subnormal.)
//
// Two passes over the values, some 4 ns a node each on one core.
func (g *Grid) Statistics(workers int) Statistics {
	parts := splitValues(g.Values, workers)
	found := make([]partStatistics, len(parts))
	inParallel(len(parts), func(i int) { found[i].scan(parts[i]) })

	s := Statistics{Nodes: len(g.Values), Min: math.Inf(1), Max: math.Inf(-1)}
	var sum exact.Sum
	count := 0
	for i := range found {
		count += found[i].count
		s.Min, s.Max = min(s.Min, found[i].min), max(s.Max, found[i].max)
		sum.Merge(&found[i].sum)
	}
	s.NoData = s.Nodes - count
	if count == 0 {
		s.Min, s.Max, s.Mean, s.StdDev = math.NaN(), math.NaN(), math.NaN(), math.NaN()
		return s
	}
	s.Mean = sum.Mean(count)
	if count == 1 {
		return s
	}

	inParallel(len(parts), func(i int) { found[i].deviate(parts[i], s.Mean) })
	var deviations, squares exact.Sum
	for i := range found {
		deviations.Merge(&found[i].sum)
		squares.Merge(&found[i].squares)
	}
	// With d = z - m for a rounded mean m: sum (z - mean)² = sum d² - (sum d)²/n.
	d := deviations.Value()
	s.StdDev = math.Sqrt(max(0, squares.Value()-float64(d*d)/float64(count)) / float64(count-1))
	return s
}

// partStatistics is one worker's share.
type partStatistics struct {
	count        int
	min, max     float64
	sum, squares exact.Sum
}

func (p *partStatistics) scan(values []float64) {
	p.min, p.max = math.Inf(1), math.Inf(-1)
	for _, z := range values {
		if z != z {
			continue
		}
		p.count++
		if z < p.min {
			p.min = z
		}
		if z > p.max {
			p.max = z
		}
		p.sum.Add(z)
	}
}

// deviate replaces sum by that of the differences from mean, and fills squares.
func (p *partStatistics) deviate(values []float64, mean float64) {
	p.sum = exact.Sum{}
	for _, z := range values {
		if z != z {
			continue
		}
		d := z - mean
		p.sum.Add(d)
		p.squares.Add(float64(d * d))
	}
}

// splitValues cuts values into one part a worker, none of them small.
func splitValues(values []float64, workers int) [][]float64 {
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	const least = 1 << 14 // below this a goroutine costs more than it saves
	n := max(1, min(workers, len(values)/least))
	parts := make([][]float64, n)
	for i := range parts {
		parts[i] = values[i*len(values)/n : (i+1)*len(values)/n]
	}
	return parts
}

// inParallel calls do(0) to do(n-1), each in its own goroutine, and waits for all.
func inParallel(n int, do func(i int)) {
	if n == 1 {
		do(0)
		return
	}
	var wg sync.WaitGroup
	for i := range n {
		wg.Go(func() { do(i) })
	}
	wg.Wait()
}
