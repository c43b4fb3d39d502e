package overlay

import (
	"context"
	"runtime"
	"sync"
	"sync/atomic"

	"isofacet/interp"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// Part is what is cut, or filled, or is the same. All of it is positive.
type Part struct {
	Volume float64
	Area   float64 // in plan
	// The area measured on the slopes of the surfaces from and to.
	AreaFrom, AreaTo float64
}

// Figures are what lies between two surfaces where both are.
type Figures struct {
	Cut  Part // to is lower than from: taken away
	Fill Part // to is higher: brought in
	Same Part // no difference over some width; no volume

	Net float64 // fill less cut, rounded once
	// Covered is the plan area that both surfaces cover: the three areas together,
	// rounded once. AreaFrom and AreaTo are all of each surface's own plan area.
	Covered          float64
	AreaFrom, AreaTo float64
	Pieces           int // polygons on which the difference is linear

	Weights *Weights // if they were asked for
}

// Options say how to work, never what comes out.
type Options struct {
	// Workers is the largest number of goroutines; 0 means one per CPU.
	Workers int
	// Weights asks for what every height counts in the volumes.
	Weights bool
	// Progress, when not nil, is told now and then, from one goroutine at a time,
	// how many of the triangles of one surface are done.
	Progress func(done, total int)
}

// Between returns what lies between from and to, exact but for rounding (see the
// package comment). It returns nil and ctx.Err() if ctx ends first.
//
// Beside the surfaces it holds 9 bytes a triangle and, of the one with more triangles,
// 16 bytes a vertex, of the other 12.
func Between(ctx context.Context, from, to *interp.Surface, opt Options) (*Figures, error) {
	workers := opt.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	// The surface with more triangles is the outer one: more to share out. Either
	// way has the same result, bit for bit.
	swapped := to.Mesh().NumTriangles() > from.Mesh().NumTriangles()
	outer, inner := newSide(from, workers), newSide(to, workers)
	if swapped {
		outer, inner = inner, outer
	}
	var w *weigher
	if opt.Weights {
		w = newWeigher(outer, inner)
	}
	total, err := sumPieces(ctx, outer, inner, workers, opt.Progress, w)
	if err != nil {
		return nil, err
	}
	return total.figures(from, to, swapped, w), nil
}

// totals are the sums of a run, for each sign of the difference.
type totals struct {
	pos, neg, zero sums
	pieces         int
}

// sums are three areas, twice: in plan, on the outer surface, and on the inner one; and
// the volume, six times.
type sums [4]exact.Tally

const (
	planArea = iota
	outerArea
	innerArea
	volume
)

func (t *totals) merge(o *totals) {
	for i := range t.pos {
		t.pos[i].Merge(&o.pos[i])
		t.neg[i].Merge(&o.neg[i])
		t.zero[i].Merge(&o.zero[i])
	}
	t.pieces += o.pieces
}

// figures rounds the sums. Their differences are inner less outer, which is to less
// from unless the two have changed places.
func (t *totals) figures(from, to *interp.Surface, swapped bool, w *weigher) *Figures {
	f := &Figures{
		Cut: t.neg.part(swapped), Fill: t.pos.part(swapped), Same: t.zero.part(swapped),
		AreaFrom: from.Area(), AreaTo: to.Area(), Pieces: t.pieces,
	}
	if swapped {
		f.Cut, f.Fill = f.Fill, f.Cut
	}
	var net, covered exact.Sum
	net.Merge(t.pos[volume].Sum())
	net.Subtract(t.neg[volume].Sum())
	f.Net = net.Mean(6)
	if swapped && f.Net != 0 {
		f.Net = -f.Net
	}
	for _, s := range []*sums{&t.pos, &t.neg, &t.zero} {
		covered.Merge(s[planArea].Sum())
	}
	f.Covered = covered.Mean(2)
	if w != nil {
		f.Weights = w.weights(swapped)
	}
	return f
}

// addPiece adds what a polygon contributes.
func (t *totals) addPiece(poly *polygon, slantOuter, slantInner float64) {
	t.pieces++
	first, signs := poly.survey()
	if signs == somePos|someNeg {
		to, zero2 := poly.splitFan(first)
		t.add(&t.pos, to[0], slantOuter, slantInner)
		t.add(&t.neg, to[1], slantOuter, slantInner)
		t.add(&t.zero, share{zero2, 0}, slantOuter, slantInner)
		return
	}
	area2, volume6 := poly.fan(first)
	switch signs {
	case somePos:
		t.add(&t.pos, share{area2, volume6}, slantOuter, slantInner)
	case someNeg:
		t.add(&t.neg, share{area2, -volume6}, slantOuter, slantInner)
	default:
		t.add(&t.zero, share{area2, 0}, slantOuter, slantInner)
	}
}

func (s *sums) part(swapped bool) Part {
	p := Part{
		Volume: s[volume].Sum().Mean(6), Area: s[planArea].Sum().Mean(2),
		AreaFrom: s[outerArea].Sum().Mean(2), AreaTo: s[innerArea].Sum().Mean(2),
	}
	if swapped {
		p.AreaFrom, p.AreaTo = p.AreaTo, p.AreaFrom
	}
	return p
}

func (t *totals) add(to *sums, s share, slantOuter, slantInner float64) {
	if s.area2 == 0 && s.volume6 == 0 {
		return
	}
	exact.AddFour((*[4]exact.Tally)(to), s.area2, s.area2*slantOuter, s.area2*slantInner, s.volume6)
}

// Triangles of the outer side, and vertices, that a worker takes at a time.
const (
	trianglesChunk = 1 << 10
	verticesChunk  = 1 << 12
)

// sumPieces adds up all pieces, on all workers. Every piece has terms of its own,
// which do not depend on others; the sums are exact, so that their order is free.
func sumPieces(ctx context.Context, outer, inner *side, workers int, progress func(done, total int), weigh *weigher) (*totals, error) {
	total := &totals{}
	if outer.shown == 0 || inner.shown == 0 {
		return total, ctx.Err()
	}
	at := newPlaces(outer, inner, workers)
	seen := newInsides(inner)
	count := int(outer.shown)
	var next atomic.Int64
	var mu sync.Mutex
	var wg sync.WaitGroup
	done := 0
	for range min(workers, count/trianglesChunk+1) {
		wg.Go(func() {
			m := &meeting{outer: outer, inner: inner, weigh: weigh, seen: seen}
			own := &totals{}
			for ctx.Err() == nil {
				first := int(next.Add(trianglesChunk)) - trianglesChunk
				if first >= count {
					break
				}
				last := min(first+trianglesChunk, count)
				m.walks.start(triangulate.Triangle(first), triangulate.Triangle(last))
				for t := triangulate.Triangle(first); t < triangulate.Triangle(last); t++ {
					if !m.trace(own, t, at) {
						m.addTo(own, t, at)
					}
				}
				if progress != nil {
					mu.Lock()
					done += last - first
					progress(done, count)
					mu.Unlock()
				}
			}
			mu.Lock()
			defer mu.Unlock()
			total.merge(own)
		})
	}
	wg.Wait()
	return total, ctx.Err()
}

// addTo adds the pieces of outer triangle t, whatever its position.
func (m *meeting) addTo(total *totals, t triangulate.Triangle, at *places) {
	seed := at.seed(m.outer, t)
	if seed == triangulate.NoTriangle {
		return
	}
	m.gather(t, seed)
	var corners [3]triangulate.Location
	var d [3]float64
	for k, v := range m.v {
		corners[k], d[k] = at.location(v), at.d[v]
	}
	var poly polygon
	for i := range m.found.n {
		f := &m.found.of[i]
		if f.t >= m.inner.shown {
			continue
		}
		m.piece(f, &corners, &d, &poly)
		if poly.n < 3 {
			continue
		}
		total.addPiece(&poly, m.outer.slant[t], m.inner.slant[f.t])
		if m.weigh != nil {
			m.weigh.add(&poly, t, f.t)
		}
	}
}

// inChunks calls work for all of 0..n, in chunks, from several goroutines; each
// makes its own by start.
func inChunks(n, workers int, start func() func(from, to int)) {
	var next atomic.Int64
	var wg sync.WaitGroup
	for range min(workers, n/verticesChunk+1) {
		wg.Go(func() {
			work := start()
			for {
				from := int(next.Add(verticesChunk)) - verticesChunk
				if from >= n {
					return
				}
				work(from, min(from+verticesChunk, n))
			}
		})
	}
	wg.Wait()
}
