package grid

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// writer puts values of one triangle after another into a block.
type writer struct {
	*scan
	block
	values []float64 // of the block, south row first

	t     triangulate.Triangle
	plane interp.Plane
	fixed float64 // the triangle's slope, azimuth or shade
	runs  []interp.Run
}

func (f *scan) newWriter() *writer {
	rows := 1 << f.blockRowsLog
	return &writer{scan: f, values: make([]float64, rows*blockStride), runs: make([]interp.Run, 0, rows+1)}
}

// begin makes the writer's block b, with no data.
func (w *writer) begin(b block) {
	w.block = b
	for i := range w.values {
		w.values[i] = math.NaN()
	}
}

// end copies the block into the grid.
func (w *writer) end() {
	n := w.east - w.west
	for row := w.south; row < w.north; row++ {
		from := (row - w.south) * blockStride
		copy(w.g.Row(len(w.ys) - 1 - row)[w.west:w.east], w.values[from:from+n])
	}
}

func (w *writer) prepare(t triangulate.Triangle) {
	w.t, w.runs = t, w.runs[:0]
	if w.show != Value {
		w.fixed = w.show.of(w.s.Gradient(t))
	}
}

// of returns what is shown of a triangle with this gradient.
func (s Show) of(dzdx, dzdy float64) float64 {
	switch s {
	case Slope:
		return interp.Slope(dzdx, dzdy)
	case DownhillAzimuth:
		return interp.DownhillAzimuth(dzdx, dzdy)
	}
	return shade(dzdx, dzdy)
}

// columns takes the nodes of a row: those from inner to nearS are strictly inside,
// those from nearL and up to end are near an edge.
func (w *writer) columns(row, nearL, inner, nearS, end int) {
	if nearL < inner || nearS < end {
		if inner >= nearS {
			w.exactly(row, nearL, end)
			return
		}
		w.exactly(row, nearL, inner)
		w.exactly(row, nearS, end)
	}
	from, to := max(inner, w.west), min(nearS, w.east)
	if from < to {
		w.runs = append(w.runs, interp.Run{Row: int32(row), Col: int32(from), N: int32(to - from), Into: int32((row-w.south)*blockStride + from - w.west)})
	}
}

// finish writes the nodes strictly inside the triangle.
func (w *writer) finish() {
	if len(w.runs) == 0 {
		return
	}
	if w.show == Value {
		w.s.PlaneInto(&w.plane, w.t)
		w.plane.Runs(w.values, w.xs, w.ys, w.runs)
		return
	}
	for _, r := range w.runs {
		values := w.values[r.Into:][:r.N]
		for i := range values {
			values[i] = w.fixed
		}
	}
}

// exactly writes those of the nodes that the triangle owns.
func (w *writer) exactly(row, from, to int) {
	values := w.values[(row-w.south)*blockStride:]
	for col := max(from, w.west); col < min(to, w.east); col++ {
		p := orb.Point{w.xs[col], w.ys[row]}
		loc := w.m.LocateIn(w.t, p)
		if loc.Place == triangulate.Outside {
			continue
		}
		if w.show == Value {
			values[col-w.west] = w.s.Value(loc, p)
		} else {
			values[col-w.west] = w.fixed
		}
	}
}
