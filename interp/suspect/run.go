package suspect

import (
	"context"
	"math"
	"slices"

	"isofacet/triangulate"
)

// A Run is a number of shots in succession that are moved by one amount, as by a rod of
// another length than was noted.
type Run struct {
	// First and Last are the run's ends, by their places in the sequence.
	First, Last int
	// Amount is how far the run lies above what the others expect, the mean of its shots,
	// Spread how far these lie apart (the median absolute deviation, times 1.4826).
	Amount, Spread float64
	// Scale is what shots in a row miss by about it.
	Scale float64
	// Shots are those of the run that can be expected.
	Shots []Shot
}

// A Shot of a run, and how far it lies above what is expected without the shots about it
// in the sequence.
type Shot struct {
	Vertex   triangulate.Vertex
	Residual float64
}

// How runs are looked for.
const (
	blockLength = 16  // shots that are expected together from all others
	windowLong  = 192 // shots that the scale is taken from
	runLeast    = 5   // shots, fewer are suspects each for itself
	runOff      = 2.5 // scales that each shot lies off at least, a few excepted
	runAmount   = 5   // scales that the amount comes to at least
	runLoose    = 4   // the amount is at least this many times the spread
	runMoved    = 8   // shots by which the ends are moved at most
	// Of the median reach this much is usual: along the rim of a survey whole rows are
	// expected from afar.
	runReachUsual = 1.5
)

// runs looks for runs in a sequence of vertices. Those that are on the outline or on
// lines, of which nothing can be said, are passed over.
//
// Each shot is expected from all but the block of blockLength shots about it, so that a
// run does not vouch for itself. A run begins as a stretch of shots that lie off to one
// side; its ends are where the sum of the evidence for "moved by this amount" against
// "not moved" is largest (a likelihood ratio; Page 1954).
func (f *finder) runs(ctx context.Context, sequence []triangulate.Vertex) ([]Run, error) {
	var at []int // places in the sequence of those that can be expected
	var vs []triangulate.Vertex
	for i, v := range sequence {
		if _, lined := f.lines[v]; v != triangulate.NoVertex && !lined && !f.near.r.OnOutline(v) {
			at, vs = append(at, i), append(vs, v)
		}
	}
	if len(vs) < 3*blockLength {
		return nil, nil
	}
	x, reach, err := f.missBlocks(ctx, vs)
	if err != nil {
		return nil, err
	}
	residual := slices.Clone(x)
	scale := centre(x, reach, f.opt.ScaleLeast)
	var found []Run
	for first := 0; first < len(x); first++ {
		side := math.Copysign(1, x[first])
		off := func(i int) bool { return side*x[i] > runOff*scale[i] }
		if !off(first) {
			continue
		}
		last, count := first, 1
		for i := first + 1; i < len(x) && i <= last+2; i++ {
			if off(i) {
				last = i
				count++
			}
		}
		if count < runLeast {
			continue
		}
		if a, b, amount, spread, ok := settle(x, scale, first, last); ok {
			run := Run{First: at[a], Last: at[b], Amount: amount, Spread: spread, Scale: scale[first]}
			for i := a; i <= b; i++ {
				run.Shots = append(run.Shots, Shot{vs[i], residual[i]})
			}
			found = append(found, run)
			last = max(last, b)
		}
		first = last
	}
	return found, nil
}

// missBlocks returns how far each of vs lies from what all but the block about it
// expect, and how far that reaches. There are two ways to cut into blocks; the one counts in which it lies further
// from the block's ends.
func (f *finder) missBlocks(ctx context.Context, vs []triangulate.Vertex) (x, reach []float64, err error) {
	x, reach = make([]float64, len(vs)), make([]float64, len(vs))
	var left []triangulate.Left
	for _, start := range []int{0, -blockLength / 2} {
		for ; start < len(vs); start += blockLength {
			if err := ctx.Err(); err != nil {
				return nil, nil, err
			}
			low, high := max(start, 0), min(start+blockLength, len(vs))
			left = f.near.r.WithoutAll(left[:0], vs[low:high])
			for i := low; i < high; i++ {
				if k := i - start; k >= blockLength/4 && k < blockLength-blockLength/4 || i < blockLength/4 || i >= len(vs)-blockLength/4 {
					x[i] = f.own[vs[i]] - f.work.ValueOf(left[i-low], f.near.pos[vs[i]])
					reach[i] = f.work.Reach(left[i-low], f.near.pos[vs[i]])
				}
			}
		}
	}
	return x, reach, nil
}

// centre takes the middle of the values about each from it, in place, and returns their
// scales; as in surroundings.scale, one that reaches unusually far has a larger one.
func centre(x, reach []float64, least float64) []float64 {
	scale := make([]float64, len(x))
	middles := make([]float64, len(x))
	var window []float64
	const step = windowLong / 3
	for from := 0; from < len(x); from += step {
		to := min(from+step, len(x))
		window = append(window[:0], x[max(0, from-step):min(len(x), to+step)]...)
		middle := median(window)
		for i, v := range window {
			window[i] = math.Abs(v - middle)
		}
		s := max(normal*median(window), least)
		window = append(window[:0], reach[max(0, from-step):min(len(x), to+step)]...)
		usual := runReachUsual * median(window)
		for i := from; i < to; i++ {
			scale[i], middles[i] = s*stretch(reach[i], usual), middle
		}
	}
	for i := range x {
		x[i] -= middles[i]
	}
	return scale
}

// settle finds the ends of a run about the shots from first to last, and whether it is
// one.
func settle(x, scale []float64, first, last int) (a, b int, amount, spread float64, ok bool) {
	values := append([]float64(nil), x[first:last+1]...)
	amount = median(values)
	for range 3 {
		// The evidence of a shot is (x² - (x - amount)²) / 2: positive nearer the amount.
		evidence := func(i int) float64 {
			return float64(amount*x[i]) - float64(float64(amount*amount)/2)
		}
		middle := (first + last) / 2
		best, sum := math.Inf(-1), 0.0
		for i := middle; i >= max(0, first-runMoved); i-- {
			if sum += evidence(i); sum > best {
				best, a = sum, i
			}
		}
		best, sum = math.Inf(-1), 0
		for i := middle; i <= min(len(x)-1, last+runMoved); i++ {
			if sum += evidence(i); sum > best {
				best, b = sum, i
			}
		}
		values = append(values[:0], x[a:b+1]...)
		if next := median(values); next != amount {
			amount = next
			continue
		}
		break
	}
	total := 0.0
	for i := a; i <= b; i++ {
		values[i-a] = math.Abs(x[i] - amount)
		total += x[i]
	}
	spread = normal * median(values)
	n := b - a + 1
	return a, b, total / float64(n), spread,
		n >= runLeast && math.Abs(amount) >= runAmount*median(slices.Clone(scale[a:b+1])) && runLoose*spread <= math.Abs(amount)
}
