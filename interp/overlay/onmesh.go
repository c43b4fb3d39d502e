package overlay

import (
	"context"
	"math"
	"runtime"
	"sync"
	"sync/atomic"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// OnMesh is Between for two surfaces on one mesh, given by the heights of its
// vertices: a level or a plane (see Plane) under a surface, or heights measured twice
// at the same places. Every triangle is one piece. It returns what New of package
// interp reports about the heights.
//
// Time O(triangles); 8 bytes a triangle.
func OnMesh(ctx context.Context, m *triangulate.Mesh, from, to []float64, opt Options) (*Figures, error) {
	a, err := interp.New(m, from)
	if err != nil {
		return nil, err
	}
	b, err := interp.New(m, to)
	if err != nil {
		return nil, err
	}
	workers := opt.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	x, y := newSide(a, workers), newSide(b, workers)
	total := &totals{}
	var w *weigher
	if opt.Weights {
		w = newWeigher(x, y)
	}
	count := int(x.shown)
	var next atomic.Int64
	var mu sync.Mutex
	var wg sync.WaitGroup
	for range min(workers, count/trianglesChunk+1) {
		wg.Go(func() {
			own := &totals{}
			var poly polygon
			for ctx.Err() == nil {
				first := int(next.Add(trianglesChunk)) - trianglesChunk
				if first >= count {
					break
				}
				for t := triangulate.Triangle(first); t < triangulate.Triangle(min(first+trianglesChunk, count)); t++ {
					v, _ := x.turned(t)
					poly.begin(&x.pos[v[0]], &x.pos[v[0]])
					for _, c := range v {
						poly.add(&x.pos[c], 0, 0, to[c]-from[c])
					}
					own.addPiece(&poly, x.slant[t], y.slant[t])
					if w != nil {
						w.add(&poly, t, t)
					}
				}
			}
			mu.Lock()
			defer mu.Unlock()
			total.merge(own)
		})
	}
	wg.Wait()
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	return total.figures(a, b, false, w), nil
}

// Level returns heights for OnMesh that are z everywhere.
func Level(m *triangulate.Mesh, z float64) []float64 {
	zs := make([]float64, m.NumVertices())
	for i := range zs {
		zs[i] = z
	}
	return zs
}

// A Slope is a plane, z = Z + DzDx (x - At.x) + DzDy (y - At.y).
type Slope struct {
	At         orb.Point
	Z          float64
	DzDx, DzDy float64
}

// Height returns the height of the plane at p.
func (s *Slope) Height(p orb.Point) float64 {
	return s.Z + (float64(s.DzDx*(p[0]-s.At[0])) + float64(s.DzDy*(p[1]-s.At[1])))
}

// Heights returns heights for OnMesh that lie on the plane.
func (s *Slope) Heights(m *triangulate.Mesh) []float64 {
	zs := make([]float64, m.NumVertices())
	for i, p := range m.Positions() {
		zs[i] = s.Height(p)
	}
	return zs
}

// FitSlope returns the least squares plane through points with heights, and the
// largest distance up or down of a point from it. ok is false where the points are
// in line, or fewer than three.
//
// The normal equations are those of coordinates relative to the middle of the
// points, summed exactly, so that the order of the points does not matter.
func FitSlope(pts []orb.Point, z []float64) (s Slope, most float64, ok bool) {
	if len(pts) < 3 {
		return s, 0, false
	}
	mean := func(of func(i int) float64) float64 {
		var sum exact.Sum
		for i := range pts {
			sum.Add(of(i))
		}
		return sum.Mean(len(pts))
	}
	s.At = orb.Point{mean(func(i int) float64 { return pts[i][0] }), mean(func(i int) float64 { return pts[i][1] })}
	s.Z = mean(func(i int) float64 { return z[i] })
	var xx, xy, yy, xz, yz exact.Sum
	for i, p := range pts {
		x, y, h := p[0]-s.At[0], p[1]-s.At[1], z[i]-s.Z
		xx.AddProduct(x, x)
		xy.AddProduct(x, y)
		yy.AddProduct(y, y)
		xz.AddProduct(x, h)
		yz.AddProduct(y, h)
	}
	a, b, c, u, v := xx.Value(), xy.Value(), yy.Value(), xz.Value(), yz.Value()
	det := float64(a*c) - float64(b*b)
	if !(det > 1e-12*a*c) {
		return s, 0, false
	}
	s.DzDx = (float64(u*c) - float64(v*b)) / det
	s.DzDy = (float64(v*a) - float64(u*b)) / det
	for i, p := range pts {
		most = max(most, math.Abs(z[i]-s.Height(p)))
	}
	return s, most, true
}
