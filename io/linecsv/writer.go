package linecsv

import (
	"errors"
	"fmt"
	"io"

	"isofacet/io/outfile"
)

// Options say how numbers are written: digits after the point, 0 to 20, or -1 for the shortest text that reads back to the same
// double. Fields that a table does not have are ignored.
type Options struct {
	XYDecimals, ZDecimals          int
	SlopeDecimals, AzimuthDecimals int
	// Inferred adds a column to lines.
	Inferred bool
	// Workers encode what WriteBatch is given; 0 means one per CPU.
	Workers int
}

// A WriteError is something that a table cannot hold.
type WriteError struct {
	Row      string // "line 17", "triangle 3"
	What     string // "vertex 2", "level"
	Seen     string
	Expected string
}

func (e *WriteError) Error() string {
	return fmt.Sprintf("linecsv: %s: %s: %s: expected %s", e.Row, e.What, e.Seen, e.Expected)
}

// Writer writes one table: T is Line, Band, Vertex or Triangle. It is not for several goroutines at once.
type Writer[T any] struct {
	w       io.Writer
	table   table[T]
	opt     Options
	buf     []byte
	written int
	closed  bool
	err     error // the first, for ever
}

// table is what makes a Writer one of lines, or of another kind.
type table[T any] struct {
	name   string // of one T
	header string
	weight func(*T) int // rows, about
	// rows appends the rows of t, which has a number counting from 1.
	rows func(dst []byte, opt *Options, t *T, number int) ([]byte, *WriteError)
}

const (
	bufferSize = 1 << 16
	// blockRows is how many rows a block of a batch has at least: some 500 kB.
	blockRows = 1 << 14
)

func newWriter[T any](w io.Writer, opt Options, t table[T]) *Writer[T] {
	for _, places := range []*int{&opt.XYDecimals, &opt.ZDecimals, &opt.SlopeDecimals, &opt.AzimuthDecimals} {
		*places = max(-1, min(*places, 20))
	}
	return &Writer[T]{w: w, table: t, opt: opt, buf: append([]byte(t.header), '\n')}
}

// Written returns how many T have been written.
func (w *Writer[T]) Written() int { return w.written }

var errClosed = errors.New("linecsv: write after close")

// Write writes the rows of t and keeps nothing of it.
//
// It returns a *WriteError if t cannot be written, or what the io.Writer returns. Either is final: what has been written is of no
// use, and every later call returns the same error.
func (w *Writer[T]) Write(t *T) error {
	if w.closed && w.err == nil {
		w.err = errClosed
	}
	if w.err != nil {
		return w.err
	}
	if w.buf, w.err = w.append(w.buf, t, w.written+1); w.err != nil {
		return w.err
	}
	w.written++
	if len(w.buf) >= bufferSize {
		return w.flush()
	}
	return nil
}

func (w *Writer[T]) append(dst []byte, t *T, number int) ([]byte, error) {
	dst, err := w.table.rows(dst, &w.opt, t, number)
	if err != nil {
		err.Row = fmt.Sprintf("%s %d", w.table.name, number)
		return dst, err
	}
	return dst, nil
}

func (w *Writer[T]) flush() error {
	if w.err == nil && len(w.buf) > 0 {
		_, w.err = w.w.Write(w.buf)
	}
	w.buf = w.buf[:0]
	return w.err
}

// WriteBatch writes all of ts in order, encoded by several workers. The bytes are those that Write makes. Errors are those
// of Write.
func (w *Writer[T]) WriteBatch(ts []T) error {
	var ends []int
	rows := 0
	for i := range ts {
		if rows += w.table.weight(&ts[i]); rows >= blockRows || i == len(ts)-1 {
			ends = append(ends, i+1)
			rows = 0
		}
	}
	if len(ends) < 2 || w.closed || w.err != nil {
		for i := range ts {
			if err := w.Write(&ts[i]); err != nil {
				return err
			}
		}
		return w.err
	}
	if err := w.flush(); err != nil {
		return err
	}
	w.err = outfile.WriteBlocks(w.w, len(ends), w.opt.Workers, func(k int, buf []byte) ([]byte, error) {
		first := 0
		if k > 0 {
			first = ends[k-1]
		}
		var err error
		for i := first; i < ends[k]; i++ {
			if buf, err = w.append(buf, &ts[i], w.written+i+1); err != nil {
				return buf, err
			}
		}
		return buf, nil
	})
	if w.err == nil {
		w.written += len(ts)
	}
	return w.err
}

// Close hands the rest to the io.Writer, which it does not close. A table without rows is its header alone.
func (w *Writer[T]) Close() error {
	if w.closed && w.err == nil {
		w.err = errClosed
	}
	w.closed = true
	return w.flush()
}
