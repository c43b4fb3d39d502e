package picture

import (
	"fmt"
	"math"

	"isofacet/grid"
)

// field is a raster as fine as the picture can show it: the raster itself, or means of its blocks.
type field struct {
	cols, rows    int
	values        []float64 // row 0 in the north, NaN no data
	cellX, cellY  float64   // ground a column, a row
	width, height int       // of the map in pixels, at least cols and rows
	low, high     float64   // of the raster, not of means; both NaN if it is empty
	missing       int       // nodes without a value
}

// smallMap is the longer side that a small raster is enlarged to, about: whole pixels a cell.
const smallMap = 900

// thinnest is the least width or height of a map in pixels, so that a single row can be seen.
const thinnest = 12

// newField reduces g to a map whose longer side has at most most pixels.
func newField(g *grid.Grid, most int) (*field, error) {
	if err := g.Validate(); err != nil {
		return nil, err
	}
	s := g.Spec
	f := &field{low: math.NaN(), high: math.NaN()}
	for i, v := range g.Values {
		switch {
		case v != v:
			f.missing++
		case !isFinite(v):
			return nil, &InputError{fmt.Sprintf("value of row %d, column %d", i/s.Cols+1, i%s.Cols+1), fmt.Sprint(v), "a finite number or no data"}
		default:
			f.low, f.high = least(f.low, v), -least(-f.high, -v)
		}
	}
	x, y := s.CellX.Float64(), s.CellY.Float64()
	groundX, groundY := float64(float64(s.Cols)*x), float64(float64(s.Rows)*y)
	n := max(s.Cols, s.Rows)
	side := min(n, most)
	if m := min(smallMap, most) / n; m > 1 {
		side = m * n // whole pixels a cell
	} else if n > most {
		block := (n + most - 1) / most
		side = (n + block - 1) / block
	}
	perPixel := max(groundX, groundY) / float64(side)
	f.width = max(int(math.RoundToEven(groundX/perPixel)), thinnest)
	f.height = max(int(math.RoundToEven(groundY/perPixel)), thinnest)
	f.cols, f.rows = min(s.Cols, f.width), min(s.Rows, f.height)
	f.cellX, f.cellY = groundX/float64(f.cols), groundY/float64(f.rows)
	f.values = g.Values
	if f.cols < s.Cols || f.rows < s.Rows {
		if g.Labels.Show == azimuths {
			f.sample(g)
		} else {
			f.average(g)
		}
	}
	return f, nil
}

// least returns the smaller one, NaN being none.
func least(a, b float64) float64 {
	if a <= b {
		return a
	}
	return b
}

// average fills f with the means of the values of blocks: column c of f is columns c*Cols/cols to (c+1)*Cols/cols - 1 of g. Sums go
// row by row, west to east, so that they are the same always.
func (f *field) average(g *grid.Grid) {
	f.values = make([]float64, f.cols*f.rows)
	sums, counts := make([]float64, f.cols), make([]int, f.cols)
	for row := range f.rows {
		clear(sums)
		clear(counts)
		for r := row * g.Spec.Rows / f.rows; r < (row+1)*g.Spec.Rows/f.rows; r++ {
			line := g.Row(r)
			for col := range f.cols {
				for _, v := range line[col*g.Spec.Cols/f.cols : (col+1)*g.Spec.Cols/f.cols] {
					if v == v {
						sums[col] += v
						counts[col]++
					}
				}
			}
		}
		for col := range f.cols {
			v := math.NaN()
			if counts[col] > 0 {
				// A mean of finite values may overflow on the way only.
				v = max(f.low, min(sums[col]/float64(counts[col]), f.high))
			}
			f.values[row*f.cols+col] = v
		}
	}
}

// sample fills f with one value of each block: directions have no mean.
func (f *field) sample(g *grid.Grid) {
	f.values = make([]float64, 0, f.cols*f.rows)
	for row := range f.rows {
		line := g.Row((2*row + 1) * g.Spec.Rows / (2 * f.rows))
		for col := range f.cols {
			f.values = append(f.values, line[(2*col+1)*g.Spec.Cols/(2*f.cols)])
		}
	}
}

// at returns a value, or NaN outside.
func (f *field) at(row, col int) float64 {
	if uint(row) >= uint(f.rows) || uint(col) >= uint(f.cols) {
		return math.NaN()
	}
	return f.values[row*f.cols+col]
}
