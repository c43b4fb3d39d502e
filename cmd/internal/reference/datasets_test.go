package reference

import (
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"
)

// dataset is one set of open survey data and how its files are read.
type dataset struct {
	name    string
	columns string // of the readings
	cell    float64
	every   int // the raster of check values takes every second, fifth ... node
}

// Values at the queries and nodes, counts, areas and volumes were computed for
// this project by rational arithmetic on the decimals. wolfcamp and camg do not
// begin at multiples of their cell, 20 and 50: both are filled at cell 10.
var datasets = []dataset{
	// J. C. Davis, Statistics and Data Analysis in Geology, Wiley 1973: 52 spot heights.
	{"topo", "id,x,y,z", 0.25, 1},
	// H. Akima, ACM Trans. Math. Softw. 4(2), 1978, 148-159: 50 points.
	{"akima50", "id,x,y,z", 1, 1},
	// W. V. Harper and J. M. Furr, BMI/ONWI-587, 1986; N. Cressie, Statistics for
	// Spatial Data, Wiley 1993, 212-214: 85 heads of the Wolfcamp aquifer.
	{"wolfcamp", "id,x,y,z", 10, 2},
	// The Meuse flood plain, 155 elevations, as distributed with R packages.
	{"meuse", "id,x,y,z,-", 100, 1},
	// C. L. Capeche et al., 1997: 178 soil points with elevation.
	{"camg", "id,x,y,z,-,-", 10, 5},
}

func (d dataset) readings(t *testing.T) []string {
	t.Helper()
	return []string{figures(t, "datasets/"+d.name+"_points.csv"), "--columns", d.columns}
}

// summary returns the set's row of counts, areas and volumes.
func (d dataset) summary(t *testing.T) row {
	t.Helper()
	return only(t, table(t, "datasets/mesh_summary.csv"), "dataset", d.name)
}

// tolerance is that of a height.
func (d dataset) tolerance(t *testing.T) float64 {
	t.Helper()
	s := d.summary(t)
	return 1e-9 * (1 + s.number(t, "z_max") - s.number(t, "z_min"))
}

// each runs a test on every set; those that may not be kept here are skipped
// where there is no folder of them.
func each(t *testing.T, test func(t *testing.T, d dataset)) {
	for _, d := range datasets {
		t.Run(d.name, func(t *testing.T) { test(t, d) })
	}
}

func TestQueries(t *testing.T) {
	each(t, func(t *testing.T, d dataset) {
		at := figures(t, "datasets/"+d.name+"_queries.csv")
		value, outside := compare(t, "value"), 0
		for _, r := range query(t, at, d.readings(t)...) {
			want := r.get(t, "z_linear")
			if want != "outside" {
				value.near(r.name, r.number(t, "surface_z"), number(t, r.name, want), d.tolerance(t))
				continue
			}
			outside++
			for column, want := range map[string]string{"surface_z": "", "slope": "", "downhill_azimuth": "", "place": "outside"} {
				same(t, r.name+": "+column, r.get(t, column), want)
			}
		}
		same(t, "number of places", value.n+outside, len(table(t, "datasets/"+d.name+"_queries.csv")))
	})
}

// Of each set's raster every node is compared, those without a value too. A node
// that the table calls not unique, in camg, lies in a tie; it has to have one of
// the two values.
func TestRasters(t *testing.T) {
	each(t, func(t *testing.T, d dataset) {
		all := table(t, "datasets/"+d.name+"_grid.csv")
		var b orb.Bound
		for k, r := range all {
			p := r.point(t, "x", "y")
			if k == 0 {
				b = p.Bound()
			}
			b = b.Extend(p)
		}
		var extent []string
		for _, v := range []float64{b.Min[0], b.Min[1], b.Max[0], b.Max[1]} {
			extent = append(extent, decimal(v))
		}
		values, n := raster(t, append(d.readings(t), "--values-at", "corners",
			"--cell", decimal(d.cell), "--extent", strings.Join(extent, ","))...)
		columns := int(math.Round((b.Max[0]-b.Min[0])/d.cell)) + 1
		lines := int(math.Round((b.Max[1]-b.Min[1])/d.cell)) + 1
		same(t, "nodes", n, columns*lines)
		same(t, "nodes of the table", len(all), ((columns-1)/d.every+1)*((lines-1)/d.every+1))

		value, outside := compare(t, "value"), 0
		for _, r := range all {
			got, ok := values[r.point(t, "x", "y")]
			switch want := r.get(t, "z_linear"); want {
			case "outside":
				if outside++; ok {
					t.Errorf("%s: the node outside has the value %v", r.name, got)
				}
			case "not_unique":
				a, b := camgTie(t).values(r.point(t, "x", "y"))
				value.near(r.name, got, nearest(got, a, b), d.tolerance(t))
			default:
				if !ok {
					t.Errorf("%s: no value, want %s", r.name, want)
					continue
				}
				value.near(r.name, got, number(t, r.name, want), d.tolerance(t))
			}
		}
		same(t, "nodes compared", value.n+outside, len(all))
	})
}

