package lines

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/paulmach/orb"

	"isofacet/io/readings"
)

// Text.
//
// Package readings reads the rows. It wants a height in every row, or reads no
// heights at all, so a text may be read twice: with heights; and if there is no
// column for them or some are missing, for its places, with those heights that the
// first time found.

// rowColumns are the columns of a text without a header, by how many there are.
var rowColumns = map[int]string{3: "line=1,x=2,y=3", 4: "line=1,x=2,y=3,z=4"}

// text reads the rows of a text and keeps the lines that they make.
func (c *checker) text(ctx context.Context, name string, data []byte, o *Options) error {
	t := textReader{checker: c, ctx: ctx, src: readings.FromBytes(name, data), o: *o, byName: make(map[string]*Line)}
	if err := t.read(); err != nil {
		return err
	}
	for _, l := range t.list {
		c.keep(l)
	}
	return nil
}

// textReader reads one text.
type textReader struct {
	*checker
	ctx context.Context
	src readings.Source
	o   Options

	list   []*Line
	byName map[string]*Line
	last   *Line
}

func (t *textReader) options(missing ...string) readings.Options {
	d := t.o.Declared
	d.Missing = append(slices.Clip(d.Missing), missing...)
	return readings.Options{Declared: d, Workers: t.o.Workers}
}

// read reads the text in the way that suits it.
func (t *textReader) read() error {
	var blocks []*readings.Block
	summary, err := readings.Scan(t.ctx, []readings.Source{t.src}, t.options("blank"), func(b *readings.Block) error {
		blocks = append(blocks, b)
		return nil
	})
	if err == nil {
		if summary.Counts.LeftOut > 0 {
			return t.places(blocks)
		}
		t.blocks(blocks, summary)
		return nil
	}
	// Not errors.As: a list of bad lines is no trouble of the layout.
	trouble, ok := err.(*readings.PositionError)
	if !ok {
		return err
	}
	switch {
	case trouble.Kind == readings.Empty:
		return nil // read says that there is no line
	case trouble.Kind == readings.MissingRole:
		return t.places(nil) // z may be what is missing
	case trouble.Kind == readings.NoHeader && t.o.Columns.IsZero():
		return t.headerless(trouble)
	case trouble.Kind == readings.UnknownHeader:
		trouble.Expected = "names such as line, x, y, z"
	}
	return trouble
}

// headerless reads a text without a header: line x y z or line x y, or two
// numbers between blanks, x y. Three numbers a row could be either and are asked about.
func (t *textReader) headerless(trouble *readings.PositionError) error {
	p, err := readings.ReadPositions(t.ctx, t.src, t.options())
	if err == nil {
		t.rows(p, nil)
		return nil
	}
	if err := t.ctx.Err(); err != nil {
		return err
	}
	asked := *trouble
	asked.Expected = "a header such as line,x,y,z, or rows of a line's name, x, y and perhaps z"
	o := t.options()
	if o.Columns, err = readings.ParseColumns(rowColumns[3]); err != nil {
		return err
	}
	p, err = readings.ReadPositions(t.ctx, t.src, o)
	if bad, ok := errors.AsType[*readings.BadLines](err); ok && bad.First[0].Line > trouble.Line {
		return err
	}
	if err != nil || p.Len() == 0 {
		return &asked
	}
	switch first := p.Row(nil, 0); {
	case len(first) == 4:
		if t.o.Columns, err = readings.ParseColumns(rowColumns[4]); err != nil {
			return err
		}
		return t.read()
	case len(first) != 3:
		return &asked
	case looksLikeNumber(first[0]):
		asked.What = "no header line above three numbers"
		asked.Expected = "to be told by a header whether they are line,x,y or x,y,z"
		return &asked
	}
	t.rows(p, nil)
	return nil
}

// looksLikeNumber reports whether a text is a number with either decimal mark.
func looksLikeNumber(text string) bool {
	_, err := strconv.ParseFloat(strings.Replace(text, ",", ".", 1), 64)
	return err == nil
}

// blocks makes lines of rows that all have heights.
func (t *textReader) blocks(blocks []*readings.Block, summary *readings.Summary) {
	layout := &summary.Layouts[0]
	if !t.layout(layout, summary.Warnings) {
		return
	}
	named, withIDs := layout.Has(readings.Line), layout.Has(readings.ID)
	for _, b := range blocks {
		t.set.DecimalsXY = max(t.set.DecimalsXY, b.DecimalsXY)
		t.set.DecimalsZ = max(t.set.DecimalsZ, b.DecimalsZ)
		for i := range b.Points {
			v := vertex{at: b.Points[i], z: b.Z[i], row: b.Lines[i]}
			if withIDs {
				v.id = b.Text(readings.ID, i)
			}
			if named {
				v.line = b.Text(readings.Line, i)
			}
			t.add(layout, v, named, withIDs)
		}
	}
	t.ambiguous(layout, named, withIDs)
}

// places reads a text once more for its places; blocks are the rows that
// have heights.
func (t *textReader) places(blocks []*readings.Block) error {
	p, err := readings.ReadPositions(t.ctx, t.src, t.options())
	if err != nil {
		return err
	}
	t.rows(p, blocks)
	return nil
}

