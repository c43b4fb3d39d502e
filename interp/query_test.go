package interp

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// TestQueryIsSampling: in bulk as one by one, in the order asked, for any number of
// workers; places outside, at vertices, on edges and no places at all among them.
func TestQueryIsSampling(t *testing.T) {
	for _, d := range pointsets.All {
		pts := d.Points(20000, 9)
		s := surfaceOf(t, pts, heights(pts, lumpy))
		b := orb.MultiPoint(pts).Bound().Pad(0.1)
		r := rand.New(rand.NewPCG(19, 20))
		places := []orb.Point{{math.NaN(), 0}, {math.Inf(1), math.Inf(-1)}, {1e60, -1e60}}
		for range 3 * queryChunk {
			p := orb.Point{b.Min[0] + r.Float64()*(b.Max[0]-b.Min[0]), b.Min[1] + r.Float64()*(b.Max[1]-b.Min[1])}
			switch r.IntN(4) {
			case 0:
				p = pts[r.IntN(len(pts))]
			case 1:
				c := s.Mesh().Corners(triangulate.Triangle(r.IntN(s.Mesh().NumTriangles())))
				q, u := s.Mesh().Position(c[0]), s.Mesh().Position(c[1])
				p = orb.Point{(q[0] + u[0]) / 2, (q[1] + u[1]) / 2}
			}
			places = append(places, p)
		}
		sp := s.Sampler()
		want := make([]Sample, len(places))
		seen := map[triangulate.Place]int{}
		for i, p := range places {
			want[i] = sp.At(p)
			seen[want[i].Location.Place]++
		}
		for place := triangulate.Outside; place <= triangulate.OnVertex; place++ {
			if seen[place] == 0 {
				t.Errorf("%s: no place was %v", d.Name, place)
			}
		}
		for _, workers := range []int{0, 1, 2, 3, 8} {
			got, err := s.Query(context.Background(), places, workers)
			if err != nil {
				t.Fatal(err)
			}
			for i := range want {
				if got[i].Location != want[i].Location || math.Float64bits(got[i].Z) != math.Float64bits(want[i].Z) {
					t.Fatalf("%s, %d workers, place %d: %v, want %v", d.Name, workers, i, got[i], want[i])
				}
			}
		}
	}
}

func TestQueryStops(t *testing.T) {
	pts := pointsets.Uniform(100, 10)
	s := surfaceOf(t, pts, heights(pts, lumpy))
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if got, err := s.Query(ctx, pts, 2); !errors.Is(err, context.Canceled) || got != nil {
		t.Errorf("%v, %v, want no samples and context.Canceled", got, err)
	}
	if got, err := s.Query(context.Background(), nil, 2); err != nil || len(got) != 0 {
		t.Errorf("no places: %v, %v, want none", got, err)
	}
}

// TestHilbertCurve: all cells of the coarsest eight levels are visited once, each
// beside the one before.
func TestHilbertCurve(t *testing.T) {
	const n = 256
	h := newHilbert(orb.Bound{Max: orb.Point{n, n}})
	var at [n * n]orb.Point
	seen := 0
	for x := range n {
		for y := range n {
			k := h.index(orb.Point{float64(x), float64(y)}) >> 16
			if at[k] == (orb.Point{}) {
				seen++
			}
			at[k] = orb.Point{float64(x) + 1, float64(y) + 1}
		}
	}
	if seen != n*n {
		t.Fatalf("%d cells have numbers of their own, want %d", seen, n*n)
	}
	for k := 1; k < n*n; k++ {
		if d := math.Abs(at[k][0]-at[k-1][0]) + math.Abs(at[k][1]-at[k-1][1]); d != 1 {
			t.Fatalf("cell %d at %v, cell %d at %v: want neighbours", k-1, at[k-1], k, at[k])
		}
	}
}

func TestSortByHigh(t *testing.T) {
	r := rand.New(rand.NewPCG(21, 22))
	keys := make([]uint64, 10000)
	for i := range keys {
		keys[i] = uint64(r.Uint32()>>r.IntN(32))<<32 | uint64(i)
	}
	keys = sortByHigh(keys)
	for i := 1; i < len(keys); i++ {
		if keys[i-1] >= keys[i] { // stable: the index below breaks ties in order
			t.Fatalf("keys %d and %d: %x, %x", i-1, i, keys[i-1], keys[i])
		}
	}
}
