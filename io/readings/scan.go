package readings

import (
	"context"
	"fmt"
	"math"
	"runtime"
	"sync"
	"sync/atomic"
)

// The way of a file:
//
//	chunks.next ──► worker.parse ──► scanner.take, in the order of the file ──► each
//	one goroutine   several         the caller's goroutine
//
// A piece in flight is one chunk and the block made of it; at most a few more than
// there are workers exist at a time, so memory does not grow with the file.

// A Summary is what Scan tells beside the blocks.
type Summary struct {
	Counts   Counts // Used counts the readings of the blocks; Merged is 0
	Layouts  []Layout
	Warnings []Warning
}

// Scan reads the sources one after the other and calls each with their readings in
// blocks of some thousand lines, in order. A block is the callee's to keep. An
// error of each ends the scan and comes back as it is. Places that repeat are not
// looked at.
//
// Reading goes on behind bad lines to count them, and blocks come all the same:
// without Options.Lenient, Scan returns *BadLines at the end if there were any, and
// what each was given should be forgotten. Other errors are *PositionError,
// *OptionError, or ctx.Err().
//
// Cost: see the package comment. Memory: some blocks per worker, whatever the size
// of the input.
func Scan(ctx context.Context, sources []Source, o Options, each func(*Block) error) (*Summary, error) {
	s, err := newScanner(ctx, sources, &o, needValue, each)
	if err != nil {
		return nil, err
	}
	return s.run(sources)
}

// scanner is one call of Scan.
type scanner struct {
	ctx     context.Context
	o       *Options
	need    need
	each    func(*Block) error
	summary *Summary
	bad     BadLines
	hit     []atomic.Bool
	unmet   unmet

	done, total int64 // bytes
}

func newScanner(ctx context.Context, sources []Source, o *Options, n need, each func(*Block) error) (*scanner, error) {
	if err := o.check(); err != nil {
		return nil, err
	}
	if o.Workers <= 0 {
		o.Workers = runtime.GOMAXPROCS(0)
	}
	s := &scanner{ctx: ctx, o: o, need: n, each: each, summary: &Summary{}}
	if o.Select.Exclude != nil {
		s.hit = make([]atomic.Bool, o.Select.Exclude.Len())
	}
	for _, src := range sources {
		if src.Size <= 0 {
			s.total = 0
			break
		}
		s.total += src.Size
	}
	return s, nil
}

func (s *scanner) run(sources []Source) (*Summary, error) {
	for i, src := range sources {
		if err := s.source(i, src); err != nil {
			return nil, err
		}
	}
	if s.o.Progress != nil {
		s.o.Progress(s.done, s.done)
	}
	if s.o.Select.Exclude != nil {
		s.summary.Warnings = append(s.summary.Warnings, s.o.Select.Exclude.warnings(s.hit)...)
	}
	if len(sources) > 0 {
		s.summary.Warnings = append(s.summary.Warnings, s.unmet.warnings(sources[0].Name)...)
	}
	if s.bad.Total > 0 && !s.o.Lenient {
		s.bad.Good = s.summary.Counts.Read - s.bad.Total
		return nil, &s.bad
	}
	return s.summary, nil
}

// file is a source that is being read.
type file struct {
	number int
	plan   *plan
	chunks chunks
	line   int // lines before the next block
	// first line taken as Windows-1252, from 1, and how many
	convertedFirst, converted int
}

func (f *file) noteConverted(n, first int) {
	if f.converted == 0 {
		f.convertedFirst = first
	}
	f.converted += n
}

