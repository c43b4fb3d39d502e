package contour

import (
	"fmt"
	"math"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/triangulate/exact"
)

// raster is a lattice of values as a source of lines: marching squares. A cell here is the square between four nodes,
// all with values; its corners and sides are numbered counter-clockwise.
//
//	3 --side 2-- 2    north       A passage is 4 times the number of a cell plus a side,
//	|            |                from the corner of that number to the next. Cell c has its
//	side 3    side 1              north-western node at row c / (cols-1), column
//	|            |                c % (cols-1).
//	0 --side 0-- 1    south
//
// A side is crossed where linear interpolation between its two nodes says. A cell whose corners are above, below, above,
// below in turn is a saddle, crossed twice: the two corners above are joined if the mean of the four is at or above
// the level, otherwise the two below are.
type raster struct {
	values []float64
	xs, ys []float64
	cols   int // of nodes
	wide   int // columns of cells
	high   int // rows of cells
	// ranks holds, for every node, how many levels are not above its value, or noValue.
	ranks []int32
}

const noValue = -1

// RasterNodesMost is the largest number of nodes in a raster that lines are followed through.
const RasterNodesMost = math.MaxInt32

func newRaster(g *grid.Grid) (*raster, error) {
	if err := g.Validate(); err != nil {
		return nil, err
	}
	if len(g.Values) > RasterNodesMost {
		return nil, fmt.Errorf("raster of %d nodes, expected at most %d: %w", len(g.Values), RasterNodesMost, ErrTooMany)
	}
	s := &raster{
		values: g.Values, xs: g.Spec.Xs(), ys: g.Spec.Ys(),
		cols: g.Spec.Cols, wide: g.Spec.Cols - 1, high: g.Spec.Rows - 1,
	}
	for i, v := range g.Values {
		if size := math.Abs(v); size > 1e60 || size < 1e-60 && size != 0 {
			return nil, fmt.Errorf("raster row %d, column %d, value %v: expected no-data, 0 or a number from 1e-60 to 1e60 in size",
				i/s.cols+1, i%s.cols+1, v)
		}
	}
	return s, nil
}

func (s *raster) cells() int   { return s.wide * s.high }
func (s *raster) slots() int64 { return 2 * int64(s.cells()) }

// slot is the bit of a passage. The two passages of a saddle are opposite sides, 0 and 2 or 1 and 3.
func (s *raster) slot(p passage) int64 { return int64(p) >> 1 }

func (s *raster) rank(zs []float64, workers int) {
	s.ranks = make([]int32, len(s.values))
	inRanges(len(s.values), workers, func(_, from, to int) {
		rankValues(s.ranks[from:to], s.values[from:to], zs)
		for i := from; i < to; i++ {
			if math.IsNaN(s.values[i]) {
				s.ranks[i] = noValue
			}
		}
	})
}

// corners returns the nodes at the corners of a cell.
func (s *raster) corners(cell int) [4]int {
	nw := cell/s.wide*s.cols + cell%s.wide
	return [4]int{nw + s.cols, nw + s.cols + 1, nw + 1, nw}
}

// cornerRanks returns the ranks of a cell's corners, and whether all have values.
func (s *raster) cornerRanks(cell int) (r [4]int32, ok bool) {
	for i, n := range s.corners(cell) {
		r[i] = s.ranks[n]
	}
	return r, r[0] >= 0 && r[1] >= 0 && r[2] >= 0 && r[3] >= 0
}

func (s *raster) spans(dst []span, first int, outline *[]passage) {
	for i := range dst {
		r, ok := s.cornerRanks(first + i)
		if !ok {
			dst[i] = span{}
			continue
		}
		dst[i] = span{min(r[0], r[1], r[2], r[3]), max(r[0], r[1], r[2], r[3])}
		for side := range 4 {
			if p := passage(4*(first+i) + side); r[side] > r[(side+1)%4] && s.begins(p) {
				*outline = append(*outline, p)
			}
		}
	}
}

func (s *raster) side(p passage) span {
	r, _ := s.cornerRanks(int(p >> 2))
	side := int(p & 3)
	return span{r[(side+1)%4], r[side]}
}

func (s *raster) begins(p passage) bool { return s.across(p) == noPassage }

// across returns the passage of the same side in the neighbouring cell, or noPassage where there is none with
// values.
func (s *raster) across(p passage) passage {
	cell, side := int(p>>2), int(p&3)
	row, col := cell/s.wide, cell%s.wide
	switch side {
	case 0:
		row++
	case 1:
		col++
	case 2:
		row--
	case 3:
		col--
	}
	if row < 0 || row >= s.high || col < 0 || col >= s.wide {
		return noPassage
	}
	cell = row*s.wide + col
	if _, ok := s.cornerRanks(cell); !ok {
		return noPassage
	}
	return passage(4*cell + (side+2)%4)
}

// leave returns the side through which the line of level k, with value z, leaves a cell that it enters at p.
func (s *raster) leave(k int, z float64, p passage) passage {
	cell, side := int(p>>2), int(p&3)
	r, _ := s.cornerRanks(cell)
	above := func(i int) bool { return int(r[i&3]) > k }
	next, opposite := above(side+2), above(side+3) // the corners after the entered side's two
	out := side + 1
	switch {
	case next && opposite: // only corner side+1 is below
	case next && !opposite: // saddle
		if !s.middleAbove(cell, z) {
			out = side + 3
		}
	case opposite:
		out = side + 2
	default: // only corner side is above
		out = side + 3
	}
	return passage(4*cell + out&3)
}

