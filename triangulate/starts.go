package triangulate

import (
	"math"

	"github.com/paulmach/orb"
)

// starts is a coarse bucket index: for each cell of a square raster over the
// vertices, a triangle nearby, where a walk to a position in the cell begins.
type starts struct {
	xMin, yMin, perX, perY float64
	cols, rows             int
	triangle               []Triangle
	rim                    []HalfEdge // those without a twin: where lines come in
}

// verticesPerCell balances the index's memory against the steps of a walk.
const verticesPerCell = 2

func newStarts(m *Mesh) starts {
	s := starts{cols: 1, rows: 1, triangle: []Triangle{0}}
	if len(m.half) == 0 {
		return s
	}
	b := orb.Bound{Min: m.pos[0], Max: m.pos[0]}
	for _, p := range m.pos {
		b.Min[0], b.Max[0] = min(b.Min[0], p[0]), max(b.Max[0], p[0])
		b.Min[1], b.Max[1] = min(b.Min[1], p[1]), max(b.Max[1], p[1])
	}
	w, h := b.Max[0]-b.Min[0], b.Max[1]-b.Min[1]
	cells := float64(len(m.pos)/verticesPerCell + 1)
	// Square cells, at least one row and column, no more than cells in one line.
	s.cols = int(min(max(math.Sqrt(cells)*math.Sqrt(w)/math.Sqrt(h), 1), cells))
	s.rows = int(min(max(cells/float64(s.cols), 1), cells))
	s.xMin, s.yMin = b.Min[0], b.Min[1]
	s.perX, s.perY = float64(s.cols)/w, float64(s.rows)/h
	s.triangle = make([]Triangle, s.cols*s.rows)
	for i := range s.triangle {
		s.triangle[i] = NoTriangle
	}
	for h, e := range m.half {
		s.triangle[s.cell(m.pos[e.origin])] = HalfEdge(h).Triangle()
		if e.twin == NoHalfEdge {
			s.rim = append(s.rim, HalfEdge(h))
		}
	}
	// Empty cells take over a neighbour's: from below in their column, else
	// from the left.
	last := Triangle(0)
	for i, t := range s.triangle {
		switch {
		case t != NoTriangle:
			last = t
		case i >= s.cols:
			s.triangle[i] = s.triangle[i-s.cols]
		default:
			s.triangle[i] = last
		}
	}
	return s
}

func (s *starts) cell(p orb.Point) int {
	return s.row(p[1])*s.cols + s.col(p[0])
}

func (s *starts) col(x float64) int { return slot((x-s.xMin)*s.perX, s.cols) }
func (s *starts) row(y float64) int { return slot((y-s.yMin)*s.perY, s.rows) }

// slot is the whole part of f, brought into 0..n-1; 0 for NaN.
func slot(f float64, n int) int {
	if !(f > 0) {
		return 0
	}
	if f >= float64(n) {
		return n - 1
	}
	return int(f)
}

// near returns a triangle to begin a walk to p from.
func (s *starts) near(p orb.Point) Triangle { return s.triangle[s.cell(p)] }
