package numtext

import (
	"math"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"
)

func TestAppendRows(t *testing.T) {
	for _, c := range []struct {
		v        float64
		decimals int
		want     string
	}{
		{431.70500000000004, 3, "431.705"},
		{431.70500000000004, -1, "431.70500000000004"},
		{0, 2, "0.00"},
		{0, -1, "0"},
		{math.Copysign(0, -1), 0, "0"},
		{math.Copysign(0, -1), 3, "0.000"},
		{math.Copysign(0, -1), -1, "0"},
		{-0.004, 2, "0.00"},
		{-0.0049999, 2, "0.00"},
		{-0.006, 2, "-0.01"},
		{-1e-300, 30, "0." + strings.Repeat("0", 30)},
		{0.5, 0, "0"}, // ties to even
		{-0.5, 0, "0"},
		{1.5, 0, "2"},
		{2.5, 0, "2"},
		{0.125, 2, "0.12"},
		{0.375, 2, "0.38"},
		{1.005, 2, "1.00"}, // the double lies below
		{9.995, 2, "9.99"}, // likewise
		{0.1, 20, "0.10000000000000000555"},
		{99.999, 2, "100.00"},
		{-12.5, 1, "-12.5"},
		{5600000.25, 2, "5600000.25"},
		{1e15, 3, "1000000000000000.000"},
		{1 << 62, 0, "4611686018427387904"},
		{1e21, -1, "1e21"},
		{1e20, -1, "100000000000000000000"},
		{1e-6, -1, "0.000001"},
		{1e-7, -1, "1e-7"},
		{-9.5e-17, -1, "-9.5e-17"},
		{5e-324, -1, "5e-324"},
		{0.3, -1, "0.3"},
	} {
		if got := string(Append([]byte("x"), c.v, c.decimals)); got != "x"+c.want {
			t.Errorf("Append(%v, %d) = %s, want %s", c.v, c.decimals, got[1:], c.want)
		}
	}
	for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("Append(%v) does not panic", v)
				}
			}()
			Append(nil, v, 2)
		}()
	}
}

// draw makes numbers of every size, and many that are near or on a tie at few decimals.
func draw(r *rand.Rand) float64 {
	switch r.IntN(4) {
	case 0:
		return math.Float64frombits(r.Uint64()&^(0x7ff<<52) | uint64(1023-200+r.IntN(400))<<52)
	case 1:
		return float64(r.Int64N(1e12)-5e11) / pow10[r.IntN(9)]
	case 2: // ties of the binary fraction
		return float64(r.Int64N(1<<40)-1<<39) / float64(int64(1)<<r.IntN(30))
	default: // a tie or its neighbour
		v := float64(2*r.Int64N(1e9)+1) / 2 / pow10[r.IntN(6)]
		return math.Nextafter(v, math.Inf(r.IntN(3)-1))
	}
}

func TestAppendEqualsTheStandardLibrary(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for range 500_000 {
		v, decimals := draw(r), r.IntN(26)-1
		got := string(Append(nil, v, decimals))
		want := strconv.FormatFloat(v, 'f', decimals, 64)
		if decimals < 0 {
			back, err := strconv.ParseFloat(got, 64)
			if err != nil || back != v {
				t.Fatalf("Append(%v, -1) = %s, which reads as %v", v, got, back)
			}
			if len(got) > len(strconv.FormatFloat(v, 'e', -1, 64)) && len(got) > len(want) {
				t.Fatalf("Append(%v, -1) = %s, but %s is shorter", v, got, want)
			}
			continue
		}
		if strings.Trim(want, "-0.") == "" {
			want = strings.TrimPrefix(want, "-")
		}
		if got != want {
			t.Fatalf("Append(%v, %d) = %s, want %s", v, decimals, got, want)
		}
	}
}

func TestParseEqualsTheStandardLibrary(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for range 500_000 {
		v, decimals := draw(r), r.IntN(26)-1
		text := strconv.AppendFloat(nil, v, "fge"[r.IntN(3)], decimals, 64)
		want, err := strconv.ParseFloat(string(text), 64)
		if err != nil {
			t.Fatal(err)
		}
		if got, ok := Parse(text); !ok || got != want || math.Signbit(got) != math.Signbit(want) {
			t.Fatalf("Parse(%s) = %v, %v; want %v", text, got, ok, want)
		}
	}
}

func TestParse(t *testing.T) {
	for _, c := range []struct {
		text string
		want float64
		ok   bool
	}{
		{"12.4", 12.4, true},
		{"+.5", 0.5, true},
		{"-3.", -3, true},
		{"1e3", 1000, true},
		{"9007199254740993", 9007199254740992, true}, // 2^53 + 1: a tie, to even
		{"9007199254740993.0", 9007199254740992, true},
		{"184467440737095516160", 184467440737095516160, true}, // ten times 2^64 must not wrap
		{"18446744073709551617", 18446744073709551616, true},
		{"00000000000000000000000012.5", 12.5, true},
		{"5e-324", 5e-324, true},
		{"1e999", 0, false},
		{"", 0, false},
		{".", 0, false},
		{"-", 0, false},
		{"+-1", 0, false},
		{"1e", 0, false},
		{"1.2.3", 0, false},
		{"1,5", 0, false},
		{" 1", 0, false},
		{"0x1p3", 0, false},
		{"1_000", 0, false},
		{"inf", 0, false},
		{"NaN", 0, false},
		{"ee", 0, false},
	} {
		if got, ok := Parse([]byte(c.text)); ok != c.ok || ok && got != c.want {
			t.Errorf("Parse(%q) = %v, %v; want %v, %v", c.text, got, ok, c.want, c.ok)
		}
	}
}

func FuzzParse(f *testing.F) {
	for _, s := range []string{"0", "-12.4", ".5e3", "9007199254740993", "1e-320", "1_0", "nan"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		v, ok := Parse([]byte(s))
		if !ok {
			// What is refused must be no plain decimal number within the range of doubles.
			if _, err := strconv.ParseFloat(s, 64); err == nil && strings.Trim(s, "0123456789+-.eE") == "" {
				t.Fatalf("Parse(%q) is refused", s)
			}
			return
		}
		want, err := strconv.ParseFloat(s, 64)
		if err != nil || v != want {
			t.Fatalf("Parse(%q) = %v, want %v, %v", s, v, want, err)
		}
		if back, ok := Parse(Append(nil, v, Shortest)); !ok || back != v {
			t.Fatalf("%v reads back as %v", v, back)
		}
	})
}

func BenchmarkParse(b *testing.B) {
	r := rand.New(rand.NewPCG(5, 6))
	for _, c := range []struct {
		name     string
		decimals int
	}{{"decimals=3", 3}, {"decimals=full", -1}} {
		texts := make([][]byte, 1024)
		for i := range texts {
			texts[i] = Append(nil, 100+50*r.NormFloat64(), c.decimals)
		}
		b.Run(c.name, func(b *testing.B) {
			for b.Loop() {
				for _, text := range texts {
					if _, ok := Parse(text); !ok {
						b.Fatal(string(text))
					}
				}
			}
			b.ReportMetric(float64(len(texts))*float64(b.N)/b.Elapsed().Seconds(), "numbers/s")
		})
	}
}
