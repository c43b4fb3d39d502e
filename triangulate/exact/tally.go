package exact

import "math"

// Tally is a Sum for millions of positive numbers of everyday size, at a third of the
// time: a number goes to a bin by its exponent, whole, without a shift. It is exact as
// Sum is; any other number is taken as well, in the time that Sum takes.
//
// A Tally is 3.2 kB. The zero value is empty. It is not safe for use by several
// goroutines at once.
//
// Source: the large superaccumulator of Neal 2015, for the exponents that matter.
type Tally struct {
	// bin i holds the sum of the mantissas of numbers of 2^(i+tallyLeast-1023) and
	// above, below the next power of two, as whole numbers.
	bin  [tallyBins]uint64
	rest Sum
}

// Numbers from 2^-160 (1e-48) up to 2^96 (1e28) have bins.
const (
	tallyBins  = 256
	tallyLeast = 1023 - 160
	tallyFull  = 1 << 63 // a mantissa more still fits
)

// Add adds x.
func (t *Tally) Add(x float64) {
	b := math.Float64bits(x)
	if i := b>>52 - tallyLeast; i < tallyBins { // else x is negative, or of another size
		if s := t.bin[i] + (b&(1<<52-1) | 1<<52); s < tallyFull {
			t.bin[i] = s
			return
		}
	}
	t.addSlowly(x)
}

// AddFour adds four numbers, one to each of four tallies, in one call.
func AddFour(t *[4]Tally, x0, x1, x2, x3 float64) {
	for k, x := range [4]float64{x0, x1, x2, x3} {
		b := math.Float64bits(x)
		if i := b>>52 - tallyLeast; i < tallyBins {
			if s := t[k].bin[i] + (b&(1<<52-1) | 1<<52); s < tallyFull {
				t[k].bin[i] = s
				continue
			}
		}
		t[k].addSlowly(x)
	}
}

// addSlowly adds x where Add does not: its bin is full, or it has none.
//
//go:noinline
func (t *Tally) addSlowly(x float64) {
	if i := math.Float64bits(x)>>52 - tallyLeast; i < tallyBins {
		t.empty(int(i))
	}
	t.rest.Add(x)
}

// empty moves what is in bin i to the rest. Both halves are exact.
func (t *Tally) empty(i int) {
	s := t.bin[i]
	t.bin[i] = 0
	unit := i + tallyLeast - 1075 // the exponent of the last bit of a mantissa
	t.rest.Add(math.Ldexp(float64(s>>32), unit+32))
	t.rest.Add(math.Ldexp(float64(s&(1<<32-1)), unit))
}

// Merge adds what o holds to t. o keeps its value; t and o must be different.
func (t *Tally) Merge(o *Tally) {
	t.rest.Merge(o.Sum())
}

// Sum returns the sum so far, for reading and merging; it stays the tally's own.
func (t *Tally) Sum() *Sum {
	for i, s := range t.bin {
		if s != 0 {
			t.empty(i)
		}
	}
	return &t.rest
}
