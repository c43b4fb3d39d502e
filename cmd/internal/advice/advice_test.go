package advice

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"

	"isofacet/triangulate"
)

func mesh(t *testing.T, pts []orb.Point) *triangulate.Mesh {
	t.Helper()
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return m
}

func lattice(n int, step float64) []orb.Point {
	var pts []orb.Point
	for i := range n {
		for j := range n {
			pts = append(pts, orb.Point{step * float64(i), step * float64(j)})
		}
	}
	return pts
}

func TestSpacing(t *testing.T) {
	for _, row := range []struct {
		name string
		pts  []orb.Point
		want float64
	}{
		// A lattice has 2n(n-1) sides and (n-1)² diagonals: the median is a side.
		{"lattice", lattice(9, 2.5), 2.5},
		{"one triangle, sides 3 4 5", []orb.Point{{0, 0}, {3, 0}, {0, 4}}, 4},
		{"a lattice and one far reading", append(lattice(9, 2.5), orb.Point{1000, 1000}), 2.5},
		{"two readings", []orb.Point{{0, 0}, {3, 0}}, math.NaN()},
		{"in line", []orb.Point{{0, 0}, {1, 1}, {2, 2}}, math.NaN()},
	} {
		got := Spacing(mesh(t, row.pts), 3)
		if got != row.want && !(math.IsNaN(got) && math.IsNaN(row.want)) {
			t.Errorf("%s: %v, want %v", row.name, got, row.want)
		}
	}
}

// The slow way: all lengths, sorted.
func TestSpacingIsTheMedian(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for range 20 {
		pts := make([]orb.Point, 3+r.IntN(200))
		for i := range pts {
			pts[i] = orb.Point{r.ExpFloat64() * 100, r.NormFloat64()}
		}
		m := mesh(t, pts)
		var lengths []float64
		for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
			if m.Twin(h) < h {
				lengths = append(lengths, math.Sqrt(squaredDistance(m.Position(m.Origin(h)), m.Position(m.Dest(h)))))
			}
		}
		slices.Sort(lengths)
		want := lengths[(len(lengths)-1)/2]
		for _, workers := range []int{1, 2, 8} {
			if got := Spacing(m, workers); got != want {
				t.Errorf("%d readings, %d workers: %v, want %v", len(pts), workers, got, want)
			}
		}
	}
}

func BenchmarkSpacing(b *testing.B) {
	r := rand.New(rand.NewPCG(5, 6))
	pts := make([]orb.Point, 1e5)
	for i := range pts {
		pts[i] = orb.Point{r.Float64(), r.Float64()}
	}
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		b.Fatal(err)
	}
	rate := func(b *testing.B) {
		b.ReportMetric(float64(len(pts))*float64(b.N)/b.Elapsed().Seconds()/1e6, "Mvertices/s")
	}
	b.Run("spacing/uniform/n=1e5", func(b *testing.B) {
		for b.Loop() {
			Spacing(m, 1)
		}
		rate(b)
	})
	b.Run("outline/uniform/n=1e5", func(b *testing.B) {
		limit := 3 * Spacing(m, 1)
		for b.Loop() {
			LongOutline(m, limit)
		}
		rate(b)
	})
	b.Run("floor=read every twin", func(b *testing.B) {
		n := 0
		for b.Loop() {
			for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
				n += int(m.Twin(h))
			}
		}
		rate(b)
	})
}

func TestLongOutline(t *testing.T) {
	// A lattice of 8 x 8 steps and one reading 100 steps to its east. The hull is
	// the square and a triangle over its eastern side: base 8, height 100.
	pts := append(lattice(9, 1), orb.Point{108, 4})
	if got, want := LongOutline(mesh(t, pts), 3), 400.0/464; math.Abs(got-want) > 1e-15 {
		t.Errorf("share beyond a limit of 3 is %v, want %v", got, want)
	}
	if got := LongOutline(mesh(t, pts), 200); got != 0 {
		t.Errorf("share beyond a limit of 200 is %v, want 0", got)
	}
	// Long edges that no long triangle joins to the outside are kept: a ring of
	// readings round an empty middle.
	var ring []orb.Point
	for _, p := range lattice(31, 1) {
		if math.Abs(p[0]-15) > 8 || math.Abs(p[1]-15) > 8 {
			ring = append(ring, p)
		}
	}
	if got := LongOutline(mesh(t, ring), 3); got != 0 {
		t.Errorf("share of an inner gap is %v, want 0", got)
	}
	if got := LongOutline(mesh(t, pts[:2]), 3); got != 0 {
		t.Errorf("share without triangles is %v, want 0", got)
	}
}

