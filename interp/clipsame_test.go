package interp_test

import (
	"context"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Where edges run together, their crossings with a ring may round to one point although
// their heights there differ: three edges leave one vertex within a millionth of each
// other. Whichever way the ring runs and wherever it begins, the point has one height.
func TestClipIsTheSameEitherWayP2(t *testing.T) {
	const x, y = 500000, 4600000 // places there are 9e-10 apart in y
	pts := []orb.Point{{x, y}, {x + 10, y + 1}, {x + 10, y + 1 + 0x1p-20}, {x + 10, y + 1 + 0x1p-19}, {x - 10, y + 20}, {x - 10, y - 20}}
	z := []float64{0, 0, 1000, 2000, 5, 7}
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := interp.FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	ring := []orb.Point{{x + 0x1p-13, y - 3}, {x + 0x1p-13, y + 3}, {x - 9, y + 3}, {x - 9, y - 3}}
	var want map[orb.Point]float64
	for turn := range ring {
		for _, reverse := range []bool{false, true} {
			at := append(slices.Clone(ring[turn:]), ring[:turn]...)
			at = append(at, at[0])
			if reverse {
				slices.Reverse(at)
			}
			r, err := triangulate.NewRegion([]orb.Ring{at}, nil)
			if err != nil {
				t.Fatal(err)
			}
			c, err := s.Clip(context.Background(), r, triangulate.Options{})
			if err != nil {
				t.Fatal(err)
			}
			got := map[orb.Point]float64{}
			for v := range c.Surface.Mesh().Vertices() {
				got[c.Surface.Mesh().Position(v)] = c.Surface.Z()[v]
			}
			if want == nil {
				want = got
			}
			if len(got) != len(want) {
				t.Errorf("from %d, reversed %v: %d vertices, want %d", turn, reverse, len(got), len(want))
			}
			for p, z := range want {
				if got[p] != z {
					t.Errorf("from %d, reversed %v: height %v at %v, want %v", turn, reverse, got[p], p, z)
				}
			}
		}
	}
}
