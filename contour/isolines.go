package contour

import (
	"context"

	"isofacet/grid"
	"isofacet/interp"
)

// Lines returns the isolines of s in output order: by level, then by first and second point.
//
// They depend on the positions and values alone, not on how the mesh is numbered nor on the number of workers. Every
// point is the Crossing of an edge. It returns a *PiecesError, or ctx.Err() with no lines if ctx ends first.
//
// Time O(vertices + triangles + pieces); some 4 bytes a vertex and 4 a piece while it works, 16 a point of the
// result. EachLine needs not hold the result.
func Lines(ctx context.Context, s *interp.Surface, levels Levels, opt Options) ([]Line, Report, error) {
	return collect(ctx, newTriangles(s), levels, opt)
}

// EachLine calls use for each of the lines that Lines returns, in the same order, from the calling goroutine. The
// points belong to use. It holds some millions of points at a time. The first error of use ends it and is returned.
func EachLine(ctx context.Context, s *interp.Surface, levels Levels, opt Options, use func(Line) error) (Report, error) {
	return each(ctx, newTriangles(s), levels, opt, use)
}

// RasterLines returns the isolines of a raster in output order: by level, then by first and second point.
//
// They run straight through each square between four nodes with values, from side to side. A side is crossed where
// linear interpolation between its two nodes puts the level. A square with two opposite corners above the level
// and two below is passed twice; its middle, taken as the mean of the four, decides which two are joined (equal to
// the level counts as above). Lines end at the sides of squares with a corner that has no data.
//
// It returns an error of g.Validate, one for a value out of range, one wrapping ErrTooMany for more than
// RasterNodesMost nodes, or what Lines returns.
func RasterLines(ctx context.Context, g *grid.Grid, levels Levels, opt Options) ([]Line, Report, error) {
	src, err := newRaster(g)
	if err != nil {
		return nil, Report{}, err
	}
	return collect(ctx, src, levels, opt)
}

// EachRasterLine is to RasterLines what EachLine is to Lines.
func EachRasterLine(ctx context.Context, g *grid.Grid, levels Levels, opt Options, use func(Line) error) (Report, error) {
	src, err := newRaster(g)
	if err != nil {
		return Report{}, err
	}
	return each(ctx, src, levels, opt, use)
}

func collect(ctx context.Context, src source, levels Levels, opt Options) ([]Line, Report, error) {
	var lines []Line
	r, err := each(ctx, src, levels, opt, func(l Line) error {
		lines = append(lines, l)
		return nil
	})
	if err != nil {
		return nil, Report{}, err
	}
	return lines, r, nil
}

func each(ctx context.Context, src source, levels Levels, opt Options, use func(Line) error) (Report, error) {
	var r Report
	j, err := newJob(ctx, src, levels, opt)
	if err != nil {
		return r, err
	}
	r.Pieces = int64(len(j.seeds))
	err = j.run(ctx, func(t traced) error {
		r.WithoutLength += t.withoutLength
		for _, l := range t.lines {
			if opt.Shortest > 0 {
				if length := l.Length(); length < opt.Shortest {
					r.TooShort = append(r.TooShort, Short{l.Level, length, l.Closed, l.Points[0]})
					continue
				}
			}
			r.Lines++
			r.Points += int64(len(l.Points))
			if err := use(l); err != nil {
				return err
			}
		}
		return nil
	})
	return r, err
}
