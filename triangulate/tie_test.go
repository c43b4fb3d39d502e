package triangulate_test

import (
	"context"
	"fmt"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// tieSets are full of cocircular quadruples.
func tieSets() map[string][]orb.Point {
	return map[string][]orb.Point{
		"lattice 2 x 2":                      lattice(2, 2, 0, 0, 1),
		"lattice 6 x 5":                      lattice(6, 5, -2, -3, 1),
		"lattice 5 x 5 of quarters, far off": lattice(5, 5, 430000, 5600000, 0.25),
		"lattice 5 x 5 of tenths, far off":   lattice(5, 5, 430000, 5600000, 0.1),
		"one row and a point":                append(lattice(12, 1, 0, 0, 1), orb.Point{5, 3}),
		"two rows":                           lattice(12, 2, 0, 0, 1),
		"lattice tilted 3-4-5":               tilted345(5, 5),
		"circle of 12":                       integerCircle(5),
		"circle of 12 with its centre":       append(integerCircle(5), orb.Point{}),
		"circle of 20":                       integerCircle(25),
		"circle of 36":                       integerCircle(65),
		"two circles about one centre":       append(integerCircle(5), integerCircle(10)...),
		"quincunx":                           append(lattice(4, 4, 0, 0, 2), lattice(3, 3, 1, 1, 2)...),
	}
}

// tilted345 is a lattice with sides (4, 3) and (-3, 4).
func tilted345(nx, ny int) []orb.Point {
	var pts []orb.Point
	for i := range nx {
		for j := range ny {
			pts = append(pts, orb.Point{float64(4*i - 3*j), float64(3*i + 4*j)})
		}
	}
	return pts
}

// TestTieRuleIsItsDefinition compares with the definition in integers, for the
// order as listed and random ones.
func TestTieRuleIsItsDefinition(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for name, pts := range tieSets() {
		want := tiedDelaunay(distinct(pts))
		sameTriangles(t, name, corners(checked(t, pts, triangulate.Options{})), want)
		for range 50 {
			sameTriangles(t, name+", shuffled", corners(checked(t, shuffled(pts, r), triangulate.Options{})), want)
		}
	}
}

// TestTieRuleInAllOrders runs every order of small sets: all sets of three to
// six nodes of a 3 x 3 lattice, some of seven, and sets with repeated places.
func TestTieRuleInAllOrders(t *testing.T) {
	var sets [][]orb.Point
	nodes := lattice(3, 3, 0, 0, 1)
	for chosen := range 1 << len(nodes) {
		var set []orb.Point
		for i, p := range nodes {
			if chosen>>i&1 == 1 {
				set = append(set, p)
			}
		}
		// Seven is one in nine for time's sake; they hold all sixes anyway.
		if n := len(set); n >= 3 && n <= 6 || n == 7 && chosen%9 == 1 && !testing.Short() {
			sets = append(sets, set)
		}
	}
	square := lattice(2, 2, 0, 0, 1)
	sets = append(sets,
		integerCircle(5)[:7],
		integerCircle(5)[5:],
		append(lattice(2, 3, 0, 0, 1), orb.Point{0.5, 0.5}),
		append(square, square[0], square[0], square[0]),
		append(square, square[0], square[1], square[2]),
		[]orb.Point{{0, 0}, {1, 0}, {0, 0}, {2, 0}, {1, 0}, {2, 0}},
		[]orb.Point{{0, 0}, {0, 0}, {0, 0}, {0, 0}, {0, 0}, {0, 1}, {1, 0}},
	)
	for _, set := range sets {
		want := tiedDelaunay(distinct(set))
		name := fmt.Sprint(set)
		permute(set, func(pts []orb.Point) {
			m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{Workers: 1})
			if err != nil {
				t.Fatal(err)
			}
			sameTriangles(t, name, corners(m), want)
		})
	}
}

// permute calls do with every order of pts (Heap 1963).
func permute(pts []orb.Point, do func([]orb.Point)) {
	var heap func(k int)
	heap = func(k int) {
		if k <= 1 {
			do(pts)
			return
		}
		for i := range k {
			heap(k - 1)
			if i < k-1 {
				j := 0
				if k%2 == 0 {
					j = i
				}
				pts[j], pts[k-1] = pts[k-1], pts[j]
			}
		}
	}
	heap(len(pts))
}

// TestLatticeDiagonals: on a lattice the rule leaves one direction only, (1, -1)
// (design, tie rule). The volume of a curved surface over a lattice, summed by
// others over that diagonal, therefore is this mesh's.
func TestLatticeDiagonals(t *testing.T) {
	for _, pts := range [][]orb.Point{lattice(30, 20, 0, 0, 1), lattice(20, 30, 6e6, -4e5, 0.5)} {
		m := checked(t, pts, triangulate.Options{})
		step := pts[1][0] - pts[0][0]
		for h := range triangulate.HalfEdge(m.NumHalfEdges()) {
			o, d := m.Position(m.Origin(h)), m.Position(m.Dest(h))
			dx, dy := (d[0]-o[0])/step, (d[1]-o[1])/step
			if dx*dy > 0 || dx*dy < -1 {
				t.Fatalf("edge %v–%v runs along (%v, %v)", o, d, dx, dy)
			}
		}
	}
}

// TestOracleTilesTheHull guards the definition itself: a rule that contradicts
// itself, or numbers that do not stand for infinitesimals, would leave gaps or
// overlaps.
func TestOracleTilesTheHull(t *testing.T) {
	for name, pts := range tieSets() {
		pts = distinct(pts)
		triangles := tiedDelaunay(pts)
		m := checked(t, pts, triangulate.Options{})
		if got, want := len(triangles), 2*len(pts)-2-len(m.Hull()); got != want {
			t.Errorf("%s: %d triangles, want %d", name, got, want)
		}
	}
}
