package triangulate_test

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

// hardShapes are the inputs on which triangulators are known to fail, and the
// corners of what is accepted.
func hardShapes() []struct {
	name string
	pts  []orb.Point
} {
	type row = struct {
		name string
		pts  []orb.Point
	}
	rows := []row{
		{"no point", nil},
		{"one point", []orb.Point{{3, 4}}},
		{"two points", []orb.Point{{3, 4}, {1, 2}}},
		{"three points, clockwise", []orb.Point{{0, 0}, {0, 1}, {1, 0}}},

		// All on one line.
		{"horizontal line", line(100, 7, 7, 1, 0)},
		{"vertical line", line(100, 7, 7, 0, 1)},
		{"slanted line", line(100, -50, -100, 1, 2)},
		{"slanted line, falling", line(101, -50, 100, 1, -2)},
		{"line through 0 in the last places", []orb.Point{{-1e-60, -1e-60}, {0, 0}, {1e-60, 1e-60}, {1e60, 1e60}, {-1e60, -1e60}}},
		// In tenths a straight row is seldom straight in doubles: slivers.
		{"row in tenths", line(100, 0.1, 0.3, 0.1, 0.3)},
		{"line and one point", append(line(50, 0, 0, 1, 1), orb.Point{10, 30})},
		{"line between two points", append(line(50, 0, 0, 1, 0), orb.Point{20, 5}, orb.Point{30, -5})},
		{"line and a last place", append(line(50, 0, 0, 1, 1), orb.Point{20, math.Nextafter(20, 21)})},

		// Repeated places.
		{"one place twice", []orb.Point{{1, 1}, {1, 1}}},
		{"one place 1000 times", slices.Repeat([]orb.Point{{1, 1}}, 1000)},
		{"half at one place", append(slices.Repeat([]orb.Point{{3, 3}}, 500), lattice(25, 20, 0, 0, 1)...)},
		{"nearly all at one place", append(slices.Repeat([]orb.Point{{3, 3}}, 1000), orb.Point{0, 0}, orb.Point{5, 1}, orb.Point{2, 8})},
		{"nearly all at two places", append(slices.Repeat([]orb.Point{{3, 3}, {4, 3}}, 500), orb.Point{2, 8})},
		{"two places only", slices.Repeat([]orb.Point{{3, 3}, {4, 3}}, 500)},
		{"every place 2 times", slices.Repeat(lattice(10, 10, 0, 0, 1), 2)},
		{"every place 3 times", slices.Repeat(lattice(10, 10, 0, 0, 1), 3)},
		{"every place 50 times", slices.Repeat(lattice(10, 10, 0, 0, 1), 50)},
		{"line with every place 7 times", slices.Repeat(line(40, 0, 0, 1, 2), 7)},
		{"0 and -0", []orb.Point{{0, 0}, {math.Copysign(0, -1), 0}, {0, math.Copysign(0, -1)}, {1, math.Copysign(0, -1)}, {1, 0}, {0, 1}}},

		// Range and mixed sizes.
		{"smallest and largest coordinates", []orb.Point{{1e-60, -1e-60}, {-1e-60, 1e-60}, {1e60, 1e60}, {-1e60, 1e60}, {1e60, -1e60}, {0, 0}, {1, 1e-60}}},
		{"1e-9 next to 1e9", small1e9()},
		{"mixed signs", mixedSigns()},
		{"a cluster in the last places far off", lastPlaces()},

		// Published failures.
		{"libgeos/geos issue 1286", []orb.Point{
			{-1.3890020986020145e-10, 4.860466764224401},
			{-1.3889120965221466e-10, -5.531838081766228},
			{-1.388852095135568e-10, -12.460041312426647},
			{0.9999999999166641, -3.799787274101123}}},
		{"libgeos/geos issue 719", []orb.Point{
			{1139294.6389832512941211, 8201313.5346954688429832},
			{1139360.8549531854223460, 8201271.1898052766919136},
			{1139497.5995843114797026, 8201199.9955425458028913},
			{1139567.7837303513661027, 8201163.3485335074365139},
			{1139635.3942210066597909, 8201119.9025274068117142}}},
		{"libgeos/geos issue 946", []orb.Point{
			{584245.72096874, 7549593.72686167}, {584251.71398371, 7549594.01629478},
			{584242.72446125, 7549593.58214511}, {584230.73978847, 7549592.9760418},
			{584233.73581213, 7549593.13045099}, {584236.7318358, 7549593.28486019},
			{584239.72795377, 7549593.43742855}, {584227.74314188, 7549592.83423486}}},
		{"locationtech/jts issue 477, first", []orb.Point{{0, 0}, {1, 0}, {-1, 0.05}, {0, 0}}},
		{"locationtech/jts issue 477, second", []orb.Point{{0, 0}, {0, 486}, {1, 486}, {1, 22}, {2, 22}, {2, 0}}},
		{"near-collinear (Kettner et al. 2008)", nearCollinear(32)},
		{"near-collinear, few", nearCollinear(4)},

		// Surveys.
		{"millimetre shots along walls, wide gaps", walls()},
		{"rows of a near-straight outline", nearStraightOutline()},
		{"fan about one point", fan()},
		{"parabola", parabola(200)},
	}
	for deg := range 91 {
		rows = append(rows,
			row{fmt.Sprintf("lattice tilted by %d degrees", deg), tilted(12, 12, deg, 0, 0, 1)},
			row{fmt.Sprintf("lattice tilted by %d degrees, far off", deg), tilted(12, 12, deg, 430000, 5600000, 0.1)})
	}
	return rows
}