// middleAbove reports whether the mean of a cell's corners is at or above z.
func (s *raster) middleAbove(cell int, z float64) bool {
	c := s.corners(cell)
	a, b, d, e := s.values[c[0]], s.values[c[1]], s.values[c[2]], s.values[c[3]]
	// Five numbers added in doubles are off by less than 4 x 2^-53 of the sum of their sizes each.
	sum := ((a + b) + (d + e)) - float64(4*z)
	if bound := 0x1p-50 * (math.Abs(a) + math.Abs(b) + math.Abs(d) + math.Abs(e) + float64(4*math.Abs(z))); math.Abs(sum) > bound {
		return sum > 0
	}
	var s5 exact.Sum
	for _, v := range [...]float64{a, b, d, e, -4 * z} {
		s5.Add(v)
	}
	return s5.Value() >= 0
}

// at returns where the side at p is crossed.
func (s *raster) at(p passage, z float64) orb.Point {
	c, side := s.corners(int(p>>2)), int(p&3)
	i, j := c[side], c[(side+1)&3]
	return Crossing(s.place(i), s.values[i], s.place(j), s.values[j], z)
}

// place returns the position of a node.
func (s *raster) place(node int) orb.Point { return orb.Point{s.xs[node%s.cols], s.ys[node/s.cols]} }

func (s *raster) follow(k int, z float64, starts []passage, seeds []int32, m *marks, points *arena, use func(fragment)) {
	for _, p := range starts {
		if m.claim(s.slot(p)) {
			use(s.followFrom(k, z, p, m, points))
		}
	}
	for _, cell := range seeds {
		r, _ := s.cornerRanks(int(cell))
		for side := range 4 {
			p := passage(4*int(cell) + side)
			if int(r[side]) > k && int(r[(side+1)&3]) <= k && m.claim(s.slot(p)) {
				use(s.followFrom(k, z, p, m, points))
			}
		}
	}
}

// followFrom returns the fragment that begins at p, which is claimed.
func (s *raster) followFrom(k int, z float64, p passage, m *marks, points *arena) fragment {
	f := fragment{first: p}
	line := points.begin()
	for {
		line = appendPoint(line, s.at(p, z))
		out := s.leave(k, z, p)
		p = s.across(out)
		if p == noPassage {
			line = appendPoint(line, s.at(out, z))
			f.after = noPassage
			break
		}
		if !m.claim(s.slot(p)) {
			f.after = p
			break
		}
	}
	if f.after == f.first {
		line = append(line, line[0]) // room for the point that will repeat the first
	}
	f.points = points.keep(line)
	return f
}

func (s *raster) release(seeds []int32, m *marks) {
	for _, cell := range seeds {
		m.free(2 * int64(cell))
	}
}

func (s *raster) outline(zs []float64, use func(a, b orb.Point, ra, rb int, at func(k int) orb.Point) error) error {
	for cell := range s.cells() {
		r, ok := s.cornerRanks(cell)
		if !ok {
			continue
		}
		c := s.corners(cell)
		for side := range 4 {
			p := passage(4*cell + side)
			if !s.begins(p) {
				continue
			}
			end := (side + 1) % 4
			at := func(k int) orb.Point { return s.at(p, zs[k]) }
			if err := use(s.place(c[side]), s.place(c[end]), int(r[side]), int(r[end]), at); err != nil {
				return err
			}
		}
	}
	return nil
}

func (s *raster) reading(node int32) (orb.Point, float64) { return s.place(int(node)), s.values[node] }

func (s *raster) near(within float64, zs []float64, workers int) []int32 {
	parts := make([][]int32, max(1, workers))
	inRanges(s.cells(), workers, func(w, from, to int) {
		for cell := from; cell < to; cell++ {
			parts[w] = s.nearIn(cell, within, zs, parts[w])
		}
	})
	return sortedOnce(parts)
}

// nearIn appends the corners of a cell to which a line or the rim may come within some distance. A piece of line cuts
// off at least a share of a corner's two sides; the distance from the corner is no less than that of the shorter over
// the root of two.
func (s *raster) nearIn(cell int, within float64, zs []float64, found []int32) []int32 {
	r, ok := s.cornerRanks(cell)
	if !ok {
		return found
	}
	c := s.corners(cell)
	sw, ne := s.place(c[0]), s.place(c[2])
	short := min(ne[0]-sw[0], ne[1]-sw[1])
	z := [4]float64{s.values[c[0]], s.values[c[1]], s.values[c[2]], s.values[c[3]]}
	spread := 0.0
	if r[0] != r[1] || r[0] != r[2] || r[0] != r[3] {
		spread = max(z[0], z[1], z[2], z[3]) - min(z[0], z[1], z[2], z[3])
	}
	for side := range 4 {
		if s.begins(passage(4*cell + side)) {
			found = append(found, int32(c[side]), int32(c[(side+1)%4]))
		}
		gap := math.Inf(1)
		if spread > 0 {
			gap = levelGap(z[side], r[side], zs)
		}
		if !keeps(short, gap, spread, 2*within) {
			found = append(found, int32(c[side]))
		}
	}
	return found
}
