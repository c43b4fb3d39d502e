package units

import (
	"errors"
	"math"
	"math/big"
	"testing"

	"pgregory.net/rapid"
)

// The definitions: 0.3048 m, and 1200/3937 m (85 FR 62698; both in metres).
var metres = map[Unit]*big.Rat{Metre: big.NewRat(1, 1), FootInternational: big.NewRat(3048, 10000), FootUS: big.NewRat(1200, 3937)}

// Every conversion is the exact product, rounded once.
func TestConversionAgainstRationals(t *testing.T) {
	all := []Unit{Metre, FootInternational, FootUS}
	rapid.Check(t, func(t *rapid.T) {
		from, to := rapid.SampledFrom(all).Draw(t, "from"), rapid.SampledFrom(all).Draw(t, "to")
		size := rapid.SampledFrom([]float64{1e-60, 1e-3, 1, 1e3, 5e6, 1e60}).Draw(t, "size")
		v := size * rapid.Float64Range(-1, 1).Draw(t, "v")
		c, ok := Between(from, to)
		if !ok {
			t.Fatal("no conversion")
		}
		exact := new(big.Rat).SetFloat64(v)
		exact.Mul(exact, metres[from]).Quo(exact, metres[to])
		want, _ := exact.Float64()
		if got := c.Of(v); got != want && v != 0 {
			t.Fatalf("%v %v is %v %v, want %v", v, from, got, to, want)
		}
	})
}

// Ties and powers of two, where rounding by hand goes wrong.
func TestConversionAtPowersOfTwo(t *testing.T) {
	for from := range metres {
		for to := range metres {
			c, _ := Between(from, to)
			for e := -150; e < 150; e++ {
				for _, v := range []float64{math.Ldexp(1, e), math.Nextafter(math.Ldexp(1, e), 0), math.Ldexp(1200*3937*381, e), math.Ldexp(499999, e), math.Ldexp(500000*3, e)} {
					exact := new(big.Rat).SetFloat64(v)
					exact.Mul(exact, metres[from]).Quo(exact, metres[to])
					if want, _ := exact.Float64(); c.Of(v) != want || c.Of(-v) != -want {
						t.Fatalf("%v %v is %v %v, want %v", v, from, c.Of(v), to, want)
					}
				}
			}
		}
	}
}

// 2,000,000 feet of the two kinds differ by 4.000008 feet (2 in a million: 85 FR
// 62698 gives the ratio 0.999998).
func TestTwoMillionFeet(t *testing.T) {
	c, _ := Between(FootUS, FootInternational)
	if d := c.Of(2_000_000) - 2_000_000; math.Abs(d-4.000008) > 1e-9 {
		t.Errorf("2,000,000 ft-us are %v ft-int more", d)
	}
	back, _ := Between(FootInternational, FootUS)
	if by, over := back.Ratio(); by != 499999 || over != 500000 {
		t.Errorf("an international foot is %d/%d US survey feet", by, over)
	}
}

func TestParse(t *testing.T) {
	for _, u := range []Unit{Metre, FootInternational, FootUS} {
		if got, err := Parse(u.String()); got != u || err != nil {
			t.Errorf("%v: %v, %v", u, got, err)
		}
	}
	for text, ambiguous := range map[string]bool{"ft": true, "Feet": true, "foot": true, "yard": false, "": false, "unstated": false} {
		_, err := Parse(text)
		if e, ok := errors.AsType[*Error](err); !ok || e.Ambiguous != ambiguous {
			t.Errorf("%q: %v", text, err)
		}
	}
	if _, ok := Between(Unstated, Metre); ok {
		t.Error("an unstated unit is converted")
	}
	if c, ok := Between(Unstated, Unstated); !ok || c.Changes() || c.Of(3) != 3 {
		t.Error("nothing to convert is an error")
	}
}

func BenchmarkOf(b *testing.B) {
	c, _ := Between(FootUS, Metre)
	sum := 0.0
	for i := range b.N {
		sum += c.Of(float64(i) + 0.25)
	}
	if math.IsNaN(sum) {
		b.Fatal("no number")
	}
}
