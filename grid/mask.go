package grid

import (
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Mask makes every node outside r no-data and returns how many values that took.
// A node on a rim of r stays. Every decision is exact.
//
// Time O(rows x runs between rims + nodes near rims).
func (g *Grid) Mask(r *triangulate.Region) (taken int) {
	near := g.nearRims(r)
	xs, ys := g.Spec.Xs(), g.Spec.Ys()
	for row, spans := range near {
		values := g.Row(row)
		clear := func(from, to int) {
			for i := from; i < to; i++ {
				if !math.IsNaN(values[i]) {
					values[i] = math.NaN()
					taken++
				}
			}
		}
		at := 0
		for _, s := range append(spans, columnSpan{len(xs), len(xs)}) {
			// No rim passes from column at to the span: one node decides.
			if at < s.from && !r.Contains(orb.Point{xs[at], ys[row]}) {
				clear(at, s.from)
			}
			for at = max(at, s.from); at < s.to; at++ {
				if !r.Contains(orb.Point{xs[at], ys[row]}) {
					clear(at, at+1)
				}
			}
		}
	}
	return taken
}

// OwnOnRims gives every node on a rim of the region the slope, azimuth or shade of the
// triangle that owns it on what the region leaves of the surface: the triangle that owns
// it on the whole surface s may be in a void. Call it after Mask, with the clip of s and
// what Fill was asked to show. Values are the same from both sides.
//
// Time O(rows + nodes near rims).
func (g *Grid) OwnOnRims(r *triangulate.Region, s *interp.Surface, c *interp.Clip, show Show) {
	if show == Value {
		return
	}
	whole, tracer := s.Mesh().Locator(), c.Tracer()
	xs, ys := g.Spec.Xs(), g.Spec.Ys()
	for row, spans := range g.nearRims(r) {
		at := 0
		for _, span := range spans {
			for at = max(at, span.from); at < span.to; at++ {
				p := orb.Point{xs[at], ys[row]}
				if r.Place(p) != triangulate.OnEdge {
					continue
				}
				if loc := tracer.Kept(p, whole.LocateNext(p)); loc.Place != triangulate.Outside {
					g.Row(row)[at] = show.of(s.Gradient(loc.Triangle))
				}
			}
		}
	}
}

// columnSpan holds columns from (included) to to (left out).
type columnSpan struct{ from, to int }

// nearRims returns, for every row, the columns within about one of a rim, as
// spans in order; they may overlap.
func (g *Grid) nearRims(r *triangulate.Region) [][]columnSpan {
	near := make([][]columnSpan, g.Spec.Rows)
	boundary, voids := r.Rings()
	for _, ring := range slices.Concat(boundary, voids) {
		for i := 1; i < len(ring); i++ {
			g.eachRowNear(ring[i-1], ring[i], func(row int, span columnSpan) {
				if span.from < span.to {
					near[row] = append(near[row], span)
				}
			})
		}
	}
	for _, spans := range near {
		slices.SortFunc(spans, func(a, b columnSpan) int { return a.from - b.from })
	}
	return near
}

// eachRowNear calls f for every row within a cell of the line from a to b, with
// the columns within a cell of the line in that row. Rounding moves a place by
// less than a cell (see Spec.Validate), so the line passes between no others.
func (g *Grid) eachRowNear(a, b orb.Point, f func(row int, span columnSpan)) {
	cellX, cellY := g.Spec.CellX.Float64(), g.Spec.CellY.Float64()
	x0, y0 := g.Spec.X(0), g.Spec.Y(0)
	whole := func(f float64, most int) int { return int(min(max(f, -1), float64(most))) }
	column := func(x float64) float64 { return (x - x0) / cellX }
	if a[1] < b[1] {
		a, b = b, a // a is the northern end
	}
	first := max(whole((y0-a[1])/cellY-1, g.Spec.Rows), 0)
	last := min(whole((y0-b[1])/cellY+1, g.Spec.Rows), g.Spec.Rows-1)
	for row := first; row <= last; row++ {
		west, east := a[0], b[0]
		if a[1] > b[1] {
			// The part of the line within a cell of the row.
			x := func(y float64) float64 {
				return a[0] + float64((b[0]-a[0])*min(max((a[1]-y)/(a[1]-b[1]), 0), 1))
			}
			y := y0 - float64(float64(row)*cellY)
			west, east = x(y+cellY), x(y-cellY)
		}
		west, east = min(west, east), max(west, east)
		f(row, columnSpan{max(whole(column(west)-1, g.Spec.Cols), 0), max(whole(column(east)+2, g.Spec.Cols), 0)})
	}
}
