package readings

import (
	"cmp"
	"context"
	"math"
	"slices"
	"strings"
)

// A Part is the readings of one name: of a round, of a zone, those held out.
type Part struct {
	Name string
	Set  *Set
	// Err, if not nil, is why the part has no set: readings at one place that may
	// not be merged (*SpotError), or of several zones (*MixedError), or, under
	// Options.BadApart, lines that could not be read (*BadLines). The other parts
	// stand.
	Err error
}

// A Parter tells which part a reading belongs to, from its texts: text returns what
// it has in a kept role, empty if its source has no such column. It is called by
// several goroutines.
type Parter func(text func(Role) string) string

// ByRole puts readings apart by their text in a role.
func ByRole(r Role) Parter {
	return func(text func(Role) string) string { return text(r) }
}

// ReadParts reads like Read, once, and puts readings apart. Parts come by name in
// rising order. Each is a set by itself, as if Read had been given its lines alone:
// readings of two parts at one place are no readings at one place, and in each part
// used + merged + left out + refused = read. But a line that cannot be taken apart,
// refused under Options.Lenient, is counted and listed in every part.
//
// Errors are those of Read, except that of Part.Err.
func ReadParts(ctx context.Context, sources []Source, o Options, part Parter) ([]Part, error) {
	o.part = part
	apart := o.BadApart && !o.Lenient
	o.Lenient = o.Lenient || apart // every bad line is kept, with its part
	p := parts{o: &o, sources: sources, of: map[string]*someBlocks{}, badApart: apart}
	total, bad := 0, false
	s, err := newScanner(ctx, sources, &o, needValue, func(b *Block) error {
		if total += b.Len(); total > math.MaxInt32 {
			return &PositionError{File: b.Layout.File, Kind: TooMany, What: "input", Expected: "at most 2,147,483,647 readings"}
		}
		bad = bad || len(b.Refused) > 0
		if bad && !o.Lenient {
			p.of = nil // only the bad lines will be told
			return nil
		}
		p.take(b)
		return nil
	})
	if err != nil {
		return nil, err
	}
	summary, err := s.run(sources)
	if err != nil {
		return nil, err
	}
	if apart && len(p.unknown) > 0 {
		// It may belong to any of them.
		s.bad.Good = summary.Counts.Read - s.bad.Total
		return nil, &s.bad
	}
	return p.finish(ctx, summary)
}

// parts are the sets in the making.
type parts struct {
	o       *Options
	sources []Source
	of      map[string]*someBlocks
	unknown []*PositionError // refused, in no part

	badApart bool
}

// noteDecimals keeps how many decimals a reading is written with.
func (b *Block) noteDecimals(decimals [3]int) {
	most := func(n int) uint8 { return uint8(min(n, math.MaxUint8)) }
	b.decimals = append(b.decimals, [2]uint8{most(max(decimals[0], decimals[1])), most(decimals[2])})
}

// someBlocks are the readings of one part.
type someBlocks struct {
	blocks  []*Block
	refused []*PositionError
	counts  Counts
}

// take spreads a block over the parts.
func (p *parts) take(b *Block) {
	here := map[string]*Block{}
	into := func(name string) (*someBlocks, *Block) {
		some := p.of[name]
		if some == nil {
			name = strings.Clone(name) // it may be a piece of the block's texts
			some = &someBlocks{}
			p.of[name] = some
		}
		blk := here[name]
		if blk == nil {
			blk = &Block{File: b.File, Layout: b.Layout}
			here[name] = blk
			some.blocks = append(some.blocks, blk)
		}
		return some, blk
	}
	for i := range b.Points {
		some, blk := into(p.o.part(func(r Role) string { return b.Text(r, i) }))
		blk.Points = append(blk.Points, b.Points[i])
		blk.Z = append(blk.Z, b.Z[i])
		blk.Lines = append(blk.Lines, b.Lines[i])
		blk.DecimalsXY = max(blk.DecimalsXY, int(b.decimals[i][0]))
		blk.DecimalsZ = max(blk.DecimalsZ, int(b.decimals[i][1]))
		if b.work != nil {
			blk.work = append(blk.work, b.work[i])
		}
		for slot := range b.texts {
			if b.texts[slot].len() > 0 {
				from, to := b.texts[slot].bounds(i)
				blk.texts[slot].add(b.texts[slot].data[from:to])
			}
		}
		some.counts.Read++
		some.counts.Used++
	}
	for i, left := range b.LeftOut {
		some, blk := into(*b.leftParts[i])
		blk.LeftOut = append(blk.LeftOut, left)
		some.counts.Read++
		some.counts.LeftOut++
	}
	for i, e := range b.Refused {
		name := b.refusedParts[i]
		if name == nil {
			p.unknown = append(p.unknown, e)
			continue
		}
		some, _ := into(*name)
		some.refused = append(some.refused, e)
		some.counts.Read++
		some.counts.Refused++
	}
}

// finish makes the sets.
func (p *parts) finish(ctx context.Context, summary *Summary) ([]Part, error) {
	all := make([]Part, 0, len(p.of))
	for name, some := range p.of {
		set := &Set{Counts: some.counts, Layouts: summary.Layouts, Warnings: summary.Warnings}
		set.Counts.Read += len(p.unknown)
		set.Counts.Refused += len(p.unknown)
		set.Refused = slices.Concat(some.refused, p.unknown)
		slices.SortStableFunc(set.Refused, func(a, b *PositionError) int {
			return cmp.Or(cmp.Compare(p.number(a.File), p.number(b.File)), cmp.Compare(a.Line, b.Line))
		})
		set.Counts.Headers, set.Counts.Comments = summary.Counts.Headers, summary.Counts.Comments
		set.Counts.BlankLines, set.Counts.Skipped = summary.Counts.BlankLines, summary.Counts.Skipped
		c := collected{Set: set, blocks: some.blocks, o: p.o, sources: p.sources}
		c.joinNumbers()
		part := Part{Name: name, Set: set}
		err := p.badLines(set)
		if err == nil {
			err = c.mixed()
		}
		if err == nil {
			err = c.mergeSpots(ctx)
		}
		if err != nil {
			if ctx.Err() != nil {
				return nil, err
			}
			part.Set, part.Err = nil, err
		} else {
			c.joinTexts()
		}
		all = append(all, part)
	}
	slices.SortFunc(all, func(a, b Part) int { return cmp.Compare(a.Name, b.Name) })
	return all, nil
}

// badLines returns the error of a part with lines that could not be read, if bad
// lines are a matter of their part.
func (p *parts) badLines(set *Set) error {
	if !p.badApart || len(set.Refused) == 0 {
		return nil
	}
	return &BadLines{
		First: set.Refused[:min(firstFew, len(set.Refused))], Total: len(set.Refused), Good: set.Counts.Read - set.Counts.Refused,
	}
}

// number returns the number of the source of that name.
func (p *parts) number(name string) int {
	return slices.IndexFunc(p.sources, func(s Source) bool { return s.Name == name })
}