// source reads one source to its end.
func (s *scanner) source(number int, src Source) error {
	ctx, cancel := context.WithCancel(s.ctx)
	defer cancel()
	r, err := src.Open()
	if err != nil {
		return &PositionError{File: src.Name, Kind: Unreadable, Err: err}
	}
	defer r.Close()
	f := &file{number: number}
	var perr *PositionError
	// Reading may wait for a person or a network; ctx must not wait with it.
	ready := make(chan struct{})
	go func() {
		defer close(ready)
		text, encoding, err := decoded(r)
		if err != nil {
			perr = &PositionError{Kind: Unreadable, What: "read", Err: err}
			return
		}
		f.chunks = chunks{r: text, size: s.o.chunk, spare: make(chan []byte, s.o.Workers+4)}
		perr = s.begin(f, src.Size, Layout{File: src.Name, Encoding: encoding, SkipRows: s.o.SkipRows})
	}()
	select {
	case <-ready:
	case <-ctx.Done():
		return ctx.Err()
	}
	if perr != nil {
		perr.File = src.Name
		return perr
	}
	if perr := s.rolesToChooseBy(f.plan); perr != nil {
		return perr
	}
	before := s.summary.Counts.Read
	if f.chunks.ended {
		err = s.inline(ctx, f)
	} else {
		err = s.parallel(ctx, f)
	}
	if err != nil {
		return err
	}
	if s.summary.Counts.Read == before {
		s.warn(Warning{src.Name, 0, "no readings"})
	}
	if f.converted > 0 {
		s.warn(Warning{src.Name, f.convertedFirst, fmt.Sprintf("not UTF-8: taken as Windows-1252 (%s in all)", lines(f.converted))})
	}
	return nil
}

func (s *scanner) warn(w Warning) { s.summary.Warnings = append(s.summary.Warnings, w) }

// begin makes the plan from the first lines and passes over those that hold no
// readings.
func (s *scanner) begin(f *file, size int64, l Layout) *PositionError {
	skipped := f.chunks.start(size, s.o.SkipRows)
	sniff := newSniffer(&s.o.Declared, s.need, l)
	sniff.line, sniff.counts.Skipped = skipped, skipped
	if s.need == needValue {
		sniff.reducer, sniff.depthFrom = s.o.Reduce, s.o.DepthFrom
	}
	for {
		for !f.chunks.ended && f.chunks.have < maxRecord && lastLineEnd(f.chunks.buf[:f.chunks.have], 0, true) == 0 {
			f.chunks.grow()
		}
		b := f.chunks.buf[:f.chunks.have]
		if len(b) == 0 && f.chunks.err != nil {
			return &PositionError{Line: sniff.line + 1, Kind: Unreadable, What: "read", Err: f.chunks.err}
		}
		before := sniff.line
		plan, passed, err := sniff.sniff(b, f.chunks.ended)
		if err != nil {
			return err
		}
		n := 0
		for range passed {
			n += behindLineEnd(b[n:], lineEnd(b[n:], 0))
		}
		if _, converted, first := readable(b[:n]); converted > 0 {
			f.noteConverted(converted, before+first+1)
		}
		f.chunks.drop(n)
		f.line = before + passed
		if plan != nil {
			f.plan, f.chunks.format = plan, plan.format
			break
		}
	}
	s.summary.Layouts = append(s.summary.Layouts, f.plan.layout)
	s.summary.Counts.add(&sniff.counts)
	s.summary.Warnings = append(s.summary.Warnings, sniff.warnings...)
	return nil
}

// rolesToChooseBy reports a pattern for a role that the file does not have.
func (s *scanner) rolesToChooseBy(p *plan) *PositionError {
	for _, list := range [][]Pattern{s.o.Select.Only, s.o.Select.Without} {
		for _, pattern := range list {
			if p.fieldOf[pattern.Role] < 0 && !(p.reduce && p.reducer.Provides(pattern.Role)) {
				return &PositionError{File: p.layout.File, Line: p.layout.HeaderLine, Kind: MissingRole,
					What: "no column for " + pattern.Role.String(), Expected: "one to choose " + pattern.String() + " by"}
			}
		}
	}
	return nil
}

// inline parses a file that is in memory already.
func (s *scanner) inline(ctx context.Context, f *file) error {
	w := newWorker(f.plan, s.o, s.hit)
	defer s.unmet.add(w)
	for {
		if err := ctx.Err(); err != nil {
			return err
		}
		b, perr := f.chunks.next()
		if b == nil && perr == nil {
			return nil
		}
		blk := &Block{fatal: perr}
		if perr == nil {
			w.parse(blk, b)
		}
		if err := s.take(f, blk, len(b)); err != nil {
			return err
		}
	}
}

