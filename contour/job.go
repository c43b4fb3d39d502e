package contour

import (
	"context"
	"slices"
	"sync"
)

// A job follows the lines of all levels through one source. First every cell is put on the list of each level that
// crosses it, by counting and then filling, so that a level later visits only its own cells. Then batches of
// levels are followed at the same time as the batch before is handed out: levels with many cells in several units, small
// ones whole. The lists and the units never show in the result.
type job struct {
	src    source
	levels Levels
	zs     []float64
	opt    Options

	// The cells that level k crosses are seeds[seedFirst[k]:seedFirst[k+1]], the passages on the outline at which its
	// lines begin starts[startFirst[k]:startFirst[k+1]].
	seeds      []int32
	seedFirst  []int64
	starts     []passage
	startFirst []int64

	unitPieces int64 // pieces to a unit of work
	progress   progress
}

// progress counts pieces and passes them on from one goroutine at a time.
type progress struct {
	sync.Mutex
	done, total int64
	tell        func(done, total int64)
}

func (p *progress) add(n int64) {
	if p.tell == nil {
		return
	}
	p.Lock()
	defer p.Unlock()
	p.done += n
	p.tell(p.done, p.total)
}

// unitPiecesLeast is about a millisecond of work.
const unitPiecesLeast = 1 << 15

// newJob makes the lists. It returns a *PiecesError, or ctx.Err().
func newJob(ctx context.Context, src source, levels Levels, opt Options) (*job, error) {
	j := &job{src: src, levels: levels, zs: levels.values(), opt: opt}
	// Marking passages takes a bit a slot: a unit is large enough to be worth it.
	j.unitPieces = opt.unitPieces
	if j.unitPieces <= 0 {
		j.unitPieces = max(unitPiecesLeast, src.slots()>>8)
	}
	src.rank(j.zs, opt.workers())
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	outline, err := j.list(ctx)
	if err != nil {
		return nil, err
	}
	j.listStarts(outline)
	j.progress.tell, j.progress.total = opt.Progress, int64(len(j.seeds))
	return j, nil
}

// crossed is a cell that the levels of a span cross.
type crossed struct {
	cell int32
	span
}

// list fills seeds, and returns the passages on the outline at which lines begin.
func (j *job) list(ctx context.Context) ([]passage, error) {
	n, levels := j.src.cells(), len(j.levels)
	workers := max(1, min(j.opt.workers(), n/parallelLeast))
	count := make([][]int64, workers) // of every level, by range of cells
	found := make([][]crossed, workers)
	outline := make([][]passage, workers)
	used := inRanges(n, workers, func(w, from, to int) {
		found[w] = j.findCrossed(from, to, &outline[w])
		c := make([]int64, levels+1)
		for _, f := range found[w] { // where spans begin and end
			c[f.lo]++
			c[f.hi]--
		}
		for k := 1; k <= levels; k++ { // how many cover
			c[k] += c[k-1]
		}
		count[w] = c
	})
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	j.seedFirst = make([]int64, levels+1)
	total := int64(0)
	for k := range levels {
		j.seedFirst[k] = total
		for w := range used {
			c := count[w][k]
			count[w][k] = total // where this range's cells begin in the list
			total += c
		}
	}
	j.seedFirst[levels] = total
	if most := j.opt.PiecesMost; most > 0 && total > most {
		return nil, &PiecesError{total, most}
	}
	j.seeds = make([]int32, total)
	err := inTasks(used, used, func(_, w int) error {
		at := count[w]
		for _, f := range found[w] {
			for k := f.lo; k < f.hi; k++ {
				j.seeds[at[k]] = f.cell
				at[k]++
			}
		}
		return ctx.Err()
	})
	return slices.Concat(outline...), err
}

// findCrossed returns the cells from..to that some level crosses, in order.
func (j *job) findCrossed(from, to int, outline *[]passage) []crossed {
	var found []crossed
	var block [512]span
	for ; from < to; from += len(block) {
		b := block[:min(len(block), to-from)]
		j.src.spans(b, from, outline)
		for i, s := range b {
			if s.lo < s.hi {
				found = append(found, crossed{int32(from + i), s})
			}
		}
	}
	return found
}

