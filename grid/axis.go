package grid

import (
	"fmt"
	"math"

	"isofacet/grid/decimal"
)

// axis places the nodes along x or y. Node k lies at
//
//	(base + k step) / (2 x 10^scale)
//
// with integers: counting in half units of the last decimal makes the middle of a cell whole too. The integer is exact,
// and one division rounds it, so that node k is the double nearest to its decimal place whatever k is. Adding
// up a cell in doubles drifts (0.1 added a thousand times is 99.9999999999986), and k times a rounded
// cell is off by up to k/2 units in the last place of the cell.
type axis struct {
	base, step int64
	scale      int
	n          int
	half       bool // values stand in the middle of cells
}

// halfUnitsMax bounds the integers: five times one still fits, which is its place in tenths of the last decimal.
const halfUnitsMax = math.MaxInt64 / 5

// coordinateMax is the largest coordinate that readings may have.
const coordinateMax = 1e60

func newAxis(name string, origin, cell decimal.Number, n int, at NodePlace) (axis, error) {
	cell, origin = cell.Normal(), origin.Normal()
	if cell.Sign() <= 0 {
		return axis{}, &SpecError{What: "cell " + name, Seen: cell.String(), Expected: "a number above 0"}
	}
	if n < 1 {
		what := "columns"
		if name == "y" {
			what = "rows"
		}
		return axis{}, &SpecError{What: what, Seen: fmt.Sprint(n), Expected: "at least 1"}
	}
	scale := int(cell.Scale)
	if origin.Sign() != 0 {
		scale = max(scale, int(origin.Scale))
	}
	o, okO := halfUnits(origin, scale)
	c, okC := halfUnits(cell, scale)
	if !okO || !okC || int64(n) > (halfUnitsMax-max(o, -o))/c {
		return axis{}, &SpecError{
			What:     "cell " + name,
			Seen:     fmt.Sprintf("%s from %s, %d times", cell, origin, n),
			Expected: "places that 17 digits can write",
		}
	}
	a := axis{base: o, step: c, scale: scale, n: n}
	if at == Centres {
		a.half = true
		a.base += c / 2 // c is even
	}
	size := max(math.Abs(origin.Float64()), math.Abs(a.end().Float64()))
	if size > coordinateMax {
		return axis{}, &SpecError{What: "extent in " + name, Seen: fmt.Sprint(size), Expected: "coordinates up to 1e60"}
	}
	if ulp := math.Nextafter(size, math.Inf(1)) - size; cell.Float64() < 2*ulp {
		return axis{}, &SpecError{
			What:     "cell " + name,
			Seen:     fmt.Sprintf("%s at coordinates of %s", cell, a.end()),
			Expected: fmt.Sprintf("at least %.2g, twice the step between doubles there", 2*ulp),
		}
	}
	return a, nil
}

func mustAxis(name string, origin, cell decimal.Number, n int, at NodePlace) axis {
	a, err := newAxis(name, origin, cell, n, at)
	if err != nil {
		panic("grid: lattice not validated: " + err.Error())
	}
	return a
}

// halfUnits returns 2 n in units of 10^-scale, or false if that is beyond halfUnitsMax. scale >= n.Scale unless n is 0.
func halfUnits(n decimal.Number, scale int) (int64, bool) {
	if n.Unscaled == 0 {
		return 0, true
	}
	u := n.Unscaled
	if u > halfUnitsMax/2 || u < -halfUnitsMax/2 {
		return 0, false
	}
	u *= 2
	for s := int(n.Scale); s < scale; s++ {
		if u > halfUnitsMax/10 || u < -halfUnitsMax/10 {
			return 0, false
		}
		u *= 10
	}
	return u, true
}

// pow10 are powers of ten that a double holds exactly; twice the last one is a double too.
var pow10 = [...]float64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11,
	1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22}

// at returns the double nearest to the place of node k.
func (a axis) at(k int) float64 {
	h := a.base + int64(k)*a.step
	const exact = 1 << 53
	if -exact <= h && h <= exact {
		if 0 <= a.scale && a.scale < len(pow10) {
			return float64(h) / float64(2*pow10[a.scale]) // both exact: one rounding
		}
	}
	// Halving is exact at any size a coordinate can have.
	return 0.5 * decimal.Float64(h, a.scale)
}

// decimalAt returns the exact place of node k.
func (a axis) decimalAt(k int) decimal.Number { return a.number(a.base + int64(k)*a.step) }

// end returns the last node's place, or the far edge of its cell where values stand in the middle.
func (a axis) end() decimal.Number {
	h := a.base + int64(a.n-1)*a.step
	if a.half {
		h += a.step / 2
	}
	return a.number(h)
}

func (a axis) number(halfUnits int64) decimal.Number {
	n, err := decimal.New(5*halfUnits, a.scale+1) // 5/10 is a half
	if err != nil {
		panic("grid: place of a node: " + err.Error()) // halfUnitsMax leaves room for it
	}
	return n
}