// In camg the two diagonals of a tie give volumes that differ by 29.14: the
// program's has to be one of the two.
func TestMeshSummaries(t *testing.T) {
	area, volume, height := compare(t, "area"), compare(t, "volume"), compare(t, "mean height")
	each(t, func(t *testing.T, d dataset) {
		f, r := inspect(t, d.readings(t)...), d.summary(t)
		sameMesh(t, f, r)
		area.part(d.name, f.Surface.Area, r.number(t, "hull_area_unit2"), 1e-9)
		want := r.number(t, "volume_under_surface_to_z0_unit3")
		mean := r.number(t, "mean_height_unit")
		if d.name == "camg" {
			a, b := camgTie(t).volumes()
			if off := math.Abs(a - b); math.Abs(off-29.14) > 0.005 { // the notes give two decimals
				t.Errorf("the two volumes differ by %v, want 29.14", off)
			}
			taken := nearest(f.Surface.VolumeAboveZero, want, want+a-b, want+b-a)
			mean += (taken - want) / r.number(t, "hull_area_unit2")
			want = taken
		}
		volume.part(d.name, f.Surface.VolumeAboveZero, want, 1e-9)
		height.part(d.name, f.Surface.VolumeAboveZero/f.Surface.Area, mean, 1e-9)
	})
}

// Two more sets have no check values. What is read has to be used, and Euler's
// relation between counts has to hold.
func TestInputOnly(t *testing.T) {
	for name, readings := range map[string]int{
		"kitanidis29": 29,  // P. K. Kitanidis, Introduction to Geostatistics, Cambridge 1997
		"parana143":   143, // P. J. Diggle and P. J. Ribeiro, 2002
	} {
		f := inspect(t, figures(t, "datasets/"+name+"_points.csv"), "--columns", "id,x,y,z")
		same(t, name+": readings read", f.Readings.Read, readings)
		same(t, name+": readings used", f.Readings.Used, readings)
		same(t, name+": triangles", f.Surface.Triangles, 2*readings-2-f.Surface.OutlineVertices)
	}
}

// tie is a quadrilateral whose corners lie on one circle, in turning order, with
// heights: either diagonal is right.
type tie [4]struct {
	p orb.Point
	z float64
}

// camgTie is the one of camg: points 39, 40, 53 and 52, as the set's notes say.
func camgTie(t *testing.T) tie {
	t.Helper()
	all := table(t, "datasets/camg_points.csv")
	var q tie
	for i, id := range []string{"39", "40", "53", "52"} {
		r := only(t, all, "id", id)
		q[i].p, q[i].z = r.point(t, "east_m", "north_m"), r.number(t, "elevation_m")
	}
	return q
}

// halves returns the triangles for a diagonal from corner k.
func (q tie) halves(k int) [2][3]int {
	return [2][3]int{{k, k + 1, k + 2}, {k, k + 2, (k + 3) % 4}}
}

// values returns the height at p for either diagonal.
func (q tie) values(p orb.Point) (a, b float64) {
	var out [2]float64
	for k := range out {
		for _, h := range q.halves(k) {
			i, j, l := q[h[0]], q[h[1]], q[h[2]]
			whole := cross(i.p, j.p, l.p)
			wi, wj, wl := cross(p, j.p, l.p)/whole, cross(i.p, p, l.p)/whole, cross(i.p, j.p, p)/whole
			if min(wi, wj, wl) >= 0 {
				out[k] = wi*i.z + wj*j.z + wl*l.z
			}
		}
	}
	return out[0], out[1]
}

// volumes returns the volume to height 0 for either diagonal.
func (q tie) volumes() (a, b float64) {
	var out [2]float64
	for k := range out {
		for _, h := range q.halves(k) {
			i, j, l := q[h[0]], q[h[1]], q[h[2]]
			out[k] += math.Abs(cross(i.p, j.p, l.p)) / 2 * (i.z + j.z + l.z) / 3
		}
	}
	return out[0], out[1]
}

// cross is twice the area of a triangle.
func cross(a, b, c orb.Point) float64 {
	return (b[0]-a[0])*(c[1]-a[1]) - (b[1]-a[1])*(c[0]-a[0])
}

// nearest returns the candidate next to v.
func nearest(v float64, candidates ...float64) float64 {
	return slices.MinFunc(candidates, func(a, b float64) int {
		if math.Abs(a-v) < math.Abs(b-v) {
			return -1
		}
		return 1
	})
}
