package reference

import (
	"cmp"
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"
	"os"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

// TestPlane asks a tilted plane, z = 2 + 0.03 x - 0.02 y at random places, for
// values and cells: both must come out exact. Places have two decimals, so
// heights have four, and the program writes six: the text itself is compared,
// with the plane worked out in whole numbers. Slope 0.0360555, downhill azimuth
// 303.690 degrees (common practice: the gradient's length and direction).
func TestPlane(t *testing.T) {
	random := rand.New(rand.NewPCG(1, 1))
	const side = 100000                                      // hundredths
	plane := func(x, y int) int { return 20000 + 3*x - 2*y } // ten-thousandths, of hundredths
	fixed := func(v, decimals int) string {
		return new(big.Rat).SetFrac64(int64(v), int64(math.Pow10(decimals))).FloatString(decimals)
	}
	data := "x,y,z\n"
	for range 2000 {
		x, y := random.IntN(side+1), random.IntN(side+1)
		data += fixed(x, 2) + "," + fixed(y, 2) + "," + fixed(plane(x, y), 4) + "\n"
	}
	// Corners, so that every place asked for is inside.
	for _, c := range [][2]int{{0, 0}, {side, 0}, {0, side}, {side, side}} {
		data += fixed(c[0], 2) + "," + fixed(c[1], 2) + "," + fixed(plane(c[0], c[1]), 4) + "\n"
	}
	path := file(t, "plane.csv", data)

	places := "x,y,want\n"
	for range 2000 {
		x, y := random.IntN(side+1), random.IntN(side+1)
		places += fixed(x, 2) + "," + fixed(y, 2) + "," + fixed(plane(x, y)*100, 6) + "\n"
	}
	at := file(t, "places.csv", places)
	for _, r := range rows(t, "query", isofacet(t, "query", path, "--at", at)) {
		same(t, r.name+": surface_z", r.get(t, "surface_z"), r.get(t, "want"))
	}
	slope, azimuth := compare(t, "slope"), compare(t, "downhill azimuth")
	for _, r := range query(t, at, path) {
		slope.near(r.name, r.number(t, "slope"), 0.0360555, 5e-8)
		azimuth.near(r.name, r.number(t, "downhill_azimuth"), 303.690, 5e-4)
	}
	cells := rows(t, "grid", isofacet(t, "grid", path, "--cell", "12.5", "--layout", "list"))
	same(t, "cells", len(cells), 80*80)
	for _, r := range cells {
		x, y := math.Round(100*r.number(t, "x")), math.Round(100*r.number(t, "y"))
		same(t, r.name+": z", r.get(t, "z"), fixed(plane(int(x), int(y))*100, 6))
	}
}

// TestThreeHeads is the three-point problem: heads 100 at (0, 0), 99 at (100, 0)
// and 99 at (0, 200) have gradient 0.0111803 and flow to azimuth 63.4349 degrees.
// Source: common practice; the digits beyond are sqrt(5)/200 and arctan 2.
func TestThreeHeads(t *testing.T) {
	wells := file(t, "wells.csv", "well,x,y,head\nA,0,0,100.00\nB,100,0,99.00\nC,0,200,99.00\n")
	a := query(t, "20,30", wells)[0]
	slope, azimuth := compare(t, "gradient"), compare(t, "azimuth")
	slope.near("printed", a.number(t, "slope"), 0.0111803, 5e-8)
	slope.part("exact", a.number(t, "slope"), math.Sqrt(5)/200, 1e-14)
	azimuth.near("printed", a.number(t, "downhill_azimuth"), 63.4349, 5e-5)
	azimuth.part("exact", a.number(t, "downhill_azimuth"), math.Atan2(2, 1)*180/math.Pi, 1e-14)
}

// TestPyramid: on a square of 20 x 20 with apex 6 it holds 800. Source: base x
// height / 3.
func TestPyramid(t *testing.T) {
	f := inspect(t, file(t, "pyramid.csv", "x,y,z\n0,0,0\n20,0,0\n20,20,0\n0,20,0\n10,10,6\n"))
	same(t, "volume above zero", f.Surface.VolumeAboveZero, 800)
	same(t, "area", f.Surface.Area, 400)
}

// TestLargeLattice triangulates 1000 x 1000 nodes of a unit lattice six million
// away from the origin: exactly 1996002 triangles over exactly 998001. The same
// lattice turned by 25 degrees has a rim bent by rounding: there the count follows
// from the nodes on the hull, which are found here by exact signs, and the area is
// the hull's to 1e-9. Heights of 1 make the volume the area. Source: 2 (n - 1)^2
// triangles over (n - 1)^2; 2n - 2 - h for n points of which h lie on the hull.
func TestLargeLattice(t *testing.T) {
	if testing.Short() {
		t.Skip("a million readings, twice: not with -short")
	}
	const n, offset = 1000, 6e6
	s, c := math.Sincos(25 * math.Pi / 180)
	var square, turned []orb.Point
	for i := range n {
		for j := range n {
			x, y := float64(i), float64(j)
			square = append(square, orb.Point{offset + x, offset + y})
			turned = append(turned, orb.Point{offset + c*x - s*y, offset + s*x + c*y})
		}
	}
	one := func(x, y float64) float64 { return 1 }

	f := inspect(t, readings(t, square, one)).Surface
	same(t, "vertices", f.Vertices, n*n)
	same(t, "triangles", f.Triangles, 1996002)
	same(t, "vertices on the outline", f.OutlineVertices, 4*(n-1))
	same(t, "area", f.Area, 998001)
	same(t, "volume", f.VolumeAboveZero, 998001)

	rim := hull(turned)
	twice := 0.0
	for i, p := range rim {
		twice += cross(rim[0], p, rim[(i+1)%len(rim)])
	}
	f = inspect(t, readings(t, turned, one)).Surface
	same(t, "vertices, turned", f.Vertices, n*n)
	same(t, "vertices on the outline, turned", f.OutlineVertices, len(rim))
	same(t, "triangles, turned", f.Triangles, 2*n*n-2-len(rim))
	area := compare(t, "area")
	area.part("turned, against its hull", f.Area, twice/2, 1e-9)
	area.part("turned, against the square", f.Area, 998001, 1e-9)
}

// hull returns the points on the boundary of the convex hull, those within its
// sides included, by the two chains of A. M. Andrew (Inf. Process. Lett. 9, 1979)
// with exact signs.
func hull(pts []orb.Point) []orb.Point {
	sorted := slices.SortedFunc(slices.Values(pts), func(a, b orb.Point) int {
		return cmp.Or(cmp.Compare(a[0], b[0]), cmp.Compare(a[1], b[1]))
	})
	var rim []orb.Point
	for range 2 {
		chain := []orb.Point{}
		for _, p := range sorted {
			for len(chain) > 1 && exact.Orient(chain[len(chain)-2], chain[len(chain)-1], p) < 0 {
				chain = chain[:len(chain)-1]
			}
			chain = append(chain, p)
		}
		rim = append(rim, chain[:len(chain)-1]...)
		slices.Reverse(sorted)
	}
	return rim
}

// TestDecimalComma: a file with decimal commas gives the same output as the one
// with decimal points, byte for byte, whatever is asked of it.
func TestDecimalComma(t *testing.T) {
	path := figures(t, "datasets/topo_points.csv")
	point, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	comma := file(t, "topo_points.csv", strings.NewReplacer(",", ";", ".", ",").Replace(string(point)))
	for _, args := range [][]string{
		{"inspect"},
		{"inspect", "--format", "json"},
		{"grid", "--cell", "0.25"},
		{"grid", "--cell", "0.5", "--show", "slope", "--decimals", "full"},
		{"query", "--at", figures(t, "datasets/topo_queries.csv"), "--explain"},
	} {
		args = append(args, "--columns", "id,x,y,z")
		a, b := isofacet(t, append(args, path)...), isofacet(t, append(args, comma)...)
		if a != b || a == "" {
			t.Errorf("isofacet %s: with decimal commas it prints\n%s\nwith points\n%s", fmt.Sprint(args), b, a)
		}
	}
}
