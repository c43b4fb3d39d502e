package triangulate_test

import (
	"context"
	"encoding/csv"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// checked triangulates pts and fails the test at once if Check finds a broken
// invariant. A test that fails later leaves a drawing of the mesh.
func checked(t testing.TB, pts []orb.Point, opt triangulate.Options) *triangulate.Mesh {
	t.Helper()
	m, err := triangulate.Delaunay(context.Background(), pts, opt)
	if err != nil {
		t.Fatal(err)
	}
	if err := m.Check(); err != nil {
		draw(t, m)
		t.Fatalf("%d points: %v", len(pts), err)
	}
	return m
}

// corners is a mesh as its definition sees it: positions only, in the order in
// which triangles are written.
func corners(m *triangulate.Mesh) [][3]orb.Point {
	out := make([][3]orb.Point, 0, m.NumTriangles())
	for _, c := range m.CanonicalTriangles(m.Rank()) {
		out = append(out, [3]orb.Point{m.Position(c[0]), m.Position(c[1]), m.Position(c[2])})
	}
	return out
}

// sameTriangles fails the test if two lists of triangles differ, and says where.
func sameTriangles(t testing.TB, name string, got, want [][3]orb.Point) {
	t.Helper()
	for i := range min(len(got), len(want)) {
		if got[i] != want[i] {
			t.Fatalf("%s: triangle %d of %d is %v, want %v", name, i, len(got), got[i], want[i])
		}
	}
	if len(got) != len(want) {
		t.Fatalf("%s: %d triangles, want %d", name, len(got), len(want))
	}
}

// distinct returns pts in (x, y) order without repeats, -0 written as 0.
func distinct(pts []orb.Point) []orb.Point {
	s := make([]orb.Point, len(pts))
	for i, p := range pts {
		s[i] = orb.Point{p[0] + 0, p[1] + 0}
	}
	slices.SortFunc(s, byXY)
	return slices.Compact(s)
}

func byXY(a, b orb.Point) int { return exact.CompareXY(a, b) }

// shuffled returns a copy of pts in another order.
func shuffled(pts []orb.Point, r *rand.Rand) []orb.Point {
	s := slices.Clone(pts)
	r.Shuffle(len(s), func(i, j int) { s[i], s[j] = s[j], s[i] })
	return s
}

// lattice returns nx x ny nodes with the given step, the first at (x0, y0).
func lattice(nx, ny int, x0, y0, step float64) []orb.Point {
	var pts []orb.Point
	for j := range ny {
		for i := range nx {
			pts = append(pts, orb.Point{x0 + float64(i)*step, y0 + float64(j)*step})
		}
	}
	return pts
}

// integerCircle returns all integer points of x² + y² = radius².
func integerCircle(radius int) []orb.Point {
	var pts []orb.Point
	for x := -radius; x <= radius; x++ {
		y := int(math.Sqrt(float64(radius*radius - x*x)))
		if x*x+y*y != radius*radius {
			continue
		}
		pts = append(pts, orb.Point{float64(x), float64(y)})
		if y != 0 {
			pts = append(pts, orb.Point{float64(x), float64(-y)})
		}
	}
	return pts
}

// nearCollinear is the set-up of Kettner, Mehlhorn, Pion, Schirra and Yap,
// Classroom examples of robustness problems in geometric computations, Comput.
// Geom. 40, 2008, figure 2 (from memory): n x n points 2^-53 apart near
// (0.5, 0.5), and two points far out on the diagonal that runs through them.
func nearCollinear(n int) []orb.Point {
	pts := []orb.Point{{12, 12}, {24, 24}}
	for i := range n {
		for j := range n {
			pts = append(pts, orb.Point{0.5 + float64(i)/(1<<53), 0.5 + float64(j)/(1<<53)})
		}
	}
	return pts
}

// readCSV reads a table with one header line.
func readCSV(t testing.TB, path string) [][]string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatalf("%s: %v", path, err)
	}
	return rows[1:]
}

// readPoints reads a table of x and y.
func readPoints(t testing.TB, path string) []orb.Point {
	t.Helper()
	var pts []orb.Point
	for i, row := range readCSV(t, path) {
		var p orb.Point
		for k := range p {
			v, err := strconv.ParseFloat(row[k], 64)
			if err != nil {
				t.Fatalf("%s:%d:%d: %v", path, i+2, k+1, err)
			}
			p[k] = v
		}
		pts = append(pts, p)
	}
	return pts
}

// area2 returns twice the area of the triangles and twice that of the polygon
// through the hull, each the exact value rounded once.
func area2(m *triangulate.Mesh) (triangles, hull float64) {
	var s, h exact.Sum
	cross := func(s *exact.Sum, p, q orb.Point) {
		s.AddProduct(p[0], q[1])
		s.AddProduct(-p[1], q[0])
	}
	for t := range m.Triangles() {
		c := m.Corners(t)
		for i := range c {
			cross(&s, m.Position(c[i]), m.Position(c[(i+1)%3]))
		}
	}
	ring := m.Hull()
	for i := range ring {
		cross(&h, m.Position(ring[i]), m.Position(ring[(i+1)%len(ring)]))
	}
	return s.Value(), h.Value()
}

// draw leaves an SVG of m among the test's artifacts: triangles, and the
// vertices of small meshes with their numbers.
func draw(t testing.TB, m *triangulate.Mesh) {
	t.Helper()
	if m.NumVertices() == 0 || m.NumVertices() > 5000 {
		return
	}
	b := orb.MultiPoint(m.Positions()).Bound()
	scale := 1000 / max(b.Max[0]-b.Min[0], b.Max[1]-b.Min[1], math.SmallestNonzeroFloat64)
	at := func(v triangulate.Vertex) (x, y float64) {
		p := m.Position(v)
		return (p[0] - b.Min[0]) * scale, (b.Max[1] - p[1]) * scale
	}
	var s strings.Builder
	s.WriteString(`<svg xmlns="http://www.w3.org/2000/svg" viewBox="-10 -10 1020 1020">` + "\n")
	for tr := range m.Triangles() {
		s.WriteString(`<path fill="none" stroke="black" stroke-width=".5" d="M`)
		for _, v := range m.Corners(tr) {
			x, y := at(v)
			fmt.Fprintf(&s, " %.3f %.3f", x, y)
		}
		s.WriteString(` Z"/>` + "\n")
	}
	if m.NumVertices() <= 200 {
		for v := range m.Vertices() {
			x, y := at(v)
			fmt.Fprintf(&s, `<text x="%.3f" y="%.3f" font-size="12">%d</text>`+"\n", x, y, v)
		}
	}
	s.WriteString("</svg>\n")
	name := filepath.Join(t.ArtifactDir(), "mesh.svg")
	if err := os.WriteFile(name, []byte(s.String()), 0o644); err != nil {
		t.Logf("drawing: %v", err)
		return
	}
	t.Logf("drawing left in %s (with -artifacts)", name)
}
