package grid

import (
	"math"

	"github.com/paulmach/orb"

	"isofacet/grid/decimal"
)

// Extent is a rectangle with sides at decimal coordinates.
type Extent struct {
	XMin, YMin, XMax, YMax decimal.Number
}

// SpecFor returns the smallest lattice on whole multiples of the cell that covers the extent of the readings: with
// Centres the cells cover it, with Corners the nodes reach round it. An extent without width gets one column of
// cells (to its east, if it lies on an edge) or, on a multiple, one column of nodes; likewise without height.
//
// A side of the extent counts as the shortest decimal that reads back to it, so that readings from 0.3 on begin
// at the third cell of 0.1, though the double 0.3 lies a little below it.
//
// It returns a *SpecError if the cell is not above 0, the extent is empty or not finite, or the lattice is not one that Validate
// accepts. It does not judge the size: see Check.
func SpecFor(extent orb.Bound, cellX, cellY decimal.Number, at NodePlace) (Spec, error) {
	if !(extent.Min[0] <= extent.Max[0] && extent.Min[1] <= extent.Max[1]) {
		return Spec{}, &SpecError{What: "extent", Seen: "no readings", Expected: "at least one reading"}
	}
	var e Extent
	for _, side := range []struct {
		name string
		f    float64
		to   *decimal.Number
	}{{"xmin", extent.Min[0], &e.XMin}, {"ymin", extent.Min[1], &e.YMin}, {"xmax", extent.Max[0], &e.XMax}, {"ymax", extent.Max[1], &e.YMax}} {
		n, err := decimal.FromFloat(side.f)
		if size := math.Abs(side.f); err != nil || size > coordinateMax || 0 < size && size < 1/coordinateMax {
			return Spec{}, &SpecError{What: "extent " + side.name, Seen: formatFloat(side.f), Expected: "0 or 1e-60 to 1e60 in size"}
		}
		*side.to = n
	}
	return specOutward(e, cellX, cellY, at, true)
}

// SpecFromExtent returns the lattice with exactly these sides. They must be whole multiples of the cell; the first that is not is
// returned as a *MultipleError, which names the two nearest. Other errors are *SpecError: cells not above 0, sides in
// the wrong order, an extent without area (with Centres), or a lattice that Validate does not accept.
func SpecFromExtent(e Extent, cellX, cellY decimal.Number, at NodePlace) (Spec, error) {
	if err := checkCells(cellX, cellY); err != nil {
		return Spec{}, err
	}
	for _, side := range []struct {
		name  string
		value decimal.Number
		cell  decimal.Number
	}{{"xmin", e.XMin, cellX}, {"ymin", e.YMin, cellY}, {"xmax", e.XMax, cellX}, {"ymax", e.YMax, cellY}} {
		if side.value.IsMultipleOf(side.cell) {
			continue
		}
		below, above, err := side.value.Around(side.cell)
		if err != nil {
			return Spec{}, &SpecError{What: "extent " + side.name, Seen: side.value.String(), Expected: "places that 17 digits can write"}
		}
		return Spec{}, &MultipleError{Side: side.name, Value: side.value.Normal(), Cell: side.cell.Normal(), Below: below, Above: above}
	}
	return specOutward(e, cellX, cellY, at, false)
}

// SpecOutward is SpecFromExtent with each side first moved outward to the next whole multiple of the cell.
func SpecOutward(e Extent, cellX, cellY decimal.Number, at NodePlace) (Spec, error) {
	return specOutward(e, cellX, cellY, at, false)
}

