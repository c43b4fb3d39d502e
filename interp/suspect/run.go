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
//
// The shots of the clearest run are taken out before the others are judged: those that lie
// next to a run look off to the other side.
func (f *finder) runs(ctx context.Context, sequence []triangulate.Vertex) (found []Run, err error) {
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
	w := &walk{f: f, vs: vs, x: make([]float64, len(vs)), reach: make([]float64, len(vs)), taken: make([]bool, len(vs))}
	if err := w.miss(ctx, 0, len(vs)); err != nil {
		return nil, err
	}
	w.judge(f.opt.ScaleLeast)
	chosen, err := w.choose(ctx)
	if err != nil {
		return nil, err
	}
	slices.SortFunc(chosen, func(a, b stretchOff) int { return a.first - b.first })
	for _, c := range chosen {
		c.run.First, c.run.Last = at[c.first], at[c.last]
		found = append(found, c.run)
	}
	return found, nil
}

// A walk is the shots of a sequence that can be expected, in a row.
type walk struct {
	f     *finder
	vs    []triangulate.Vertex
	x     []float64 // how far each lies off what all but the block about it expect
	reach []float64 // how far that reaches
	taken []bool    // those of runs that are settled
	parts []part    // of windowLong/3 shots each
}

// A part of a walk has a middle and a scale of what its shots and those of its neighbours
// lie off, and the reach that is usual there.
type part struct{ middle, scale, usual float64 }

const partLong = windowLong / 3

// miss works out x and reach of the shots from low up to but without high. There are two
// ways to cut into blocks; the one counts in which a shot lies further from the block's
// ends.
func (w *walk) miss(ctx context.Context, low, high int) error {
	n := len(w.vs)
	var left []triangulate.Left
	for _, start := range []int{0, -blockLength / 2} {
		for start += max(0, low-start) / blockLength * blockLength; start < high; start += blockLength {
			if err := ctx.Err(); err != nil {
				return err
			}
			from, to := max(start, 0), min(start+blockLength, n)
			left = w.f.near.r.WithoutAll(left[:0], w.vs[from:to])
			for i := max(from, low); i < min(to, high); i++ {
				if k := i - start; k >= blockLength/4 && k < blockLength-blockLength/4 || i < blockLength/4 || i >= n-blockLength/4 {
					w.x[i] = w.f.own[w.vs[i]] - w.f.work.ValueOf(left[i-from], w.f.near.pos[w.vs[i]])
					w.reach[i] = w.f.work.Reach(left[i-from], w.f.near.pos[w.vs[i]])
				}
			}
		}
	}
	return nil
}

// judge works out what shots usually lie off, part by part.
func (w *walk) judge(least float64) {
	var window []float64
	for from := 0; from < len(w.x); from += partLong {
		low, high := max(0, from-partLong), min(len(w.x), from+2*partLong)
		window = append(window[:0], w.x[low:high]...)
		p := part{middle: median(window)}
		for i, v := range window {
			window[i] = math.Abs(v - p.middle)
		}
		p.scale = max(normal*median(window), least)
		window = append(window[:0], w.reach[low:high]...)
		p.usual = runReachUsual * median(window)
		w.parts = append(w.parts, p)
	}
}

// off is how far shot i lies from the middle of those about it; nothing if it belongs to
// a run already.
func (w *walk) off(i int) float64 {
	if w.taken[i] {
		return 0
	}
	return w.x[i] - w.parts[i/partLong].middle
}

// scale is what shot i may lie off; as in surroundings.scale, one that reaches unusually
// far has a larger one.
func (w *walk) scale(i int) float64 {
	p := w.parts[i/partLong]
	return p.scale * stretch(w.reach[i], p.usual)
}

// settle finds the ends of a run about the shots from first to last, and whether it is
// one.
func (w *walk) settle(first, last int) (c stretchOff, ok bool) {
	values := make([]float64, 0, last-first+1+2*runMoved)
	fill := func(a, b int, of func(int) float64) []float64 {
		values = values[:0]
		for i := a; i <= b; i++ {
			values = append(values, of(i))
		}
		return values
	}
	amount := median(fill(first, last, w.off))
	for range 3 {
		middle := (first + last) / 2
		best, sum := math.Inf(-1), 0.0
		for i := middle; i >= max(0, first-runMoved) && !w.taken[i]; i-- {
			if sum += evidence(w.off(i), amount); sum > best {
				best, c.first = sum, i
			}
		}
		best, sum = math.Inf(-1), 0
		for i := middle; i <= min(len(w.x)-1, last+runMoved) && !w.taken[i]; i++ {
			if sum += evidence(w.off(i), amount); sum > best {
				best, c.last = sum, i
			}
		}
		if next := median(fill(c.first, c.last, w.off)); next != amount {
			amount = next
			continue
		}
		break
	}
	n := c.last - c.first + 1
	total := 0.0
	for i := c.first; i <= c.last; i++ {
		total += w.off(i)
		s := w.scale(i)
		c.clear += evidence(w.off(i), amount) / float64(s*s)
	}
	spread := normal * median(fill(c.first, c.last, func(i int) float64 { return math.Abs(w.off(i) - amount) }))
	c.run = Run{Amount: total / float64(n), Spread: spread, Scale: w.scale(c.first)}
	return c, n >= runLeast && math.Abs(amount) >= runAmount*median(fill(c.first, c.last, w.scale)) && runLoose*spread <= math.Abs(amount)
}

// evidence is how much a shot that is off by x speaks for "moved by this amount" against
// "not moved": (x² - (x - amount)²) / 2, positive nearer the amount.
func evidence(x, amount float64) float64 {
	return float64(amount*x) - float64(float64(amount*amount)/2)
}

// without judges anew what is pinned, after the shots of runs have been taken out: they
// are pinned no longer, and of the others those pass that were off because of a run.
func (f *finder) without(runs []Run) {
	for _, run := range runs {
		for _, s := range run.Shots {
			delete(f.pinned, s.Vertex)
		}
	}
	if len(runs) == 0 {
		return
	}
	for v := range f.pinned {
		f.expect(v)
	}
	for v := range f.pinned {
		f.judge(v, f.near)
	}
}
