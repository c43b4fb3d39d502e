package gridcsv

import (
	"bytes"
	"fmt"
	"math"
	"slices"
	"sync"
	"sync/atomic"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/io/numtext"
)

// A list is read twice: first for the texts of its places, which make the lattice, then for the values. So numbers of places
// are parsed once each, and nothing is kept a row.

// readList reads the rows from offset body on.
func (f *file) readList(body int) (*grid.Grid, error) {
	if body >= len(f.data) {
		return nil, f.fault(len(f.data), "", "no further line", "nodes, one a line")
	}
	parts := f.parts(body)
	xs, ys, err := f.placeTexts(parts)
	if err != nil {
		return nil, err
	}
	columns, err := f.axisOf("x", xs)
	if err != nil {
		return nil, err
	}
	lines, err := f.axisOf("y", ys)
	if err != nil {
		return nil, err
	}
	spec, err := f.spec(columns.first, lines.first, columns.step, lines.step, columns.n, lines.n)
	if err != nil {
		return nil, err
	}
	g, err := grid.New(spec)
	if err != nil {
		return nil, fmt.Errorf("%s%w", prefix(f.opt.Name), err)
	}
	if err := f.fill(g, parts, columns.index, lines.index); err != nil {
		return nil, err
	}
	return g, nil
}

// fields splits a line of a list. next is where the following line starts.
func (f *file) fields(at int) (x, y, z []byte, next int, fault *ReadError) {
	line, next := f.line(at)
	a := bytes.IndexByte(line, ',')
	b := -1
	if a >= 0 {
		b = bytes.IndexByte(line[a+1:], ',')
	}
	if b < 0 || bytes.IndexByte(line[a+b+2:], ',') >= 0 {
		return nil, nil, nil, next, f.fault(at, "row", fmt.Sprintf("of %d fields", bytes.Count(line, []byte(","))+1), "3: x, y and z")
	}
	return line[:a], line[a+1 : a+1+b], line[a+b+2:], next, nil
}

// placeTexts returns every text of an x and of a y, with the offset where it is first met.
func (f *file) placeTexts(parts [][2]int) (xs, ys map[string]int, err error) {
	type found struct {
		xs, ys map[string]int
		fault  *ReadError
	}
	founds := make([]found, len(parts))
	var wg sync.WaitGroup
	for i, p := range parts {
		wg.Go(func() {
			fd := found{xs: map[string]int{}, ys: map[string]int{}}
			var lastY []byte
			for at := p[0]; at < p[1]; {
				x, y, _, next, fault := f.fields(at)
				if fault != nil {
					fd.fault = fault
					break
				}
				if _, known := fd.xs[string(x)]; !known {
					fd.xs[string(x)] = at
				}
				if lastY == nil || !bytes.Equal(y, lastY) { // nodes come row by row
					if _, known := fd.ys[string(y)]; !known {
						fd.ys[string(y)] = at + len(x) + 1
					}
					lastY = y
				}
				at = next
			}
			founds[i] = fd
		})
	}
	wg.Wait()
	xs, ys = founds[0].xs, founds[0].ys
	for i, fd := range founds {
		if fd.fault != nil {
			return nil, nil, fd.fault
		}
		if i == 0 {
			continue
		}
		for text, at := range fd.xs { // of two offsets the earlier part's is the smaller
			if _, known := xs[text]; !known {
				xs[text] = at
			}
		}
		for text, at := range fd.ys {
			if _, known := ys[text]; !known {
				ys[text] = at
			}
		}
	}
	return xs, ys, nil
}

// evenAxis is one axis of a lattice found from texts.
type evenAxis struct {
	first decimal.Number
	step  decimal.Number // zero for a single place
	n     int
	index map[string]int // text to place, counted from the first
}

