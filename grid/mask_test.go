package grid_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/triangulate"
)

// A mask agrees with the region at every node, rims through nodes included.
func TestMaskEqualsRegion(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for range 200 {
		ring := func() orb.Ring {
			var r orb.Ring
			cx, cy := float64(rng.IntN(40)), float64(rng.IntN(40))
			for _, d := range [][2]float64{{1, 0}, {1, 1}, {0, 1}, {-1, 2}, {-1, 0}, {-2, -1}, {0, -1}, {1, -1}} {
				k := float64(1 + rng.IntN(30))
				r = append(r, orb.Point{cx + k*d[0]/2, cy + k*d[1]/2})
			}
			return append(r, r[0])
		}
		region, err := triangulate.NewRegion([]orb.Ring{ring(), ring()}, []orb.Ring{ring()})
		if err != nil {
			t.Fatal(err)
		}
		cell := decimal.MustParse([]string{"1", "0.5", "0.3", "7"}[rng.IntN(4)])
		spec := grid.Spec{CellX: cell, CellY: cell, Cols: 1 + rng.IntN(90), Rows: 1 + rng.IntN(90), ValuesAt: grid.NodePlace(rng.IntN(2))}
		g, err := grid.New(spec)
		if err != nil {
			t.Fatal(err)
		}
		for i := range g.Values {
			g.Values[i] = float64(i)
		}
		taken := g.Mask(region)
		for row := range spec.Rows {
			for col := range spec.Cols {
				p := orb.Point{spec.X(col), spec.Y(row)}
				if got := !math.IsNaN(g.At(row, col)); got != region.Contains(p) {
					t.Fatalf("node %v: kept %v", p, got)
				}
			}
		}
		if want := g.Statistics(1).NoData; taken != want {
			t.Fatalf("%d taken, %d no-data", taken, want)
		}
	}
}
