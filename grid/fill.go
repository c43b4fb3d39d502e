package grid

import (
	"context"
	"fmt"
	"math"
	"runtime"
	"sync/atomic"

	"golang.org/x/sync/errgroup"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Show says what of a surface a raster shows.
type Show uint8

// What can be shown.
const (
	Value           Show = iota // the interpolated value
	Slope                       // rise over run of the triangle that owns the node
	DownhillAzimuth             // where water would run, degrees clockwise from north; no-data on a flat
	Shade                       // the share of a light from the north-west that the owner is struck by, 0 to 1; see shade
)

// Options says what to show and how to work.
type Options struct {
	Show Show
	// Workers is the largest number of goroutines; 0 means one per CPU. It
	// never changes a bit of the result.
	Workers int
	// Progress, when not nil, is told from several goroutines how many of the
	// triangles are done.
	Progress func(done, total int)
}

// Fill returns s, or its slope, azimuth or shade, at every node of spec. Nodes outside
// the surface are NaN; a node on the outline is inside.
//
// Every node is written once, by the triangle that owns it (see
// triangulate.Location), with exactly the bits that s.Value returns there, for
// any number of workers.
//
// It returns the error of spec.Validate, or ctx.Err() with a nil grid if ctx
// ends first. Call spec.Check first where the size comes from outside: the
// values take 8 bytes a node.
//
// Time O(nodes + triangles x rows that each spans).
func Fill(ctx context.Context, spec Spec, s *interp.Surface, opt Options) (*Grid, error) {
	g, err := newUnset(spec)
	if err != nil {
		return nil, err
	}
	workers := opt.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	if err := g.setNoData(ctx, s.Mesh(), workers); err != nil {
		return nil, err
	}
	f := newScan(g, s, opt.Show)
	total := s.Mesh().NumTriangles()
	var next, done atomic.Int64
	group, ctx := errgroup.WithContext(ctx)
	for range workers {
		group.Go(func() error {
			w := &writer{scan: f}
			for {
				lo := int(next.Add(trianglesAtOnce)) - trianglesAtOnce
				if lo >= total {
					return nil
				}
				hi := min(lo+trianglesAtOnce, total)
				for t := lo; t < hi; t++ {
					f.triangle(w, triangulate.Triangle(t))
				}
				if err := ctx.Err(); err != nil {
					return err
				}
				if opt.Progress != nil {
					opt.Progress(int(done.Add(int64(hi-lo))), total)
				}
			}
		})
	}
	if err := group.Wait(); err != nil {
		return nil, err
	}
	return g, nil
}

// trianglesAtOnce is how many neighbouring triangles a worker takes at a time:
// enough to make taking them cheap, few enough to share out a small mesh.
const trianglesAtOnce = 4096

// newUnset is New without the no-data.
func newUnset(spec Spec) (*Grid, error) {
	if err := spec.Validate(); err != nil {
		return nil, err
	}
	if spec.NumNodes() > math.MaxInt/8 {
		return nil, spec.Check(math.MaxInt64 / 8)
	}
	return &Grid{Spec: spec, Values: make([]float64, spec.NumNodes())}, nil
}

// setNoData makes NaN of every value that the surface may leave alone: all but
// those well inside its outline, which the triangles write.
func (g *Grid) setNoData(ctx context.Context, m *triangulate.Mesh, workers int) error {
	inside := g.wellInside(m)
	var group errgroup.Group
	for w := range workers {
		group.Go(func() error {
			for row := w * len(inside) / workers; row < (w+1)*len(inside)/workers; row++ {
				if err := ctx.Err(); err != nil {
					return err
				}
				values, in := g.Row(row), inside[row]
				for i := range values[:in.from] {
					values[i] = math.NaN()
				}
				for i := in.to; i < len(values); i++ {
					values[i] = math.NaN()
				}
			}
			return nil
		})
	}
	return group.Wait()
}

// wellInside returns, for every row, columns whose nodes are certainly in a
// triangle: more than a cell away from the hull. Where triangles are hidden there
// may be gaps anywhere, and it knows of none.
func (g *Grid) wellInside(m *triangulate.Mesh) []columnSpan {
	inside := make([]columnSpan, g.Spec.Rows)
	if m.NumTriangles() == 0 || m.NumTriangles() < m.Whole().NumTriangles() {
		return inside
	}
	for i := range inside {
		inside[i] = columnSpan{-1, -1}
	}
	// Counter-clockwise, edges to the west of the surface run south, those to
	// its east north; what runs neither way shuts the row.
	ys := g.Spec.Ys()
	hull := m.Hull()
	for i, v := range hull {
		a, b := m.Position(v), m.Position(hull[(i+1)%len(hull)])
		g.eachRowNear(a, b, func(row int, span columnSpan) {
			in := &inside[row]
			switch y := ys[row]; {
			case b[1] < y && y < a[1]:
				in.from = max(in.from, span.to)
			case a[1] < y && y < b[1]:
				if in.to < 0 {
					in.to = span.from
				}
				in.to = min(in.to, span.from)
			default:
				in.from, in.to = g.Spec.Cols, 0
			}
		})
	}
	for i, in := range inside {
		if in.from < 0 || in.to < 0 || in.from >= in.to {
			inside[i] = columnSpan{0, 0}
		}
	}
	return inside
}

// String returns the word that options use.
func (s Show) String() string {
	switch s {
	case Value:
		return "value"
	case Slope:
		return "slope"
	case DownhillAzimuth:
		return "downhill-azimuth"
	case Shade:
		return "shade"
	}
	return fmt.Sprintf("Show(%d)", uint8(s))
}