// rows makes lines of rows of which some may have heights.
func (t *textReader) rows(p *readings.Positions, blocks []*readings.Block) {
	if !t.layout(&p.Layout, p.Warnings) {
		return
	}
	t.set.DecimalsXY = max(t.set.DecimalsXY, p.DecimalsXY)
	for _, left := range p.LeftOut {
		t.checker.add(&Fault{Place: Place{File: p.Layout.File, Row: int(left.Line)}, Kind: NoPlace, Seen: left.Reason, Expected: "a place for every vertex"})
	}
	column := func(r readings.Role) int {
		return slices.IndexFunc(p.Layout.Columns, func(c readings.Column) bool { return c.Role == r })
	}
	name, id := column(readings.Line), column(readings.ID)
	heights := newHeightFinder(blocks)
	var fields []string
	for i := range p.Points {
		v := vertex{at: p.Points[i], z: heights.at(p.Lines[i]), row: p.Lines[i]}
		fields = p.Row(fields[:0], i)
		if id >= 0 {
			v.id = fields[id]
		}
		if name >= 0 {
			v.line = fields[name]
		}
		t.add(&p.Layout, v, name >= 0, id >= 0)
	}
	for _, b := range blocks {
		t.set.DecimalsZ = max(t.set.DecimalsZ, b.DecimalsZ)
	}
	t.ambiguous(&p.Layout, name >= 0, id >= 0)
}

// heightFinder finds the height of a row, for rows that rise.
type heightFinder struct {
	blocks []*readings.Block
	next   int // in blocks[0]
}

func newHeightFinder(blocks []*readings.Block) *heightFinder { return &heightFinder{blocks: blocks} }

func (h *heightFinder) at(row uint32) float64 {
	for len(h.blocks) > 0 {
		b := h.blocks[0]
		for h.next < b.Len() && b.Lines[h.next] < row {
			h.next++
		}
		if h.next < b.Len() {
			if b.Lines[h.next] == row {
				return b.Z[h.next]
			}
			break
		}
		h.blocks, h.next = h.blocks[1:], 0
	}
	return math.NaN()
}

// vertex is a row.
type vertex struct {
	at       orb.Point
	z        float64
	row      uint32
	line, id string
}

// add adds a vertex to its line.
func (t *textReader) add(layout *readings.Layout, v vertex, named, withIDs bool) {
	l := t.last
	if l == nil || named && l.Name != v.line {
		if !named {
			v.line = baseName(layout.File)
		}
		if v.line == "" {
			t.checker.add(&Fault{Place: Place{File: layout.File, Row: int(v.row)}, Kind: NoName, Seen: `line ""`, Expected: "the name of the line that the vertex belongs to"})
			return
		}
		if l = t.byName[v.line]; l == nil {
			l = &Line{Name: strings.Clone(v.line), File: layout.File}
			t.byName[l.Name] = l
			t.list = append(t.list, l)
		}
		t.last = l
	}
	l.Points = append(l.Points, v.at)
	l.Z = append(l.Z, v.z)
	l.numbers = append(l.numbers, v.row)
	if withIDs {
		l.ids = append(l.ids, v.id)
	}
}

// layout takes over how a text was read. It refuses one that does not say which line a
// row belongs to but has columns that might, and reports false then.
func (t *textReader) layout(l *readings.Layout, warnings []readings.Warning) bool {
	t.set.Layouts = append(t.set.Layouts, *l)
	t.set.Warnings = append(t.set.Warnings, warnings...)
	if l.Has(readings.Line) {
		return true
	}
	var others []string
	for _, c := range l.Columns {
		switch c.Role {
		case readings.X, readings.Y, readings.Z, readings.ID:
		default:
			others = append(others, strconv.Quote(shorten(c.Name)))
		}
	}
	switch n := len(others); {
	case n > 0:
		column := "column "
		if n > 1 {
			column = "columns "
		}
		t.checker.add(&Fault{Place: Place{File: l.File, Row: l.HeaderLine}, Kind: NoLineColumn,
			Seen:     "no column line, and something else in " + column + strings.Join(others, ", "),
			Expected: "a column line, or only x, y, z and point names, which make one line"})
	case l.Note != "":
		t.set.warn(l.File, 0, l.Note+", of one line")
	}
	return len(others) == 0
}

// ambiguous refuses one line for all rows if the names of its points repeat: they may
// be names of lines.
func (t *textReader) ambiguous(l *readings.Layout, named, withIDs bool) {
	if named || !withIDs || t.last == nil {
		return
	}
	for k := 1; k < len(t.last.ids); k++ {
		if id := t.last.ids[k]; id != "" && id == t.last.ids[k-1] && t.last.Points[k] != t.last.Points[k-1] {
			column := l.Columns[slices.IndexFunc(l.Columns, func(c readings.Column) bool { return c.Role == readings.ID })]
			t.checker.add(&Fault{Place: t.last.At(k), Kind: NoLineColumn,
				Seen:     fmt.Sprintf("%s %q at two places in a row", cmp.Or(column.Name, column.Role.String()), shorten(id)),
				Expected: "names of points, or a column line if these are names of lines"})
			t.list = nil
			return
		}
	}
}
