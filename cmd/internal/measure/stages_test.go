package measure

import (
	"bytes"
	"cmp"
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"runtime"
	"slices"
	"strconv"
	"testing"
	"time"

	"github.com/paulmach/orb"

	"isofacet/contour"
	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/io/readings"
	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

const n, rounds = 1_000_000, 5

// task is something to time; limit is its largest time as a part of another's, 0
// where none is promised.
type task struct {
	name  string
	cores int // that Go may use: collecting garbage, too, would else use the other
	run   func()
	of    string
	limit float64
}

// TestStageRatios times the stages over 1e6 uniform points beside each other, and
// holds the medians to what is promised.
//
//	ISOFACET_MEASURE=1 go test -run StageRatios -v ./cmd/internal/measure
func TestStageRatios(t *testing.T) {
	if os.Getenv("ISOFACET_MEASURE") == "" {
		t.Skip("ISOFACET_MEASURE is not set: ratios mean something on a quiet machine only")
	}
	ctx := context.Background()
	must := func(err error) {
		if err != nil {
			t.Fatal(err)
		}
	}
	pts := pointsets.Uniform(n, 1)
	s := surface(t, pts, func(p orb.Point) float64 {
		return math.Sin(10*math.Pi*p[0]) * math.Sin(10*math.Pi*p[1])
	})
	// The same hills, ten times as high and far above the datum: ground, over which
	// nearly every triangle is gentle (interp.Plane).
	ground := surface(t, pts, func(p orb.Point) float64 {
		return 100 + float64(10*float64(math.Sin(10*math.Pi*p[0])*math.Sin(10*math.Pi*p[1])))
	})
	rng := rand.New(rand.NewPCG(1, 1))
	noise := surface(t, pts, func(orb.Point) float64 { return rng.Float64() })
	spec := grid.Spec{CellX: decimal.MustParse("0.00025"), CellY: decimal.MustParse("0.00025"), Cols: 4000, Rows: 4000}
	asked := make([]orb.Point, n)
	for i := range asked {
		asked[i] = orb.Point{rng.Float64(), rng.Float64()}
	}
	levels, err := contour.Every(decimal.MustParse("0.1"), decimal.MustParse("0.05"), 5, -0.999, 0.999)
	must(err)
	text := rows()
	parse := func(workers int) func() {
		return func() {
			set, err := readings.Read(ctx, []readings.Source{readings.FromBytes("shots.csv", text)}, readings.Options{Workers: workers})
			must(err)
			if set.Len() != n {
				t.Fatalf("%d readings", set.Len())
			}
		}
	}
	lines := func(s *interp.Surface) func() {
		return func() {
			_, err := contour.EachLine(ctx, s, levels, contour.Options{Workers: 2}, func(contour.Line) error { return nil })
			must(err)
		}
	}
	work := make([]orb.Point, n)
	tasks := []task{
		{"sort", 1, func() {
			slices.SortFunc(work, func(a, b orb.Point) int {
				if c := cmp.Compare(a[0], b[0]); c != 0 {
					return c
				}
				return cmp.Compare(a[1], b[1])
			})
		}, "", 0},
		{"Delaunay, 1 core", 1, func() {
			_, err := triangulate.Delaunay(ctx, pts, triangulate.Options{Workers: 1})
			must(err)
		}, "sort", 3},
		{"Delaunay, 2 cores", 2, func() {
			_, err := triangulate.Delaunay(ctx, pts, triangulate.Options{Workers: 2})
			must(err)
		}, "sort", 1.7},
		{"fill 4000 x 4000, 2 cores", 2, func() {
			_, err := grid.Fill(ctx, spec, ground, grid.Options{Workers: 2})
			must(err)
		}, "Delaunay, 2 cores", 0.5},
		{"the same, heights around 0", 2, func() {
			_, err := grid.Fill(ctx, spec, s, grid.Options{Workers: 2})
			must(err)
		}, "Delaunay, 2 cores", 0},
		{"1e6 random queries, 2 cores", 2, func() {
			_, err := s.Query(ctx, asked, 2)
			must(err)
		}, "Delaunay, 2 cores", 1},
		{"parse 1e6 rows, 1 core", 1, parse(1), "sort", 0.6},
		{"parse 1e6 rows, 2 cores", 2, parse(2), "parse 1e6 rows, 1 core", 1 / 1.7},
		{fmt.Sprintf("%d levels, smooth, 2 cores", len(levels)), 2, lines(s), "Delaunay, 2 cores", 0.3},
		{"the same, white noise", 2, lines(noise), "Delaunay, 2 cores", 0},
	}
	took := map[string][]float64{}
	for range rounds + 1 { // the first round warms up
		for _, k := range tasks {
			copy(work, pts)
			runtime.GC()
			all := runtime.GOMAXPROCS(k.cores)
			start := time.Now()
			k.run()
			took[k.name] = append(took[k.name], time.Since(start).Seconds())
			runtime.GOMAXPROCS(all)
		}
	}
	median := map[string]float64{}
	for name, d := range took {
		d = d[1:]
		slices.Sort(d)
		median[name] = d[rounds/2]
	}
	for _, k := range tasks {
		d := took[k.name][1:]
		line := fmt.Sprintf("%-32s %.3f s (%.3f to %.3f)", k.name, median[k.name], slices.Min(d), slices.Max(d))
		if k.of != "" {
			line += fmt.Sprintf("  %.2f of %s", median[k.name]/median[k.of], k.of)
		}
		t.Log(line)
		if k.limit > 0 && median[k.name] > k.limit*median[k.of] {
			t.Errorf("%s: %.2f of %s, want at most %.2f", k.name, median[k.name]/median[k.of], k.of, k.limit)
		}
	}
}

func surface(t *testing.T, pts []orb.Point, height func(orb.Point) float64) *interp.Surface {
	t.Helper()
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	z := make([]float64, len(pts))
	for i, p := range pts {
		z[i] = height(p)
	}
	s, err := interp.FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// rows is a text of n rows id,x,y,z,code.
func rows() []byte {
	var b bytes.Buffer
	b.WriteString("id,x,y,z,code\n")
	rng := rand.New(rand.NewPCG(2, 2))
	var line []byte
	for i := range n {
		line = strconv.AppendInt(append(line[:0], 'P'), int64(i+1), 10)
		for _, v := range [3]float64{500000 + 2000*rng.Float64(), 4600000 + 2000*rng.Float64(), 100 + 50*rng.Float64()} {
			line = strconv.AppendFloat(append(line, ','), v, 'f', 3, 64)
		}
		b.Write(append(line, ",GR\n"...))
	}
	return b.Bytes()
}