// line returns n points from (x, y) in steps of (dx, dy).
func line(n int, x, y, dx, dy float64) []orb.Point {
	pts := make([]orb.Point, n)
	for i := range pts {
		pts[i] = orb.Point{x + float64(i)*dx, y + float64(i)*dy}
	}
	return pts
}

// small1e9 has clusters of both sizes, and both sizes in one position.
func small1e9() []orb.Point {
	r := rand.New(rand.NewPCG(9, 9))
	var pts []orb.Point
	for range 60 {
		u, v := r.Float64()-0.5, r.Float64()-0.5
		pts = append(pts, orb.Point{u * 1e-9, v * 1e-9}, orb.Point{u * 1e9, v * 1e9}, orb.Point{u * 1e-9, v * 1e9})
	}
	return pts
}

// mixedSigns is symmetrical about both axes, with points on them.
func mixedSigns() []orb.Point {
	r := rand.New(rand.NewPCG(4, 4))
	pts := []orb.Point{{0, 0}}
	for range 40 {
		u, v := r.Float64(), r.Float64()
		pts = append(pts, orb.Point{u, v}, orb.Point{-u, v}, orb.Point{u, -v}, orb.Point{-u, -v}, orb.Point{u, 0}, orb.Point{0, -v})
	}
	return pts
}

// lastPlaces fills a square whose sides are twelve last places of a map
// coordinate.
func lastPlaces() []orb.Point {
	var pts []orb.Point
	x := 430000.1
	for range 12 {
		y := 5600000.3
		for range 12 {
			pts = append(pts, orb.Point{x, y})
			y = math.Nextafter(y, math.Inf(1))
		}
		x = math.Nextafter(x, math.Inf(1))
	}
	return pts
}

// millimetres rounds to the double nearest to a number of three decimals.
func millimetres(v float64) float64 { return math.Round(v*1000) / 1000 }

// walls are shots every 5 cm along straight walls in several directions, metres
// long, with tens of metres of nothing between them.
func walls() []orb.Point {
	var pts []orb.Point
	for k, deg := range []float64{0, 17, 33.3, 45, 71, 90, 120, 163} {
		sin, cos := math.Sincos(deg * math.Pi / 180)
		x0, y0 := 430000+float64(k%3)*60, 5600000+float64(k/3)*45
		for i := range 120 {
			d := float64(i) * 0.05
			pts = append(pts, orb.Point{millimetres(x0 + d*cos), millimetres(y0 + d*sin)})
		}
	}
	return pts
}

// nearStraightOutline is a long field whose rims are straight but for the
// rounding to millimetres, so that its hull is a matter of last places.
func nearStraightOutline() []orb.Point {
	var pts []orb.Point
	for i := range 300 {
		d := float64(i) * 0.737
		for _, across := range []float64{0, 3, 20} {
			pts = append(pts, orb.Point{millimetres(430000 + d*0.8 - across*0.6), millimetres(5600000 + d*0.6 + across*0.8)})
		}
	}
	return pts
}

// fan is one vertex in the middle of a large near-circle.
func fan() []orb.Point {
	pts := []orb.Point{{1000, 1000}}
	for i := range 500 {
		sin, cos := math.Sincos(float64(i) / 500 * 2 * math.Pi)
		pts = append(pts, orb.Point{1000 + 700*cos, 1000 + 700*sin})
	}
	return pts
}

// parabola has all points on the hull, and the longest possible fans.
func parabola(n int) []orb.Point {
	pts := make([]orb.Point, n)
	for i := range pts {
		pts[i] = orb.Point{float64(i), float64(i * i)}
	}
	return pts
}

