package interp

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/paulmach/orb"
	"gonum.org/v1/gonum/spatial/kdtree"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
	"isofacet/triangulate/pointsets"
)

// TestNearest against gonum's kd-tree and against looking at all, inside and outside the
// hull, with breaklines and on lattices where many are equally near.
func TestNearest(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	check := func(name string, s *Surface) {
		n, err := s.Nearest(context.Background(), triangulate.Options{})
		if err != nil {
			t.Fatal(err)
		}
		pos := s.Mesh().Positions()
		var all kdtree.Points
		for _, p := range pos {
			all = append(all, kdtree.Point{p[0], p[1]})
		}
		tree := kdtree.New(all, false)
		b := orb.MultiPoint(pos).Bound()
		w, h := b.Max[0]-b.Min[0], b.Max[1]-b.Min[1]
		f := n.Finder()
		for range 400 {
			p := orb.Point{b.Min[0] + w*(1.4*r.Float64()-0.2), b.Min[1] + h*(1.4*r.Float64()-0.2)}
			if r.IntN(4) == 0 {
				p = pos[r.IntN(len(pos))]
			}
			_, squared := tree.Nearest(kdtree.Point{p[0], p[1]})
			at, got := f.At(p)
			if want := math.Sqrt(squared); math.Abs(got-want) > 4*ulp(want) {
				t.Fatalf("%s: nearest to %v is %v, %v away, want %v", name, p, at, got, want)
			}
			most := (w + h) / 20 * r.Float64()
			var found, want []orb.Point
			f.Within(p, most, func(q orb.Point) { found = append(found, q) })
			for _, q := range pos {
				if dx, dy := q[0]-p[0], q[1]-p[1]; dx*dx+dy*dy <= most*most {
					want = append(want, q)
				}
			}
			order := func(a, b orb.Point) int { return exact.CompareXY(a, b) }
			slices.SortFunc(found, order)
			slices.SortFunc(want, order)
			if !slices.Equal(found, want) {
				t.Fatalf("%s: within %v of %v: %d vertices, want %d", name, most, p, len(found), len(want))
			}
		}
	}
	for _, d := range []pointsets.Distribution{pointsets.All[0], pointsets.All[1], pointsets.All[len(pointsets.All)-2]} {
		pts := d.Points(1500, 2)
		check(d.Name, surfaceOf(t, pts, heights(pts, lumpy)))
	}
	pts := pointsets.Uniform(800, 3)
	s, _, err := WithBreaklines(context.Background(), pts, heights(pts, lumpy), terraceLines(5, 9), BreaklineOptions{Crossing: SplitCrossings, CrossingSpreadMax: 9})
	if err != nil {
		t.Fatal(err)
	}
	check("breaklines", s)
}

// TestUncertainty: in closed form at a corner, the middle of an edge and the centroid.
func TestUncertainty(t *testing.T) {
	s := surfaceOf(t, []orb.Point{{0, 0}, {4, 0}, {0, 4}}, []float64{1, 2, 3})
	sigma := make([]float64, 3)
	for i, u := range []float64{0.3, 0.4, 1.2} {
		sigma[s.Mesh().VertexOf(i)] = u
	}
	for _, c := range []struct {
		p    orb.Point
		want float64
	}{
		{orb.Point{0, 0}, 0.3},
		{orb.Point{2, 0}, 0.25}, // a half of 0.3 and 0.4
		{orb.Point{0, 2}, math.Sqrt(0.09+1.44) / 2},
		{orb.Point{4. / 3, 4. / 3}, 1.3 / 3}, // 3, 4, 12 and 13
		{orb.Point{1, 1}, math.Sqrt(0.25*0.09 + 0.0625*0.16 + 0.0625*1.44)},
		{orb.Point{3, 3}, math.NaN()},
	} {
		got := s.Uncertainty(s.Mesh().Locator().Locate(c.p), c.p, sigma)
		if !(math.Abs(got-c.want) <= 1e-15) && !(math.IsNaN(got) && math.IsNaN(c.want)) {
			t.Errorf("at %v: %v, want %v", c.p, got, c.want)
		}
	}
}

// TestSpread: gaps take the median of what is about them.
func TestSpread(t *testing.T) {
	nan := math.NaN()
	pts := []orb.Point{{0, 0}, {2, 0}, {4, 0}, {0, 2}, {2, 2}, {4, 2}, {9, 1}}
	s := surfaceOf(t, pts, make([]float64, len(pts)))
	values := make([]float64, len(pts))
	for i, x := range []float64{1, nan, nan, 2, 6, nan, nan} {
		values[s.Mesh().VertexOf(i)] = x
	}
	got := s.Spread(values)
	for i, want := range []float64{1, 2, 6, 2, 6, 6, 6} {
		if g := got[s.Mesh().VertexOf(i)]; g != want {
			t.Errorf("point %d: %v, want %v", i, g, want)
		}
	}
	if all := s.Spread([]float64{nan, nan, nan, nan, nan, nan, nan}); !math.IsNaN(all[0]) {
		t.Errorf("of nothing: %v", all)
	}
}
