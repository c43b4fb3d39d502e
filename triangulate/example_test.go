package triangulate_test

import (
	"context"
	"errors"
	"fmt"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

func ExampleDelaunay() {
	pts := []orb.Point{{0, 0}, {10, 0}, {10, 10}, {0, 10}, {4, 3}, {10, 0}}
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(m.NumInputs(), "points,", m.NumVertices(), "vertices,", m.NumTriangles(), "triangles")
	for _, c := range m.CanonicalTriangles(m.Rank()) {
		fmt.Println(m.Position(c[0]), m.Position(c[1]), m.Position(c[2]))
	}
	// Output:
	// 6 points, 5 vertices, 4 triangles
	// [0 0] [4 3] [0 10]
	// [0 0] [10 0] [4 3]
	// [0 10] [4 3] [10 10]
	// [4 3] [10 0] [10 10]
}

// The four corners of a square lie on one circle: either diagonal would do. The tie
// rule takes the one along (1, -1), whatever the order of the points.
func ExampleDelaunay_tie() {
	for _, pts := range [][]orb.Point{
		{{0, 0}, {1, 0}, {0, 1}, {1, 1}},
		{{1, 1}, {0, 0}, {1, 0}, {0, 1}},
	} {
		m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
		if err != nil {
			fmt.Println(err)
			return
		}
		between := ""
		for _, c := range m.CanonicalTriangles(m.Rank()) {
			fmt.Print(between, m.Position(c[0]), " ", m.Position(c[1]), " ", m.Position(c[2]))
			between = " and "
		}
		fmt.Println()
	}
	// Output:
	// [0 0] [1 0] [0 1] and [0 1] [1 0] [1 1]
	// [0 0] [1 0] [0 1] and [0 1] [1 0] [1 1]
}

func ExamplePositionError() {
	pts := []orb.Point{{430000, 5600000}, {430000, 1e300}}
	_, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	var pe *triangulate.PositionError
	if errors.As(err, &pe) {
		fmt.Println("not usable: point", pe.Index)
	}
	fmt.Println(err)
	// Output:
	// not usable: point 1
	// point 1: position (430000, 1e+300): expected finite coordinates, 0 or from 1e-60 to 1e+60 in size
}

func ExampleLocator_Locate() {
	pts := []orb.Point{{0, 0}, {10, 0}, {10, 10}, {0, 10}, {4, 3}}
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	l, rank := m.Locator(), m.Rank()
	for _, p := range []orb.Point{{4, 1}, {2, 1.5}, {10, 10}, {11, 5}} {
		at := l.Locate(p)
		fmt.Print(p, ": ", at.Place)
		if at.Place != triangulate.Outside {
			for _, v := range m.Canonical(at.Triangle, rank) {
				fmt.Print(" ", m.Position(v))
			}
		}
		fmt.Println()
	}
	// Output:
	// [4 1]: inside [0 0] [10 0] [4 3]
	// [2 1.5]: edge [0 0] [10 0] [4 3]
	// [10 10]: vertex [0 10] [4 3] [10 10]
	// [11 5]: outside
}

func ExampleLocator_Cross() {
	pts := []orb.Point{{0, 0}, {10, 0}, {10, 10}, {0, 10}, {4, 3}}
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	for c := range m.Locator().Cross(orb.Point{-2, 0}, orb.Point{10, 6}) {
		switch c.Place {
		case triangulate.OnVertex:
			fmt.Println("through", m.Position(c.Vertex))
		case triangulate.OnEdge:
			p, q := m.Position(m.Origin(c.Edge)), m.Position(m.Dest(c.Edge))
			if p[0] > q[0] {
				p, q = q, p
			}
			fmt.Println("over", p, "to", q)
		}
	}
	// Output:
	// over [0 10] to [0 0]
	// through [4 3]
	// over [10 0] to [10 10]
}

func ExampleMesh_Around() {
	pts := []orb.Point{{0, 0}, {10, 0}, {10, 10}, {0, 10}, {4, 3}}
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	// The neighbours of the input point 0, a corner of the hull.
	for h := range m.Around(m.VertexOf(0)) {
		fmt.Println(m.Position(m.Dest(h)), "then", m.Position(m.Apex(h)))
	}
	// Output:
	// [10 0] then [4 3]
	// [4 3] then [0 10]
}
