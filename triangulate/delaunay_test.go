package triangulate_test

import (
	"context"
	"testing"
	"slices"
	"cmp"

	"github.com/paulmach/orb"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

func TestQuick(t *testing.T) {
	for _, n := range []int{0,1,2,3,4,5,10,100,1000,20000} {
		for name, f := range map[string]func(int,uint64)[]orb.Point{"u":pointsets.Uniform,"l":pointsets.UnitLattice,"l01":pointsets.Lattice01,"s":pointsets.ScanLines,"c":pointsets.Clustered,"o":pointsets.Circle} {
			pts := f(n, 1)
			pts = append(pts, pts[:len(pts)/3]...)
			m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
			if err != nil { t.Fatal(err) }
			if err := m.Check(); err != nil { t.Errorf("%s %d: %v", name, n, err) }
		}
	}
}
func BenchmarkDelaunay(b *testing.B) {
	pts := pointsets.Uniform(1e6, 1)
	for _, w := range []int{1,2} {
		for name, f := range map[string]func(int,uint64)[]orb.Point{"u":pointsets.Uniform,"l":pointsets.UnitLattice,"l01":pointsets.Lattice01,"s":pointsets.ScanLines,"c":pointsets.Clustered,"survey":pointsets.Survey} {
	pts := f(1e6, 1)
	b.Run(name+string(rune('0'+w)), func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			triangulate.Delaunay(context.Background(), pts, triangulate.Options{Workers: w})
		}
	})
	}}
	b.Run("sort", func(b *testing.B) {
		for b.Loop() {
			b.StopTimer()
			q := slices.Clone(pts)
			b.StartTimer()
			slices.SortFunc(q, func(a, b orb.Point) int { if c := cmp.Compare(a[0],b[0]); c!=0 {return c}; return cmp.Compare(a[1],b[1])})
		}
	})
}
