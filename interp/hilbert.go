package interp

import "github.com/paulmach/orb"

// hilbert numbers the 2^16 x 2^16 cells of a rectangle along Hilbert's curve, whose
// neighbours are neighbours in the plane. It orders work and nothing else: no
// result depends on it, so its arithmetic may round.
type hilbert struct {
	min   orb.Point
	scale [2]float64 // cells a unit
}

func newHilbert(b orb.Bound) hilbert {
	h := hilbert{min: b.Min}
	for axis := range 2 {
		if size := b.Max[axis] - b.Min[axis]; size > 0 {
			h.scale[axis] = (1 << 16) / size
		}
	}
	return h
}

// index returns the number of the cell that holds p, or of the nearest one.
//
// Source: the usual loop over the bits of x and y from the highest, which turns and
// mirrors the quadrant so that the curve enters and leaves it at the right corners
// (D. Hilbert, Math. Ann. 38, 1891; from memory of common practice).
func (h *hilbert) index(p orb.Point) uint32 {
	x, y := h.cell(p, 0), h.cell(p, 1)
	var d uint32
	for bit := 15; bit >= 0; bit-- {
		rx, ry := x>>bit&1, y>>bit&1
		d = d<<2 | (3*rx ^ ry)
		// Without branches, which would be mispredicted half of the time: if ry is
		// 0, mirror both when rx is 1, and exchange x and y.
		flip := (ry - 1) & -rx
		x, y = x^flip, y^flip
		t := (x ^ y) & (ry - 1)
		x, y = x^t, y^t
	}
	return d
}

// cell returns the column or row of p, kept within the rectangle.
func (h *hilbert) cell(p orb.Point, axis int) uint32 {
	c := (p[axis] - h.min[axis]) * h.scale[axis]
	if !(c > 0) { // NaN too
		return 0
	}
	if c >= 1<<16-1 {
		return 1<<16 - 1
	}
	return uint32(c)
}
