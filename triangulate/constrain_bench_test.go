package triangulate_test

import (
	"context"
	"math"
	"math/rand/v2"
	"os"
	"runtime"
	"slices"
	"testing"
	"time"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
	"isofacet/triangulate/pointsets"
)

// constrainedCase is a set of points and the segments that go into it.
type constrainedCase struct {
	name string
	pts  []orb.Point
	segs []triangulate.Segment
	most float64 // at most this part of the plain build is added; 0 states only
}

// constrainedCases are what inserting is measured on, at n points. The limit was
// set for the first; the others are stated beside it.
func constrainedCases(t testing.TB, n int) []constrainedCase {
	uniform := pointsets.Uniform(n, 1)
	lattice := pointsets.UnitLattice(n, 1)
	return []constrainedCase{
		{"short-segments", uniform, shortSegments(t, uniform, n/10), 0.6},
		{"polyline", uniform, acrossPolyline(t, uniform, n/200), 0},
		{"corner-to-corner", uniform, cornerToCorner(uniform), 0},
		{"lattice-short-segments", lattice, shortSegments(t, lattice, n/10), 0},
		{"lattice-corner-to-corner", lattice, cornerToCorner(lattice), 0},
	}
}

// spacing is the side of a square that holds one point on average.
func spacing(pts []orb.Point) float64 {
	b := orb.MultiPoint(pts).Bound()
	return math.Sqrt((b.Max[0] - b.Min[0]) * (b.Max[1] - b.Min[1]) / float64(len(pts)))
}

// nearestCorner finds a vertex near q, as the number of an input point, or -1
// outside.
func nearestCorner(l *triangulate.Locator, m *triangulate.Mesh, in []int32, q orb.Point) int32 {
	at := l.Locate(q)
	if at.Place == triangulate.Outside {
		return -1
	}
	best, distance := int32(-1), math.Inf(1)
	for _, v := range m.Corners(at.Triangle) {
		p := m.Position(v)
		dx, dy := p[0]-q[0], p[1]-q[1]
		if d := dx*dx + dy*dy; d < distance {
			best, distance = in[v], d
		}
	}
	return best
}

// shortSegments joins n pairs of points such that no segments cross. Their median
// length is three times the spacing of the points, none is longer than twelve.
func shortSegments(t testing.TB, pts []orb.Point, n int) []triangulate.Segment {
	t.Helper()
	m := mustDelaunay(t, pts)
	in, l, step := m.Inputs(), m.Locator(), spacing(pts)
	rng := rand.New(rand.NewPCG(1, 2))
	// Middles of segments that cross are no further apart than the longest.
	const most = 12
	cells := map[[2]int][]int32{}
	var segs []triangulate.Segment
	var lengths []float64
	for len(segs) < n {
		i := int32(rng.IntN(len(pts)))
		p := pts[i]
		// Those that cross are turned away, long ones more often, so begin longer:
		// the median of two normal coordinates is 1.18 deviations.
		k := nearestCorner(l, m, in, orb.Point{p[0] + rng.NormFloat64()*step*2.72, p[1] + rng.NormFloat64()*step*2.72})
		if k < 0 || pts[k] == p {
			continue
		}
		q := pts[k]
		length := math.Hypot(q[0]-p[0], q[1]-p[1]) / step
		if length > most {
			continue
		}
		cell := [2]int{int((p[0] + q[0]) / 2 / step / most), int((p[1] + q[1]) / 2 / step / most)}
		crossed := false
		for around := range 9 {
			for _, o := range cells[[2]int{cell[0] + around%3 - 1, cell[1] + around/3 - 1}] {
				crossed = crossed || crosses(p, q, pts[segs[o].From], pts[segs[o].To])
			}
		}
		if !crossed {
			cells[cell] = append(cells[cell], int32(len(segs)))
			segs = append(segs, triangulate.Segment{From: i, To: k})
			lengths = append(lengths, length)
		}
	}
	slices.Sort(lengths)
	if median := lengths[len(lengths)/2]; math.Abs(median-3) > 0.15 {
		t.Fatalf("the median length of the segments is %.2f spacings, want 3", median)
	}
	return segs
}

