package reference

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"
)

// nodes reads a set of scattered nodes: franke100 and franke33 are Franke's, of
// 1979; grid81 is the 9 x 9 lattice of Renka and Brown, 1999.
func nodes(t *testing.T, set string) []orb.Point {
	t.Helper()
	var pts []orb.Point
	for _, r := range table(t, "scattered/"+set+"_nodes.csv") {
		pts = append(pts, r.point(t, "x", "y"))
	}
	return pts
}

// TestPublishedLinearValues compares 200 published values: functions 1 to 8 on
// Franke's 33 nodes, asked at 25 places.
//
// Source: the output listing, dated 2012-10-24, of a public Fortran test program
// for piecewise linear interpolation of scattered data. It prints 4 decimals and
// computes some of them from constants in single precision. Beside each stands
// the value by rational arithmetic, computed for this project.
//
// The nodes hold one tie, a quadrilateral whose value depends on the diagonal
// taken. None of the 25 places lies in it, so no row is an exception here: a
// row that says otherwise is an error.
func TestPublishedLinearValues(t *testing.T) {
	published := compare(t, "published value")
	exact := compare(t, "value")
	of := compare(t, "published value of the function")
	spread := compare(t, "RMS error")
	pts := nodes(t, "franke33")
	all := table(t, "scattered/pwl_franke33_published_values.csv")
	for _, rms := range table(t, "scattered/pwl_franke33_published_rms.csv") {
		k := rms.get(t, "function_id")
		f := functions[rms.count(t, "function_id")]
		places := "x,y,value,published,function\n"
		for _, r := range all {
			if r.get(t, "function_id") != k {
				continue
			}
			if r.get(t, "triangle_is_unique") != "yes" {
				t.Fatalf("%s: the place lies in a tie", r.name)
			}
			places += strings.Join([]string{
				r.get(t, "x"), r.get(t, "y"), r.get(t, "z_interpolated_exact_check"),
				r.get(t, "z_interpolated_published_4dp"), r.get(t, "z_function_published_4dp"),
			}, ",") + "\n"
		}
		squares, n := 0.0, 0
		for _, r := range query(t, file(t, "places.csv", places), readings(t, pts, f)) {
			name := "function " + k + ", " + r.name
			z, truth := r.number(t, "surface_z"), f(r.number(t, "x"), r.number(t, "y"))
			exact.near(name, z, r.number(t, "value"), 1e-9)
			published.near(name, z, r.number(t, "published"), 1e-4)
			of.near(name, truth, r.number(t, "function"), 1e-4)
			squares += sq(z - truth)
			n++
		}
		same(t, "places of function "+k, n, 25)
		got := math.Sqrt(squares / float64(n))
		same(t, "RMS error of function "+k+" to two digits", fmt.Sprintf("%.2g", got), rms.get(t, "rms_error_published_2sig"))
		// The third column follows from values of 4 decimals, half a unit off.
		spread.near("function "+k, got, rms.number(t, "rms_error_from_table_rows"), 1e-4)
	}
	same(t, "number of published values", published.n, 200)
}

