package triangulate

import (
	"context"
	"fmt"
	"slices"
	"sort"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// Segment is a straight piece of a breakline, between two input points.
type Segment struct {
	From, To int32 // indices of input points
}

// Crossed names two segments that cross between their ends, by their numbers,
// the smaller first.
type Crossed struct {
	A, B int32
}

// CrossingError is returned for segments that cross where neither has a vertex.
type CrossingError struct {
	Pairs []Crossed // all of them, sorted
}

func (e *CrossingError) Error() string {
	p := e.Pairs[0]
	if len(e.Pairs) == 1 {
		return fmt.Sprintf("segments %d and %d cross: expected segments that meet only at vertices", p.A, p.B)
	}
	return fmt.Sprintf("segments %d and %d cross, and %d more pairs: expected segments that meet only at vertices", p.A, p.B, len(e.Pairs)-1)
}

// Constrained returns the constrained Delaunay triangulation of pts and segs:
// every segment is a chain of edges, and every other inner edge passes the
// in-circle test (Lee & Lin 1986; Chew 1989). A vertex exactly on a segment
// divides it; segments may share ends, touch, overlap and repeat. A segment
// whose ends are at one place adds nothing. The result depends on the sets of
// points and segments alone.
//
// Segments that cross between vertices are refused with a *CrossingError;
// SplitCrossings makes vertices there. Other errors are those of Delaunay.
//
// Beside Delaunay, expected time O(1) for each triangle that a segment crosses.
func Constrained(ctx context.Context, pts []orb.Point, segs []Segment, opt Options) (*Mesh, error) {
	m, err := Delaunay(ctx, pts, opt)
	if err != nil || len(segs) == 0 {
		return m, err
	}
	for i, s := range segs {
		if s.From < 0 || int(s.From) >= len(pts) || s.To < 0 || int(s.To) >= len(pts) {
			panic(fmt.Sprintf("triangulate: segment %d joins points %d and %d of %d", i, s.From, s.To, len(pts)))
		}
	}
	if len(m.half) == 0 {
		m.chains = m.lineChains(segs)
		return m, nil
	}
	n := &inserter{pos: m.pos, half: m.half, kept: newBits(len(m.half)), at: m.outgoing()}
	for _, p := range m.insertionOrder(segs) {
		a, b := p.lo, p.hi
		if exact.CompareXY(m.pos[a], m.pos[b]) > 0 {
			a, b = b, a
		}
		if !n.insert(a, b, p.segment) {
			return nil, &CrossingError{Pairs: FindCrossings(pts, segs)}
		}
		if ctx.Err() != nil {
			return nil, ctx.Err()
		}
	}
	m.kept = n.kept
	m.chains = n.chains
	sortChains(m.chains)
	return m, nil
}

// pending is a segment to insert, by its vertices, lo < hi.
type pending struct {
	lo, hi  Vertex
	segment int32
}

// insertionOrder sorts the segments along the vertices, whose numbers are
// coherent in space, so that neighbours in time are neighbours in memory. It
// depends on the places of the segments, not on their order.
func (m *Mesh) insertionOrder(segs []Segment) []pending {
	ps := make([]pending, 0, len(segs))
	for i, s := range segs {
		a, b := m.VertexOf(int(s.From)), m.VertexOf(int(s.To))
		if a != b {
			ps = append(ps, pending{min(a, b), max(a, b), int32(i)})
		}
	}
	slices.SortFunc(ps, func(p, q pending) int {
		if p.lo != q.lo {
			return int(p.lo) - int(q.lo)
		}
		if p.hi != q.hi {
			return int(p.hi) - int(q.hi)
		}
		return int(p.segment) - int(q.segment)
	})
	return ps
}

// outgoing returns, for every vertex, a half-edge that starts there.
func (m *Mesh) outgoing() []HalfEdge {
	at := make([]HalfEdge, len(m.pos))
	for h, e := range m.half {
		at[e.origin] = HalfEdge(h)
	}
	return at
}

// lineChains is what the segments are made of when all vertices lie on one line.
func (m *Mesh) lineChains(segs []Segment) []chainEdge {
	order := m.byPosition()
	rank := make([]int, len(order))
	for i, v := range order {
		rank[v] = i
	}
	var chains []chainEdge
	for i, s := range segs {
		a, b := rank[m.VertexOf(int(s.From))], rank[m.VertexOf(int(s.To))]
		for k := min(a, b); k < max(a, b); k++ {
			u, v := order[k], order[k+1]
			chains = append(chains, chainEdge{min(u, v), max(u, v), int32(i)})
		}
	}
	sortChains(chains)
	return chains
}

func sortChains(chains []chainEdge) {
	slices.SortFunc(chains, compareChain)
}

func compareChain(p, q chainEdge) int {
	if p.u != q.u {
		return int(p.u) - int(q.u)
	}
	if p.v != q.v {
		return int(p.v) - int(q.v)
	}
	return int(p.segment) - int(q.segment)
}

// IsConstrained tells whether the edge of h is a part of a segment.
func (m *Mesh) IsConstrained(h HalfEdge) bool { return m.kept != nil && m.kept.get(int(h)) }

// HasConstraints tells whether any edge is a part of a segment.
func (m *Mesh) HasConstraints() bool { return len(m.chains) > 0 }

// SegmentsAlong returns the numbers of the segments that the edge of h is a part
// of, rising. Time O(log segments).
func (m *Mesh) SegmentsAlong(h HalfEdge) []int32 {
	if !m.IsConstrained(h) {
		return nil
	}
	u, v := m.Origin(h), m.Dest(h)
	u, v = min(u, v), max(u, v)
	i := sort.Search(len(m.chains), func(i int) bool { return compareChain(m.chains[i], chainEdge{u, v, 0}) >= 0 })
	var segments []int32
	for ; i < len(m.chains) && m.chains[i].u == u && m.chains[i].v == v; i++ {
		if k := len(segments); k == 0 || segments[k-1] != m.chains[i].segment {
			segments = append(segments, m.chains[i].segment)
		}
	}
	return segments
}
