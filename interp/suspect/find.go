package suspect

import (
	"container/heap"
	"context"
	"math"
	"runtime"
	"slices"
	"sync/atomic"

	"golang.org/x/sync/errgroup"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// FactorUsual is how many scales a reading must lie off to be a suspect. Trade practice
// looks at three and more; with scales from some thirty residuals each, three would name
// every hundredth sound reading.
const FactorUsual = 5

// Options says what makes a reading a suspect.
type Options struct {
	// Factor is how many scales it must lie off; 0 means FactorUsual.
	Factor float64
	// ScaleLeast is the smallest scale, in the unit of z: what readings do not resolve. It
	// is never taken for less than what rounding does to a height, 2^-48 of the largest.
	ScaleLeast float64
	// Sequence has the vertices in the order in which they were shot, for runs; NoVertex
	// and repeats are passed over.
	Sequence []triangulate.Vertex
	// Group has a number for every vertex, or -1, such as of its code; nil for none.
	Group []int32
	// Workers is the largest number of goroutines; 0 means one per CPU.
	Workers int
}

// A Suspect is a reading that lies off what the others expect.
type Suspect struct {
	Vertex triangulate.Vertex
	// Expected is the height at its place by the others without any suspect, Residual
	// its own height less that.
	Expected, Residual float64
	// Scale is what residuals about it come to, Off how many of them it lies off.
	Scale, Off float64
}

// Result is what Find found.
type Result struct {
	// Scale is the scale of the residuals about every vertex, suspects left out: NaN
	// where there are too few.
	Scale []float64
	// Judged counts the vertices that have one.
	Judged int
	// Suspects are those that lie furthest off first.
	Suspects []Suspect
	// Together are readings that were off in groups of neighbours, to one side: steps
	// and edges of the ground where no lines are. They are no suspects. Runs are not
	// among them.
	Together []triangulate.Vertex
	// Runs are shots in succession moved by one amount, as they come in the sequence.
	Runs []Run
	// Groups are those whose shots lie off, by number.
	Groups []Group
}

// Find looks for readings that lie off what the others expect; see the package comment
// for how. left is what s.LeaveOneOut returned: Find takes it over and scribbles on it. The
// result depends on the surface and on Factor and ScaleLeast alone, runs and groups also on
// what names them.
//
// Time several times that of LeaveOneOut; beside left 16 bytes a vertex, 24 with lines, and
// 53 more where there are suspects. It returns ctx.Err() if ctx ends first.
func Find(ctx context.Context, s *interp.Surface, left *interp.LeftOut, opt Options) (*Result, error) {
	if opt.Factor == 0 {
		opt.Factor = FactorUsual
	}
	if opt.Workers <= 0 {
		opt.Workers = runtime.GOMAXPROCS(0)
	}
	f, err := newFinder(s, left, opt)
	if err != nil {
		return nil, err
	}
	if err := f.settle(ctx); err != nil {
		return nil, err
	}
	res := &Result{Scale: f.scale}
	if res.Runs, err = f.runs(ctx, opt.Sequence); err != nil {
		return nil, err
	}
	f.without(res.Runs)
	res.Suspects, res.Together = f.confirm(), f.together()
	for _, scale := range f.scale {
		if scale == scale {
			res.Judged++
		}
	}
	f.near = nil // the copy of the mesh goes before more memory is asked for
	res.Groups = f.groups(opt.Group, res.Suspects)
	slices.SortFunc(res.Suspects, func(a, b Suspect) int {
		return f.order(entry{a.Vertex, a.Off}, entry{b.Vertex, b.Off})
	})
	return res, nil
}

// finder holds what is known of every vertex.
type finder struct {
	opt Options
	own []float64 // heights as read
	// work is the surface with the heights z, which the finder changes: a vertex of a
	// line that is taken out stays, so that the line keeps its course, at the height
	// that the rest of the line gives it.
	work *interp.Surface
	z    []float64

	residual []float64 // of the star of every vertex; NaN of those that are out
	reach    []float64 // likewise
	scale    []float64
	off      []float64 // in scales
	lines    lines
	out      []triangulate.Vertex
	pinned   map[triangulate.Vertex]bool // what stays in
	// was is the residual of those that are out when they went, changed who was judged
	// anew since.
	was     map[triangulate.Vertex]float64
	changed map[triangulate.Vertex]bool

	near *surroundings // in what is left
}

func newFinder(s *interp.Surface, left *interp.LeftOut, opt Options) (*finder, error) {
	n := len(left.Expected)
	f := &finder{opt: opt, own: s.Z(), z: s.Z(), residual: left.Expected, reach: left.Reach, scale: make([]float64, n), off: make([]float64, n)}
	if s.Mesh().HasConstraints() {
		f.z = slices.Clone(f.z)
	}
	var err error
	if f.work, err = interp.New(s.Mesh(), f.z); err != nil {
		return nil, err
	}
	for _, z := range f.z {
		f.opt.ScaleLeast = max(f.opt.ScaleLeast, math.Abs(z)/(1<<48))
	}
	for v, expected := range left.Expected {
		f.residual[v] = f.own[v] - expected
	}
	f.pinned, f.was, f.changed = map[triangulate.Vertex]bool{}, map[triangulate.Vertex]float64{}, map[triangulate.Vertex]bool{}
	f.near = newSurroundings(s.Mesh())
	f.lines = linesOf(s.Mesh())
	for v := range f.lines {
		f.missLine(v)
	}
	return f, nil
}

// judgeAll judges every vertex.
func (f *finder) judgeAll(ctx context.Context) error {
	const chunk = 4096
	var next atomic.Int64
	g, ctx := errgroup.WithContext(ctx)
	for range min(f.opt.Workers, len(f.z)/chunk+1) {
		g.Go(func() error {
			near := newSurroundings(f.work.Mesh())
			for {
				first := int(next.Add(chunk)) - chunk
				if first >= len(f.z) {
					return nil
				}
				if err := ctx.Err(); err != nil {
					return err
				}
				for v := first; v < min(first+chunk, len(f.z)); v++ {
					f.judge(triangulate.Vertex(v), near)
				}
			}
		})
	}
	return g.Wait()
}

// judge sets scale and off of v.
func (f *finder) judge(v triangulate.Vertex, near *surroundings) {
	f.scale[v], f.off[v] = math.NaN(), 0
	if m := f.missStar(v); m.residual == m.residual {
		f.scale[v], f.off[v] = f.compare(v, m, near)
	}
}

// missStar is how far v lies off by its star.
func (f *finder) missStar(v triangulate.Vertex) miss { return miss{f.residual[v], f.reach[v]} }

// compare tells how far off v is that misses by m; a vertex of a line by its star or by
// its line, whichever lets it pass.
func (f *finder) compare(v triangulate.Vertex, m miss, near *surroundings) (scale, off float64) {
	l, lined := f.lines[v]
	depths := depthMost
	if lined {
		depths = depthMostLined
	}
	near.gather(v, depths, fewest, func(u triangulate.Vertex) bool {
		_, alike := f.lines[u]
		return alike == lined && f.residual[u] == f.residual[u]
	})
	if len(near.about) < fewest {
		near.gather(v, depths, fewest, func(u triangulate.Vertex) bool { return f.residual[u] == f.residual[u] })
	}
	scale, off = f.against(near, f.missStar, m)
	if !lined || !l.joins() {
		return scale, off
	}
	along, offAlong := f.against(near, func(u triangulate.Vertex) miss {
		if l, ok := f.lines[u]; ok && l.joins() {
			return l.miss
		}
		return f.missStar(u)
	}, l.miss)
	if offAlong < off || off != off {
		return along, offAlong
	}
	return scale, off
}

func (f *finder) against(near *surroundings, of func(triangulate.Vertex) miss, m miss) (scale, off float64) {
	middle, scale := near.scale(of, m.reach)
	if scale != scale {
		return scale, 0
	}
	scale = max(scale, f.opt.ScaleLeast)
	if d := math.Abs(m.residual - middle); d > 0 {
		off = d / scale // infinite where nothing else is off at all
	}
	return scale, off
}

// takeOut takes out the worst, expects its neighbours anew, and so on until nothing is
// off.
func (f *finder) takeOut(ctx context.Context) error {
	q := &queue{f: f}
	for v, off := range f.off {
		if off > f.opt.Factor && !f.pinned[triangulate.Vertex(v)] {
			q.list = append(q.list, entry{triangulate.Vertex(v), off})
		}
	}
	heap.Init(q)
	var link []triangulate.Vertex
	for len(q.list) > 0 {
		if len(f.out)%1024 == 0 && ctx.Err() != nil {
			return ctx.Err()
		}
		e := heap.Pop(q).(entry)
		if f.off[e.v] != e.off {
			continue // judged anew since
		}
		link = append(link[:0], f.near.neighbours(e.v)...)
		f.drop(e.v)
		for _, u := range link {
			f.expect(u)
			f.changed[u] = true
		}
		for _, u := range link {
			f.judge(u, f.near)
			if f.off[u] > f.opt.Factor && !f.pinned[u] {
				heap.Push(q, entry{u, f.off[u]})
			}
		}
	}
	return nil
}

// drop takes v out.
func (f *finder) drop(v triangulate.Vertex) {
	if l, lined := f.lines[v]; !lined {
		f.near.r.Remove(v)
	} else if l.joins() {
		f.z[v] = f.alongLine(v, l)
	} else {
		f.z[v] = f.work.ValueOf(f.near.r.Without(v), f.near.pos[v])
	}
	f.was[v] = f.residual[v]
	f.residual[v] = math.NaN()
	f.off[v] = 0
	f.out = append(f.out, v)
}

// expect predicts v anew from what is left.
func (f *finder) expect(v triangulate.Vertex) {
	if f.residual[v] != f.residual[v] {
		return // out, or on the outline
	}
	left := f.near.r.Without(v)
	f.residual[v], f.reach[v] = f.own[v]-f.work.ValueOf(left, f.near.pos[v]), f.work.Reach(left, f.near.pos[v])
	if _, lined := f.lines[v]; lined {
		f.missLine(v)
	}
}

// confirm compares those that were taken out with all that are left: one that was off
// because of another is no suspect.
func (f *finder) confirm() (suspects []Suspect) {
	whole := newSurroundings(f.work.Mesh())
	for _, v := range f.out {
		var left triangulate.Left
		l, lined := f.lines[v]
		if lined {
			left = f.near.r.Without(v)
			f.missLine(v)
		} else {
			left = f.near.r.Locate(v)
		}
		expected := f.work.ValueOf(left, f.near.pos[v])
		m := miss{f.own[v] - expected, f.work.Reach(left, f.near.pos[v])}
		scale, off := f.compare(v, m, whole)
		if l.joins() {
			expected = f.own[v] - l.residual
			f.missLine(v)
		}
		f.scale[v] = scale
		if off > f.opt.Factor {
			suspects = append(suspects, Suspect{v, expected, f.own[v] - expected, scale, off})
		}
	}
	return suspects
}

// An entry of the queue waits to be taken out.
type entry struct {
	v   triangulate.Vertex
	off float64
}

// order puts what is further off first, then goes by (x, y).
func (f *finder) order(a, b entry) int {
	switch {
	case a.off > b.off:
		return -1
	case a.off < b.off:
		return 1
	}
	return exact.CompareXY(f.near.pos[a.v], f.near.pos[b.v])
}

// queue is a heap with the entry furthest off on top.
type queue struct {
	list []entry
	f    *finder
}

func (q *queue) Len() int           { return len(q.list) }
func (q *queue) Less(i, j int) bool { return q.f.order(q.list[i], q.list[j]) < 0 }
func (q *queue) Swap(i, j int)      { q.list[i], q.list[j] = q.list[j], q.list[i] }
func (q *queue) Push(x any)         { q.list = append(q.list, x.(entry)) }
func (q *queue) Pop() any {
	n := len(q.list) - 1
	e := q.list[n]
	q.list = q.list[:n]
	return e
}
