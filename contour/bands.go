package contour

import (
	"context"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/interp"
)

// Band is a polygon between two neighbouring levels.
type Band struct {
	// Lower and Upper bound the values: Lower.Z <= value < Upper.Z. The lowest band has no lower level, the highest no
	// upper one: nil.
	Lower, Upper *Level
	// Polygon has its outer ring first, counter-clockwise, then holes, clockwise. Each ring starts at its smallest point in
	// (x, y) order and repeats it at the end. No ring touches itself; rings touch each other in points at most.
	Polygon orb.Polygon
}

// Bands returns the parts of s between neighbouring levels as polygons, in order of band, then of the first points of
// outer rings. Levels need not lie in the range of the values.
//
// The rings run along isolines and along the outline, and neighbours have the very same points on their common border: those
// of Lines, and readings. Together the polygons are the surface: they neither overlap nor leave gaps, and their areas add
// up to its area but for the rounding of crossings on the outline: within (1e-12 x area) + (perimeter x ulp of the
// largest coordinate). Every polygon is valid by OGC simple features: parts of a band that touch in a point are polygons of
// their own, and parts without area (a ridge that just reaches the level) are left out. All this is decided by exact
// signs for the coordinates as given out.
//
// A reading's place lies in or on a polygon of its band; or if its value equals a level, of the band below, where the level is
// only just reached. The readings for which rounding left none are in the report, which also says how far borders are
// off.
//
// It returns a *PiecesError, an error wrapping ErrTooMany for more than 1e9 points, or ctx.Err() with no bands.
//
// Time O(n log n) for n points of lines and outline, some 150 bytes a point.
func Bands(ctx context.Context, s *interp.Surface, levels Levels, opt Options) ([]Band, BandReport, error) {
	return bands(ctx, newTriangles(s), levels, opt)
}

// RasterBands is Bands for a raster. The surface is that of RasterLines: squares whose four nodes have values.
func RasterBands(ctx context.Context, g *grid.Grid, levels Levels, opt Options) ([]Band, BandReport, error) {
	src, err := newRaster(g)
	if err != nil {
		return nil, BandReport{}, err
	}
	return bands(ctx, src, levels, opt)
}

func bands(ctx context.Context, src source, levels Levels, opt Options) ([]Band, BandReport, error) {
	n, err := netOf(ctx, src, levels, opt)
	if err != nil {
		return nil, BandReport{}, err
	}
	polygons, report, err := n.polygons(ctx, src, levels.values(), opt.workers())
	if err != nil {
		return nil, BandReport{}, err
	}
	return bandsFrom(polygons, levels), report, nil
}

// netOf returns the net of all lines and the outline.
func netOf(ctx context.Context, src source, levels Levels, opt Options) (*net, error) {
	j, err := newJob(ctx, src, levels, opt)
	if err != nil {
		return nil, err
	}
	n := new(net)
	k := 0
	err = j.run(ctx, func(t traced) error {
		for _, l := range t.lines {
			if err := n.add(l.Points, k, k+1); err != nil {
				return err
			}
		}
		k++
		return nil
	})
	if err != nil {
		return nil, err
	}
	return n, src.outline(j.zs, n.addSide)
}

// bandsFrom adds the levels to polygons.
func bandsFrom(polygons []bandPolygon, levels Levels) []Band {
	out := make([]Band, len(polygons))
	for i, p := range polygons {
		if p.band > 0 {
			out[i].Lower = &levels[p.band-1]
		}
		if p.band < len(levels) {
			out[i].Upper = &levels[p.band]
		}
		out[i].Polygon = p.rings
	}
	return out
}

// polygons returns the polygons of the bands between the paths, which came from src.
func (n *net) polygons(ctx context.Context, src source, zs []float64, workers int) ([]bandPolygon, BandReport, error) {
	if len(n.paths) == 0 {
		return nil, BandReport{}, nil
	}
	var polygons []bandPolygon
	var report BandReport
	var fresh func(int) bool // all at first
	near := lookNear(n, src, zs, workers)
	defer near.wait()
	for round := range leadsMost {
		tree, _, err := n.splitAll(ctx, workers, fresh)
		if err != nil {
			return nil, BandReport{}, err
		}
		f, err := newFaces(n, tree)
		if err != nil {
			return nil, BandReport{}, err
		}
		if err := ctx.Err(); err != nil {
			return nil, BandReport{}, err
		}
		made, err := f.polygons()
		if err != nil {
			return nil, BandReport{}, err
		}
		r := f.report(tree, src, zs, near, workers)
		if round > 0 && len(r.TooNarrow) >= len(report.TooNarrow) {
			break // the polygons before were as good
		}
		polygons, report = made, r
		leads := f.leads(tree, r, zs)
		if len(leads) == 0 {
			break
		}
		changed := n.insert(leads)
		fresh = func(path int) bool { return changed[path] }
	}
	return polygons, report, ctx.Err()
}
