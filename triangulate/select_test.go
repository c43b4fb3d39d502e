package triangulate

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
	"time"
)

// adversary writes an input on which every turn of selectAround, without its
// limit of turns, narrows the range by a sample's length at most: it runs the
// selection and decides values only when they are asked for, always as the
// smallest of those left (McIlroy, A killer adversary for quicksort, 1999). It
// returns the values and the number of turns.
func adversary(n int) (x []float64, turns int) {
	const undecided = math.MaxFloat64
	r := make([]record, n)
	for i := range r {
		r[i] = record{x: undecided, id: int32(i)}
	}
	x = make([]float64, n)
	next := 1.0
	decide := func(e *record) {
		if e.x == undecided {
			e.x = next
			x[e.id] = next
			next++
		}
	}
	lo, hi, k := 0, n, n/2
	for hi-lo > fewRecords && turns < n {
		turns++
		m := hi - lo
		for _, at := range sampled(m) {
			decide(&r[lo+at])
		}
		low, high := pivots(r[lo:hi], k-lo, 0)
		i := lo + partition(r[lo:hi], low, 0)
		j := i + partition(r[i:hi], high, 0)
		switch {
		case k < i:
			hi = i
		case k >= j:
			lo = j
		default:
			lo, hi = i, j
		}
		if hi-lo <= m-m/8 {
			continue
		}
		decide(&r[k])
		p := r[k]
		i = lo + partition(r[lo:hi], p, 0)
		j = i + partitionEqual(r[i:hi], p)
		switch {
		case k < i:
			hi = i
		case k >= j:
			lo = j
		default:
			lo, hi = i, j
		}
	}
	for i := range r {
		decide(&r[i])
	}
	return x, turns
}

// sampled lists the positions among m records at which pivots looks.
func sampled(m int) []int {
	size := 9
	for 2*size+1 <= 79 && size*size*2 < m {
		size = 2*size + 1
	}
	at := make([]int, size)
	for i := range at {
		at[i] = (2*i + 1) * m / (2 * size)
	}
	return at
}

// TestSelectionAgainstAnAdversary: an input made against the sampling costs no
// more than a few sorts.
func TestSelectionAgainstAnAdversary(t *testing.T) {
	if testing.Short() {
		t.Skip("-short: it compares times, which the race detector stretches unevenly")
	}
	const n = 100_000
	x, turns := adversary(n)
	if turns < 200 {
		t.Fatalf("the input takes %d turns only: it is not made against the sampling as it is now", turns)
	}
	rec := make([]record, n)
	took := func(f func()) time.Duration {
		for i := range rec {
			rec[i] = record{x: x[i], id: int32(i)}
		}
		start := time.Now()
		f()
		return time.Since(start)
	}
	cutting, sorting := took(func() { cut(rec, 0) }), took(func() { sortRecords(rec, 0) })
	t.Logf("%d turns without a limit; cut %v, sort %v", turns, cutting, sorting)
	if cutting > 8*sorting {
		t.Errorf("the cut took %v, a sort takes %v", cutting, sorting)
	}
}

// TestCut: the two sides of a cut are in order, equal places stay together, and
// no record is lost, on rows full of repeats.
func TestCut(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 2))
	for range 3000 {
		n := 2 + r.IntN(400)
		values := 1 + r.IntN(n)
		rec := make([]record, n)
		for i := range rec {
			rec[i] = record{float64(r.IntN(values)), float64(r.IntN(1 + values/10)), int32(i)}
		}
		axis := r.IntN(2)
		at := cut(rec, axis)
		seen := make([]bool, n)
		for _, e := range rec {
			seen[e.id] = true
		}
		if slices.Contains(seen, false) {
			t.Fatalf("n=%d: a record is lost", n)
		}
		oneSide := at == 0 || at == n
		for i := range rec[:at] {
			for j := at; j < n; j++ {
				if !before(&rec[i], &rec[j], axis) {
					t.Fatalf("n=%d, axis %d: %v left and %v right of the cut", n, axis, rec[i], rec[j])
				}
			}
		}
		if oneSide {
			for i := range rec {
				if !samePlace(&rec[i], &rec[0]) {
					t.Fatalf("n=%d: not cut, but %v and %v", n, rec[0], rec[i])
				}
			}
		}
	}
}
