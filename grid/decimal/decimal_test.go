package decimal

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"math/big"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// rat is the oracle's view of a Number.
func rat(n Number) *big.Rat {
	r := new(big.Rat).SetInt64(n.Unscaled)
	p := new(big.Rat).SetInt(new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(max(n.Scale, -n.Scale))), nil))
	if n.Scale > 0 {
		return r.Quo(r, p)
	}
	return r.Mul(r, p)
}

func number(t *rapid.T, label string) Number {
	u := rapid.OneOf(rapid.Int64(), rapid.Int64Range(-1000, 1000), rapid.SampledFrom([]int64{
		math.MinInt64, math.MaxInt64, 1e18, -1e18, 1 << 53, 1<<53 + 1, 0, 10, 100})).Draw(t, label)
	s := rapid.OneOf(rapid.IntRange(-6, 12), rapid.IntRange(-60, 60)).Draw(t, label+" scale")
	return Number{Unscaled: u, Scale: int8(s)}
}

// fits says whether a Number can hold r: r in normal form has at most 63 bits of digits.
func fits(r *big.Rat) bool {
	if r.Sign() == 0 {
		return true
	}
	for s := -MaxScale; s <= MaxScale; s++ {
		p := new(big.Rat).SetInt(new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(max(s, -s))), nil))
		if s < 0 {
			p.Inv(p)
		}
		if q := p.Mul(p, r); q.IsInt() {
			return q.Num().IsInt64() // the first scale at which it is whole is the normal form
		}
	}
	return false
}

func isNormal(n Number) bool { return n == n.Normal() }

func checkResult(t *rapid.T, what string, got Number, err error, want *big.Rat) {
	t.Helper()
	if !fits(want) {
		if !errors.Is(err, ErrRange) {
			t.Fatalf("%s = %v, %v; want ErrRange for %s", what, got, err, want)
		}
		return
	}
	if err != nil || rat(got).Cmp(want) != 0 || !isNormal(got) {
		t.Fatalf("%s = %+v, %v; want %s", what, got, err, want)
	}
}

func TestArithmeticAgainstRationals(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a, b := number(t, "a"), number(t, "b")
		k := rapid.OneOf(rapid.Int64(), rapid.Int64Range(-1000, 1000)).Draw(t, "k")

		got, err := a.Add(b)
		checkResult(t, "a+b", got, err, new(big.Rat).Add(rat(a), rat(b)))
		got, err = a.Times(k)
		checkResult(t, "k a", got, err, new(big.Rat).Mul(rat(a), new(big.Rat).SetInt64(k)))
		if b.Normal().Unscaled != math.MinInt64 {
			got, err = a.Sub(b)
			checkResult(t, "a-b", got, err, new(big.Rat).Sub(rat(a), rat(b)))
		}
		if got, want := a.Cmp(b), rat(a).Cmp(rat(b)); got != want {
			t.Fatalf("cmp(%v, %v) = %d, want %d", a, b, got, want)
		}
		if got, want := a.Cmp(a.Normal()), 0; got != want {
			t.Fatalf("cmp with its own normal form = %d", got)
		}
	})
}

func TestFloat64RoundsOnce(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := number(t, "a")
		want, _ := rat(a).Float64() // nearest, ties to even: package math/big
		if got := a.Float64(); got != want {
			t.Fatalf("%+v.Float64() = %v, want %v", a, got, want)
		}
	})
}

func TestTextRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := number(t, "a")
		back, err := Parse(a.String())
		if err != nil || back != a.Normal() {
			t.Fatalf("Parse(%q) = %+v, %v; want %+v", a.String(), back, err, a.Normal())
		}
		r, ok := new(big.Rat).SetString(a.String())
		if !ok || r.Cmp(rat(a)) != 0 {
			t.Fatalf("text %q is not %s", a.String(), rat(a))
		}
	})
}

func TestFromFloatReadsBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := rapid.Float64Range(-1e60, 1e60).Draw(t, "f")
		if f != 0 && math.Abs(f) < 1e-60 {
			f = 0
		}
		n, err := FromFloat(f)
		if err != nil || n.Float64() != f {
			t.Fatalf("FromFloat(%v) = %v, %v", f, n, err)
		}
		if want := strconv.FormatFloat(f, 'f', -1, 64); n.String() != want && f != 0 {
			t.Fatalf("FromFloat(%v) = %s, want %s", f, n, want)
		}
	})
	for _, f := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), 5e-324, math.MaxFloat64} {
		if n, err := FromFloat(f); !errors.Is(err, ErrRange) {
			t.Errorf("FromFloat(%v) = %v, %v; want ErrRange", f, n, err)
		}
	}
}

