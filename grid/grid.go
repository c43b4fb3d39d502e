package grid

import (
	"fmt"
	"math"
)

// Grid is a raster: one value a node.
type Grid struct {
	Spec   Spec
	Labels Labels
	// Values holds Spec.NumNodes() values, row by row from the north-west; NaN is no data. The unit is Labels.ZUnit.
	Values []float64
}

// New returns a grid of no-data, or the error of spec.Validate. 8 bytes a node: call spec.Check first where the size comes from outside.
func New(spec Spec) (*Grid, error) {
	if err := spec.Validate(); err != nil {
		return nil, err
	}
	if spec.NumNodes() > math.MaxInt/8 {
		return nil, spec.Check(math.MaxInt64 / 8)
	}
	g := &Grid{Spec: spec, Values: make([]float64, spec.NumNodes())}
	for i := range g.Values {
		g.Values[i] = math.NaN()
	}
	return g, nil
}

// At returns the value of node (row, col); NaN is no data. It panics outside the lattice.
func (g *Grid) At(row, col int) float64 {
	if uint(col) >= uint(g.Spec.Cols) {
		panic(fmt.Sprintf("grid: column %d of %d", col, g.Spec.Cols))
	}
	return g.Values[row*g.Spec.Cols+col]
}

// Row returns the values of one row, west to east: a part of g.Values, not a copy.
func (g *Grid) Row(row int) []float64 {
	first := row * g.Spec.Cols
	return g.Values[first : first+g.Spec.Cols : first+g.Spec.Cols]
}

// Validate returns nil if the lattice is valid and there is one value a node, and otherwise a *SpecError.
func (g *Grid) Validate() error {
	if err := g.Spec.Validate(); err != nil {
		return err
	}
	if len(g.Values) != g.Spec.NumNodes() {
		return &SpecError{What: "values", Seen: fmt.Sprint(len(g.Values)),
			Expected: fmt.Sprintf("%d, one a node of %d columns and %d rows", g.Spec.NumNodes(), g.Spec.Cols, g.Spec.Rows)}
	}
	return nil
}
