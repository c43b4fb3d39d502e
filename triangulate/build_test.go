package triangulate_test

import (
	"context"
	"errors"
	"fmt"
	"math"
	"runtime"
	"runtime/debug"
	"slices"
	"sync/atomic"
	"testing"
	"time"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/pointsets"
)

// TestCancelled: a context that has ended, or ends on the way, gives its error
// and no mesh, and no goroutine stays behind.
func TestCancelled(t *testing.T) {
	ended, cancel := context.WithCancel(context.Background())
	cancel()
	late, stop := context.WithDeadline(context.Background(), time.Unix(0, 0))
	defer stop()
	before := runtime.NumGoroutine()
	for _, n := range []int{1, 10, 100_000} {
		for _, workers := range []int{1, 4} {
			for ctx, want := range map[context.Context]error{ended: context.Canceled, late: context.DeadlineExceeded} {
				m, err := triangulate.Delaunay(ctx, pointsets.Uniform(n, 1), triangulate.Options{Workers: workers})
				if m != nil || !errors.Is(err, want) {
					t.Errorf("n=%d, %d workers: mesh %v, error %v, want %v", n, workers, m != nil, err, want)
				}
			}
		}
	}
	for _, workers := range []int{1, 2, 8} {
		for _, at := range []int{1, 7} {
			ctx, cancel := context.WithCancel(context.Background())
			calls := 0
			m, err := triangulate.Delaunay(ctx, pointsets.Uniform(100_000, 1), triangulate.Options{
				Workers: workers,
				Progress: func(done, total int) {
					if calls++; calls == at {
						cancel()
					}
				},
			})
			cancel()
			if m != nil || !errors.Is(err, context.Canceled) {
				t.Errorf("%d workers, cancelled in call %d: mesh %v, error %v", workers, at, m != nil, err)
			}
		}
	}
	if after := runtime.NumGoroutine(); after > before {
		t.Errorf("%d goroutines before, %d after", before, after)
	}
}

// TestProgress: one caller at a time, never falling, the total once and last.
func TestProgress(t *testing.T) {
	for name, pts := range map[string][]orb.Point{
		"one point":       {{1, 2}},
		"few points":      lattice(4, 4, 0, 0, 1),
		"uniform":         pointsets.Uniform(100_000, 1),
		"repeated places": slices.Repeat(pointsets.Uniform(10_000, 1), 5),
		"one place":       slices.Repeat([]orb.Point{{1, 2}}, 50_000),
		"mostly one place": append(slices.Repeat([]orb.Point{{.5, .5}}, 30_000),
			pointsets.Uniform(25_000, 1)...),
	} {
		for _, workers := range []int{1, 2, 8} {
			var inside atomic.Int32
			var reports []int
			_, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{Workers: workers, Progress: func(done, total int) {
				if inside.Add(1) > 1 {
					t.Errorf("%s: called while it was being called", name)
				}
				defer inside.Add(-1)
				if total != len(pts) {
					t.Errorf("%s: total %d, want %d", name, total, len(pts))
				}
				reports = append(reports, done)
			}})
			if err != nil {
				t.Fatal(err)
			}
			if len(reports) == 0 || reports[len(reports)-1] != len(pts) || !slices.IsSorted(reports) {
				t.Errorf("%s, %d workers: reports %v", name, workers, reports)
				continue
			}
			if i := slices.Index(reports, len(pts)); i != len(reports)-1 {
				t.Errorf("%s: the total came before the end: %v", name, reports)
			}
			if name == "uniform" && len(reports) < 8 {
				t.Errorf("%s: only %d reports", name, len(reports))
			}
		}
	}
	checked(t, nil, triangulate.Options{Progress: func(done, total int) {
		t.Errorf("no point, but a report of %d of %d", done, total)
	}})
}