// acrossPolyline winds through the points from west to east in n segments.
func acrossPolyline(t testing.TB, pts []orb.Point, n int) []triangulate.Segment {
	t.Helper()
	m := mustDelaunay(t, pts)
	in, l, b := m.Inputs(), m.Locator(), orb.MultiPoint(pts).Bound()
	var segs []triangulate.Segment
	last := int32(-1)
	for i := range n + 1 {
		f := 0.001 + 0.998*float64(i)/float64(n)
		k := nearestCorner(l, m, in, orb.Point{
			b.Min[0] + f*(b.Max[0]-b.Min[0]),
			b.Min[1] + (0.5+0.4*math.Sin(40*f))*(b.Max[1]-b.Min[1]),
		})
		if last >= 0 && k >= 0 && k != last {
			segs = append(segs, triangulate.Segment{From: last, To: k})
		}
		last = k
	}
	return segs
}

// cornerToCorner is the one segment from the point furthest south-west to the one
// next to the furthest north-east, so that on a lattice it meets no other.
func cornerToCorner(pts []orb.Point) []triangulate.Segment {
	byDiagonal := make([]int32, len(pts))
	for i := range byDiagonal {
		byDiagonal[i] = int32(i)
	}
	slices.SortFunc(byDiagonal, func(i, k int32) int {
		p, q := pts[i], pts[k]
		if d := (p[0] + p[1]) - (q[0] + q[1]); d != 0 {
			return int(math.Copysign(1, d))
		}
		return exact.CompareXY(p, q)
	})
	return []triangulate.Segment{{From: byDiagonal[0], To: byDiagonal[len(pts)-2]}}
}

// BenchmarkConstrained builds with segments; the floor is the build without.
func BenchmarkConstrained(b *testing.B) {
	for _, n := range benchSizes() {
		for _, floor := range []struct {
			name string
			pts  []orb.Point
		}{{"uniform", pointsets.Uniform(n, 1)}, {"lattice", pointsets.UnitLattice(n, 1)}} {
			b.Run("floor-plain-"+floor.name+"/"+pointsets.SizeName(n), func(b *testing.B) {
				for b.Loop() {
					if _, err := triangulate.Delaunay(context.Background(), floor.pts, triangulate.Options{Workers: 1}); err != nil {
						b.Fatal(err)
					}
				}
				rate(b, n, "points/s")
			})
		}
		for _, c := range constrainedCases(b, n) {
			b.Run(c.name+"/"+pointsets.SizeName(n), func(b *testing.B) {
				for b.Loop() {
					if _, err := triangulate.Constrained(context.Background(), c.pts, c.segs, triangulate.Options{Workers: 1}); err != nil {
						b.Fatal(err)
					}
				}
				rate(b, n, "points/s")
				b.ReportMetric(float64(len(c.segs)), "segments")
			})
		}
	}
}

