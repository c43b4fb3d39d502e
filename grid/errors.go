package grid

import (
	"errors"
	"fmt"
	"strconv"

	"isofacet/grid/decimal"
)

var (
	// ErrSpec is wrapped by every error about a lattice that cannot be.
	ErrSpec = errors.New("not a lattice")
	// ErrTooBig is wrapped by every error about a lattice that is larger than allowed.
	ErrTooBig = errors.New("too big")
)

// SpecError says which part of a lattice's description is wrong. It wraps ErrSpec.
type SpecError struct {
	What     string // "cell x", "extent ymax", "rows", ...
	Seen     string
	Expected string
}

func (e *SpecError) Error() string {
	return fmt.Sprintf("%s %s: expected %s", e.What, e.Seen, e.Expected)
}

func (e *SpecError) Unwrap() error { return ErrSpec }

// MultipleError says that a side of an extent is not on a whole multiple of the cell, and names the two next to it.
// It wraps ErrSpec.
type MultipleError struct {
	Side         string // xmin, ymin, xmax or ymax
	Value, Cell  decimal.Number
	Below, Above decimal.Number
}

func (e *MultipleError) Error() string {
	return fmt.Sprintf("extent %s %s: expected a whole multiple of the cell %s, such as %s or %s", e.Side, e.Value, e.Cell, e.Below, e.Above)
}

func (e *MultipleError) Unwrap() error { return ErrSpec }

// SizeError says that a lattice does not fit a limit. It wraps ErrTooBig.
type SizeError struct {
	Spec       Spec
	Nodes      float64 // as a double: it may be beyond every integer
	LimitBytes int64
	FitX, FitY decimal.Number // the first of 2, 5, 10, ... times the cell that fits; 0 if none does
}

// Bytes returns what the values would take.
func (e *SizeError) Bytes() float64 { return 8 * e.Nodes }

func (e *SizeError) Error() string {
	cell := e.Spec.CellX.String()
	if e.Spec.CellX.Cmp(e.Spec.CellY) != 0 {
		cell += " x " + e.Spec.CellY.String()
	}
	return fmt.Sprintf("cell %s over %s x %s makes %s nodes (%s): expected to fit the limit of %s",
		cell, e.side(e.Spec.CellX, e.Spec.Cols), e.side(e.Spec.CellY, e.Spec.Rows),
		formatCount(e.Nodes), formatBytes(e.Bytes()), formatBytes(float64(e.LimitBytes)))
}

func (e *SizeError) Unwrap() error { return ErrTooBig }

// side returns how far n nodes reach.
func (e *SizeError) side(cell decimal.Number, n int) string {
	if e.Spec.ValuesAt == Corners {
		n--
	}
	d, err := cell.Times(int64(n))
	if err != nil {
		return formatFloat(cell.Float64() * float64(n))
	}
	return d.String()
}

func formatFloat(f float64) string { return strconv.FormatFloat(f, 'g', -1, 64) }

func formatCount(n float64) string {
	if n < 1e6 {
		return strconv.FormatFloat(n, 'f', 0, 64)
	}
	return strconv.FormatFloat(n, 'g', 3, 64)
}

// formatBytes writes a size in powers of a thousand, three digits.
func formatBytes(b float64) string {
	units := []string{"bytes", "kB", "MB", "GB", "TB", "PB", "EB"}
	i := 0
	for b >= 999.5 && i < len(units)-1 {
		b /= 1000
		i++
	}
	return fmt.Sprintf("%.3g %s", b, units[i])
}
