package numtext_test

import (
	"fmt"
	"math"
	"math/big"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"isofacet/io/numtext"
)

func ExampleAppend() {
	row := numtext.Append(nil, 430000.125, 2)
	row = append(row, ',')
	row = numtext.Append(row, 0.1, numtext.Shortest)
	row = append(row, ',')
	row = numtext.Append(row, -0.0004, 2)
	fmt.Printf("%s\n", row)
	// Output: 430000.12,0.1,0.00
}

func TestAppend(t *testing.T) {
	negativeZero := math.Copysign(0, -1)
	for _, c := range []struct {
		v      float64
		places int
		want   string
	}{
		{0, 0, "0"}, {0, 3, "0.000"}, {negativeZero, 3, "0.000"}, {negativeZero, -1, "0"},
		{-0.4, 0, "0"}, {-0.5, 0, "0"}, {-0.6, 0, "-1"}, {0.5, 0, "0"}, {1.5, 0, "2"}, {2.5, 0, "2"}, {-1.5, 0, "-2"}, {-2.5, 0, "-2"},
		// 1.005 and 2.675 lie below their decimals, 1.015 above its: the exact binary value decides.
		{1.005, 2, "1.00"}, {2.675, 2, "2.67"}, {1.015, 2, "1.01"}, {1.025, 2, "1.02"},
		{0.05, 1, "0.1"}, {0.15, 1, "0.1"}, {0.25, 1, "0.2"}, {0.35, 1, "0.3"}, // 0.15 and 0.35 lie below
		{5600000.123, 3, "5600000.123"}, {-430000.0004, 3, "-430000.000"}, {12, 20, "12.00000000000000000000"},
		{1e-60, 3, "0.000"}, {-1e-60, 25, "0.0000000000000000000000000"}, {1e60, 0, "999999999999999949387135297074018866963645011013410073083904"},
		{4503599627370497.5, 0, "4503599627370498"}, {9007199254740993, 1, "9007199254740992.0"}, {123456789012345678, 2, "123456789012345680.00"},
		{1e20, -1, "100000000000000000000"}, {1e21, -1, "1e21"}, {-1.5e21, -1, "-1.5e21"}, {1e100, -1, "1e100"},
		{1e-6, -1, "0.000001"}, {1e-7, -1, "1e-7"}, {1.25e-10, -1, "1.25e-10"}, {-5e-324, -1, "-5e-324"}, {0.1, -1, "0.1"},
	} {
		if got := string(numtext.Append([]byte("x"), c.v, c.places)); got != "x"+c.want {
			t.Errorf("Append(%v, %d) = %s, want %s", c.v, c.places, got[1:], c.want)
		}
	}
}

// double draws values of every size, many of them next to a decimal half.
func double(t *rapid.T) float64 {
	switch rapid.IntRange(0, 3).Draw(t, "kind") {
	case 0:
		return rapid.Float64().Draw(t, "any")
	case 1:
		return float64(rapid.Int64Range(-1e13, 1e13).Draw(t, "k")) / math.Pow(2, float64(rapid.IntRange(0, 60).Draw(t, "b")))
	case 2:
		return rapid.Float64Range(-6e6, 6e6).Draw(t, "map")
	}
	half := float64(rapid.Int64Range(-1e12, 1e12).Draw(t, "k"))*10 + 5
	v := half / powerOfTen(rapid.IntRange(0, 16).Draw(t, "n"))
	for range rapid.IntRange(0, 2).Draw(t, "up") {
		v = math.Nextafter(v, math.Inf(1))
	}
	return v
}

func powerOfTen(n int) float64 {
	p, _ := strconv.ParseFloat("1e"+strconv.Itoa(n), 64)
	return p
}

// The oracle is package strconv, and for its own rounding the rational value.
func TestPlacesAreCorrectlyRounded(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v, places := double(t), rapid.IntRange(0, 24).Draw(t, "places")
		got := string(numtext.Append(nil, v, places))
		want := strconv.FormatFloat(v, 'f', places, 64)
		if strings.Trim(want, "-0.") == "" {
			want = strings.TrimPrefix(want, "-")
		}
		if got != want {
			t.Fatalf("Append(%v, %d) = %s, strconv writes %s", v, places, got, want)
		}
		text, _ := new(big.Rat).SetString(got)
		miss := new(big.Rat).Sub(text, new(big.Rat).SetFloat64(v))
		half := new(big.Rat).SetFrac(big.NewInt(1), new(big.Int).Mul(big.NewInt(2), new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(places)), nil)))
		if miss.Abs(miss).Cmp(half) > 0 {
			t.Fatalf("Append(%v, %d) = %s is more than half a unit off", v, places, got)
		}
	})
}

func TestRoundedIsWhatAReaderGets(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v, places := double(t), rapid.IntRange(-1, 24).Draw(t, "places")
		want, err := strconv.ParseFloat(string(numtext.Append(nil, v, places)), 64)
		if err != nil {
			t.Fatal(err)
		}
		if got := numtext.Rounded(v, places); math.Float64bits(got) != math.Float64bits(want) {
			t.Fatalf("Rounded(%v, %d) = %v, the text reads as %v", v, places, got, want)
		}
	})
}

func TestShortestReadsBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v := double(t)
		text := string(numtext.Append(nil, v, numtext.Shortest))
		if back, err := strconv.ParseFloat(text, 64); err != nil || back != v {
			t.Fatalf("%v is written %s and reads %v, %v", v, text, back, err)
		}
		if want := strconv.FormatFloat(v, 'g', -1, 64); len(text) > len(want)+22 {
			t.Fatalf("%v is written %s", v, text)
		}
		if strings.Contains(text, "+") || strings.Contains(text, "e-0") || strings.HasPrefix(text, "-0") && !strings.HasPrefix(text, "-0.") {
			t.Fatalf("%v is written %s", v, text)
		}
	})
}

func BenchmarkAppend(b *testing.B) {
	values := make([]float64, 4096)
	for i := range values {
		values[i] = 5.6e6 + float64(i*7919%100000)/7
	}
	for _, c := range []struct {
		name   string
		places int
	}{{"places=3", 3}, {"places=5", 5}, {"shortest", numtext.Shortest}} {
		b.Run(c.name, func(b *testing.B) {
			buf := make([]byte, 0, 1<<17)
			for b.Loop() {
				buf = buf[:0]
				for _, v := range values {
					buf = numtext.Append(buf, v, c.places)
				}
			}
			report(b, len(values))
		})
	}
	b.Run("floor=copy", func(b *testing.B) {
		buf := make([]byte, 0, 1<<17)
		for b.Loop() {
			buf = buf[:0]
			for range values {
				buf = append(buf, "5600000.000"...)
			}
		}
		report(b, len(values))
	})
}

func report(b *testing.B, n int) {
	b.ReportMetric(float64(n)*float64(b.N)/b.Elapsed().Seconds()/1e6, "Mnumbers/s")
	b.ReportMetric(0, "ns/op")
}
