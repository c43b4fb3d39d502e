package gridcsv

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"runtime"
	"strings"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/io/numtext"
)

// ReadOptions says what a file does not. The zero value will do for files of this package with more than one row and column.
type ReadOptions struct {
	// Name stands for the file in errors.
	Name string
	// ValuesAt says where in their cells values stand; nil infers it: see the package comment.
	ValuesAt *grid.NodePlace
	// CellX and CellY are the cell where a single column or row does not show it; zero takes the other axis's.
	CellX, CellY decimal.Number
	// NoData is a number that stands for no data besides the empty field; empty means none does.
	NoData string
	// LimitBytes bounds the values in memory, and at four times this the text; 0 means 2 GiB.
	LimitBytes int64
	// Workers is how many goroutines read; 0 means one per CPU.
	Workers int
}

// ReadError says where a file is not a raster. Line and Column count from 1, Column in bytes; 0 means the whole file.
type ReadError struct {
	Name         string
	Line, Column int
	What         string // "value", "x", ...; may be empty
	Seen         string
	Expected     string
}

func (e *ReadError) Error() string {
	var b strings.Builder
	if e.Name != "" {
		b.WriteString(e.Name)
		b.WriteByte(':')
	}
	if e.Line > 0 {
		fmt.Fprintf(&b, "%d:%d:", e.Line, e.Column)
	}
	if b.Len() > 0 {
		b.WriteByte(' ')
	}
	if e.What != "" {
		b.WriteString(e.What)
		b.WriteByte(' ')
	}
	fmt.Fprintf(&b, "%s: expected %s", e.Seen, e.Expected)
	return b.String()
}

const defaultLimit = 2 << 30

// Read reads a raster in either layout; the first line says which. It returns a *ReadError for what the file does wrong, an
// error that wraps grid.ErrTooBig if the lattice does not fit opt.LimitBytes, or an error of r.
func Read(r io.Reader, opt ReadOptions) (*grid.Grid, error) {
	if opt.LimitBytes <= 0 {
		opt.LimitBytes = defaultLimit
	}
	if opt.Workers <= 0 {
		opt.Workers = runtime.GOMAXPROCS(0)
	}
	data, err := readAll(r, 4*min(opt.LimitBytes, 1<<60))
	if err != nil {
		if errors.Is(err, grid.ErrTooBig) {
			return nil, fmt.Errorf("%s%w", prefix(opt.Name), err)
		}
		return nil, err
	}
	f := &file{opt: opt, data: data}
	if opt.NoData != "" {
		v, ok := numtext.Parse([]byte(opt.NoData))
		if !ok {
			return nil, &ReadError{Name: opt.Name, What: "no-data", Seen: fmt.Sprintf("%q", opt.NoData), Expected: "a number such as -9999"}
		}
		f.noData, f.hasNoData = v, true
	}
	return f.read()
}

func prefix(name string) string {
	if name == "" {
		return ""
	}
	return name + ": "
}

// readAll reads to the end, but no more than limit bytes.
func readAll(r io.Reader, limit int64) ([]byte, error) {
	var buf bytes.Buffer
	switch r := r.(type) { // where the size is known, take the memory at once
	case interface{ Stat() (fs.FileInfo, error) }:
		if info, err := r.Stat(); err == nil && info.Mode().IsRegular() {
			buf.Grow(int(min(info.Size(), limit)) + bytes.MinRead)
		}
	case interface{ Len() int }:
		buf.Grow(int(min(int64(r.Len()), limit)) + bytes.MinRead)
	}
	n, err := buf.ReadFrom(io.LimitReader(r, limit+1))
	if err != nil {
		return nil, err
	}
	if n > limit {
		return nil, fmt.Errorf("more than %d bytes of text: %w", limit, grid.ErrTooBig)
	}
	return buf.Bytes(), nil
}

// file is one file in memory.
type file struct {
	opt       ReadOptions
	data      []byte
	noData    float64
	hasNoData bool
}

func (f *file) read() (*grid.Grid, error) {
	start := 0
	if bytes.HasPrefix(f.data, []byte("\ufeff")) {
		start = len("\ufeff")
	}
	f.data = bytes.TrimRight(f.data, "\r\n")
	head, body := f.line(min(start, len(f.data)))
	first, _, _ := bytes.Cut(head, []byte(","))
	switch {
	case string(trim(first)) == `y\x`:
		return f.readMatrix(start, body)
	case isListHead(head):
		return f.readList(body)
	}
	seen := head
	const longest = 40
	if len(seen) > longest {
		seen = seen[:longest]
	}
	return nil, f.fault(start, "first line", fmt.Sprintf("%q", seen), `y\x and the x of each column, or x,y,z`)
}