func TestSuggestions(t *testing.T) {
	for _, row := range []struct {
		name string
		got  Suggestion
		want string
	}{
		{"cell for 4.31: between 1.44 and 2.16", Cell(4.31), "2"},
		{"cell for 0.1", Cell(0.1), "0.05"},
		{"cell for 1", Cell(1), "0.5"},
		{"cell for 25000", Cell(25000), "10000"},
		{"edge for 4.31: between 8.6 and 21.6", MaxEdge(4.31), "10"},
		{"edge for 1", MaxEdge(1), "5"},
		{"edge for 0.003", MaxEdge(0.003), "0.01"},
	} {
		if !row.got.OK || row.got.Value.String() != row.want || row.got.Reason == "" {
			t.Errorf("%s: %+v, want %s", row.name, row.got, row.want)
		}
	}
	if s := Cell(math.NaN()); s.OK || s.Reason == "" {
		t.Errorf("cell without triangles: %+v", s)
	}
	if s := Interval(nil); s.OK {
		t.Errorf("interval without values: %+v", s)
	}
	if s := Interval([]float64{7, 7, 7}); s.OK {
		t.Errorf("interval of equal values: %+v", s)
	}
}

// The window of the doc comment: an edge limit always lies in two to five
// spacings, and an interval makes five to ten steps, give or take the rounding.
func TestSuggestionsStayInTheirWindow(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		spacing := rapid.Float64Range(1e-6, 1e9).Draw(t, "spacing")
		edge := MaxEdge(spacing).Value.Float64() / spacing
		if edge < 1.999 || edge > 5.001 {
			t.Errorf("edge limit is %v spacings", edge)
		}
		cell := spacing / Cell(spacing).Value.Float64()
		if cell < 1.54 || cell > 3.88 { // the middle of 2 and 3, times the widest half step of the series
			t.Errorf("spacing is %v cells", cell)
		}
		steps := spacing / Interval([]float64{-spacing / 2, spacing / 2}).Value.Float64()
		if steps < 4.4 || steps > 11.1 {
			t.Errorf("%v intervals", steps)
		}
	})
}

func TestIntervalOutlastsBlunders(t *testing.T) {
	z := make([]float64, 1000)
	for i := range z {
		z[i] = 100 + float64(i%50)/10
	}
	want := Interval(z).Value
	z[3], z[500], z[900] = -9999, 0, 1e6
	if got := Interval(z).Value; got != want {
		t.Errorf("with three blunders the interval is %v, want %v", got, want)
	}
}

func TestSelectKth(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		values := rapid.SliceOfN(rapid.Float64Range(-3, 3), 1, 60).Draw(t, "values")
		if rapid.Bool().Draw(t, "ties") {
			for i := range values {
				values[i] = math.Round(values[i])
			}
		}
		k := rapid.IntRange(0, len(values)-1).Draw(t, "k")
		sorted := slices.Clone(values)
		slices.Sort(sorted)
		if got := selectKth(values, k); got != sorted[k] {
			t.Errorf("number %d is %v, want %v", k, got, sorted[k])
		}
	})
}

func TestOrderDoesNotMatter(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	pts := make([]orb.Point, 500)
	for i := range pts {
		pts[i] = orb.Point{430000 + math.Round(r.Float64()*1e5)/1e3, 5600000 + math.Round(r.Float64()*1e5)/1e3}
	}
	spacing := Spacing(mesh(t, pts), 1)
	share := LongOutline(mesh(t, pts), 2*spacing)
	for range 5 {
		r.Shuffle(len(pts), func(i, j int) { pts[i], pts[j] = pts[j], pts[i] })
		m := mesh(t, pts)
		if s := Spacing(m, 2); s != spacing {
			t.Errorf("spacing is %v after a shuffle, was %v", s, spacing)
		}
		if s := LongOutline(m, 2*spacing); s != share {
			t.Errorf("share is %v after a shuffle, was %v", s, share)
		}
	}
}
