package grid

import (
	"context"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Surface returns the raster as planes over triangles: every square between four nodes
// with values is cut in two from its north-western to its south-eastern node, the way in
// which readings at the nodes would be. Squares that lack a value, and rasters of one
// row or column, have no surface.
//
// It returns the error of g.Validate, those of interp.FromTriangles, or ctx.Err(). Time
// and memory are those of triangulating the nodes.
func (g *Grid) Surface(ctx context.Context, opt triangulate.Options) (*interp.Surface, error) {
	if err := g.Validate(); err != nil {
		return nil, err
	}
	cols, rows := g.Spec.Cols, g.Spec.Rows
	xs, ys := g.Spec.Xs(), g.Spec.Ys()
	number := make([]int32, len(g.Values)) // of the node's point
	var pts []orb.Point
	var z []float64
	for i, v := range g.Values {
		number[i] = -1
		if v == v {
			number[i] = int32(len(pts))
			pts = append(pts, orb.Point{xs[i%cols], ys[i/cols]})
			z = append(z, v)
		}
	}
	var triangles [][3]int32
	for row := 1; row < rows; row++ {
		for col := 1; col < cols; col++ {
			nw, ne := number[(row-1)*cols+col-1], number[(row-1)*cols+col]
			sw, se := number[row*cols+col-1], number[row*cols+col]
			if nw >= 0 && ne >= 0 && sw >= 0 && se >= 0 {
				triangles = append(triangles, [3]int32{nw, sw, se}, [3]int32{nw, se, ne})
			}
		}
	}
	return interp.FromTriangles(ctx, pts, z, triangles, opt)
}
