package exact

import (
	"math"
	"math/rand/v2"
	"testing"
)

// A tally holds what a sum holds: numbers of every size and sign, in and out of the
// bins, more than a bin can take, infinities.
func TestTallyIsSum(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 8))
	for kind := range 6 {
		var tally Tally
		var sum Sum
		for i := range 20000 {
			x := r.Float64()
			switch kind {
			case 1:
				x = math.Ldexp(x, r.IntN(300)-190)
			case 2:
				x = math.Float64frombits(r.Uint64()>>1) * float64(r.IntN(2))
				if math.IsNaN(x) || math.IsInf(x, 0) {
					continue
				}
			case 3:
				x = math.Nextafter(2, 1) // fills one bin
			case 4:
				x -= 0.5
			case 5:
				x = []float64{tallySmallest, tallySmallest / 2, tallyLargest, tallyLargest / 2, 0}[i%5]
			}
			tally.Add(x)
			sum.Add(x)
			if i%7000 == 0 && tally.Sum().Value() != sum.Value() {
				t.Fatalf("kind %d: after %d numbers %v, want %v", kind, i+1, tally.Sum().Value(), sum.Value())
			}
		}
		var diff Sum
		diff.Merge(tally.Sum())
		diff.Subtract(&sum)
		if diff.Value() != 0 || tally.Sum().Value() != sum.Value() {
			t.Errorf("kind %d: %v, want %v", kind, tally.Sum().Value(), sum.Value())
		}
	}
	var tally Tally
	tally.Add(1)
	tally.Add(math.Inf(1))
	if v := tally.Sum().Value(); !math.IsInf(v, 1) {
		t.Errorf("with an infinity: %v", v)
	}
	tally.Add(math.Inf(-1))
	if v := tally.Sum().Value(); !math.IsNaN(v) {
		t.Errorf("with both: %v", v)
	}
}

var tallySmallest, tallyLargest = math.Ldexp(1, -160), math.Ldexp(1, 96)

func BenchmarkTally(b *testing.B) {
	r := rand.New(rand.NewPCG(4, 1))
	xs := make([]float64, 4096)
	for i := range xs {
		xs[i] = r.ExpFloat64() * r.ExpFloat64()
	}
	b.Run("tally", func(b *testing.B) {
		var t Tally
		for i := range b.N {
			t.Add(xs[i&4095])
		}
	})
	b.Run("four", func(b *testing.B) {
		var t [4]Tally
		for i := range b.N / 4 {
			AddFour(&t, xs[4*i&4095], xs[(4*i+1)&4095], xs[(4*i+2)&4095], xs[(4*i+3)&4095])
		}
	})
	b.Run("sum", func(b *testing.B) {
		var s Sum
		for i := range b.N {
			s.Add(xs[i&4095])
		}
	})
}
