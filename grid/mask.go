package grid

import (
	"math"
	"slices"

	"github.com/paulmach/orb"

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

// columnSpan holds columns from (included) to to (left out).
type columnSpan struct{ from, to int }

// nearRims returns, for every row, the columns within about one of a rim, as
// spans in order; they may overlap.
func (g *Grid) nearRims(r *triangulate.Region) [][]columnSpan {
	xs, ys := g.Spec.Xs(), g.Spec.Ys()
	cols, rows := len(xs), len(ys)
	cellX, cellY := g.Spec.CellX.Float64(), g.Spec.CellY.Float64()
	// Rounding moves a place by far less than a cell (see Spec.Validate), so one
	// cell around a rim is ample.
	column := func(x float64) float64 { return (x - xs[0]) / cellX }
	rowOf := func(y float64) float64 { return (ys[0] - y) / cellY }
	whole := func(f float64, most int) int { return int(min(max(f, -1), float64(most))) }

	near := make([][]columnSpan, rows)
	boundary, voids := r.Rings()
	for _, ring := range slices.Concat(boundary, voids) {
		for i := 1; i < len(ring); i++ {
			a, b := ring[i-1], ring[i]
			if a[1] < b[1] {
				a, b = b, a // a is the northern end
			}
			for row := max(whole(rowOf(a[1])-1, rows), 0); row <= min(whole(rowOf(b[1])+1, rows), rows-1); row++ {
				// The part of the edge within a cell of the row.
				x := func(y float64) float64 {
					if a[1] == b[1] {
						return a[0]
					}
					return a[0] + (b[0]-a[0])*min(max((a[1]-y)/(a[1]-b[1]), 0), 1)
				}
				west, east := x(ys[row]+cellY), x(ys[row]-cellY)
				if a[1] == b[1] {
					west, east = a[0], b[0]
				}
				west, east = min(west, east), max(west, east)
				from, to := max(whole(column(west)-1, cols), 0), whole(column(east)+2, cols)
				if from < to {
					near[row] = append(near[row], columnSpan{from, to})
				}
			}
		}
	}
	for _, spans := range near {
		slices.SortFunc(spans, func(a, b columnSpan) int { return a.from - b.from })
	}
	return near
}