// piece is a chunk on its way through a worker.
type piece struct {
	chunk []byte
	block *Block
	done  chan struct{}
}

// parallel parses a file by several workers.
func (s *scanner) parallel(ctx context.Context, f *file) error {
	ctx, cancel := context.WithCancel(ctx)
	var workers sync.WaitGroup
	defer workers.Wait() // after cancel
	defer cancel()
	todo := make(chan *piece)
	inOrder := make(chan *piece, s.o.Workers+2)
	go func() {
		defer close(inOrder)
		defer close(todo)
		for {
			b, perr := f.chunks.next()
			if b == nil && perr == nil {
				return
			}
			p := &piece{b, &Block{fatal: perr}, make(chan struct{})}
			select {
			case inOrder <- p:
			case <-ctx.Done():
				return
			}
			if perr != nil {
				close(p.done)
				return
			}
			select {
			case todo <- p:
			case <-ctx.Done():
				return
			}
		}
	}()
	for range s.o.Workers {
		workers.Go(func() {
			w := newWorker(f.plan, s.o, s.hit)
			defer s.unmet.add(w)
			for {
				select {
				case p, ok := <-todo:
					if !ok {
						return
					}
					w.parse(p.block, p.chunk)
					close(p.done)
				case <-ctx.Done():
					return
				}
			}
		})
	}
	for {
		var p *piece
		var ok bool
		select {
		case p, ok = <-inOrder:
		case <-ctx.Done():
			return ctx.Err()
		}
		if !ok {
			return ctx.Err()
		}
		select {
		case <-p.done:
		case <-ctx.Done():
			return ctx.Err()
		}
		n := len(p.chunk)
		select {
		case f.chunks.spare <- p.chunk[:0]:
		default:
		}
		if err := s.take(f, p.block, n); err != nil {
			return err
		}
	}
}

// take adds what is known only in order: the file, line numbers and sums.
func (s *scanner) take(f *file, blk *Block, size int) error {
	layout := &f.plan.layout
	place := func(e *PositionError) {
		e.File = layout.File
		e.Line += f.line + 1
	}
	if blk.fatal != nil {
		place(blk.fatal)
		return blk.fatal
	}
	blk.File, blk.Layout = f.number, layout
	if f.line+blk.lines >= math.MaxUint32 {
		return &PositionError{File: layout.File, Kind: LongLine, What: "file", Expected: "less than 4,294,967,295 lines"}
	}
	if f.line > 0 {
		for i := range blk.Lines {
			blk.Lines[i] += uint32(f.line)
		}
	}
	for i := range blk.Lines {
		blk.Lines[i]++
	}
	for i := range blk.LeftOut {
		blk.LeftOut[i].File = int32(f.number)
		blk.LeftOut[i].Line += uint32(f.line + 1)
	}
	for _, w := range blk.warnings {
		s.warn(Warning{layout.File, w.Line + f.line + 1, w.Text})
	}
	for _, e := range blk.Refused {
		place(e)
		if len(s.bad.First) < firstFew {
			s.bad.First = append(s.bad.First, e)
		}
	}
	s.bad.Total += blk.Counts.Refused
	if blk.converted > 0 {
		f.noteConverted(blk.converted, f.line+blk.first+1)
	}
	s.summary.Counts.add(&blk.Counts)
	if s.o.Lenient && s.bad.Total > mostBad && s.bad.Total > s.summary.Counts.Read/2 {
		return &PositionError{File: layout.File, Line: f.line + 1, Kind: TooManyBad,
			What: fmt.Sprintf("%d of %d lines are bad", s.bad.Total, s.summary.Counts.Read), Expected: "mostly readings"}
	}
	f.line += blk.lines
	s.done += int64(size)
	if s.o.Progress != nil {
		s.o.Progress(s.done, s.total)
	}
	return s.each(blk)
}

// mostBad is how many bad lines lenient reading lists before it asks whether the
// file holds readings at all: the list is kept in memory.
const mostBad = 1_000_000
