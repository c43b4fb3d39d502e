package triangulate_test

import (
	"cmp"
	"context"
	"fmt"
	"iter"
	"math/rand/v2"
	"os"
	"runtime"
	"runtime/debug"
	"slices"
	"testing"
	"time"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
	"isofacet/triangulate/pointsets"
)

// Benchmarks run at 1e5 and 1e6 points, at 1e7 as well if ISOFACET_HUGE is
// set. Each stands beside a floor: something trivial on the same points.

func benchSizes() []int { return pointsets.Sizes(os.Getenv("ISOFACET_HUGE") != "") }

// rate reports how many of n things an operation does in a second.
func rate(b *testing.B, n int, unit string) {
	b.ReportMetric(float64(n)*float64(b.N)/b.Elapsed().Seconds(), unit)
}

// sortPoints is the floor: what ordering the points by x, then y, costs.
func sortPoints(pts [][2]float64) {
	slices.SortFunc(pts, func(a, b [2]float64) int {
		if c := cmp.Compare(a[0], b[0]); c != 0 {
			return c
		}
		return cmp.Compare(a[1], b[1])
	})
}

func plain(pts []orb.Point) [][2]float64 {
	out := make([][2]float64, len(pts))
	for i, p := range pts {
		out[i] = p
	}
	return out
}

func BenchmarkSort(b *testing.B) {
	for _, n := range benchSizes() {
		b.Run("uniform/"+pointsets.SizeName(n), func(b *testing.B) {
			pts := plain(pointsets.Uniform(n, 1))
			work := make([][2]float64, n)
			for b.Loop() {
				b.StopTimer()
				copy(work, pts)
				b.StartTimer()
				sortPoints(work)
			}
			rate(b, n, "points/s")
		})
	}
}

func BenchmarkDelaunay(b *testing.B) {
	for _, d := range pointsets.All {
		for _, n := range benchSizes() {
			pts := d.Points(n, 1)
			for _, workers := range []int{1, 2} {
				b.Run(fmt.Sprintf("%s/%s/workers=%d", d.Name, pointsets.SizeName(n), workers), func(b *testing.B) {
					for b.Loop() {
						if _, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{Workers: workers}); err != nil {
							b.Fatal(err)
						}
					}
					rate(b, n, "points/s")
				})
			}
		}
	}
}

// randomPlaces fill the unit square.
func randomPlaces(n int) []orb.Point { return pointsets.Uniform(n, 99) }

// sortedPlaces are the same in strips of a hundredth of the square, there and back.
func sortedPlaces(n int) []orb.Point {
	strip := func(p orb.Point) int { return int(p[1] * 100) }
	return slices.SortedFunc(slices.Values(randomPlaces(n)), func(p, q orb.Point) int {
		if c := cmp.Compare(strip(p), strip(q)); c != 0 {
			return c
		}
		if strip(p)%2 == 1 {
			p, q = q, p
		}
		return cmp.Compare(p[0], q[0])
	})
}

// BenchmarkLocate asks as many places as the mesh has vertices. The floor reads
// the position of one vertex for each, in random order: one miss of the cache.
func BenchmarkLocate(b *testing.B) {
	for _, n := range benchSizes() {
		m := checked(b, pointsets.Uniform(n, 1), triangulate.Options{})
		for _, way := range []struct {
			name    string
			queries []orb.Point
			find    func(*triangulate.Locator, orb.Point) triangulate.Location
		}{
			{"random", randomPlaces(n), (*triangulate.Locator).Locate},
			{"sorted", sortedPlaces(n), (*triangulate.Locator).Locate},
			{"sorted-next", sortedPlaces(n), (*triangulate.Locator).LocateNext},
		} {
			b.Run(way.name+"/"+pointsets.SizeName(n), func(b *testing.B) {
				l := m.Locator()
				inside := 0
				for b.Loop() {
					for _, p := range way.queries {
						if way.find(l, p).Place != triangulate.Outside {
							inside++
						}
					}
				}
				if inside == 0 {
					b.Fatal("nothing found")
				}
				rate(b, n, "queries/s")
			})
		}
		b.Run("floor-read/"+pointsets.SizeName(n), func(b *testing.B) {
			at := rand.New(rand.NewPCG(1, 1)).Perm(n)
			pos := m.Positions()
			sum := 0.0
			for b.Loop() {
				for _, i := range at {
					sum += pos[i][0]
				}
			}
			if sum == 0 {
				b.Fatal("nothing read")
			}
			rate(b, n, "queries/s")
		})
	}
}