// axisOf makes an axis of places: the smallest step is the cell, and every other place must be a whole number of cells from the first.
func (f *file) axisOf(name string, texts map[string]int) (evenAxis, error) {
	type place struct {
		number decimal.Number
		text   string
		at     int
	}
	places := make([]place, 0, len(texts))
	for text, at := range texts {
		places = append(places, place{text: text, at: at})
	}
	slices.SortFunc(places, func(a, b place) int { return a.at - b.at }) // so that the first fault in the file is the one reported
	for i := range places {
		p := &places[i]
		var err error
		if p.number, err = decimal.Parse(string(trim([]byte(p.text)))); err != nil {
			return evenAxis{}, f.fault(p.at, name, quote([]byte(p.text)), "a number such as 100.5")
		}
	}
	slices.SortStableFunc(places, func(a, b place) int { return a.number.Cmp(b.number) })

	a := evenAxis{first: places[0].number, n: 1, index: make(map[string]int, len(places))}
	for i := 1; i < len(places); i++ {
		gap, err := places[i].number.Sub(places[i-1].number)
		if err != nil {
			return evenAxis{}, f.fault(places[i].at, name, places[i].text, "places that 17 digits can write")
		}
		if gap.Sign() != 0 && (a.step.Sign() == 0 || gap.Cmp(a.step) < 0) {
			a.step = gap
		}
	}
	for _, p := range places {
		if a.step.Sign() == 0 {
			a.index[p.text] = 0
			continue
		}
		from, err := p.number.Sub(a.first)
		var k int64
		var whole bool
		if err == nil {
			k, whole, err = from.FloorIndex(a.step)
		}
		if err != nil || !whole || k >= math.MaxInt {
			return evenAxis{}, f.fault(p.at, name, p.number.String(),
				fmt.Sprintf("a whole number of steps from %s; the smallest step is %s", a.first, a.step))
		}
		a.index[p.text] = int(k)
		a.n = max(a.n, int(k)+1)
	}
	return a, nil
}

// fill reads the values into g, whose nodes are all without a value.
func (f *file) fill(g *grid.Grid, parts [][2]int, column, line map[string]int) error {
	taken := make([]uint32, (len(g.Values)+31)/32)
	faults := make([]*ReadError, len(parts))
	twice := make([]bool, len(parts))
	var wg sync.WaitGroup
	for i, p := range parts {
		wg.Go(func() {
			var lastY []byte
			row := 0
			for at := p[0]; at < p[1]; {
				x, y, z, next, _ := f.fields(at) // its faults were found before
				if lastY == nil || !bytes.Equal(y, lastY) {
					row, lastY = g.Spec.Rows-1-line[string(y)], y
				}
				node := row*g.Spec.Cols + column[string(x)]
				bit := uint32(1) << (node % 32)
				if atomic.OrUint32(&taken[node/32], bit)&bit != 0 {
					twice[i] = true
					return
				}
				v, fault := f.value(z, at+len(x)+len(y)+2)
				if fault != nil {
					faults[i] = fault
					return
				}
				g.Values[node] = v
				at = next
			}
		})
	}
	wg.Wait()
	if slices.Contains(twice, true) {
		return f.namedTwice(parts[0][0], column, line)
	}
	for _, fault := range faults {
		if fault != nil {
			return fault
		}
	}
	return nil
}

func (f *file) value(z []byte, at int) (float64, *ReadError) {
	text := trim(z)
	if len(text) == 0 {
		return math.NaN(), nil
	}
	v, ok := numtext.Parse(text)
	if !ok {
		return 0, f.fault(at, "value", quote(z), "a number, or nothing for no data")
	}
	if f.isNoData(v) {
		return math.NaN(), nil
	}
	return v, nil
}

// namedTwice finds the first line whose node an earlier line has. Workers only know that there is one.
func (f *file) namedTwice(body int, column, line map[string]int) error {
	seen := map[[2]int]int{}
	for at := body; at < len(f.data); {
		x, y, _, next, _ := f.fields(at)
		node := [2]int{line[string(y)], column[string(x)]}
		if before, known := seen[node]; known {
			return f.fault(at, "node", fmt.Sprintf("%s, %s again", trim(x), trim(y)),
				fmt.Sprintf("each node once; line %d has it", f.fault(before, "", "", "").Line))
		}
		seen[node] = at
		at = next
	}
	return f.fault(body, "", "a node twice", "each node once")
}
