package overlay

import (
	"context"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// uniform makes n places in the unit square and heights.
func uniform(seed uint64, n int) ([]orb.Point, []float64) {
	r := rand.New(rand.NewPCG(seed, 1))
	pts, z := make([]orb.Point, n), make([]float64, n)
	for i := range pts {
		pts[i], z[i] = orb.Point{r.Float64(), r.Float64()}, r.Float64()
	}
	return pts, z
}

// BenchmarkBetween lays 1e6 points over 1e6 others; BenchmarkDelaunay is what it is
// measured against.
func BenchmarkBetween(b *testing.B) {
	n := 1000000
	p, z := uniform(1, n)
	q, y := uniform(2, n)
	from, to := surface(b, p, z), surface(b, q, y)
	b.ResetTimer()
	for range b.N {
		f := figures(b, from, to, 0)
		b.ReportMetric(float64(f.Pieces), "pieces")
	}
}

func BenchmarkDelaunay(b *testing.B) {
	p, _ := uniform(1, 1000000)
	for range b.N {
		if _, err := triangulate.Delaunay(context.Background(), p, triangulate.Options{}); err != nil {
			b.Fatal(err)
		}
	}
}
