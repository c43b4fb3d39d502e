package contour

import (
	"context"
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/triangulate"
)

// table reads a CSV file with a header and returns its columns by name, as text.
func table(t testing.TB, path string) map[string][]string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	columns := map[string][]string{}
	for _, row := range rows[1:] {
		for i, name := range rows[0] {
			columns[name] = append(columns[name], row[i])
		}
	}
	return columns
}

func floats(t testing.TB, texts []string) []float64 {
	t.Helper()
	out := make([]float64, len(texts))
	for i, s := range texts {
		f, err := strconv.ParseFloat(s, 64)
		if err != nil {
			t.Fatal(err)
		}
		out[i] = f
	}
	return out
}

// dataset returns the path of a file of the open datasets: from testdata, or from the reference folder if it must not
// be copied here.
func dataset(t testing.TB, name string) string {
	t.Helper()
	local := filepath.Join("testdata", "datasets", name)
	if _, err := os.Stat(local); err == nil {
		return local
	}
	root := os.Getenv("ISOFACET_REFERENCE")
	if root == "" {
		t.Skipf("%s may not be copied into this repository: set ISOFACET_REFERENCE to the folder of reference values", name)
	}
	return filepath.Join(root, "datasets", name)
}

// surfaceOf triangulates points with values.
func surfaceOf(t testing.TB, pts []orb.Point, z []float64, workers int) *interp.Surface {
	t.Helper()
	m, err := triangulate.Delaunay(context.Background(), pts, triangulate.Options{Workers: workers})
	if err != nil {
		t.Fatal(err)
	}
	s, err := interp.FromInputs(m, z)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func listOf(t testing.TB, texts ...string) Levels {
	t.Helper()
	var numbers []decimal.Number
	for _, s := range texts {
		n, err := decimal.Parse(s)
		if err != nil {
			t.Fatal(err)
		}
		numbers = append(numbers, n)
	}
	levels, err := List(numbers, 5)
	if err != nil {
		t.Fatal(err)
	}
	return levels
}

// tally is what reference tables say of a level's lines.
type tally struct {
	length       float64
	open, closed int
}

func tallies(lines []Line) map[string]tally {
	byLevel := map[string][]Line{}
	for _, l := range lines {
		byLevel[l.Level.Number.String()] = append(byLevel[l.Level.Number.String()], l)
	}
	out := map[string]tally{}
	for level, ls := range byLevel {
		c := tally{length: TotalLength(ls)}
		for _, l := range ls {
			if l.Closed {
				c.closed++
			} else {
				c.open++
			}
		}
		out[level] = c
	}
	return out
}

// TestReferenceIsolines checks total lengths and counts of every _isolines table of the open datasets: reference
// values computed from exact triangulations, lengths to 12 digits (reference, section 2). Levels there
// never equal a value.
func TestReferenceIsolines(t *testing.T) {
	for _, c := range []struct{ name, x, y, z string }{
		{"topo", "x_50ft", "y_50ft", "z_ft"},
		{"akima50", "x", "y", "z"},
		{"wolfcamp", "x_km", "y_km", "head_m"},
		{"meuse", "x_m_RD", "y_m_RD", "elev_m_above_local_river_bed"},
		{"camg", "east_m", "north_m", "elevation_m"},
	} {
		t.Run(c.name, func(t *testing.T) {
			in := table(t, dataset(t, c.name+"_points.csv"))
			x, y, z := floats(t, in[c.x]), floats(t, in[c.y]), floats(t, in[c.z])
			pts := make([]orb.Point, len(x))
			for i := range x {
				pts[i] = orb.Point{x[i], y[i]}
			}
			want := table(t, dataset(t, c.name+"_isolines.csv"))
			lines, _, err := Lines(context.Background(), surfaceOf(t, pts, z, 0), listOf(t, want["level"]...), Options{})
			if err != nil {
				t.Fatal(err)
			}
			checkTallies(t, tallies(lines), want["level"], floats(t, want["total_length_unit"]), 1e-9, want["open_lines"], want["closed_lines"])
		})
	}
}

func checkTallies(t *testing.T, got map[string]tally, levels []string, lengths []float64, tolerance float64, open, closed []string) {
	t.Helper()
	for i, level := range levels {
		g := got[decimal.MustParse(level).String()]
		if math.Abs(g.length-lengths[i]) > tolerance*lengths[i] {
			t.Errorf("level %s: length %.12g, want %.12g", level, g.length, lengths[i])
		}
		if open != nil && (strconv.Itoa(g.open) != open[i] || strconv.Itoa(g.closed) != closed[i]) {
			t.Errorf("level %s: %d open and %d closed lines, want %s and %s", level, g.open, g.closed, open[i], closed[i])
		}
	}
}

// volcano returns the 87 x 61 heights of Maunga Whau, x = 10 (row - 1), y = 10 (column - 1).
func volcano(t testing.TB) (pts []orb.Point, z []float64) {
	in := table(t, dataset(t, "volcano_points.csv"))
	x, y, z := floats(t, in["x_m"]), floats(t, in["y_m"]), floats(t, in["z_m"])
	for i := range x {
		pts = append(pts, orb.Point{x[i], y[i]})
	}
	return pts, z
}

// TestReferenceVolcanoTriangles: every cell is cocircular; the tie rule's diagonals are the table's column
// length_m_other_diagonal, printed to 9 digits.
func TestReferenceVolcanoTriangles(t *testing.T) {
	want := table(t, dataset(t, "volcano_isolines_tin.csv"))
	pts, z := volcano(t)
	lines, _, err := Lines(context.Background(), surfaceOf(t, pts, z, 0), listOf(t, want["level_m"]...), Options{})
	if err != nil {
		t.Fatal(err)
	}
	checkTallies(t, tallies(lines), want["level_m"], floats(t, want["length_m_other_diagonal"]), 1e-8, nil, nil)
}

// TestReferenceVolcanoRaster compares with the general-purpose library contourpy 1.0.7 (its serial method), lengths to 9
// digits. At 180.5 one saddle's mean equals the level: as above, by our convention, its two upper corners are joined, and
// there is 1 closed line where the table has 2, of the same length.
func TestReferenceVolcanoRaster(t *testing.T) {
	want := table(t, dataset(t, "volcano_isolines_contourpy.csv"))
	pts, z := volcano(t)
	ten := decimal.MustParse("10")
	spec := grid.Spec{CellX: ten, CellY: ten, Cols: 87, Rows: 61, ValuesAt: grid.Corners}
	g, err := grid.New(spec)
	if err != nil {
		t.Fatal(err)
	}
	for i, p := range pts {
		g.Values[(60-int(p[1]/10))*87+int(p[0]/10)] = z[i]
	}
	lines, _, err := RasterLines(context.Background(), g, listOf(t, want["level_m"]...), Options{})
	if err != nil {
		t.Fatal(err)
	}
	closed := want["closed_lines"]
	for i, level := range want["level_m"] {
		if level == "180.5" {
			closed[i] = "1"
		}
	}
	checkTallies(t, tallies(lines), want["level_m"], floats(t, want["total_length_m_marching_squares"]), 1e-8, want["open_lines"], closed)
}