func isListHead(line []byte) bool {
	fields := bytes.Split(line, []byte(","))
	return len(fields) == 3 && strings.EqualFold(string(trim(fields[0])), "x") &&
		strings.EqualFold(string(trim(fields[1])), "y") && strings.EqualFold(string(trim(fields[2])), "z")
}

// line returns the line that starts at an offset, without its end, and where the next one starts.
func (f *file) line(at int) (line []byte, next int) {
	rest := f.data[at:]
	if n := bytes.IndexByte(rest, '\n'); n >= 0 {
		line, next = rest[:n], at+n+1
	} else {
		line, next = rest, len(f.data)
	}
	if n := len(line); n > 0 && line[n-1] == '\r' {
		line = line[:n-1]
	}
	return line, next
}

// trim removes blanks and tabs on both sides.
func trim(field []byte) []byte {
	for len(field) > 0 && (field[0] == ' ' || field[0] == '\t') {
		field = field[1:]
	}
	for n := len(field); n > 0 && (field[n-1] == ' ' || field[n-1] == '\t'); n = len(field) {
		field = field[:n-1]
	}
	return field
}

// fault makes an error about the text at a byte offset.
func (f *file) fault(at int, what, seen, expected string) *ReadError {
	at = min(at, len(f.data))
	before := f.data[:at]
	return &ReadError{
		Name: f.opt.Name, Line: bytes.Count(before, []byte("\n")) + 1, Column: at - bytes.LastIndexByte(before, '\n'),
		What: what, Seen: seen, Expected: expected,
	}
}

func quote(field []byte) string {
	const longest = 40
	if len(field) > longest {
		return fmt.Sprintf("%q...", field[:longest])
	}
	return fmt.Sprintf("%q", field)
}

// parts cuts the body into one piece a worker, at line ends. Each is a range of offsets.
func (f *file) parts(body int) (ranges [][2]int) {
	const least = 64 << 10
	n := max(1, min(f.opt.Workers, (len(f.data)-body)/least))
	at := body
	for i := 1; i <= n && at < len(f.data); i++ {
		end := len(f.data)
		if i < n {
			end = max(at, body+(len(f.data)-body)/n*i)
			if nl := bytes.IndexByte(f.data[end:], '\n'); nl >= 0 {
				end += nl + 1
			} else {
				end = len(f.data)
			}
		}
		ranges = append(ranges, [2]int{at, end})
		at = end
	}
	return ranges
}

// cell returns the cell of a lattice from the steps found along its axes; zero means that an axis has one node.
func (f *file) cell(stepX, stepY decimal.Number) (x, y decimal.Number, err error) {
	pick := func(found, told, other decimal.Number) decimal.Number {
		switch {
		case found.Sign() != 0:
			return found
		case told.Sign() != 0:
			return told
		}
		return other
	}
	x = pick(stepX, f.opt.CellX, stepY)
	y = pick(stepY, f.opt.CellY, x)
	x = pick(x, y, y)
	if x.Sign() == 0 {
		return x, y, &ReadError{Name: f.opt.Name, Seen: "a single node", Expected: "at least two, or to be told the cell"}
	}
	return x, y, nil
}

// spec makes the lattice from its north-western node.
func (f *file) spec(west, south, stepX, stepY decimal.Number, cols, rows int) (grid.Spec, error) {
	cellX, cellY, err := f.cell(stepX, stepY)
	if err != nil {
		return grid.Spec{}, err
	}
	at := grid.PlaceOf(west, south, cellX, cellY)
	if f.opt.ValuesAt != nil {
		at = *f.opt.ValuesAt
	}
	s, err := grid.SpecFromNodes(west, south, cellX, cellY, cols, rows, at)
	if err == nil {
		err = s.Check(f.opt.LimitBytes)
	}
	if err != nil {
		return grid.Spec{}, fmt.Errorf("%s%w", prefix(f.opt.Name), err)
	}
	return s, nil
}

// isNoData reports whether v is the number that stands for none.
func (f *file) isNoData(v float64) bool { return f.hasNoData && v == f.noData }