// BenchmarkCross follows lines across the whole mesh. The floor decides one
// orientation for each crossing, on the positions that the lines come by.
func BenchmarkCross(b *testing.B) {
	for _, n := range benchSizes() {
		for _, d := range []string{"uniform", "unit-lattice"} {
			i := slices.IndexFunc(pointsets.All, func(p pointsets.Distribution) bool { return p.Name == d })
			m := checked(b, pointsets.All[i].Points(n, 1), triangulate.Options{})
			box := orb.MultiPoint(m.Positions()).Bound()
			lines := func() iter.Seq2[orb.Point, orb.Point] {
				return func(yield func(orb.Point, orb.Point) bool) {
					for k := range 20 {
						f := (float64(k) + 0.5) / 20
						y, z := box.Min[1]+f*(box.Max[1]-box.Min[1]), box.Max[1]-f*(box.Max[1]-box.Min[1])
						if !yield(orb.Point{box.Min[0], y}, orb.Point{box.Max[0], z}) {
							return
						}
					}
				}
			}
			var met []orb.Point
			l := m.Locator()
			for p, q := range lines() {
				for c := range l.Cross(p, q) {
					if c.Place == triangulate.OnVertex {
						met = append(met, m.Position(c.Vertex))
					} else {
						met = append(met, m.Position(m.Origin(c.Edge)))
					}
				}
			}
			b.Run(d+"/"+pointsets.SizeName(n), func(b *testing.B) {
				for b.Loop() {
					for p, q := range lines() {
						for range l.Cross(p, q) {
						}
					}
				}
				rate(b, len(met), "crossings/s")
			})
			b.Run("floor-orient/"+d+"/"+pointsets.SizeName(n), func(b *testing.B) {
				left := 0
				for b.Loop() {
					for _, p := range met {
						left += exact.Orient(box.Min, box.Max, p)
					}
				}
				if left == len(met) {
					b.Fatal("all to the left")
				}
				rate(b, len(met), "crossings/s")
			})
		}
	}
}

// TestRatios measures what the promise of speed is about: medians of five, each
// round running everything once so that a busy moment hits all alike. It needs a
// quiet machine with two cores, so it runs only when asked:
//
//	ISOFACET_MEASURE=1 go test -run Ratios -v ./triangulate
//
// The limits are of 1e6 points: on two cores Delaunay takes at most 1.7 times the
// sort of one core, on one core 3 times; no other distribution takes more than
// 1.4 times uniform.
func TestRatios(t *testing.T) {
	if os.Getenv("ISOFACET_MEASURE") == "" {
		t.Skip("ISOFACET_MEASURE is not set: ratios mean something on a quiet machine only")
	}
	const n, rounds = 1_000_000, 5
	type task struct {
		name  string
		fresh bool // on memory that the system has to hand out first
		run   func()
	}
	var tasks []task
	name := func(d string, workers int) string { return fmt.Sprintf("%s, %d workers", d, workers) }
	for _, d := range slices.Backward(pointsets.All) { // so that uniform is not the one to warm up
		pts := d.Points(n, 1)
		for _, workers := range []int{1, 2} {
			run := func() {
				if _, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{Workers: workers}); err != nil {
					t.Fatal(err)
				}
			}
			tasks = append(tasks, task{name(d.Name, workers), false, run})
			if d.Name == "uniform" {
				tasks = append(tasks, task{name("fresh memory", workers), true, run})
			}
		}
	}
	uniform := plain(pointsets.Uniform(n, 1))
	work := make([][2]float64, n)
	tasks = append(tasks, task{"sort", false, func() { sortPoints(work) }})
	m := checked(t, pointsets.Uniform(n, 1), triangulate.Options{})
	for _, ask := range []struct {
		name    string
		queries []orb.Point
	}{{"1e6 random places", randomPlaces(n)}, {"1e6 sorted places", sortedPlaces(n)}} {
		tasks = append(tasks, task{ask.name, false, func() {
			l := m.Locator()
			for _, p := range ask.queries {
				l.Locate(p)
			}
		}})
	}

	took, used := map[string][]time.Duration{}, map[string][]time.Duration{}
	for range rounds {
		for _, k := range tasks {
			copy(work, uniform)
			if runtime.GC(); k.fresh {
				debug.FreeOSMemory()
			}
			start, cpu := time.Now(), cpuTime()
			k.run()
			took[k.name] = append(took[k.name], time.Since(start))
			used[k.name] = append(used[k.name], cpuTime()-cpu)
		}
	}
	median, cpu := map[string]float64{}, map[string]float64{}
	for _, k := range tasks {
		d, u := took[k.name], used[k.name]
		slices.Sort(d)
		slices.Sort(u)
		median[k.name], cpu[k.name] = d[rounds/2].Seconds(), u[rounds/2].Seconds()
		t.Logf("%-26s %6.3f s (%.3f to %.3f), processor time %6.3f s",
			k.name, median[k.name], d[0].Seconds(), d[rounds-1].Seconds(), cpu[k.name])
	}
	ratio := func(what, of string, most float64) {
		r := median[what] / median[of]
		t.Logf("%-26s / %-20s %5.2f, at most %v (processor time %5.2f)", what, of, r, most, cpu[what]/cpu[of])
		if r > most {
			t.Errorf("%s takes %.2f times %s, want at most %v", what, r, of, most)
		}
	}
	ratio(name("uniform", 2), "sort", 1.7)
	ratio(name("uniform", 1), "sort", 3)
	for _, d := range pointsets.All {
		if d.Name == "uniform" || d.Name == "circles" { // no limit was set for circles
			continue
		}
		for _, workers := range []int{1, 2} {
			ratio(name(d.Name, workers), name("uniform", workers), 1.4)
		}
	}
}