// specOutward grows e to multiples of the cell. With atLeastOne a width of no cells becomes one.
func specOutward(e Extent, cellX, cellY decimal.Number, at NodePlace, atLeastOne bool) (Spec, error) {
	if err := checkCells(cellX, cellY); err != nil {
		return Spec{}, err
	}
	s := Spec{CellX: cellX.Normal(), CellY: cellY.Normal(), ValuesAt: at}
	var err error
	if s.West, s.Cols, err = span("x", e.XMin, e.XMax, cellX, at, atLeastOne); err != nil {
		return Spec{}, err
	}
	if s.South, s.Rows, err = span("y", e.YMin, e.YMax, cellY, at, atLeastOne); err != nil {
		return Spec{}, err
	}
	if err := s.Validate(); err != nil {
		return Spec{}, err
	}
	return s, nil
}

// span returns where the nodes along one axis begin, and how many there are.
func span(name string, from, to, cell decimal.Number, at NodePlace, atLeastOne bool) (decimal.Number, int, error) {
	if from.Cmp(to) > 0 {
		return decimal.Number{}, 0, &SpecError{What: "extent " + name + "max", Seen: to.String(), Expected: "at least " + name + "min, " + from.String()}
	}
	first, _, err1 := from.FloorIndex(cell)
	last, _, err2 := to.CeilIndex(cell)
	start, err3 := cell.Times(first)
	const countMax = math.MaxInt / 2
	if err1 != nil || err2 != nil || err3 != nil || last/2-first/2 > countMax/2 {
		return decimal.Number{}, 0, &SpecError{
			What: "cell " + name, Seen: cell.String() + " from " + from.String() + " to " + to.String(), Expected: "places that 17 digits can write"}
	}
	n := last - first
	switch {
	case at == Corners:
		n++
	case n == 0 && atLeastOne:
		n = 1
	case n == 0:
		return decimal.Number{}, 0, &SpecError{What: "extent " + name + "max", Seen: to.String(), Expected: "more than " + name + "min, " + from.String()}
	}
	return start, int(n), nil
}

func checkCells(cellX, cellY decimal.Number) error {
	if cellX.Sign() <= 0 {
		return &SpecError{What: "cell x", Seen: cellX.String(), Expected: "a number above 0"}
	}
	if cellY.Sign() <= 0 {
		return &SpecError{What: "cell y", Seen: cellY.String(), Expected: "a number above 0"}
	}
	return nil
}

// SpecFromNodes returns the lattice whose south-western node is at (x, y): how a file that lists places of nodes becomes a lattice. It
// need not lie on whole multiples of the cell. Errors are *SpecError.
func SpecFromNodes(x, y, cellX, cellY decimal.Number, cols, rows int, at NodePlace) (Spec, error) {
	s := Spec{West: x.Normal(), South: y.Normal(), CellX: cellX.Normal(), CellY: cellY.Normal(), Cols: cols, Rows: rows, ValuesAt: at}
	if at == Centres {
		var errX, errY error
		if s.West, errX = halfACellBefore(x, cellX); errX != nil {
			return Spec{}, &SpecError{What: "first x", Seen: x.String() + " with the cell " + cellX.String(), Expected: "places that 17 digits can write"}
		}
		if s.South, errY = halfACellBefore(y, cellY); errY != nil {
			return Spec{}, &SpecError{What: "first y", Seen: y.String() + " with the cell " + cellY.String(), Expected: "places that 17 digits can write"}
		}
	}
	if err := s.Validate(); err != nil {
		return Spec{}, err
	}
	return s, nil
}

func halfACellBefore(node, cell decimal.Number) (decimal.Number, error) {
	half, err := cell.Times(5)
	if err != nil {
		return decimal.Number{}, err
	}
	if half, err = decimal.New(half.Unscaled, int(half.Scale)+1); err != nil {
		return decimal.Number{}, err
	}
	return node.Sub(half)
}

// PlaceOf tells from a node's place where values stand on a lattice that lies on whole multiples of its cell: Corners if the node lies on
// one along both axes, else Centres.
func PlaceOf(x, y, cellX, cellY decimal.Number) NodePlace {
	if x.IsMultipleOf(cellX) && y.IsMultipleOf(cellY) {
		return Corners
	}
	return Centres
}