func TestMultiplesAgainstRationals(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a, step := number(t, "a"), number(t, "step")
		if step.Sign() <= 0 {
			if _, _, err := a.FloorIndex(step); !errors.Is(err, ErrStep) {
				t.Fatalf("step %v: error %v, want ErrStep", step, err)
			}
			if a.IsMultipleOf(step) {
				t.Fatalf("%v is a multiple of %v", a, step)
			}
			return
		}
		q := new(big.Rat).Quo(rat(a), rat(step))
		if got := a.IsMultipleOf(step); got != q.IsInt() {
			t.Fatalf("%v multiple of %v: %v, quotient %s", a, step, got, q)
		}
		floor := new(big.Int).Div(q.Num(), q.Denom())
		k, whole, err := a.FloorIndex(step)
		if !floor.IsInt64() {
			if !errors.Is(err, ErrRange) {
				t.Fatalf("index %s: error %v, want ErrRange", floor, err)
			}
			return
		}
		if err != nil || k != floor.Int64() || whole != q.IsInt() {
			t.Fatalf("FloorIndex(%v, %v) = %d, %v, %v; want %s", a, step, k, whole, err, floor)
		}
		below, above, err := a.Around(step)
		if err != nil {
			if !errors.Is(err, ErrRange) {
				t.Fatal(err)
			}
			return
		}
		if below.Cmp(a) > 0 || above.Cmp(a) < 0 || (below == above) != whole {
			t.Fatalf("%v lies not between %v and %v", a, below, above)
		}
		if gap, err := above.Sub(below); err == nil && !whole && gap != step.Normal() {
			t.Fatalf("%v and %v are not one step %v apart", below, above, step)
		}
	})
}

// The third multiple of 0.1 is the double that prints as 0.3; in doubles 3 x 0.1 is 0.30000000000000004.
func TestMultiplesOfATenth(t *testing.T) {
	tenth := MustParse("0.1")
	for k := int64(-5000); k <= 5000; k++ {
		n, err := tenth.Times(k)
		if err != nil {
			t.Fatal(err)
		}
		want, err := strconv.ParseFloat(fmt.Sprintf("%de-1", k), 64)
		if err != nil || n.Float64() != want {
			t.Fatalf("%d x 0.1 = %v, want %v", k, n.Float64(), want)
		}
	}
	if n, _ := tenth.Times(3); n.String() != "0.3" || n.Float64() != 0.3 {
		t.Errorf("3 x 0.1 = %v", n)
	}
}

func TestParse(t *testing.T) {
	for _, c := range []struct {
		text string
		want Number
		err  error
	}{
		{"0", Number{}, nil},
		{"-0.000", Number{}, nil},
		{"0.10", Number{1, 1}, nil},
		{"12.5", Number{125, 1}, nil},
		{"+.5", Number{5, 1}, nil},
		{"3.", Number{3, 0}, nil},
		{"1000", Number{1, -3}, nil},
		{"-1.50e3", Number{-15, -2}, nil},
		{"2E-3", Number{2, 3}, nil},
		{"9223372036854775807", Number{math.MaxInt64, 0}, nil},
		{"-9223372036854775808", Number{math.MinInt64, 0}, nil},
		{"9223372036854775808", Number{}, ErrRange},
		{"-9223372036854775809", Number{}, ErrRange},
		{"92233720368547758070", Number{math.MaxInt64, -1}, nil},
		{"100000000000000000000000000001", Number{}, ErrRange},
		{"0." + strings.Repeat("0", 60) + "1", Number{1, 61}, nil},
		{strings.Repeat("0", 5000) + "7" + strings.Repeat("0", 20) + "." + strings.Repeat("0", 5000), Number{7, -20}, nil},
		{"1e90", Number{1, -90}, nil},
		{"1e91", Number{}, ErrRange},
		{"1e-91", Number{}, ErrRange},
		{"1e99999999999999999999", Number{}, ErrRange},
		{"0e99999999999999999999", Number{}, nil},
		{"1e-99999999999999999999", Number{}, ErrRange},
		{"", Number{}, ErrSyntax},
		{"-", Number{}, ErrSyntax},
		{".", Number{}, ErrSyntax},
		{"1.2.3", Number{}, ErrSyntax},
		{" 1", Number{}, ErrSyntax},
		{"1 ", Number{}, ErrSyntax},
		{"1,5", Number{}, ErrSyntax},
		{"1_000", Number{}, ErrSyntax},
		{"0x10", Number{}, ErrSyntax},
		{"1e", Number{}, ErrSyntax},
		{"1e+", Number{}, ErrSyntax},
		{"e5", Number{}, ErrSyntax},
		{"1e5.5", Number{}, ErrSyntax},
		{"nan", Number{}, ErrSyntax},
		{"inf", Number{}, ErrSyntax},
	} {
		got, err := Parse(c.text)
		if got != c.want || !errors.Is(err, c.err) {
			t.Errorf("Parse(%.60q) = %+v, %v; want %+v, %v", c.text, got, err, c.want, c.err)
		}
		var pe *ParseError
		if err != nil && (!errors.As(err, &pe) || pe.Text != c.text) {
			t.Errorf("Parse(%.60q): error %v carries no text", c.text, err)
		}
	}
}

