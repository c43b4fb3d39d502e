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
	if err := f.fill(g, parts, nodeFinder{xs, ys, columns.index, lines.index}); err != nil {
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

// texts numbers the different texts of one column, in the order in which they are first met.
type texts struct {
	number map[string]int
	text   []string
	at     []int // offset where each is first met
}

func (t *texts) add(text string, at int) {
	if t.number == nil {
		t.number = map[string]int{}
	}
	t.number[text] = len(t.text)
	t.text = append(t.text, text)
	t.at = append(t.at, at)
}

// cursor finds texts in the order of a raster: the next is mostly the one behind the last, or the last again.
type cursor struct {
	*texts
	last int
}

// find returns the number of a text, or false.
func (c *cursor) find(text []byte) (int, bool) {
	for k := c.last; k < min(c.last+2, len(c.text)); k++ {
		if string(text) == c.text[k] {
			c.last = k
			return k, true
		}
	}
	k, known := c.number[string(text)]
	if known {
		c.last = k
	}
	return k, known
}

// placeTexts returns every text of an x and of a y.
func (f *file) placeTexts(parts [][2]int) (xs, ys *texts, err error) {
	type found struct {
		xs, ys texts
		fault  *ReadError
	}
	founds := make([]found, len(parts))
	var wg sync.WaitGroup
	for i, p := range parts {
		wg.Go(func() {
			fd := &founds[i]
			cx, cy := cursor{texts: &fd.xs}, cursor{texts: &fd.ys}
			for at := p[0]; at < p[1]; {
				x, y, _, next, fault := f.fields(at)
				if fault != nil {
					fd.fault = fault
					return
				}
				if _, known := cx.find(x); !known {
					fd.xs.add(string(x), at)
				}
				if _, known := cy.find(y); !known {
					fd.ys.add(string(y), at+len(x)+1)
				}
				at = next
			}
		})
	}
	wg.Wait()
	xs, ys = &founds[0].xs, &founds[0].ys
	for i := range founds {
		if founds[i].fault != nil {
			return nil, nil, founds[i].fault
		}
		if i > 0 {
			xs.merge(&founds[i].xs)
			ys.merge(&founds[i].ys)
		}
	}
	return xs, ys, nil
}

// merge adds what a later part of the file found.
func (t *texts) merge(later *texts) {
	for i, text := range later.text {
		if _, known := t.number[text]; !known {
			t.add(text, later.at[i])
		}
	}
}

// evenAxis is one axis of a lattice found from texts.
type evenAxis struct {
	first decimal.Number
	step  decimal.Number // zero for a single place
	n     int
	index []int // of each text: its place, counted from the first
}

// axisOf makes an axis of places: the smallest step is the cell, and every other place must be a whole number of cells from the first.
func (f *file) axisOf(name string, t *texts) (evenAxis, error) {
	type place struct {
		decimal.Number
		text int
	}
	places := make([]place, len(t.text))
	for i, text := range t.text { // in the order of the file, so that its first fault is the one reported
		n, err := decimal.Parse(string(trim([]byte(text))))
		if err != nil {
			return evenAxis{}, f.fault(t.at[i], name, quote([]byte(text)), "a number such as 100.5")
		}
		places[i] = place{n, i}
	}
	slices.SortStableFunc(places, func(a, b place) int { return a.Cmp(b.Number) })

	a := evenAxis{first: places[0].Number, n: 1, index: make([]int, len(places))}
	for i := 1; i < len(places); i++ {
		gap, err := places[i].Sub(places[i-1].Number)
		if err != nil {
			return evenAxis{}, f.fault(t.at[places[i].text], name, places[i].String(), "places that 17 digits can write")
		}
		if gap.Sign() != 0 && (a.step.Sign() == 0 || gap.Cmp(a.step) < 0) {
			a.step = gap
		}
	}
	if a.step.Sign() == 0 {
		return a, nil
	}
	for _, p := range places {
		from, err := p.Sub(a.first)
		var k int64
		var whole bool
		if err == nil {
			k, whole, err = from.FloorIndex(a.step)
		}
		if err != nil || !whole || k >= math.MaxInt {
			return evenAxis{}, f.fault(t.at[p.text], name, p.String(),
				fmt.Sprintf("a whole number of steps from %s; the smallest step is %s", a.first, a.step))
		}
		a.index[p.text] = int(k)
		a.n = max(a.n, int(k)+1)
	}
	return a, nil
}

// nodeFinder tells from the texts of a node where in the raster it is.
type nodeFinder struct {
	xs, ys       *texts
	column, line []int // of each text; lines count from the south
}

// fill reads the values into g, whose nodes are all without a value.
func (f *file) fill(g *grid.Grid, parts [][2]int, nodes nodeFinder) error {
	taken := make([]uint32, (len(g.Values)+31)/32)
	faults := make([]*ReadError, len(parts))
	twice := make([]bool, len(parts))
	var wg sync.WaitGroup
	for i, p := range parts {
		wg.Go(func() {
			cx, cy := cursor{texts: nodes.xs}, cursor{texts: nodes.ys}
			for at := p[0]; at < p[1]; {
				x, y, z, next, _ := f.fields(at) // faults and unknown texts cannot be: they were found before
				col, _ := cx.find(x)
				line, _ := cy.find(y)
				node := (g.Spec.Rows-1-nodes.line[line])*g.Spec.Cols + nodes.column[col]
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
		return f.namedTwice(parts[0][0], nodes)
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
func (f *file) namedTwice(body int, nodes nodeFinder) error {
	seen := map[[2]int]int{}
	cx, cy := cursor{texts: nodes.xs}, cursor{texts: nodes.ys}
	for at := body; at < len(f.data); {
		x, y, _, next, _ := f.fields(at)
		col, _ := cx.find(x)
		line, _ := cy.find(y)
		node := [2]int{nodes.line[line], nodes.column[col]}
		if before, known := seen[node]; known {
			return f.fault(at, "node", fmt.Sprintf("%s, %s again", trim(x), trim(y)),
				fmt.Sprintf("each node once; line %d has it", f.fault(before, "", "", "").Line))
		}
		seen[node] = at
		at = next
	}
	return f.fault(body, "", "a node twice", "each node once")
}
