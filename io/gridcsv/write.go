package gridcsv

import (
	"fmt"
	"io"
	"math"

	"isofacet/grid"
	"isofacet/io/numtext"
	"isofacet/io/outfile"
)

// Layout says how the nodes are laid out in text; see the package comment.
type Layout uint8

const (
	Matrix Layout = iota
	List
)

func (l Layout) String() string {
	if l == List {
		return "list"
	}
	return "matrix"
}

// All asks for as many decimals as it takes to read back the same double.
const All = numtext.Shortest

// Options says how a grid is written.
type Options struct {
	Layout Layout
	// Decimals after the point, zeros at the end included, or All.
	CoordinateDecimals, ValueDecimals int
	// NoData is the number written for nodes without a value in a matrix; empty means an empty field.
	NoData string
	// Workers is how many goroutines make text; 0 means one per CPU.
	Workers int
}

// WriteError says what in a grid or its options cannot be written. Row and Col are -1 where it is about no node.
type WriteError struct {
	Row, Col int // of the grid, from 0, row 0 in the north
	Seen     string
	Expected string
}

func (e *WriteError) Error() string {
	if e.Row < 0 {
		return fmt.Sprintf("%s: expected %s", e.Seen, e.Expected)
	}
	return fmt.Sprintf("row %d, column %d: %s: expected %s", e.Row+1, e.Col+1, e.Seen, e.Expected)
}

// blockNodes is how many nodes a worker writes at a time: some 100 kB of text.
const blockNodes = 8192

// Write writes g to w. It returns an error of w, a *WriteError, or the error of g.Validate.
func Write(w io.Writer, g *grid.Grid, opt Options) error {
	if err := g.Validate(); err != nil {
		return err
	}
	out := writer{g: g, opt: opt, noDataValue: math.NaN()}
	if opt.NoData != "" {
		v, ok := numtext.Parse([]byte(opt.NoData))
		if !ok {
			return &WriteError{Row: -1, Col: -1, Seen: fmt.Sprintf("no-data %q", opt.NoData), Expected: "a number such as -9999"}
		}
		out.noDataValue = v
	}
	var err error
	if out.xs, err = places("x", g.Spec.Xs(), opt.CoordinateDecimals); err != nil {
		return err
	}
	if out.ys, err = places("y", g.Spec.Ys(), opt.CoordinateDecimals); err != nil {
		return err
	}
	if _, err := w.Write(out.header()); err != nil {
		return err
	}
	blocks := (len(g.Values)-1)/blockNodes + 1
	return outfile.WriteBlocks(w, blocks, opt.Workers, func(i int, buf []byte) ([]byte, error) {
		first := i * blockNodes
		last := min(first+blockNodes, len(g.Values))
		if opt.Layout == List {
			return out.list(buf, first, last)
		}
		return out.matrix(buf, first, last)
	})
}

// places writes the coordinates of one axis, each once, and refuses texts that do not tell neighbours apart.
func places(axis string, at []float64, decimals int) ([]string, error) {
	texts := make([]string, len(at))
	var buf []byte
	for i, c := range at {
		buf = numtext.Append(buf[:0], c, decimals)
		texts[i] = string(buf)
		if i > 0 && texts[i] == texts[i-1] {
			return nil, &WriteError{Row: -1, Col: -1,
				Seen:     fmt.Sprintf("%d decimals write %s for two neighbouring nodes", decimals, axis+" "+texts[i]),
				Expected: "enough decimals to tell nodes apart"}
		}
	}
	return texts, nil
}

type writer struct {
	g           *grid.Grid
	opt         Options
	noDataValue float64 // NaN if fields stay empty
	xs, ys      []string
}

func (w *writer) header() []byte {
	if w.opt.Layout == List {
		return []byte("x,y,z\n")
	}
	line := []byte(`y\x`)
	for _, x := range w.xs {
		line = append(line, ',')
		line = append(line, x...)
	}
	return append(line, '\n')
}

// matrix appends nodes first to last, with the y before the first and the line feed behind the last of a row.
func (w *writer) matrix(buf []byte, first, last int) ([]byte, error) {
	cols := w.g.Spec.Cols
	row, col := first/cols, first%cols
	for i := first; i < last; i++ {
		if col == 0 {
			buf = append(buf, w.ys[row]...)
		}
		buf = append(buf, ',')
		if v := w.g.Values[i]; v == v {
			var err error
			if buf, err = w.value(buf, v, row, col); err != nil {
				return buf, err
			}
		} else {
			buf = append(buf, w.opt.NoData...)
		}
		if col++; col == cols {
			buf = append(buf, '\n')
			row, col = row+1, 0
		}
	}
	return buf, nil
}

// list appends those of nodes first to last that have a value.
func (w *writer) list(buf []byte, first, last int) ([]byte, error) {
	cols := w.g.Spec.Cols
	row, col := first/cols, first%cols
	for i := first; i < last; i++ {
		if v := w.g.Values[i]; v == v {
			buf = append(buf, w.xs[col]...)
			buf = append(buf, ',')
			buf = append(buf, w.ys[row]...)
			buf = append(buf, ',')
			var err error
			if buf, err = w.value(buf, v, row, col); err != nil {
				return buf, err
			}
			buf = append(buf, '\n')
		}
		if col++; col == cols {
			row, col = row+1, 0
		}
	}
	return buf, nil
}

func (w *writer) value(buf []byte, v float64, row, col int) ([]byte, error) {
	if math.IsInf(v, 0) {
		return buf, &WriteError{Row: row, Col: col, Seen: fmt.Sprint(v), Expected: "a finite value"}
	}
	first := len(buf)
	buf = numtext.Append(buf, v, w.opt.ValueDecimals)
	// A value can only read like no data if it is within the rounding of it.
	if d := v - w.noDataValue; -1 < d && d < 1 && w.opt.Layout == Matrix {
		if printed, _ := numtext.Parse(buf[first:]); printed == w.noDataValue {
			return buf, &WriteError{Row: row, Col: col,
				Seen:     fmt.Sprintf("value %s reads like no-data %s", buf[first:], w.opt.NoData),
				Expected: "a no-data number that no value has"}
		}
	}
	return buf, nil
}
