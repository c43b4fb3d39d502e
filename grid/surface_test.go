package grid

import (
	"context"
	"math"
	"testing"

	"isofacet/grid/decimal"
	"isofacet/triangulate"
)

// A raster's surface has its nodes' values, two triangles a square, and nothing where a
// value is missing.
func TestSurface(t *testing.T) {
	spec := Spec{West: decimal.MustParse("1000.1"), South: decimal.MustParse("2000.3"),
		CellX: decimal.MustParse("0.1"), CellY: decimal.MustParse("0.3"), Cols: 12, Rows: 9, ValuesAt: Corners}
	g, err := New(spec)
	if err != nil {
		t.Fatal(err)
	}
	for i := range g.Values {
		x, y := spec.X(i%12), spec.Y(i/12)
		g.Values[i] = 3*x - 2*y + 7
	}
	s, err := g.Surface(context.Background(), triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if n := s.Mesh().NumTriangles(); n != 2*11*8 {
		t.Errorf("%d triangles", n)
	}
	if a := s.Area(); math.Abs(a-11*0.1*8*0.3) > 1e-9 {
		t.Errorf("area %v", a)
	}
	g.Values[3*12+4] = math.NaN() // four squares less
	if s, err = g.Surface(context.Background(), triangulate.Options{}); err != nil {
		t.Fatal(err)
	}
	if n := s.Mesh().NumTriangles(); n != 2*(11*8-4) {
		t.Errorf("%d triangles without a node", n)
	}
	for tri := range s.Mesh().Triangles() {
		dx, dy := s.Gradient(tri)
		if math.Abs(dx-3) > 1e-9 || math.Abs(dy+2) > 1e-9 {
			t.Fatalf("gradient %v, %v", dx, dy)
		}
	}
}