// TestNodeSets compares counts, areas and volumes of function 1 over the three
// sets, and values at 40 places of two of them. Source: computed for this project
// by rational arithmetic.
//
// Volumes depend on the diagonals of ties. The 64 cells of grid81 are ties: there
// the volume for diagonals that run (1, -1) is taken, which is the rule here. The
// one tie of franke33 is cut in the table as the rule cuts it.
func TestNodeSets(t *testing.T) {
	places := map[string]string{}
	for _, r := range table(t, "scattered/nodeset_queries_function1.csv") {
		set := r.get(t, "node_set")
		if places[set] == "" {
			places[set] = "x,y,z_linear\n"
		}
		places[set] += r.get(t, "x") + "," + r.get(t, "y") + "," + r.get(t, "z_linear") + "\n"
	}
	area, volume := compare(t, "area"), compare(t, "volume and mean height")
	for _, r := range table(t, "scattered/nodeset_mesh_summary.csv") {
		set, _, _ := strings.Cut(r.get(t, "dataset"), " ")
		t.Run(set, func(t *testing.T) {
			data := readings(t, nodes(t, set), functions[1])
			ranges := r.number(t, "z_max") - r.number(t, "z_min")

			f := inspect(t, data)
			sameMesh(t, f, r)
			area.part(set, f.Surface.Area, r.number(t, "hull_area_unit2"), 1e-9)
			want := r.number(t, "volume_under_surface_to_z0_unit3")
			mean := r.number(t, "mean_height_unit")
			if set == "grid81" {
				want = 0.403113446012 // same source; also curved_surfaces.csv, franke1, n = 9
				mean = want           // over an area of 1
			}
			volume.part(set, f.Surface.VolumeAboveZero, want, 1e-9)
			volume.part(set+", mean height", f.Surface.VolumeAboveZero/f.Surface.Area, mean, 1e-9)

			if places[set] == "" {
				return
			}
			value := compare(t, "value")
			for _, a := range query(t, file(t, "places.csv", places[set]), data) {
				value.near(a.name, a.number(t, "surface_z"), a.number(t, "z_linear"), 1e-9*(1+ranges))
			}
			same(t, "number of values", value.n, 40)
		})
	}
}

// sameMesh compares counts and the range of heights with a row of a mesh summary.
func sameMesh(t *testing.T, f findings, r row) {
	t.Helper()
	points := r.count(t, "points")
	same(t, "readings read", f.Readings.Read, points)
	same(t, "readings used", f.Readings.Used, points)
	same(t, "vertices", f.Surface.Vertices, points)
	same(t, "triangles", f.Surface.Triangles, r.count(t, "triangles"))
	same(t, "vertices on the outline", f.Surface.OutlineVertices, r.count(t, "points_on_hull_boundary"))
	// Euler: the table's edges against the program's counts.
	same(t, "edges", f.Surface.Vertices+f.Surface.Triangles-1, r.count(t, "edges"))
	low, high := r.number(t, "z_min"), r.number(t, "z_max")
	for name, v := range map[string][2]float64{"lowest": {f.Extent.ZMin, low}, "highest": {f.Extent.ZMax, high}} {
		if math.Abs(v[0]-v[1]) > 1e-9*(1+high-low) {
			t.Errorf("%s: the %s value is %v, want %v", r.name, name, v[0], v[1])
		}
	}
}

// TestAkima30 compares the 6 x 5 lattice of Akima's 30 points.
//
// Source: H. Akima, Algorithm 526, ACM Trans. Math. Softw. 4(2), 1978, 160-164,
// points and lattice as listed by the public driver. The published lattice is of
// a smooth surface of fifth degree, so it must agree only at the readings; the
// linear column was computed for this project.
func TestAkima30(t *testing.T) {
	all := table(t, "scattered/akima30_grid.csv")
	values, n := raster(t, figures(t, "scattered/akima30_points.csv"), "--columns", "id,x,y,z",
		"--cell", "5", "--extent", "0,0,25,20", "--values-at", "corners")
	same(t, "nodes", n, len(all))
	value, published := compare(t, "value"), compare(t, "published value at a reading")
	var z []float64
	for _, r := range table(t, "scattered/akima30_points.csv") {
		z = append(z, r.number(t, "z"))
	}
	tolerance := 1e-9 * (1 + slices.Max(z) - slices.Min(z))
	for _, r := range all {
		got, ok := values[r.point(t, "x", "y")]
		if !ok {
			t.Errorf("%s: no value", r.name)
			continue
		}
		value.near(r.name, got, r.number(t, "z_linear_exact"), tolerance)
		if r.get(t, "is_data_point") == "yes" {
			// A reading comes back as it is (P3).
			same(t, r.name, got, r.number(t, "z_quintic_published_2dp"))
			published.near(r.name, got, r.number(t, "z_quintic_published_2dp"), tolerance)
		}
	}
}