// tilted is a lattice turned by whole degrees in floating point.
func tilted(nx, ny, deg int, x0, y0, step float64) []orb.Point {
	sin, cos := math.Sincos(float64(deg) * math.Pi / 180)
	pts := lattice(nx, ny, 0, 0, step)
	for i, p := range pts {
		pts[i] = orb.Point{x0 + p[0]*cos - p[1]*sin, y0 + p[0]*sin + p[1]*cos}
	}
	return pts
}

// TestHardShapes: every shape gives a mesh that passes Check, covers its hull,
// has one vertex a place and is the same for another order; small ones are
// compared with the definition.
func TestHardShapes(t *testing.T) {
	for _, row := range hardShapes() {
		t.Run(row.name, func(t *testing.T) {
			m := checked(t, row.pts, triangulate.Options{})
			places := distinct(row.pts)
			if m.NumVertices() != len(places) {
				t.Errorf("%d vertices, want %d", m.NumVertices(), len(places))
			}
			if sum, ring := area2(m); m.NumTriangles() > 0 && sum != ring {
				t.Errorf("triangles cover %v, the hull %v", sum/2, ring/2)
			}
			for i, p := range row.pts {
				if at := m.Position(m.VertexOf(i)); at != p {
					t.Fatalf("input %d at %v has its vertex at %v", i, p, at)
				}
			}
			got := corners(m)
			if len(places) <= 20 {
				sameTriangles(t, "by definition", got, tiedDelaunay(places))
			}
			again := checked(t, shuffled(row.pts, rand.New(rand.NewPCG(5, 6))), triangulate.Options{})
			sameTriangles(t, "shuffled", corners(again), got)
		})
	}
}

// TestMinusZeroIsZero: the two zeros are one place, and positions hold 0.
func TestMinusZeroIsZero(t *testing.T) {
	minus := math.Copysign(0, -1)
	m := checked(t, []orb.Point{{minus, minus}, {0, 0}, {1, minus}, {minus, 1}}, triangulate.Options{})
	if m.NumVertices() != 3 || m.NumTriangles() != 1 {
		t.Fatalf("%d vertices and %d triangles, want 3 and 1", m.NumVertices(), m.NumTriangles())
	}
	for v := range m.Vertices() {
		if p := m.Position(v); math.Signbit(p[0]) || math.Signbit(p[1]) {
			t.Errorf("vertex %d at %v", v, p)
		}
	}
}

// TestRefusedCoordinates: the first point that cannot be used is named, whatever
// stands around it and however many goroutines look.
func TestRefusedCoordinates(t *testing.T) {
	for name, bad := range map[string]float64{
		"not a number": math.NaN(), "infinite": math.Inf(1), "minus infinite": math.Inf(-1),
		"1e61": 1e61, "-1e61": -1e61, "just above 1e60": math.Nextafter(1e60, 2e60), "largest double": math.MaxFloat64,
		"1e-61": 1e-61, "-1e-61": -1e-61, "just below 1e-60": math.Nextafter(1e-60, 0), "smallest double": math.SmallestNonzeroFloat64,
	} {
		for axis := range 2 {
			for _, n := range []int{1, 5, 20_000} {
				pts := lattice(n, 1, 1, 1, 1)
				first := 2 * n / 3
				for _, i := range []int{first, n - 1} {
					pts[i][axis] = bad
				}
				for _, workers := range []int{1, 2, 7} {
					m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{Workers: workers})
					var pe *triangulate.PositionError
					if m != nil || !errors.As(err, &pe) {
						t.Fatalf("%s, n=%d: mesh %v, error %v", name, n, m, err)
					}
					if pe.Index != first || pe.Point[1-axis] != pts[first][1-axis] ||
						pe.Point[axis] != bad && !(math.IsNaN(bad) && math.IsNaN(pe.Point[axis])) {
						t.Errorf("%s, n=%d, %d workers: names point %d at %v, want %d at %v",
							name, n, workers, pe.Index, pe.Point, first, pts[first])
					}
				}
			}
		}
	}
}

// TestRefusalText: where, what was read, what was expected.
func TestRefusalText(t *testing.T) {
	_, err := triangulate.Delaunay(context.Background(), []orb.Point{{1, 2}, {1e61, 2}}, triangulate.Options{})
	want := "point 1: position (1e+61, 2): expected finite coordinates, 0 or from 1e-60 to 1e+60 in size"
	if err == nil || err.Error() != want {
		t.Errorf("got %q, want %q", err, want)
	}
}
