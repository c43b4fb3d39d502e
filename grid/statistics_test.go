package grid

import (
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"pgregory.net/rapid"

	"isofacet/grid/decimal"
)

func gridOf(values ...float64) *Grid {
	return &Grid{Spec: Spec{CellX: decimal.FromInt(1), CellY: decimal.FromInt(1), Cols: len(values), Rows: 1}, Values: values}
}

// same is ==, with NaN equal to NaN.
func same(a, b float64) bool { return a == b || a != a && b != b }

func sameStatistics(a, b Statistics) bool {
	return a.Nodes == b.Nodes && a.NoData == b.NoData && same(a.Min, b.Min) && same(a.Max, b.Max) && same(a.Mean, b.Mean) && same(a.StdDev, b.StdDev)
}

func TestStatistics(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		name   string
		values []float64
		want   Statistics
	}{
		// 2, 4, 4, 4, 5, 5, 7, 9: mean 5, squares of differences 32 (a schoolbook row, from memory).
		{"schoolbook", []float64{2, 4, nan, 4, 4, 5, 5, 7, 9}, Statistics{9, 1, 2, 9, 5, math.Sqrt(32. / 7)}},
		{"none", []float64{nan, nan}, Statistics{2, 2, nan, nan, nan, nan}},
		{"one", []float64{nan, 7.25}, Statistics{2, 1, 7.25, 7.25, 7.25, 0}},
		{"alike", []float64{0.1, 0.1, 0.1}, Statistics{3, 0, 0.1, 0.1, 0.1, 0}},
		// Plain sums lose the 1 (1e16 + 1 = 1e16) and the spread.
		{"cancelling", []float64{1e16, 1, -1e16, 1}, Statistics{4, 0, -1e16, 1e16, 0.5, math.Sqrt((2e32 + 1) / 3)}},
		// Exact in binary: deviations are ±2^-10.
		{"large offset", []float64{5.6e6 + 1./1024, 5.6e6 - 1./1024}, Statistics{2, 0, 5.6e6 - 1./1024, 5.6e6 + 1./1024, 5.6e6, math.Sqrt2 / 1024}},
	} {
		if got := gridOf(c.values...).Statistics(1); !sameStatistics(got, c.want) {
			t.Errorf("%s: %+v, want %+v", c.name, got, c.want)
		}
	}
}

func TestStatisticsAgainstRationals(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		offset := rapid.SampledFrom([]float64{0, 100, -5e6, 1e12}).Draw(t, "offset")
		values := rapid.SliceOfN(rapid.Float64Range(-1, 1), 2, 60).Draw(t, "values")
		sum, n := new(big.Rat), new(big.Rat).SetInt64(int64(len(values)))
		for i := range values {
			if math.Abs(values[i]) < 1e-100 {
				values[i] = 0 // squares would run into the subnormal numbers
			}
			values[i] += offset
			sum.Add(sum, new(big.Rat).SetFloat64(values[i]))
		}
		mean := new(big.Rat).Quo(sum, n)
		squares := new(big.Rat)
		for _, v := range values {
			d := new(big.Rat).SetFloat64(v)
			d.Sub(d, mean)
			squares.Add(squares, d.Mul(d, d))
		}
		variance, _ := squares.Quo(squares, n.Sub(n, big.NewRat(1, 1))).Float64()
		wantMean, _ := mean.Float64()
		s := gridOf(values...).Statistics(1)
		if s.Mean != wantMean {
			t.Fatalf("mean %v, want %v", s.Mean, wantMean)
		}
		// Each square is rounded once, their sum once, quotient and root once each; a deviation from the rounded mean is rounded
		// once as well: a relative error of a few 2^-53.
		if want := math.Sqrt(variance); math.Abs(s.StdDev-want) > 1e-15*want {
			t.Fatalf("standard deviation %v, want %v", s.StdDev, want)
		}
	})
}

func TestStatisticsDoNotDependOnWorkersOrOrder(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	values := make([]float64, 200_003)
	for i := range values {
		values[i] = r.NormFloat64() * math.Exp(20*r.Float64())
		if i%7 == 0 {
			values[i] = math.NaN()
		}
	}
	want := gridOf(values...).Statistics(1)
	for _, workers := range []int{0, 2, 3, 8} {
		if got := gridOf(values...).Statistics(workers); got != want {
			t.Errorf("%d workers: %+v, want %+v", workers, got, want)
		}
	}
	r.Shuffle(len(values), func(i, j int) { values[i], values[j] = values[j], values[i] })
	if got := gridOf(values...).Statistics(2); got != want {
		t.Errorf("shuffled: %+v, want %+v", got, want)
	}
}

func BenchmarkStatistics(b *testing.B) {
	values := make([]float64, 4_000_000)
	r := rand.New(rand.NewPCG(1, 2))
	for i := range values {
		values[i] = 100 + r.NormFloat64()
	}
	g := gridOf(values...)
	b.Run("floor/n=4e6", func(b *testing.B) { // only add the values up
		for b.Loop() {
			sum := 0.0
			for _, v := range values {
				sum += v
			}
			if sum == 0 {
				b.Fatal(sum)
			}
		}
		b.ReportMetric(float64(len(values))*float64(b.N)/b.Elapsed().Seconds(), "nodes/s")
	})
	for _, workers := range []int{1, 2} {
		b.Run(fmt.Sprintf("workers=%d/n=4e6", workers), func(b *testing.B) {
			for b.Loop() {
				g.Statistics(workers)
			}
			b.ReportMetric(float64(len(values))*float64(b.N)/b.Elapsed().Seconds(), "nodes/s")
		})
	}
}