// TestMemory: at most 170 bytes a point while building, 80 after (issue "the
// spine", must show 6). With the collector off, all that was ever allocated is
// a bound for what was held at any one time.
func TestMemory(t *testing.T) {
	if testing.Short() {
		t.Skip("-short: one set has 1e6 points, and the race detector adds memory of its own")
	}
	for name, pts := range map[string][]orb.Point{
		"uniform 1e5":     pointsets.Uniform(100_000, 1),
		"uniform 1e6":     pointsets.Uniform(1_000_000, 1),
		"repeated places": slices.Repeat(pointsets.Uniform(25_000, 1), 4),
		"lattice":         pointsets.UnitLattice(100_000, 1),
		"line":            line(100_000, 0, 0, 1, 1),
	} {
		for _, workers := range []int{1, 2, 8} {
			if len(pts) > 100_000 && workers != 2 {
				continue // one is enough of the large one
			}
			heap := func() (total, live uint64) {
				runtime.GC()
				var s runtime.MemStats
				runtime.ReadMemStats(&s)
				return s.TotalAlloc, s.HeapAlloc
			}
			total, live := heap()
			percent := debug.SetGCPercent(-1)
			m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{Workers: workers})
			debug.SetGCPercent(percent)
			if err != nil {
				t.Fatal(err)
			}
			totalAfter, liveAfter := heap()
			n := float64(len(pts))
			building, after := float64(totalAfter-total)/n, float64(int64(liveAfter)-int64(live))/n
			t.Logf("%s, %d workers: %.1f bytes a point while building, %.1f after", name, workers, building, after)
			if building > 170 {
				t.Errorf("%s, %d workers: %.1f bytes a point while building, want at most 170", name, workers, building)
			}
			if after > 80 {
				t.Errorf("%s, %d workers: %.1f bytes a point after, want at most 80", name, workers, after)
			}
			runtime.KeepAlive(m)
		}
	}
}

// TestManyWorkers: more goroutines than there is work for are not started.
func TestManyWorkers(t *testing.T) {
	pts := pointsets.Uniform(20_000, 1)
	want := corners(checked(t, pts, triangulate.Options{Workers: 1}))
	for _, workers := range []int{-1, 0, 1000, math.MaxInt} {
		sameTriangles(t, fmt.Sprint(workers, " workers"), corners(checked(t, pts, triangulate.Options{Workers: workers})), want)
	}
}

// TestNoShapeIsSlow: inputs that make halves, hulls or fans as long as can be take
// a small multiple of the time of uniform points, not a power of it.
func TestNoShapeIsSlow(t *testing.T) {
	if testing.Short() {
		t.Skip("-short: it compares times, which the race detector stretches unevenly")
	}
	const n = 40_000
	took := func(pts []orb.Point) time.Duration {
		best := time.Duration(1 << 62)
		for range 3 {
			start := time.Now()
			if _, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{Workers: 1}); err != nil {
				t.Fatal(err)
			}
			best = min(best, time.Since(start))
		}
		return best
	}
	floor := took(pointsets.Uniform(n, 1))
	for name, pts := range map[string][]orb.Point{
		"horizontal line":      line(n, 0, 0, 1, 0),
		"vertical line":        line(n, 0, 0, 0, 1),
		"slanted line":         line(n, 0, 0, 1, 3),
		"falling line":         line(n, 0, 0, -1, 3),
		"line in tenths":       line(n, 0, 0, 0.1, 0.3),
		"two lines":            append(line(n/2, 0, 0, 1, 0), line(n/2, 0, 100, 1, 0)...),
		"two crossing lines":   append(line(n/2, 0, 0, 1, 1), line(n/2, 0, n/2, 1, -1)...),
		"parabola":             parabola(n),
		"one circle":           pointsets.Circle(2916, 1),
		"circles":              pointsets.Circle(n, 0),
		"one place":            slices.Repeat([]orb.Point{{1, 1}}, n),
		"two places":           slices.Repeat([]orb.Point{{1, 1}, {2, 1}}, n/2),
		"mostly one place":     append(slices.Repeat([]orb.Point{{.5, .5}}, n/2), pointsets.Uniform(n/2, 1)...),
		"columns of two":       lattice(2, n/2, 0, 0, 1),
		"rows of two":          lattice(n/2, 2, 0, 0, 1),
		"sorted lattice":       pointsets.UnitLattice(n, 0),
		"near-collinear":       nearCollinear(200),
		"fan":                  append(pointsets.Circle(2916, 0), orb.Point{}),
		"kuzmin":               pointsets.Kuzmin(n, 1),
		"clusters of clusters": nested(n),
	} {
		d := took(pts)
		t.Logf("%-22s %8d points %10v, uniform %v", name, len(pts), d, floor)
		if d > 15*floor+10*time.Millisecond {
			t.Errorf("%s: %d points took %v, %d uniform ones %v", name, len(pts), d, n, floor)
		}
	}
}

// nested halves the distance to the origin with every second point, so that
// coordinates run over a hundred powers of two.
func nested(n int) []orb.Point {
	pts := pointsets.Uniform(n, 4)
	scale := 1.0
	for i, p := range pts {
		if i%400 == 399 {
			scale /= 2
		}
		pts[i] = orb.Point{p[0] * scale, p[1] * scale}
	}
	return pts
}
