package grid

import (
	"fmt"
	"math"
	"math/bits"

	"isofacet/grid/decimal"
)

// NodePlace says where in its cell a value stands.
type NodePlace uint8

const (
	// Centres: edges of cells lie on whole multiples of the cell and a value stands in the middle of its cell.
	Centres NodePlace = iota
	// Corners: nodes lie on whole multiples of the cell.
	Corners
)

func (p NodePlace) String() string {
	switch p {
	case Centres:
		return "centres"
	case Corners:
		return "corners"
	}
	return fmt.Sprintf("NodePlace(%d)", uint8(p))
}

// ParseNodePlace reads "centres" or "corners", or returns a *SpecError.
func ParseNodePlace(text string) (NodePlace, error) {
	switch text {
	case "centres":
		return Centres, nil
	case "corners":
		return Corners, nil
	}
	return 0, &SpecError{What: "values-at", Seen: text, Expected: "centres or corners"}
}

// Spec is a lattice: which nodes a raster has.
//
//	Centres, 3 columns, 2 rows              Corners, 3 columns, 2 rows
//
//	 +---+---+---+ North                     0---1---2 North   row 0
//	 | 0 | 1 | 2 |        row 0              |   |   |
//	 +---+---+---+                           3---4---5 South   row 1
//	 | 3 | 4 | 5 |        row 1             West    East
//	 +---+---+---+ South
//	West        East
//
// West and South are the outer edges of the cells with Centres, and the outermost nodes with Corners. Row 0 is the
// northern row. Node (row, col) is value number row*Cols + col.
//
// SpecFor, SpecFromExtent and SpecOutward make lattices on whole multiples of the cell; one read from a file
// may start anywhere that decimals reach. Every method except Validate needs a lattice that Validate
// accepts, and panics on another.
type Spec struct {
	West, South  decimal.Number // in the unit of the readings' coordinates
	CellX, CellY decimal.Number // > 0, same unit
	Cols, Rows   int            // >= 1
	ValuesAt     NodePlace
}

// Validate returns nil if s is a lattice: cells above zero, at least one node, coordinates within 1e60 that 17 digits
// hold, and neighbouring nodes at least two units in the last place of a double apart, so that no two share
// a place. Otherwise it returns a *SpecError.
func (s Spec) Validate() error {
	if s.ValuesAt > Corners {
		return &SpecError{What: "values-at", Seen: s.ValuesAt.String(), Expected: "centres or corners"}
	}
	if _, err := newAxis("x", s.West, s.CellX, s.Cols, s.ValuesAt); err != nil {
		return err
	}
	_, err := newAxis("y", s.South, s.CellY, s.Rows, s.ValuesAt)
	return err
}

// NumNodes returns Cols x Rows, or the largest int if that overflows.
func (s Spec) NumNodes() int {
	hi, lo := bits.Mul64(uint64(s.Cols), uint64(s.Rows))
	if hi != 0 || lo > math.MaxInt {
		return math.MaxInt
	}
	return int(lo)
}

// Bytes returns what the values of a grid take in memory, 8 bytes a node, or the largest int64 if that overflows.
func (s Spec) Bytes() int64 {
	n := int64(s.NumNodes())
	if n > math.MaxInt64/8 {
		return math.MaxInt64
	}
	return 8 * n
}

// X returns the x of the nodes of column col: the double nearest to the exact decimal place.
func (s Spec) X(col int) float64 { return s.axisX().at(col) }

// Y returns the y of the nodes of row row, row 0 in the north: the double nearest to the exact decimal place.
func (s Spec) Y(row int) float64 { return s.axisY().at(s.Rows - 1 - row) }

// Xs returns X of every column, west to east. For loops over nodes it is much cheaper than X.
func (s Spec) Xs() []float64 {
	a, xs := s.axisX(), make([]float64, s.Cols)
	for col := range xs {
		xs[col] = a.at(col)
	}
	return xs
}

// Ys returns Y of every row, north to south.
func (s Spec) Ys() []float64 {
	a, ys := s.axisY(), make([]float64, s.Rows)
	for row := range ys {
		ys[row] = a.at(s.Rows - 1 - row)
	}
	return ys
}

// XDecimal returns the exact x of the nodes of column col.
func (s Spec) XDecimal(col int) decimal.Number { return s.axisX().decimalAt(col) }

// YDecimal returns the exact y of the nodes of row row.
func (s Spec) YDecimal(row int) decimal.Number { return s.axisY().decimalAt(s.Rows - 1 - row) }

// East returns the eastern end of what West begins: the outer edge with Centres, the last node with Corners.
func (s Spec) East() decimal.Number { return s.axisX().end() }

// North returns the northern end of what South begins.
func (s Spec) North() decimal.Number { return s.axisY().end() }

// Extent returns the four sides: of the cells with Centres, of the nodes with Corners.
func (s Spec) Extent() Extent {
	return Extent{XMin: s.West.Normal(), YMin: s.South.Normal(), XMax: s.East(), YMax: s.North()}
}

// NodeExtent returns the four sides of the rectangle of nodes; with Corners it is Extent.
func (s Spec) NodeExtent() Extent {
	return Extent{XMin: s.XDecimal(0), YMin: s.YDecimal(s.Rows - 1), XMax: s.XDecimal(s.Cols - 1), YMax: s.YDecimal(0)}
}

// Decimals returns how many digits after the point the places of all nodes need.
func (s Spec) Decimals() int {
	n := 0
	for _, d := range []decimal.Number{s.XDecimal(0), s.YDecimal(0), s.CellX, s.CellY} {
		n = max(n, d.Decimals())
	}
	return n
}

// Equal reports whether s and t have the same nodes in the same places, however their decimals are written.
func (s Spec) Equal(t Spec) bool {
	return s.Cols == t.Cols && s.Rows == t.Rows && s.ValuesAt == t.ValuesAt &&
		s.West.Cmp(t.West) == 0 && s.South.Cmp(t.South) == 0 && s.CellX.Cmp(t.CellX) == 0 && s.CellY.Cmp(t.CellY) == 0
}

func (s Spec) axisX() axis { return mustAxis("x", s.West, s.CellX, s.Cols, s.ValuesAt) }
func (s Spec) axisY() axis { return mustAxis("y", s.South, s.CellY, s.Rows, s.ValuesAt) }
