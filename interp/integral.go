package interp

import (
	"math"
	"runtime"
	"sync"
	"sync/atomic"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Areas and volumes add one or a few terms a triangle, each computed from the
// corners in canonical order, in exact accumulators. So they do not depend on the
// order of triangles, and the work can be shared out freely.

// Area returns the plan area of s: the exact area inside the outline, rounded once.
//
// It is half the sum of x1 y2 - x2 y1 over the edges of the outline, with exact
// products.
func (s *Surface) Area() float64 {
	var sum exact.Sum
	for h := range triangulate.HalfEdge(s.mesh.NumHalfEdges()) {
		if s.mesh.Twin(h) == triangulate.NoHalfEdge {
			a, b := &s.pos[s.mesh.Origin(h)], &s.pos[s.mesh.Dest(h)]
			sum.AddProduct(a[0], b[1])
			sum.AddProduct(-a[1], b[0])
		}
	}
	return sum.Mean(2)
}

// SurfaceArea returns the area of s measured on its slopes. Relative error below
// 2^-49.
func (s *Surface) SurfaceArea() float64 {
	sums := overTriangles(s, 1, func(t triangulate.Triangle, sums []exact.Sum) {
		x, y, z := s.projections(s.canonical(t))
		sums[0].Add(math.Sqrt(float64(x*x) + float64(y*y) + float64(z*z)))
	})
	return sums[0].Mean(2)
}

// VolumeAboveZero returns the integral of the height over the plan area: what lies
// below the surface and above height 0, less what lies above it and below 0. For
// the two apart, see Volumes. Its error is below 2^-51 of the integral of |z|.
//
// A triangle contributes its area times the mean of its corners.
func (s *Surface) VolumeAboveZero() float64 {
	sums := overTriangles(s, 1, func(t triangulate.Triangle, sums []exact.Sum) {
		i, j, k := s.canonical(t)
		d := s.area2(i, j, k)
		sums[0].AddProduct(d, s.z[i])
		sums[0].AddProduct(d, s.z[j])
		sums[0].AddProduct(d, s.z[k])
	})
	return sums[0].Mean(6)
}

// Volumes are what a level cuts off a surface.
type Volumes struct {
	Above float64 // volume between the surface and the level where the surface is higher
	Below float64 // the same where it is lower, positive
	Net   float64 // Above - Below, rounded once from the exact sums
	// Plan areas of the two parts. A level part at the level counts as above.
	AreaAbove, AreaBelow float64
}

// Volumes returns the volumes and plan areas above and below a level. The relative
// error of each is below 2^-48; that of Net is relative to Above + Below.
func (s *Surface) Volumes(level float64) Volumes {
	sums := overTriangles(s, 4, func(t triangulate.Triangle, sums []exact.Sum) {
		i, j, k := s.canonical(t)
		s.cut(level, i, j, k, sums)
	})
	v := Volumes{
		Above:     sums[sumAbove].Mean(6),
		Below:     sums[sumBelow].Mean(6),
		AreaAbove: sums[sumAreaAbove].Mean(2),
		AreaBelow: sums[sumAreaBelow].Mean(2),
	}
	v.Net = difference(&sums[sumAbove], &sums[sumBelow])
	return v
}

// VolumeAbove returns the volume between the surface and the level where the
// surface is higher.
func (s *Surface) VolumeAbove(level float64) float64 { return s.Volumes(level).Above }

// VolumeBelow returns the volume between the surface and the level where the
// surface is lower; it is positive.
func (s *Surface) VolumeBelow(level float64) float64 { return s.Volumes(level).Below }

// trianglesChunk triangles are added in one go by one goroutine.
const trianglesChunk = 1 << 14

// overTriangles calls add for every triangle, on all cores, each with its own n
// sums, and returns their totals.
func overTriangles(s *Surface, n int, add func(t triangulate.Triangle, sums []exact.Sum)) []exact.Sum {
	count := s.mesh.NumTriangles()
	total := make([]exact.Sum, n)
	var next atomic.Int64
	var mu sync.Mutex
	var wg sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), count/trianglesChunk+1) {
		wg.Go(func() {
			sums := make([]exact.Sum, n)
			for {
				first := int(next.Add(trianglesChunk)) - trianglesChunk
				if first >= count {
					break
				}
				for t := first; t < min(first+trianglesChunk, count); t++ {
					add(triangulate.Triangle(t), sums)
				}
			}
			mu.Lock()
			defer mu.Unlock()
			for i := range total {
				total[i].Merge(&sums[i])
			}
		})
	}
	wg.Wait()
	return total
}