// TestConstrainedRatios measures what segments add to the build of 1e6 points, as
// a part of the build without them: medians of five, each round building without
// and with segments in turn. What is added is the difference of two builds in one
// round. The limit is of processor time, which a busy machine bends least. It runs
// only when asked:
//
//	ISOFACET_MEASURE=1 go test -run ConstrainedRatios -v ./triangulate
//
// The limit: 1e5 segments of median length three spacings take at most 0.6 of
// the plain build.
func TestConstrainedRatios(t *testing.T) {
	if os.Getenv("ISOFACET_MEASURE") == "" {
		t.Skip("ISOFACET_MEASURE is not set: ratios mean something on a quiet machine only")
	}
	const n, rounds = 1_000_000, 5
	for _, c := range constrainedCases(t, n) {
		for _, workers := range []int{1, 2} {
			opt := triangulate.Options{Workers: workers}
			measure := func(segs []triangulate.Segment) (took, used float64) {
				runtime.GC()
				start, cpu := time.Now(), cpuTime()
				if _, err := triangulate.Constrained(context.Background(), c.pts, segs, opt); err != nil {
					t.Fatal(err)
				}
				return time.Since(start).Seconds(), (cpuTime() - cpu).Seconds()
			}
			measure(c.segs) // warms up
			var plainTook, plainUsed, addsTook, addsUsed []float64
			for range rounds {
				took, used := measure(nil)
				tookAll, usedAll := measure(c.segs)
				plainTook, plainUsed = append(plainTook, took), append(plainUsed, used)
				addsTook, addsUsed = append(addsTook, (tookAll-took)/took), append(addsUsed, (usedAll-used)/used)
			}
			for _, s := range [][]float64{plainTook, plainUsed, addsTook, addsUsed} {
				slices.Sort(s)
			}
			got := addsUsed[rounds/2]
			t.Logf("%-24s %d workers, %6d segments: plain %.3f s, processor time %.3f s; segments add %.2f (%.2f to %.2f) of processor time, %.2f (%.2f to %.2f) of time",
				c.name, workers, len(c.segs), plainTook[rounds/2], plainUsed[rounds/2],
				got, addsUsed[0], addsUsed[rounds-1], addsTook[rounds/2], addsTook[0], addsTook[rounds-1])
			if cpuTime() == 0 {
				got = addsTook[rounds/2] // processor time is not known here
			}
			if c.most > 0 && got > c.most {
				t.Errorf("%s, %d workers: segments add %.2f of the plain build, want at most %v", c.name, workers, got, c.most)
			}
		}
	}
}

// crossingSegments joins n pairs of points about three spacings apart, whether
// they cross or not.
func crossingSegments(t testing.TB, pts []orb.Point, n int) []triangulate.Segment {
	t.Helper()
	m := mustDelaunay(t, pts)
	in, l, step := m.Inputs(), m.Locator(), spacing(pts)
	rng := rand.New(rand.NewPCG(1, 3))
	var segs []triangulate.Segment
	for len(segs) < n {
		i := int32(rng.IntN(len(pts)))
		p := pts[i]
		k := nearestCorner(l, m, in, orb.Point{p[0] + rng.NormFloat64()*step*2.5, p[1] + rng.NormFloat64()*step*2.5})
		if k >= 0 && pts[k] != p {
			segs = append(segs, triangulate.Segment{From: i, To: k})
		}
	}
	return segs
}

// BenchmarkSegments measures what segments go through before they are inserted: a
// tenth as many as points. The floor adds up the coordinates of their ends.
func BenchmarkSegments(b *testing.B) {
	for _, n := range benchSizes() {
		pts := pointsets.Uniform(n, 1)
		apart, crossing := shortSegments(b, pts, n/10), crossingSegments(b, pts, n/10)
		found := 0
		for _, k := range []struct {
			name string
			run  func()
		}{
			{"find-crossings-none", func() { found = len(triangulate.FindCrossings(pts, apart)) }},
			{"find-crossings-many", func() { found = len(triangulate.FindCrossings(pts, crossing)) }},
			{"split-crossings-none", func() { found = made(b, pts, apart) }},
			{"split-crossings-many", func() { found = made(b, pts, crossing) }},
			{"touch", func() {
				_, _, touched := triangulate.Touch(pts, apart, spacing(pts)/100)
				found = len(touched)
			}},
			{"floor-read", func() {
				sum := 0.0
				for _, s := range apart {
					sum += pts[s.From][0] + pts[s.To][1]
				}
				found = int(sum)
			}},
		} {
			b.Run(k.name+"/"+pointsets.SizeName(n), func(b *testing.B) {
				for b.Loop() {
					k.run()
				}
				rate(b, len(apart), "segments/s")
				b.ReportMetric(float64(found), "found")
			})
		}
	}
}

// made counts the vertices that splitting makes.
func made(b *testing.B, pts []orb.Point, segs []triangulate.Segment) int {
	s, err := triangulate.SplitCrossings(context.Background(), pts, segs)
	if err != nil {
		b.Fatal(err)
	}
	return len(s.Made)
}
