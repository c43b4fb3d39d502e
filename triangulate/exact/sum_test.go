package exact

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"pgregory.net/rapid"
)

// nearest rounds a rational once, to the nearest float64.
func nearest(x *big.Rat) float64 {
	f, _ := x.Float64()
	if f == 0 {
		return 0
	}
	return f
}

// anyFloat draws finite numbers over all exponents, with clusters that cancel.
func anyFloat(t *rapid.T, label string) float64 {
	return rapid.OneOf(
		rapid.Custom(func(t *rapid.T) float64 {
			m := rapid.Uint64().Draw(t, "bits")
			for m>>52&0x7ff == 0x7ff {
				m ^= 1 << 60
			}
			return math.Float64frombits(m)
		}),
		rapid.Float64Range(-1, 1),
		rapid.SampledFrom([]float64{0, math.Copysign(0, -1), 1, -1, 0x1p-53, -0x1p-53, 0x1p-54, math.MaxFloat64, -math.MaxFloat64,
			math.SmallestNonzeroFloat64, -math.SmallestNonzeroFloat64, 0x1p-1022, 0x1.fffffffffffffp-1023, 1e16, 0.1}),
	).Draw(t, label)
}

// TestSumIsCorrectlyRounded: sums, products and means against rationals.
func TestSumIsCorrectlyRounded(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var parts [3]Sum
		want := new(big.Rat)
		n := rapid.IntRange(0, 40).Draw(t, "n")
		for range n {
			s := &parts[rapid.IntRange(0, 2).Draw(t, "part")]
			x := anyFloat(t, "x")
			if rapid.Bool().Draw(t, "product") {
				y := anyFloat(t, "y")
				s.AddProduct(x, y)
				want.Add(want, new(big.Rat).Mul(rat(x), rat(y)))
				continue
			}
			s.Add(x)
			want.Add(want, rat(x))
		}
		if rapid.Bool().Draw(t, "subtracted") {
			var less Sum
			less.Subtract(&parts[2])
			parts[2] = Sum{}
			parts[2].Subtract(&less)
		}
		if rapid.Bool().Draw(t, "backwards") {
			parts[2].Merge(&parts[0])
			parts[2].Merge(&parts[1])
			parts[0] = parts[2]
		} else {
			parts[0].Merge(&parts[1])
			parts[0].Merge(&parts[2])
		}
		check(t, "Value", parts[0].Value(), nearest(want))
		check(t, "Value again", parts[0].Value(), nearest(want))
		k := rapid.IntRange(1, 1<<40).Draw(t, "k")
		check(t, "Mean", parts[0].Mean(k), nearest(new(big.Rat).Quo(want, new(big.Rat).SetInt64(int64(k)))))
	})
}

func check(t rapid.TB, what string, got, want float64) {
	t.Helper()
	if math.Float64bits(got) != math.Float64bits(want) {
		t.Fatalf("%s = %x, want %x", what, got, want)
	}
}

// TestSumIsFreeOfOrder: many additions, so that carries move often, forwards,
// backwards and split; the largest numbers with one sign fill chunks fastest.
func TestSumIsFreeOfOrder(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	x := make([]float64, 20000)
	want := new(big.Float).SetPrec(3000)
	for i := range x {
		x[i] = math.Ldexp(r.Float64()-0.5, r.IntN(120)-60)
		if i%3 == 0 {
			x[i] = math.Nextafter(2, 1)
		}
		want.Add(want, big.NewFloat(x[i]))
	}
	rounded, _ := want.Float64()
	var forwards, backwards, even, odd Sum
	for i, v := range x {
		forwards.Add(v)
		backwards.Add(x[len(x)-1-i])
		if i%2 == 0 {
			even.Add(v)
		} else {
			odd.AddProduct(v, -1)
			odd.AddProduct(v, 2)
		}
	}
	even.Merge(&odd)
	for name, s := range map[string]*Sum{"forwards": &forwards, "backwards": &backwards, "merged": &even} {
		if got := s.Value(); got != rounded {
			t.Errorf("%s: %x, want %x", name, got, rounded)
		}
	}
	for range 300 { // merging again and again needs no carrying in between
		even.Merge(&odd)
		forwards.Merge(&odd)
	}
	if even.Value() != forwards.Value() {
		t.Errorf("merged %x and %x, want the same", even.Value(), forwards.Value())
	}
}

func TestSumSpecialValues(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	cases := []struct {
		name string
		add  []float64
		want float64
	}{
		{"nothing", nil, 0},
		{"minus zero", []float64{math.Copysign(0, -1)}, 0},
		{"cancels", []float64{1e300, 1, -1e300, -1}, 0},
		{"infinity", []float64{1, inf, inf}, inf},
		{"minus infinity", []float64{-inf, 1e308}, -inf},
		{"both infinities", []float64{inf, -inf}, nan},
		{"not a number", []float64{nan, inf}, nan},
		{"overflows on the way only", []float64{math.MaxFloat64, math.MaxFloat64, -math.MaxFloat64}, math.MaxFloat64},
		{"overflows", []float64{math.MaxFloat64, math.MaxFloat64}, inf},
		{"overflows by rounding", []float64{math.MaxFloat64, 0x1p970}, inf},
		{"just does not overflow", []float64{math.MaxFloat64, 0x1p970, -5e-324}, math.MaxFloat64},
		{"smallest", []float64{5e-324}, 5e-324},
	}
	for _, c := range cases {
		var s Sum
		for _, x := range c.add {
			s.Add(x)
		}
		if got := s.Value(); math.Float64bits(got) != math.Float64bits(c.want) && !(math.IsNaN(got) && math.IsNaN(c.want)) {
			t.Errorf("%s: %v, want %v", c.name, got, c.want)
		}
	}
	var s Sum
	s.AddProduct(0, inf)
	if !math.IsNaN(s.Value()) {
		t.Errorf("0 times infinity: %v, want NaN", s.Value())
	}
	var finite, infinite Sum
	infinite.Add(inf)
	finite.Subtract(&infinite)
	if got := finite.Value(); got != -inf {
		t.Errorf("0 less infinity: %v, want -Inf", got)
	}
	infinite.Merge(&finite)
	if got := infinite.Value(); !math.IsNaN(got) {
		t.Errorf("infinity and minus infinity: %v, want NaN", got)
	}
	finite.Subtract(&infinite)
	if got := finite.Value(); !math.IsNaN(got) {
		t.Errorf("minus infinity less both: %v, want NaN", got)
	}
	defer func() {
		if recover() == nil {
			t.Error("Mean(0) did not panic")
		}
	}()
	s.Mean(0)
}
