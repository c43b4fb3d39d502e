package interp

import (
	"context"
	"os"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate/pointsets"
)

// benchSurface is a surface over n points and n places in its bounding box.
func benchSurface(b *testing.B, d pointsets.Distribution, n int) (*Surface, []orb.Point) {
	pts := d.Points(n, 1)
	s := surfaceOf(b, pts, heights(pts, lumpy))
	bound := orb.MultiPoint(pts).Bound()
	places := pointsets.Uniform(n, 2)
	for i, p := range places {
		places[i] = orb.Point{
			bound.Min[0] + p[0]*(bound.Max[0]-bound.Min[0]),
			bound.Min[1] + p[1]*(bound.Max[1]-bound.Min[1]),
		}
	}
	return s, places
}

func onAll(b *testing.B, run func(b *testing.B, s *Surface, places []orb.Point)) {
	for _, d := range pointsets.All {
		for _, n := range pointsets.Sizes(os.Getenv("ISOFACET_HUGE") != "") {
			b.Run(d.Name+"/"+pointsets.SizeName(n), func(b *testing.B) {
				s, places := benchSurface(b, d, n)
				run(b, s, places)
			})
		}
	}
}

func rate(b *testing.B, each int, unit string) {
	b.ReportMetric(float64(each)*float64(b.N)/b.Elapsed().Seconds(), unit)
}

// BenchmarkQuery: as many places as vertices, at random, sorting included.
func BenchmarkQuery(b *testing.B) {
	onAll(b, func(b *testing.B, s *Surface, places []orb.Point) {
		s.Sampler() // the index of start triangles belongs to the mesh
		for b.Loop() {
			if _, err := s.Query(context.Background(), places, 0); err != nil {
				b.Fatal(err)
			}
		}
		rate(b, len(places), "places/s")
	})
}

// BenchmarkQueryFloor copies as many samples as a query returns, at random.
func BenchmarkQueryFloor(b *testing.B) {
	onAll(b, func(b *testing.B, s *Surface, places []orb.Point) {
		order := s.visitOrder(places, 1)
		for b.Loop() {
			samples := make([]Sample, len(places))
			for _, n := range order {
				samples[n].Z = places[n][0]
			}
		}
		rate(b, len(places), "places/s")
	})
}

// BenchmarkSampler: the same places one by one in random order, on one core.
func BenchmarkSampler(b *testing.B) {
	onAll(b, func(b *testing.B, s *Surface, places []orb.Point) {
		sp := s.Sampler()
		i := 0
		for b.Loop() {
			sp.At(places[i])
			if i++; i == len(places) {
				i = 0
			}
		}
		rate(b, 1, "places/s")
	})
}

func BenchmarkPlane(b *testing.B) {
	pts := []orb.Point{{500000, 4600000}, {500100, 4600000}, {500000, 4600100}}
	for name, k := range map[string]struct {
		offset orb.Point
		z      []float64
	}{
		"gentle": {orb.Point{}, []float64{201, 202, 204}},
		"near":   {orb.Point{}, []float64{1, 2, 4}},
		"far":    {orb.Point{-500000, -4600000}, []float64{1, 2, 4}},
	} {
		moved := make([]orb.Point, 3)
		for i, p := range pts {
			moved[i] = orb.Point{p[0] + k.offset[0], p[1] + k.offset[1]}
		}
		s := surfaceOf(b, moved, k.z)
		plane := s.Plane(0)
		xs, dst := make([]float64, 1024), make([]float64, 1024)
		for i := range xs {
			xs[i] = moved[0][0] + float64(i)/16
		}
		b.Run("prepare/"+name, func(b *testing.B) {
			for b.Loop() {
				plane = s.Plane(0)
			}
		})
		b.Run("at/"+name, func(b *testing.B) {
			for b.Loop() {
				for i, x := range xs {
					dst[i] = plane.At(x, moved[0][1]+17)
				}
			}
			rate(b, len(xs), "nodes/s")
		})
		runs := map[string][]Run{"one-run/": {{N: int32(len(xs))}}}
		for i := int32(0); int(i) < len(xs); i += 2 {
			runs["runs-of-two/"] = append(runs["runs-of-two/"], Run{Col: i, N: 2, Into: i})
		}
		for runsName, runs := range runs {
			b.Run(runsName+name, func(b *testing.B) {
				for b.Loop() {
					plane.Runs(dst, xs, []float64{moved[0][1] + 17}, runs)
				}
				rate(b, len(xs), "nodes/s")
			})
		}
		b.Run("floor/"+name, func(b *testing.B) {
			for b.Loop() {
				copy(dst, xs)
			}
			rate(b, len(xs), "nodes/s")
		})
	}
}

func BenchmarkVolumes(b *testing.B) {
	onAll(b, func(b *testing.B, s *Surface, _ []orb.Point) {
		for b.Loop() {
			s.Volumes(41)
		}
		rate(b, s.Mesh().NumTriangles(), "triangles/s")
	})
}

func BenchmarkSurfaceArea(b *testing.B) {
	onAll(b, func(b *testing.B, s *Surface, _ []orb.Point) {
		for b.Loop() {
			s.SurfaceArea()
		}
		rate(b, s.Mesh().NumTriangles(), "triangles/s")
	})
}

// BenchmarkVolumesFloor visits all triangles and their heights.
func BenchmarkVolumesFloor(b *testing.B) {
	onAll(b, func(b *testing.B, s *Surface, _ []orb.Point) {
		sum := 0.0
		for b.Loop() {
			for t := range s.Mesh().Triangles() {
				for _, v := range s.Mesh().Corners(t) {
					sum += s.z[v]
				}
			}
		}
		rate(b, s.Mesh().NumTriangles(), "triangles/s")
	})
}