func TestJSONCarriesText(t *testing.T) {
	b, err := json.Marshal(struct{ Cell Number }{MustParse("0.50")})
	if err != nil || string(b) != `{"Cell":"0.5"}` {
		t.Fatalf("%s, %v", b, err)
	}
	var back struct{ Cell Number }
	if err := json.Unmarshal(b, &back); err != nil || back.Cell != MustParse("0.5") {
		t.Fatalf("%v, %v", back, err)
	}
	if err := json.Unmarshal([]byte(`{"Cell":"x"}`), &back); !errors.Is(err, ErrSyntax) {
		t.Fatalf("error %v, want ErrSyntax", err)
	}
}

func TestNewAndNeg(t *testing.T) {
	if n, err := New(1200, 3); err != nil || n != (Number{12, 1}) {
		t.Errorf("New(1200, 3) = %+v, %v", n, err)
	}
	if _, err := New(1, MaxScale+1); !errors.Is(err, ErrRange) {
		t.Errorf("New beyond MaxScale: %v", err)
	}
	if n, err := New(10, MaxScale+1); err != nil || n != (Number{1, MaxScale}) {
		t.Errorf("New whose normal form is within MaxScale = %+v, %v", n, err)
	}
	if n := FromInt(-4500); n != (Number{-45, -2}) {
		t.Errorf("FromInt(-4500) = %+v", n)
	}
	if _, err := (Number{math.MinInt64, 0}).Neg(); !errors.Is(err, ErrRange) {
		t.Errorf("negative of -2^63: %v", err)
	}
	if d := (Number{2500, 2}).Decimals(); d != 0 {
		t.Errorf("25.00 needs %d decimals", d)
	}
}

func FuzzParse(f *testing.F) {
	for _, s := range []string{"0", "-0.05", "1e3", "9223372036854775808", "00.1e-5", ".", "1..2", "1e99999999999"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		n, err := Parse(s)
		if err != nil {
			if !errors.Is(err, ErrSyntax) && !errors.Is(err, ErrRange) {
				t.Fatalf("untyped error %v", err)
			}
			return
		}
		if !isNormal(n) {
			t.Fatalf("Parse(%q) = %+v is not in normal form", s, n)
		}
		if f, err := strconv.ParseFloat(s, 64); err != nil || f != n.Float64() {
			t.Fatalf("Parse(%q) = %v, the standard library reads %v, %v", s, n.Float64(), f, err)
		}
		if back, err := Parse(n.String()); err != nil || back != n {
			t.Fatalf("%+v printed as %q reads back as %+v, %v", n, n.String(), back, err)
		}
	})
}

func BenchmarkFloat64(b *testing.B) {
	for name, n := range map[string]Number{"short": MustParse("5600000.25"), "long": MustParse("123456.78901234567")} {
		b.Run(name, func(b *testing.B) {
			var sum float64
			for b.Loop() {
				sum += n.Float64()
			}
			_ = sum
		})
	}
}

func Example() {
	step := MustParse("0.1")
	third, err := step.Times(3)
	if err != nil {
		fmt.Println(err)
		return
	}
	below, above, err := MustParse("431.7").Around(MustParse("0.5"))
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(third, third.Float64())
	fmt.Println(below, above)
	// Output:
	// 0.3 0.3
	// 431.5 432
}
