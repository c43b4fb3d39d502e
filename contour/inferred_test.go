package contour_test

import (
	"context"
	"math"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/contour"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

func splitter(t *testing.T, s *interp.Surface, beyond float64) *contour.Splitter {
	t.Helper()
	n, err := s.Nearest(context.Background(), triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return contour.NewSplitter(n, beyond)
}

// TestInferredInClosedForm: between two readings 10 apart, the line along them is within 3
// of one of them up to 3 and from 7 on; off by 1.8 up to 2.4 = sqrt(9 - 3.24).
func TestInferredInClosedForm(t *testing.T) {
	m, err := triangulate.Delaunay(context.Background(), []orb.Point{{0, 0}, {10, 0}, {5, 40}}, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	s, err := interp.New(m, []float64{1, 2, 3})
	if err != nil {
		t.Fatal(err)
	}
	sp := splitter(t, s, 3)
	for _, c := range []struct {
		name string
		line contour.Line
		want []contour.Part
	}{
		{"along", contour.Line{Points: orb.LineString{{0, 0}, {10, 0}}},
			[]contour.Part{{orb.LineString{{0, 0}, {3, 0}}, false, false}, {orb.LineString{{3, 0}, {7, 0}}, false, true}, {orb.LineString{{7, 0}, {10, 0}}, false, false}}},
		{"beside", contour.Line{Points: orb.LineString{{-5, 1.8}, {5, 1.8}}},
			[]contour.Part{{orb.LineString{{-5, 1.8}, {-2.4, 1.8}}, false, true}, {orb.LineString{{-2.4, 1.8}, {2.4, 1.8}}, false, false}, {orb.LineString{{2.4, 1.8}, {5, 1.8}}, false, true}}},
		{"far", contour.Line{Points: orb.LineString{{0, 20}, {3, 20}, {6, 21}}}, []contour.Part{{orb.LineString{{0, 20}, {3, 20}, {6, 21}}, false, true}}},
		{"at the distance", contour.Line{Points: orb.LineString{{0, 3}, {0, -3}}}, []contour.Part{{orb.LineString{{0, 3}, {0, -3}}, false, false}}},
		{"a ring that is all near", contour.Line{Closed: true, Points: orb.LineString{{-1, -1}, {1, -1}, {0, 1}, {-1, -1}}},
			[]contour.Part{{orb.LineString{{-1, -1}, {1, -1}, {0, 1}, {-1, -1}}, true, false}}},
		{"a ring is not divided where it begins", contour.Line{Closed: true, Points: orb.LineString{{0, 0}, {5, 0}, {5, 1}, {0, 1}, {0, 0}}},
			[]contour.Part{{orb.LineString{{math.Sqrt(8), 1}, {0, 1}, {0, 0}, {3, 0}}, false, false}, {orb.LineString{{3, 0}, {5, 0}, {5, 1}, {math.Sqrt(8), 1}}, false, true}}},
	} {
		got := sp.Split(&c.line)
		same := len(got) == len(c.want)
		for i := range min(len(got), len(c.want)) {
			g, w := got[i], c.want[i]
			same = same && g.Closed == w.Closed && g.Inferred == w.Inferred && len(g.Points) == len(w.Points)
			for k := range min(len(g.Points), len(w.Points)) {
				same = same && math.Abs(g.Points[k][0]-w.Points[k][0]) < 1e-14 && math.Abs(g.Points[k][1]-w.Points[k][1]) < 1e-14
			}
		}
		if !same {
			t.Errorf("%s: %v, want %v", c.name, got, c.want)
		}
	}
}

// TestInferredByLookingAtAll: parts hang together and make up the line, and each is on its
// side of the distance from the nearest of all readings, at many places along it.
func TestInferredByLookingAtAll(t *testing.T) {
	pts := pointsets.Uniform(400, 4)
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	z := make([]float64, len(pts))
	for i, p := range pts {
		z[i] = math.Sin(9*p[0]) * math.Cos(7*p[1])
	}
	s, err := interp.FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	levels, err := contour.Every(decimal.MustParse("0.2"), decimal.Number{}, 5, -1, 1)
	if err != nil {
		t.Fatal(err)
	}
	lines, _, err := contour.Lines(context.Background(), s, levels, contour.Options{})
	if err != nil {
		t.Fatal(err)
	}
	nearest := func(p orb.Point) float64 {
		best := math.Inf(1)
		for _, q := range pts {
			best = min(best, math.Hypot(p[0]-q[0], p[1]-q[1]))
		}
		return best
	}
	for _, beyond := range []float64{0, 0.005, 0.02, 0.03, 1} {
		sp := splitter(t, s, beyond)
		kinds := map[bool]int{}
		for i := range lines {
			parts := sp.Split(&lines[i])
			length := 0.0
			for k, p := range parts {
				kinds[p.Inferred]++
				if k > 0 && (parts[k-1].Points[len(parts[k-1].Points)-1] != p.Points[0] || parts[k-1].Inferred == p.Inferred) {
					t.Fatalf("beyond %v, line %d: parts %d and %d do not follow each other", beyond, i, k-1, k)
				}
				for j := 1; j < len(p.Points); j++ {
					a, b := p.Points[j-1], p.Points[j]
					length += math.Hypot(b[0]-a[0], b[1]-a[1])
					for _, f := range []float64{0.03, 0.5, 0.97} {
						q := orb.Point{a[0] + f*(b[0]-a[0]), a[1] + f*(b[1]-a[1])}
						if d := nearest(q); p.Inferred && d < beyond-1e-12 || !p.Inferred && d > beyond+1e-12 {
							t.Fatalf("beyond %v, line %d: inferred %v at %v, %v from the nearest", beyond, i, p.Inferred, q, d)
						}
					}
				}
			}
			if math.Abs(length-lines[i].Length()) > 1e-12 {
				t.Fatalf("beyond %v, line %d: parts are %v long, the line %v", beyond, i, length, lines[i].Length())
			}
		}
		if beyond == 1 && kinds[true] > 0 || beyond == 0.02 && (kinds[true] < 20 || kinds[false] < 20) {
			t.Errorf("beyond %v: %d parts measured, %d inferred", beyond, kinds[false], kinds[true])
		}
	}
}