// listStarts sorts the passages on the outline by level.
func (j *job) listStarts(outline []passage) {
	levels := len(j.levels)
	j.startFirst = make([]int64, levels+1)
	for _, p := range outline {
		for s, k := j.src.side(p), j.src.side(p).lo; k < s.hi; k++ {
			j.startFirst[k+1]++
		}
	}
	for k := range levels {
		j.startFirst[k+1] += j.startFirst[k]
	}
	j.starts = make([]passage, j.startFirst[levels])
	at := slices.Clone(j.startFirst)
	for _, p := range outline {
		for s, k := j.src.side(p), j.src.side(p).lo; k < s.hi; k++ {
			j.starts[at[k]] = p
			at[k]++
		}
	}
}

// cellsOf returns how many cells level k crosses.
func (j *job) cellsOf(k int) int64 { return j.seedFirst[k+1] - j.seedFirst[k] }

// traced is what came out of some levels: lines in output order.
type traced struct {
	lines         []Line
	withoutLength int64
}

// batch follows the levels from..to and returns what came out of each.
func (j *job) batch(ctx context.Context, from, to int) ([]traced, error) {
	type unit struct {
		level          int
		seedLo, seedHi int64
		first          bool
	}
	var units []unit
	shared := make([]*marks, to-from) // of levels in several units
	for k := from; k < to; k++ {
		n := j.cellsOf(k)
		parts := (n + j.unitPieces - 1) / j.unitPieces
		if j.opt.workers() == 1 {
			parts = min(parts, 1)
		}
		if parts > 1 {
			m := newMarks(j.src.slots(), true)
			shared[k-from] = &m
		}
		for p := range parts {
			units = append(units, unit{k, j.seedFirst[k] + p*n/parts, j.seedFirst[k] + (p+1)*n/parts, p == 0})
		}
	}
	parts := make([]part, len(units))
	own := make([]worker, j.opt.workers())
	err := inTasks(len(units), len(own), func(w, i int) error {
		if err := ctx.Err(); err != nil {
			return err
		}
		u := units[i]
		var starts []passage
		if u.first {
			starts = j.starts[j.startFirst[u.level]:j.startFirst[u.level+1]]
		}
		seeds := j.seeds[u.seedLo:u.seedHi]
		m := shared[u.level-from]
		if m == nil {
			m = own[w].marksFor(j.src)
		}
		level := j.levels[u.level]
		j.src.follow(u.level, level.Z, starts, seeds, m, &own[w].points, func(f fragment) {
			parts[i].take(j.src, level, f)
		})
		if !m.shared {
			j.src.release(seeds, m)
		}
		j.progress.add(int64(len(seeds)))
		return nil
	})
	if err != nil {
		return nil, err
	}
	// The units of level k are parts[first[k-from]:first[k-from+1]].
	first := make([]int, to-from+1)
	for _, u := range units {
		first[u.level-from+1]++
	}
	for i := range to - from {
		first[i+1] += first[i]
	}
	out := make([]traced, to-from)
	err = inTasks(len(out), j.opt.workers(), func(_, i int) error {
		out[i] = join(j.src, j.levels[from+i], parts[first[i]:first[i+1]])
		return ctx.Err()
	})
	return out, err
}

// worker is what a goroutine keeps from unit to unit.
type worker struct {
	points arena
	marks  *marks
}

func (w *worker) marksFor(src source) *marks {
	if w.marks == nil {
		m := newMarks(src.slots(), false)
		w.marks = &m
	}
	return w.marks
}

// batchPieces is how many pieces are followed before lines are handed out.
const batchPieces = 1 << 21

// run follows all lines and gives those of each level to use, in output order. The next batch is followed while
// use works; use is called from the calling goroutine.
func (j *job) run(ctx context.Context, use func(traced) error) error {
	ctx, cancel := context.WithCancel(ctx)
	defer cancel()
	ready := make(chan []traced) // a batch ahead: one is made while one is used
	failed := make(chan error, 1)
	go func() {
		defer close(ready)
		most := max(batchPieces, int64(j.opt.workers())*unitPiecesLeast*4)
		for from := 0; from < len(j.levels); {
			to, pieces := from+1, j.cellsOf(from)
			for to < len(j.levels) && pieces+j.cellsOf(to) <= most {
				pieces += j.cellsOf(to)
				to++
			}
			out, err := j.batch(ctx, from, to)
			if err != nil {
				failed <- err
				return
			}
			select {
			case ready <- out:
			case <-ctx.Done():
				failed <- ctx.Err()
				return
			}
			from = to
		}
	}()
	var err error
	for batch := range ready {
		for i := range batch {
			if err == nil {
				if err = use(batch[i]); err != nil {
					cancel() // and take what is still under way
				}
			}
			batch[i] = traced{}
		}
	}
	if err != nil {
		return err
	}
	select {
	case err = <-failed:
		return err
	default:
		return nil
	}
}
