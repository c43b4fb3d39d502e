package gridcsv

import (
	"bytes"
	"fmt"
	"math"
	"sync"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/io/numtext"
)

// readMatrix reads the header at offset start and the rows from offset body on.
func (f *file) readMatrix(start, body int) (*grid.Grid, error) {
	xs, stepX, err := f.header(start)
	if err != nil {
		return nil, err
	}
	if body >= len(f.data) {
		return nil, f.fault(len(f.data), "", "no further line", "rows of the raster")
	}
	parts := f.parts(body)
	rowsOf := make([]int, len(parts)+1) // rows before each part
	for i, p := range parts {
		rowsOf[i+1] = rowsOf[i] + bytes.Count(f.data[p[0]:p[1]], []byte("\n"))
	}
	rows := rowsOf[len(parts)] + 1 // the last line has lost its end
	cols := len(xs)
	// A row has at least as many bytes as columns. If these rows have not, one of them is short: find it before taking memory for all.
	if rows > (len(f.data)-body)/cols+1 {
		return nil, f.shortRow(body, cols)
	}
	if int64(rows)*int64(cols) > f.opt.LimitBytes/8 {
		return nil, fmt.Errorf("%s%d columns and %d rows of 8 bytes a node: expected at most %d bytes: %w", prefix(f.opt.Name), cols, rows, f.opt.LimitBytes, grid.ErrTooBig)
	}
	values := make([]float64, rows*cols)
	ys := make([]decimal.Number, rows)
	offsets := make([]int, rows)
	faults := make([]*ReadError, len(parts))
	var wg sync.WaitGroup
	for i, p := range parts {
		wg.Go(func() {
			row := rowsOf[i]
			for at := p[0]; at < p[1] && faults[i] == nil; row++ {
				line, next := f.line(at)
				offsets[row] = at
				ys[row], faults[i] = f.row(line, at, values[row*cols:(row+1)*cols])
				at = next
			}
		})
	}
	wg.Wait()
	for _, fault := range faults {
		if fault != nil {
			return nil, fault
		}
	}
	stepY, err := f.even("y", "falling", ys, offsets)
	if err != nil {
		return nil, err
	}
	if stepY, err = stepY.Neg(); err != nil {
		return nil, f.fault(body, "y", ys[0].String(), "places that 17 digits can write")
	}
	spec, err := f.spec(xs[0], ys[rows-1], stepX, stepY, cols, rows)
	if err != nil {
		return nil, err
	}
	return &grid.Grid{Spec: spec, Values: values}, nil
}

// header reads the places of the columns.
func (f *file) header(start int) (xs []decimal.Number, step decimal.Number, err error) {
	line, _ := f.line(start)
	var offsets []int
	at := start
	for i := 0; ; i++ {
		field, rest, more := bytes.Cut(line, []byte(","))
		if i > 0 {
			x, err := decimal.Parse(string(trim(field)))
			if err != nil {
				return nil, step, f.fault(at, "x", quote(field), "a number such as 100.5")
			}
			xs, offsets = append(xs, x), append(offsets, at)
		}
		if !more {
			break
		}
		at += len(field) + 1
		line = rest
	}
	if len(xs) == 0 {
		return nil, step, f.fault(at, "", "no columns", `the x of each behind y\x`)
	}
	step, err = f.even("x", "rising", xs, offsets)
	return xs, step, err
}

// even checks that the places rise or fall in even steps, and returns the step; zero for a single place.
func (f *file) even(axis, way string, at []decimal.Number, offsets []int) (step decimal.Number, err error) {
	if len(at) == 1 {
		return step, nil
	}
	step, err = at[1].Sub(at[0])
	if err != nil || way == "rising" && step.Sign() <= 0 || way == "falling" && step.Sign() >= 0 {
		return step, f.fault(offsets[1], axis, at[1].String(), fmt.Sprintf("places %s from %s", way, at[0]))
	}
	for i := 2; i < len(at); i++ {
		want, err := at[i-1].Add(step) // at[i-1] is known to be in its place
		if err != nil || want != at[i] {
			return step, f.fault(offsets[i], axis, at[i].String(), fmt.Sprintf("%s, one step of %s from %s", want, step, at[i-1]))
		}
	}
	return step, nil
}

// row reads y and as many values as there are columns.
func (f *file) row(line []byte, at int, values []float64) (y decimal.Number, fault *ReadError) {
	whole := line
	field, rest, more := bytes.Cut(line, []byte(","))
	y, err := decimal.Parse(string(trim(field)))
	if err != nil {
		return y, f.fault(at, "y", quote(field), "a number such as 50.5")
	}
	for col := range values {
		if !more {
			return y, f.uneven(whole, at, len(values))
		}
		at += len(field) + 1
		line = rest
		field, rest, more = bytes.Cut(line, []byte(","))
		if len(field) == 0 {
			values[col] = math.NaN()
			continue
		}
		v, ok := numtext.Parse(field)
		if !ok {
			if text := trim(field); len(text) == 0 {
				v, ok = math.NaN(), true
			} else {
				v, ok = numtext.Parse(text)
			}
		}
		if !ok {
			return y, f.fault(at, "value", quote(field), "a number, or nothing for no data")
		}
		if f.isNoData(v) {
			v = math.NaN()
		}
		values[col] = v
	}
	if more {
		return y, f.uneven(whole, at, len(values))
	}
	return y, nil
}

func (f *file) uneven(line []byte, at, cols int) *ReadError {
	// at is somewhere on the line: report its beginning
	at = bytes.LastIndexByte(f.data[:at], '\n') + 1
	return f.fault(at, "row", fmt.Sprintf("of %d fields", bytes.Count(line, []byte(","))+1), fmt.Sprintf("%d: y and a value for each column", cols+1))
}

// shortRow finds the first row that has not a field for each column. There is one.
func (f *file) shortRow(body, cols int) *ReadError {
	for at := body; at < len(f.data); {
		line, next := f.line(at)
		if bytes.Count(line, []byte(",")) != cols {
			return f.uneven(line, at, cols)
		}
		at = next
	}
	return f.fault(body, "rows", "of unlike length", "a field for each column")
}
