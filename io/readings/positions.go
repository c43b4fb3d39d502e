package readings

import (
	"context"
	"fmt"

	"github.com/paulmach/orb"
)

// Positions are places to be asked about, each with the row it came from.
type Positions struct {
	Points []orb.Point
	Lines  []uint32

	// Names head the columns of the rows: from the header, or x, y and column_3
	// without one.
	Names   []string
	Layout  Layout
	Counts  Counts
	LeftOut []LeftOut
	Refused []*PositionError // of lenient reading

	// DecimalsXY is the most decimals that a coordinate is written with.
	DecimalsXY int
	Warnings   []Warning

	rows   texts
	tokens tokens
}

// Len returns how many positions there are.
func (p *Positions) Len() int { return len(p.Points) }

// Row appends the fields of row i, as written but without quotes and blanks around
// them, to dst and returns it: len(Names) fields. It must not be called by two
// goroutines at once.
func (p *Positions) Row(dst []string, i int) []string {
	from, to := p.rows.bounds(i)
	p.tokens.record(p.rows.data[from:to], 0)
	for _, f := range p.tokens.fields[:min(len(p.tokens.fields), len(p.Names))] {
		dst = append(dst, string(f.text))
	}
	return dst
}

// ReadPositions reads a list of places: columns x and y, found as Read finds its
// columns, and any others, which are carried along. Of o it uses what is declared,
// Lenient, Workers and Progress; missing marks in x or y leave a row out. Lines of
// two numbers between blanks are x y, of three x y z.
//
// Errors are those of Scan. Rows are kept in memory as they are written, and may
// have at most 65,535 bytes.
func ReadPositions(ctx context.Context, src Source, o Options) (*Positions, error) {
	p := &Positions{}
	var blocks []*texts
	start := []int{0}
	o.Select = Selection{}
	s, err := newScanner(ctx, []Source{src}, &o, needPlace, func(b *Block) error {
		p.Points = append(p.Points, b.Points...)
		p.Lines = append(p.Lines, b.Lines...)
		p.LeftOut = append(p.LeftOut, b.LeftOut...)
		p.Refused = append(p.Refused, b.Refused...)
		p.DecimalsXY = max(p.DecimalsXY, b.DecimalsXY)
		blocks = append(blocks, &b.raw)
		start = append(start, len(p.Points))
		return nil
	})
	if err != nil {
		return nil, err
	}
	summary, err := s.run([]Source{src})
	if err != nil {
		return nil, err
	}
	p.rows.join(blocks, start, func(f func(k int)) {
		for k := range blocks {
			f(k)
		}
	})
	p.Counts, p.Warnings, p.Layout = summary.Counts, summary.Warnings, summary.Layouts[0]
	p.tokens.format = format{delimiter: byte(p.Layout.Delimiter), comment: []byte(p.Layout.Comment)}
	for i, c := range p.Layout.Columns {
		switch {
		case c.Name != "":
			p.Names = append(p.Names, c.Name)
		case c.Role != NoRole:
			p.Names = append(p.Names, c.Role.String())
		default:
			p.Names = append(p.Names, fmt.Sprintf("column_%d", i+1))
		}
	}
	return p, nil
}
