package picture

import (
	"fmt"
	"math"
	"testing"

	"pgregory.net/rapid"

	"isofacet/grid/decimal"
)

func TestRoundNumbers(t *testing.T) {
	for _, c := range []struct {
		v        float64
		down, up string
	}{
		{1, "1", "1"}, {1.5, "1", "2"}, {2, "2", "2"}, {2.0000001, "2", "5"}, {7, "5", "10"}, {0.3, "0.2", "0.5"}, {1e-9, "0.000000001", "0.000000001"},
		{430000, "200000", "500000"}, {0.1, "0.1", "0.1"}, {0.5, "0.5", "0.5"}, {99.9, "50", "100"},
	} {
		if down, up := roundDown(c.v).String(), roundUp(c.v).String(); down != c.down || up != c.up {
			t.Errorf("%v: %s and %s, want %s and %s", c.v, down, up, c.down, c.up)
		}
	}
	if roundUp(math.Inf(1)) != (decimal.Number{Unscaled: 5, Scale: -80}) || roundDown(5e-324) != (decimal.Number{Unscaled: 1, Scale: 80}) {
		t.Errorf("%v %v", roundUp(math.Inf(1)), roundDown(5e-324))
	}
	rapid.Check(t, func(t *rapid.T) {
		v := math.Pow(10, rapid.Float64Range(-60, 60).Draw(t, "exponent"))
		down, up := roundDown(v).Float64(), roundUp(v).Float64()
		if !(down <= v && v <= up) || up/down > 2.5+1e-9 {
			t.Fatalf("%v is between %v and %v", v, down, up)
		}
	})
}

func TestMultiples(t *testing.T) {
	for _, c := range []struct {
		step      string
		low, high float64
		want      string
	}{
		{"5", 202.1, 229.8, "[205 210 215 220 225]"}, {"0.1", 0.1, 0.3, "[0.1 0.2 0.3]"}, {"0.2", -0.3, 0.2, "[-0.2 0 0.2]"},
		{"1", 0.5, 0.9, "[]"}, {"1", 0, 100, "[]"}, {"1", -1e300, 1, "[]"},
	} {
		if got := fmt.Sprint(multiples(decimal.MustParse(c.step), c.low, c.high, 8)); got != c.want {
			t.Errorf("%s from %v to %v: %s, want %s", c.step, c.low, c.high, got, c.want)
		}
	}
}

func TestOutward(t *testing.T) {
	below, above := outward(decimal.MustParse("5"), 431196.3, 431621.9)
	if below != 431195 || above != 431625 {
		t.Errorf("%v %v", below, above)
	}
	if below, above = outward(decimal.MustParse("1"), -1e300, 1e300); below != -1e300 || above != 1e300 {
		t.Errorf("beyond decimals: %v %v", below, above)
	}
}
