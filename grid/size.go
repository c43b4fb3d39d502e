package grid

import (
	"math"

	"isofacet/grid/decimal"
)

// Check returns nil if the values of s, 8 bytes a node, fit into limitBytes, and otherwise a *SizeError, which
// wraps ErrTooBig and holds the smallest cell that would fit. It allocates nothing.
func (s Spec) Check(limitBytes int64) error {
	if s.Bytes() <= limitBytes {
		return nil
	}
	e := &SizeError{Spec: s, Nodes: float64(s.Cols) * float64(s.Rows), LimitBytes: limitBytes}
	e.FitX, e.FitY = s.fittingCell(limitBytes)
	return e
}

// fittingCell returns the cell times 2, 5, 10, 20, ...: the first whose lattice over the same extent fits into limitBytes;
// zeros if none does. Multiples of the cell, because what ends on the larger then ends on the smaller as well.
func (s Spec) fittingCell(limitBytes int64) (x, y decimal.Number) {
	for factor := int64(1); factor <= 1e17; factor *= 10 {
		for _, digit := range []int64{1, 2, 5} {
			f := float64(factor * digit)
			// A larger cell may reach over either side by one, and Corners have one node more.
			nodes := (math.Ceil(float64(s.Cols)/f) + 2) * (math.Ceil(float64(s.Rows)/f) + 2)
			if factor*digit == 1 || 8*nodes > float64(limitBytes) {
				continue
			}
			x, errX := s.CellX.Times(factor * digit)
			y, errY := s.CellY.Times(factor * digit)
			if errX != nil || errY != nil {
				break
			}
			return x, y
		}
	}
	return decimal.Number{}, decimal.Number{}
}
