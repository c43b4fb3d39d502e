package triangulate_test

import (
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// fixture is one row of testdata/invariants.csv.
type fixture struct {
	points, distinct, strictHull, onHull, triangles int
	hullArea                                        float64
}

// invariants reads the check values: computed for this project with rational
// arithmetic on the doubles nearest to the written decimals.
func invariants(t *testing.T) map[string]fixture {
	t.Helper()
	all := map[string]fixture{}
	for _, row := range readCSV(t, filepath.Join("testdata", "invariants.csv")) {
		number := func(k int) int {
			n, err := strconv.Atoi(row[k])
			if err != nil {
				t.Fatalf("%s: column %d: %v", row[0], k+1, err)
			}
			return n
		}
		f := fixture{points: number(1), distinct: number(2), strictHull: number(3)}
		if row[4] == "all collinear" {
			f.onHull, f.triangles = f.distinct, 0
		} else {
			f.onHull, f.triangles = number(4), number(5)
		}
		var err error
		if f.hullArea, err = strconv.ParseFloat(row[6], 64); err != nil {
			t.Fatal(err)
		}
		all[row[0]] = f
	}
	return all
}

// holds compares the mesh of pts with the check values. That every inner edge
// passes the in-circle test exactly is part of Check.
func (want fixture) holds(t *testing.T, pts []orb.Point) {
	t.Helper()
	m := checked(t, pts, triangulate.Options{})
	hull := m.Hull()
	got := fixture{
		points: m.NumInputs(), distinct: m.NumVertices(), strictHull: strict(m, hull),
		onHull: len(hull), triangles: m.NumTriangles(), hullArea: want.hullArea,
	}
	if got != want {
		t.Errorf("got %+v, want %+v", got, want)
	}
	if m.NumTriangles() == 0 {
		return
	}
	sum, ring := area2(m)
	if sum != ring {
		t.Errorf("triangles cover %v, the hull %v", sum/2, ring/2)
	}
	if off := math.Abs(sum/2 - want.hullArea); off > 1e-12*want.hullArea {
		t.Errorf("area %v, want %v", sum/2, want.hullArea)
	}
}

// strict counts the hull's vertices at which it turns. All on one line, two ends.
func strict(m *triangulate.Mesh, hull []triangulate.Vertex) int {
	n := len(hull)
	if m.NumTriangles() == 0 {
		return min(n, 2)
	}
	turns := 0
	for i := range hull {
		a, b, c := m.Position(hull[i]), m.Position(hull[(i+1)%n]), m.Position(hull[(i+2)%n])
		if exact.Orient(a, b, c) > 0 {
			turns++
		}
	}
	return turns
}

// TestReferenceBuiltHere: the fixtures that this repository holds or can build.
func TestReferenceBuiltHere(t *testing.T) {
	want := invariants(t)
	for name, pts := range map[string][]orb.Point{
		"lattice_circle_65":                     integerCircle(65),
		"lattice_circle_65 plus centre (0,0)":   append(integerCircle(65), orb.Point{}),
		"lattice_circle_1105":                   integerCircle(1105),
		"lattice_circle_1105 plus centre (0,0)": append(integerCircle(1105), orb.Point{}),
		"grid_40x40":                            lattice(40, 40, 0, 0, 1),
		"kuzmin_2000":                           readPoints(t, "testdata/kuzmin_2000.csv"),
		"topo_twice":                            readPoints(t, "testdata/topo_twice.csv"),
		"topo_offset_metres":                    readPoints(t, "testdata/topo_offset_metres.csv"),
	} {
		t.Run(name, func(t *testing.T) {
			f, ok := want[name]
			if !ok {
				t.Fatalf("testdata/invariants.csv has no row for it")
			}
			f.holds(t, pts)
		})
	}
	// With its centre every triangulation of a circle is the fan about it.
	m := checked(t, append(integerCircle(1105), orb.Point{}), triangulate.Options{})
	for tr := range m.Triangles() {
		c := m.Corners(tr)
		o := orb.Point{}
		if m.Position(c[0]) != o && m.Position(c[1]) != o && m.Position(c[2]) != o {
			t.Errorf("triangle %d does not touch the centre", tr)
		}
	}
}

// TestReferenceDelaunator: the test inputs of npm delaunator 5.1.0 (Mapbox, ISC);
// robustness1 also divided and multiplied, as in that package's own suite.
func TestReferenceDelaunator(t *testing.T) {
	dir := os.Getenv("ISOFACET_REFERENCE")
	if dir == "" {
		t.Skip("ISOFACET_REFERENCE is not set: the folder it names holds the delaunator inputs, which must not be copied here")
	}
	ran := 0
	for name, want := range invariants(t) {
		if !strings.HasPrefix(name, "delaunator_") {
			continue
		}
		file, scale, _ := strings.Cut(name, " scaled by ")
		pts := readPoints(t, filepath.Join(dir, "geometry", file+".csv"))
		for i, p := range pts {
			switch scale {
			case "": // as it is
			case "1e-9":
				pts[i] = orb.Point{p[0] / 1e9, p[1] / 1e9}
			case "0.01":
				pts[i] = orb.Point{p[0] / 100, p[1] / 100}
			case "100":
				pts[i] = orb.Point{p[0] * 100, p[1] * 100}
			case "1e9":
				pts[i] = orb.Point{p[0] * 1e9, p[1] * 1e9}
			default:
				t.Fatalf("%s: how is %q done?", name, scale)
			}
		}
		t.Run(name, func(t *testing.T) { want.holds(t, pts) })
		ran++
	}
	if ran != 15 {
		t.Errorf("%d fixtures, want 15", ran)
	}
}
